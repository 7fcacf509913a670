import type { Graph } from '../expression/graph';
import type { Expr } from '../expression/node';
import { Rational } from '../expression/rational';

/** Rounded towards zero. */
export function truncated(g: Graph, x: Expr): Expr {
  if (x.op === 'number') {
    const r = x.data as Rational;
    return r.isInteger ? x : g.number(Rational.of(r.numerator / r.denominator));
  }
  const up = g.negate(g.apply('floor', [g.negate(x)]));
  return g.select(g.less(x, g.zero), up, g.apply('floor', [x]));
}
