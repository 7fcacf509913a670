import type { Expr, SymbolData } from '../node';
import { Rational } from '../rational';
import type { Expander } from './expand';
import { takeContent } from './content';
import {
  atom,
  constant,
  inverse,
  mergeFactors,
  negate,
  sorted,
  timesMonomial,
  type Factor,
  type Monomial,
  type Polynomial,
} from './polynomial';

/**
 * A rational power of a polynomial. Whole positive powers are multiplied out where that stays short; of others, what all
 * terms share comes out, so that 1/(2*a*b + 2*a*c) is 1/2 * 1/a * 1/(b + c).
 */
export function raise(x: Expander, p: Polynomial, e: Rational): Polynomial {
  if (e.isZero) return constant(Rational.ONE);
  if (e.isOne) return p;
  if (p.length === 0) return e.sign > 0 ? [] : atom(x.graph.nan);
  if (p.length === 1) return raiseMonomial(x, p[0]!, e);
  if (e.isInteger && e.sign > 0 && e.numerator < 64n) {
    const expanded = x.multiplyOut(p, Number(e.numerator));
    if (expanded) return expanded;
  }
  const short = x.shorten(p);
  if (short.length < 2) return raise(x, short, e);
  const { content, rest } = splitContent(x, sorted(short), e);
  const core = x.expression(rest);
  const outside = raiseMonomial(x, content, e);
  return outside.length === 1 ? [withFactor(outside[0]!, { base: core, exponent: e })] : outside;
}

function withFactor(m: Monomial, f: Factor): Monomial {
  return { coefficient: m.coefficient, factors: mergeFactors(m.factors, [f]) };
}

/** (c * a^i * b^j)^e. A root takes out only what cannot be negative; |a| stands for the root of a^2. */
function raiseMonomial(x: Expander, m: Monomial, e: Rational): Polynomial {
  const c = foldedPower(x, m.coefficient, e);
  if (e.isInteger) {
    const factors = m.factors.map((f) => ({ base: f.base, exponent: f.exponent.multiply(e) }));
    return x.times([{ coefficient: c ?? Rational.ONE, factors }], c ? constant(Rational.ONE) : constantPower(x, m.coefficient, e));
  }
  let out: Polynomial = constant(c ?? Rational.ONE);
  const inside: Factor[] = [];
  for (const f of m.factors) {
    const exponent = f.exponent.multiply(e);
    if (isNonNegative(f.base)) out = x.times(out, atom(f.base, exponent));
    else if (f.exponent.isInteger && f.exponent.numerator % 2n === 0n) {
      const absolute = x.call('abs', [x.meaning(f.base)]);
      const raised = exponent.isOne ? absolute : raise(x, absolute, exponent);
      out = x.times(out, raised);
    } else inside.push(f);
  }
  if (inside.length === 0) return c ? out : x.times(out, constantPower(x, m.coefficient, e));
  if (inside.length === 1 && c) {
    const f = inside[0]!;
    return x.times(out, atom(f.base, f.exponent.multiply(e)));
  }
  const core = x.expression([{ coefficient: c ? Rational.ONE : m.coefficient, factors: inside }]);
  return x.times(out, atom(core, e));
}

function constantPower(x: Expander, c: Rational, e: Rational): Polynomial {
  const value = x.graph.power(x.graph.number(c), x.graph.number(e));
  return value.op === 'number' ? constant(value.data as Rational) : value.op === 'power' ? atom(x.graph.number(c), e) : atom(value);
}

function foldedPower(x: Expander, c: Rational, e: Rational): Rational | undefined {
  const value = x.graph.power(x.graph.number(c), x.graph.number(e));
  return value.op === 'number' ? (value.data as Rational) : undefined;
}

/** What all terms have in common and may leave a power e, and the terms without it; the first of them gets a plus. */
function splitContent(x: Expander, p: readonly Monomial[], e: Rational): { content: Monomial; rest: Polynomial } {
  const taken = takeContent(p, (f) => e.isInteger || isNonNegative(f.base));
  let c = taken.coefficient;
  if (e.isInteger && p[0]!.coefficient.sign < 0) c = c.negate();
  if (!foldedPower(x, c, e)) c = Rational.ONE;
  const content = { coefficient: c, factors: taken.factors };
  return { content, rest: p.map((m) => timesMonomial(m, inverse(content))) };
}

/** Never negative where it is defined, as far as a look at the top tells. */
function isNonNegative(base: Expr): boolean {
  switch (base.op) {
    case 'number':
      return (base.data as Rational).sign >= 0;
    case 'symbol':
      return ((base.data as SymbolData).domain?.low ?? -1) >= 0;
    case 'abs':
    case 'exp':
    case 'cosh':
    case 'pi':
      return true;
    case 'power': {
      const e = base.args[1]!;
      return e.op === 'number' && !(e.data as Rational).isInteger && (e.data as Rational).denominator % 2n === 0n;
    }
    default:
      return false;
  }
}

/** Minus the polynomial where its leading term has a minus sign. */
export function withPlus(p: Polynomial): { flipped: boolean; value: Polynomial } {
  const first = sorted(p)[0];
  return first && first.coefficient.sign < 0 ? { flipped: true, value: negate(p) } : { flipped: false, value: p };
}
