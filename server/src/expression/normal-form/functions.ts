import type { FunctionName } from '../node';
import { Rational } from '../rational';
import type { Expander } from './expand';
import { atom, constant, negate, type Monomial, type Polynomial } from './polynomial';
import { withPlus } from './powers';

/**
 * A function of polynomials: its argument shortened, minus signs taken out of odd and even functions, quarter turns out
 * of sine and cosine, so that cos(-a), cos(a) and sin(a + pi/2) meet.
 */
export function applyFunction(x: Expander, name: FunctionName, args: readonly Polynomial[]): Polynomial {
  const short = args.map((p) => x.shorten(p));
  switch (name) {
    case 'sin':
    case 'cos':
      return circular(x, name, short[0]!);
    case 'tan':
    case 'asin':
    case 'atan':
    case 'sinh':
    case 'tanh':
    case 'sign': {
      const { flipped, value } = withPlus(short[0]!);
      const f = plain(x, name, [value]);
      return flipped ? negate(f) : f;
    }
    case 'cosh':
      return plain(x, name, [withPlus(short[0]!).value]);
    case 'abs':
      return absolute(x, short[0]!);
    default:
      return plain(x, name, short);
  }
}

function plain(x: Expander, name: FunctionName, args: readonly Polynomial[]): Polynomial {
  const e = x.graph.apply(name, args.map((p) => x.expression(p)));
  if (e.op === 'number') return constant(e.data as Rational);
  return e.op === name ? atom(e) : x.meaning(e);
}

function circular(x: Expander, name: 'sin' | 'cos', argument: Polynomial): Polynomial {
  const { quarters, rest } = takeQuarterTurns(argument);
  const { flipped, value } = withPlus(rest);
  // sin(a + n*pi/2) runs through sin a, cos a, -sin a, -cos a; the cosine is one step ahead.
  const step = (quarters + (name === 'cos' ? 1 : 0)) % 4;
  const f = plain(x, step % 2 === 0 ? 'sin' : 'cos', [value]);
  const minus = step >= 2 !== (flipped && step % 2 === 0);
  return minus ? negate(f) : f;
}

function takeQuarterTurns(p: Polynomial): { quarters: number; rest: Polynomial } {
  const turn = p.find((m) => m.factors.length === 1 && m.factors[0]!.base.op === 'pi' && m.factors[0]!.exponent.isOne);
  if (!turn) return { quarters: 0, rest: p };
  const quarters = turn.coefficient.multiply(Rational.of(2));
  if (!quarters.isInteger) return { quarters: 0, rest: p };
  return { quarters: Number(((quarters.numerator % 4n) + 4n) % 4n), rest: p.filter((m) => m !== turn) };
}

/** |c*a*b| with what is known not to be negative outside. */
function absolute(x: Expander, p: Polynomial): Polynomial {
  if (p.length !== 1) return plain(x, 'abs', [withPlus(p).value]);
  const m: Monomial = p[0]!;
  const coefficient = m.coefficient.sign < 0 ? m.coefficient.negate() : m.coefficient;
  const sure = m.factors.filter((f) => neverNegative(f.base.op, f.exponent) || isPositiveSymbol(f.base));
  const open = m.factors.filter((f) => !sure.includes(f));
  if (open.length === 0) return [{ coefficient, factors: sure }];
  const inside = plain(x, 'abs', [[{ coefficient: Rational.ONE, factors: open }]]);
  return x.times([{ coefficient, factors: sure }], inside);
}

function neverNegative(op: string, exponent: Rational): boolean {
  return op === 'abs' || op === 'exp' || op === 'cosh' || (exponent.isInteger ? exponent.numerator % 2n === 0n : exponent.denominator % 2n === 0n);
}

function isPositiveSymbol(e: { op: string; data: unknown }): boolean {
  return e.op === 'pi' || (e.op === 'symbol' && ((e.data as { domain?: { low?: number } }).domain?.low ?? -1) >= 0);
}
