import type { Expr } from '../node';
import type { Rational } from '../rational';
import type { Multiples } from './bases';
import { add, inverse, multiply, power, PRIME, squareRoot, subtract } from './field';

/** Points of the unit circle, one per random point: t -> ((1 - t^2)/(1 + t^2), 2t/(1 + t^2)). */
export interface Circle {
  readonly c: Float64Array;
  readonly s: Float64Array;
}

export function circleOf(parameters: Float64Array): Circle {
  const c = new Float64Array(parameters.length);
  const s = new Float64Array(parameters.length);
  parameters.forEach((t, k) => {
    const square = multiply(t, t);
    const over = inverse(add(1, square));
    c[k] = multiply(subtract(1, square), over);
    s[k] = multiply(add(t, t), over);
  });
  return { c, s };
}

/** Powers with a whole or half exponent; all others are functions without algebra. */
export function powerAt(exponent: Expr, base: number, value: number, salt: number): number {
  if (Number.isNaN(base) || Number.isNaN(value)) return NaN;
  if (exponent.op !== 'number') return mixed('power', [base, value], salt);
  const r = exponent.data as Rational;
  const size = Number(r.numerator < 0n ? -r.numerator : r.numerator);
  if (size > 1e6 || (r.denominator !== 1n && r.denominator !== 2n)) return mixed('power', [base, value], salt);
  const root = r.denominator === 2n ? squareRoot(base) : base;
  const positive = power(root, size);
  return r.sign < 0 ? inverse(positive) : positive;
}

const HALF = (PRIME + 1) / 2;

/** exp, sinh, cosh and tanh of whole multiples of base exponents, at one point. */
export function exponentialAt(op: string, { parts }: Multiples, base: (name: string) => number): number {
  let e = 1;
  for (const { base: name, times } of parts) {
    const p = power(base(name), Math.abs(times));
    e = multiply(e, times < 0 ? inverse(p) : p);
  }
  if (op === 'exp') return e;
  const back = inverse(e);
  const sinh = multiply(HALF, subtract(e, back));
  const cosh = multiply(HALF, add(e, back));
  return op === 'sinh' ? sinh : op === 'cosh' ? cosh : multiply(sinh, inverse(cosh));
}

/** sin, cos and tan of whole multiples of base angles, by the addition formulas, at one point. */
export function circularAt(op: string, { parts, quarters }: Multiples, circle: (name: string) => Circle, at: number): number {
  let c = 1;
  let s = 0;
  for (const { base, times } of parts) {
    const point = circle(base);
    let bc = point.c[at]!;
    let bs = times < 0 ? subtract(0, point.s[at]!) : point.s[at]!;
    for (let n = Math.abs(times); n > 0; n = Math.floor(n / 2)) {
      if (n % 2 === 1) {
        const turned = subtract(multiply(c, bc), multiply(s, bs));
        s = add(multiply(c, bs), multiply(s, bc));
        c = turned;
      }
      if (n === 1) break;
      const doubled = subtract(multiply(bc, bc), multiply(bs, bs));
      bs = multiply(2, multiply(bc, bs));
      bc = doubled;
    }
  }
  for (let k = 0; k < quarters; k++) {
    const turned = subtract(0, s);
    s = c;
    c = turned;
  }
  return op === 'cos' ? c : op === 'sin' ? s : multiply(s, inverse(c));
}

/** A function without algebra: the same value for the same arguments, otherwise as good as random. */
export function mixed(op: string, args: readonly number[], salt: number): number {
  let h = salt;
  for (let i = 0; i < op.length; i++) h = Math.imul(h ^ op.charCodeAt(i), 0x01000193);
  for (const a of args) {
    if (Number.isNaN(a)) return NaN;
    h = Math.imul(h ^ a, 0x85ebca6b);
    h ^= h >>> 13;
    h = Math.imul(h, 0xc2b2ae35);
    h ^= h >>> 16;
  }
  return (h >>> 0) % PRIME;
}
