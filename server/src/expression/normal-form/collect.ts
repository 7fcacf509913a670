import type { Graph } from '../graph';
import type { Expr, SymbolData } from '../node';
import { Rational } from '../rational';
import { reachable } from '../reach';
import { monomialExpr, polynomialExpr } from './expand';
import { factorKey, inverse, timesMonomial, type Factor, type Monomial, type Polynomial } from './polynomial';
import { takeContent } from './content';

/**
 * The terms with equal moving parts taken together: M*x'' + m*x'' as (M + m)*x''. What does not move (parameters and
 * numbers) makes the coefficients.
 */
export function collected(graph: Graph, terms: Polynomial): Expr {
  const groups = new Map<string, { moving: Factor[]; coefficients: Monomial[] }>();
  const isFixed = fixedness();
  for (const m of terms) {
    const moving = m.factors.filter((f) => !isFixed(f.base));
    const key = factorKey(moving);
    const coefficient = { coefficient: m.coefficient, factors: m.factors.filter((f) => isFixed(f.base)) };
    const group = groups.get(key);
    if (group) group.coefficients.push(coefficient);
    else groups.set(key, { moving, coefficients: [coefficient] });
  }
  const parts: Expr[] = [];
  for (const { moving, coefficients } of groups.values()) {
    if (coefficients.length === 1 || moving.length === 0) {
      for (const c of coefficients) parts.push(monomialExpr(graph, timesMonomial(c, { coefficient: Rational.ONE, factors: moving })));
      continue;
    }
    const content = takeContent(coefficients);
    const rest = coefficients.map((c) => timesMonomial(c, inverse(content)));
    parts.push(graph.multiply(monomialExpr(graph, content), polynomialExpr(graph, rest), ...moving.map((f) => graph.power(f.base, graph.number(f.exponent)))));
  }
  return graph.sum(parts);
}

/** A sum as the product of what all its terms share and the rest, as it stands well in a quotient. */
export function factored(graph: Graph, terms: Polynomial): Expr {
  if (terms.length < 2) return polynomialExpr(graph, terms);
  const content = takeContent(terms);
  const rest = terms.map((m) => timesMonomial(m, inverse(content)));
  return graph.multiply(monomialExpr(graph, content), collected(graph, rest));
}

/** Whether an atom depends on parameters and numbers only. */
function fixedness(): (e: Expr) => boolean {
  const known = new Map<Expr, boolean>();
  return (e) => {
    let fixed = known.get(e);
    if (fixed === undefined) {
      fixed = reachable([e]).every((n) => n.op !== 'symbol' || (n.data as SymbolData).role === 'parameter');
      known.set(e, fixed);
    }
    return fixed;
  };
}
