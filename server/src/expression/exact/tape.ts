import type { Expr, SymbolData } from '../node';
import type { Rational } from '../rational';
import { reachable } from '../reach';
import { Bases } from './bases';
import { add, inverse, multiply, power, PRIME, residue, squareRoot, subtract } from './field';

/** Values of a symbol at every point, as residues; NaN marks a point that is no use. */
export type ExactColumn = Float64Array;

/** Draws residues; the same in every run. */
export class Residues {
  /** @param state not zero; another one gives other residues */
  constructor(private state = 0x2545f491) {}

  next(): number {
    // xorshift32 (G. Marsaglia, Xorshift RNGs, Journal of Statistical Software 8, 2003)
    let x = this.state;
    x ^= x << 13;
    x ^= x >>> 17;
    x ^= x << 5;
    this.state = x;
    return (x >>> 0) % PRIME;
  }

  square(): number {
    const x = this.next();
    return multiply(x, x);
  }
}

const PIECEWISE: ReadonlySet<string> = new Set([
  'abs', 'sign', 'min', 'max', 'floor', 'less', 'lessEqual', 'equal', 'and', 'or', 'not', 'select', 'nan',
]);

/**
 * Evaluation modulo a prime at random points. Angles are points of the unit circle, t -> ((1 - t^2)/(1 + t^2),
 * 2t/(1 + t^2)); functions without algebra of their own are random functions of their arguments' values.
 */
export class ExactTape {
  readonly nodes: readonly Expr[];
  readonly bases: Bases;
  /** The operation that has no exact meaning here. */
  readonly stopped: string | undefined;

  constructor(roots: readonly Expr[]) {
    this.nodes = reachable(roots);
    this.bases = new Bases(this.nodes);
    const odd = this.nodes.find((n) => PIECEWISE.has(n.op));
    this.stopped = odd ? (odd.op === 'select' ? 'a branch' : odd.op) : this.bases.stopped;
  }

  get symbols(): readonly Expr[] {
    return this.nodes.filter((n) => n.op === 'symbol');
  }

  run(column: (symbol: Expr) => ExactColumn | undefined, points: number, residues: Residues): Map<Expr, Float64Array> {
    const values = new Map<Expr, Float64Array>();
    const circle = this.drawCircle(points, residues);
    const exponents = new Map([...this.bases.exponents].map((b) => [b, draw(points, () => residues.next())]));
    const pi = draw(points, () => residues.next());
    const salt = residues.next();
    for (const node of this.nodes) {
      const out = new Float64Array(points);
      const args = node.args.map((a) => values.get(a)!);
      switch (node.op) {
        case 'number':
          out.fill(residue(node.data as Rational));
          break;
        case 'pi':
          out.set(pi);
          break;
        case 'symbol': {
          const c = column(node);
          if (c) out.set(c);
          else out.fill(NaN);
          break;
        }
        case 'sum':
          for (const a of args) for (let s = 0; s < points; s++) out[s] = add(out[s]!, a[s]!);
          break;
        case 'product':
          out.fill(1);
          for (const a of args) for (let s = 0; s < points; s++) out[s] = multiply(out[s]!, a[s]!);
          break;
        case 'power':
          for (let s = 0; s < points; s++) out[s] = powerAt(node.args[1]!, args[0]![s]!, args[1]![s]!, salt);
          break;
        case 'solve':
          values.set(node, solveAll(args, node.data as number, points));
          continue;
        case 'component': {
          const all = values.get(node.args[0]!)!;
          const k = node.data as number;
          out.set(all.subarray(k * points, (k + 1) * points));
          break;
        }
        default: {
          const multiples = this.bases.multiples.get(node);
          for (let s = 0; s < points; s++) {
            out[s] = multiples
              ? elementary(node.op, multiples, (base) => circle.get(base)!, (base) => exponents.get(base)![s]!, s)
              : mixed(node.op, args.map((a) => a[s]!), salt);
          }
        }
      }
      values.set(node, out);
    }
    return values;
  }

  private drawCircle(points: number, residues: Residues): Map<string, { c: Float64Array; s: Float64Array }> {
    const out = new Map<string, { c: Float64Array; s: Float64Array }>();
    for (const base of this.bases.angles) {
      const c = new Float64Array(points);
      const s = new Float64Array(points);
      for (let k = 0; k < points; k++) {
        const t = residues.next();
        const square = multiply(t, t);
        const over = inverse(add(1, square));
        c[k] = multiply(subtract(1, square), over);
        s[k] = multiply(add(t, t), over);
      }
      out.set(base, { c, s });
    }
    return out;
  }
}

