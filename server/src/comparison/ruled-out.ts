import type { Domain, Expr } from '../expression/node';
import type { Rational } from '../expression/rational';

/**
 * Sides of conditions that the declared ranges rule out: `if (m <= 0) return 0` where the declaration says `m > 0`. No
 * state has to be seen there. By interval arithmetic (R. E. Moore, Interval Analysis, chapter 3), which may be too wide
 * but never too narrow, so that a side that can be reached is never taken for one that can't.
 */

interface Interval {
  readonly low: number;
  readonly high: number;
}

const ALL: Interval = { low: -Infinity, high: Infinity };
const DEEPEST = 12;

/** True where the condition can't come out as `side` at more than single values of the declared ranges. */
export function isRuledOut(condition: Expr, side: boolean, domains: ReadonlyMap<Expr, Domain>): boolean {
  const { args } = condition;
  switch (condition.op) {
    case 'not':
      return isRuledOut(args[0]!, !side, domains);
    case 'and':
      return side ? args.some((a) => isRuledOut(a, true, domains)) : args.every((a) => isRuledOut(a, false, domains));
    case 'or':
      return side ? args.every((a) => isRuledOut(a, true, domains)) : args.some((a) => isRuledOut(a, false, domains));
    case 'less':
    case 'lessEqual': {
      const [a, b] = args.map((x) => interval(x, domains, 0)) as [Interval, Interval];
      return side ? a.low >= b.high : a.high <= b.low;
    }
    default:
      return false;
  }
}

function interval(e: Expr, domains: ReadonlyMap<Expr, Domain>, depth: number): Interval {
  if (depth > DEEPEST) return ALL;
  const part = (x: Expr): Interval => interval(x, domains, depth + 1);
  switch (e.op) {
    case 'number': {
      const x = (e.data as Rational).toNumber();
      return { low: x, high: x };
    }
    case 'pi':
      return { low: 3.14, high: 3.15 };
    case 'symbol': {
      const { low = -Infinity, high = Infinity } = domains.get(e) ?? {};
      return { low, high };
    }
    case 'abs':
      return { low: 0, high: Infinity };
    case 'sum':
      return e.args.map(part).reduce((a, b) => ({ low: a.low + b.low, high: a.high + b.high }));
    case 'product':
      return e.args.map(part).reduce(times);
    case 'power':
      return part(e.args[0]!).low >= 0 || isEven(e.args[1]!) ? { low: 0, high: Infinity } : ALL;
    default:
      return ALL;
  }
}

function isEven(e: Expr): boolean {
  if (e.op !== 'number') return false;
  const r = e.data as Rational;
  return r.isInteger && r.numerator % 2n === 0n;
}

function times(a: Interval, b: Interval): Interval {
  const corners = [a.low * b.low, a.low * b.high, a.high * b.low, a.high * b.high].map((x) => (Number.isNaN(x) ? 0 : x));
  return { low: Math.min(...corners), high: Math.max(...corners) };
}
