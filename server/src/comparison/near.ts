import { derivative } from '../expression/differentiate';
import type { Expr, SymbolData } from '../expression/node';
import { Rational } from '../expression/rational';
import { symbolsOf } from '../expression/reach';
import { substitute } from '../expression/substitute';
import type { Derived } from '../mechanics/lagrange';
import { solutionMap } from '../mechanics/quantities';
import type { Pair } from './pair';

/** Higher orders of a solved system grow fast and nobody types them. */
export const MOST_ORDERS = 5;

/**
 * `near q = q0, order n`: both sides as Taylor polynomials about the point. The coordinates named move by eps times
 * themselves from their point, all velocities and inputs are of order eps (the point is a state of rest), other
 * coordinates and parameters stay as they are. The coefficients of eps^0 ... eps^n must agree; the code may keep more.
 * @returns for each pair, one pair per order
 */
export function expand(derived: Derived, pairs: readonly Pair[]): Pair[][] {
  const { graph, near } = derived.system;
  if (!near) return pairs.map((p) => [p]);
  const eps = graph.symbol({ name: 'eps', role: 'auxiliary', order: 0 });
  const motion = solutionMap(derived);
  const flat = substitute(graph, pairs.flatMap((p) => [p.found, p.expected]), motion);
  const moved = new Map<Expr, Expr>();
  for (const s of symbolsOf(...flat)) {
    const data = s.data as SymbolData;
    const point = near.point.get(s);
    if (point) moved.set(s, graph.add(point, graph.multiply(eps, s)));
    else if (data.role === 'input' || (data.role === 'coordinate' && data.order > 0)) moved.set(s, graph.multiply(eps, s));
  }
  let current = substitute(graph, flat, moved);
  const atPoint = new Map<Expr, Expr>([[eps, graph.zero]]);
  const out: Pair[][] = pairs.map(() => []);
  let factorial = Rational.ONE;
  for (let order = 0; order <= Math.min(near.order, MOST_ORDERS); order++) {
    if (order > 0) {
      current = current.map((e) => derivative(graph, e, eps));
      factorial = factorial.divide(Rational.of(order));
    }
    const values = substitute(graph, current, atPoint).map((e) => graph.multiply(graph.number(factorial), e));
    pairs.forEach((_, i) => out[i]!.push({ found: values[2 * i]!, expected: values[2 * i + 1]! }));
  }
  return out;
}

/**
 * What code that keeps no more than the orders declared must compute: the expansions of the expected values as polynomials
 * in the coordinates themselves. For the search of faults; verdicts compare order by order.
 */
export function polynomials(derived: Derived, expected: readonly Expr[]): Expr[] {
  const { graph, near } = derived.system;
  if (!near) return [...expected];
  const back = new Map([...near.point].map(([symbol, point]) => [symbol, graph.subtract(symbol, point)] as const));
  const orders = expand(derived, expected.map((e) => ({ found: e, expected: e })));
  return orders.map((pairs) => substitute(graph, [graph.sum(pairs.map((p) => p.expected))], back)[0]!);
}
