import type { Graph } from './graph';
import type { Expr, SymbolData } from './node';
import type { Rational } from './rational';
import { symbolsOf } from './reach';
import { monomialExpr } from './normal-form/expand';
import { factorKey } from './normal-form/polynomial';
import type { Monomial, NormalForm } from './normal-form';

/** How the terms of two sums relate: what the expected one has and the found one has not, and so on. */
export interface TermComparison {
  readonly missing: readonly Monomial[];
  readonly extra: readonly Monomial[];
  /** In both, but with other coefficients: `found` = `ratio` * `expected`. */
  readonly scaled: readonly { readonly expected: Monomial; readonly found: Monomial; readonly ratio: Rational }[];
  readonly common: number;
}

export function compareTerms(expected: NormalForm, found: NormalForm): TermComparison {
  const open = new Map(found.terms.map((m) => [factorKey(m.factors), m]));
  const missing: Monomial[] = [];
  const scaled: { expected: Monomial; found: Monomial; ratio: Rational }[] = [];
  let common = 0;
  for (const m of expected.terms) {
    const key = factorKey(m.factors);
    const other = open.get(key);
    if (!other) missing.push(m);
    else if (other.coefficient.equals(m.coefficient)) common++;
    else scaled.push({ expected: m, found: other, ratio: other.coefficient.divide(m.coefficient) });
    open.delete(key);
  }
  return { missing, extra: [...open.values()], scaled, common };
}

/** The terms as expressions; their sum is the form. */
export function termsOf(graph: Graph, form: NormalForm): Expr[] {
  return form.terms.map((m) => monomialExpr(graph, m));
}

/**
 * An equation of motion, "residual = 0", with what is applied from outside (terms with an input and no acceleration) on
 * the right side.
 */
export function splitEquation(graph: Graph, form: NormalForm): { left: Expr; right: Expr } {
  const left: Expr[] = [];
  const right: Expr[] = [];
  for (const term of termsOf(graph, form)) {
    const symbols = symbolsOf(term).map((e) => e.data as SymbolData);
    const applied = symbols.some((s) => s.role === 'input') && !symbols.some((s) => s.role === 'coordinate' && s.order > 1);
    if (applied) right.push(graph.negate(term));
    else left.push(term);
  }
  return { left: graph.sum(left), right: graph.sum(right) };
}