/** A symbol's random column: squares for symbols that are never negative, so that their roots behave. */
export function drawSymbol(symbol: Expr, nonNegative: boolean, points: number, residues: Residues): ExactColumn {
  const { role } = symbol.data as SymbolData;
  return draw(points, () => (nonNegative || role === 'time' ? residues.square() : residues.next()));
}

function draw(points: number, next: () => number): Float64Array {
  return Float64Array.from({ length: points }, next);
}

function powerAt(exponent: Expr, base: number, value: number, salt: number): number {
  if (Number.isNaN(base) || Number.isNaN(value)) return NaN;
  if (exponent.op !== 'number') return mixed('power', [base, value], salt);
  const r = exponent.data as Rational;
  const size = Number(r.numerator < 0n ? -r.numerator : r.numerator);
  if (size > 1e6 || (r.denominator !== 1n && r.denominator !== 2n)) return mixed('power', [base, value], salt);
  const root = r.denominator === 2n ? squareRoot(base) : base;
  const positive = power(root, size);
  return r.sign < 0 ? inverse(positive) : positive;
}

function elementary(
  op: string,
  multiples: NonNullable<ReturnType<Bases['multiples']['get']>>,
  circle: (base: string) => { readonly c: Float64Array; readonly s: Float64Array },
  exponent: (base: string) => number,
  at: number,
): number {
  if (op === 'exp' || op === 'sinh' || op === 'cosh' || op === 'tanh') {
    let e = 1;
    for (const { base, times } of multiples.parts) {
      const p = power(exponent(base), Math.abs(times));
      e = multiply(e, times < 0 ? inverse(p) : p);
    }
    if (op === 'exp') return e;
    const back = inverse(e);
    const half = (PRIME + 1) / 2;
    const sinh = multiply(half, subtract(e, back));
    const cosh = multiply(half, add(e, back));
    return op === 'sinh' ? sinh : op === 'cosh' ? cosh : multiply(sinh, inverse(cosh));
  }
  let c = 1;
  let s = 0;
  const turn = (c2: number, s2: number): void => {
    [c, s] = [subtract(multiply(c, c2), multiply(s, s2)), add(multiply(c, s2), multiply(s, c2))];
  };
  for (const { base, times } of multiples.parts) {
    let bc = circle(base).c[at]!;
    let bs = circle(base).s[at]!;
    if (times < 0) bs = subtract(0, bs);
    for (let n = Math.abs(times); n > 0; n = Math.floor(n / 2)) {
      if (n % 2 === 1) turn(bc, bs);
      [bc, bs] = [subtract(multiply(bc, bc), multiply(bs, bs)), multiply(2, multiply(bc, bs))];
    }
  }
  for (let k = 0; k < multiples.quarters; k++) turn(0, 1);
  return op === 'cos' ? c : op === 'sin' ? s : multiply(s, inverse(c));
}

/** A function without algebra: the same value for the same arguments, otherwise as good as random. */
function mixed(op: string, args: readonly number[], salt: number): number {
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

/** Elimination at every point; NaN where the matrix is singular there. */
export function solveAll(args: readonly Float64Array[], n: number, points: number): Float64Array {
  const out = new Float64Array(n * points);
  for (let p = 0; p < points; p++) {
    const a = Array.from({ length: n }, (_, i) => [...args.slice(i * n, (i + 1) * n), args[n * n + i]!].map((c) => c[p]!));
    const x = eliminate(a);
    for (let i = 0; i < n; i++) out[i * points + p] = x ? x[i]! : NaN;
  }
  return out;
}

function eliminate(a: number[][]): number[] | undefined {
  const n = a.length;
  for (let k = 0; k < n; k++) {
    const pivot = a.findIndex((row, i) => i >= k && row[k] !== 0);
    if (pivot < 0 || Number.isNaN(a[pivot]![k]!)) return undefined;
    [a[k], a[pivot]] = [a[pivot]!, a[k]!];
    const over = inverse(a[k]![k]!);
    for (let j = k; j <= n; j++) a[k]![j] = multiply(a[k]![j]!, over);
    for (let i = 0; i < n; i++) {
      const f = a[i]![k]!;
      if (i === k || f === 0) continue;
      for (let j = k; j <= n; j++) a[i]![j] = subtract(a[i]![j]!, multiply(f, a[k]![j]!));
    }
  }
  return a.map((row) => row[n]!);
}
