import type { Graph } from './graph';
import type { Expr } from './node';
import { Rational } from './rational';
import { reachable } from './reach';
import { collected, factored } from './normal-form/collect';
import { Expander, polynomialExpr } from './normal-form/expand';
import { sorted, type Monomial } from './normal-form/polynomial';

export type { Factor, Monomial } from './normal-form/polynomial';
export { collected } from './normal-form/collect';
export { monomialExpr } from './normal-form/expand';

/**
 * A sum of monomials with exact coefficients over atoms: symbols, functions of normalised arguments, roots and negative
 * powers of sums, selections, solutions of linear systems. For display and for the analysis of terms, never for a
 * verdict: x/x becomes 1 here.
 */
export interface NormalForm {
  readonly terms: readonly Monomial[];
}

const DEFAULT_TERMS = 400;

/** Undefined where it would have more than `mostTerms` terms, or take far longer than such a form should. */
export function normalForm(graph: Graph, expr: Expr, mostTerms = DEFAULT_TERMS): NormalForm | undefined {
  const expander = new Expander(graph, mostTerms);
  const p = expander.expand(expr);
  if (!p) return undefined;
  const short = expander.shorten(p);
  return short.length > mostTerms ? undefined : { terms: sorted(short) };
}

export function toExpr(graph: Graph, form: NormalForm): Expr {
  return polynomialExpr(graph, form.terms);
}

/**
 * The shorter of an expression and its normal form, chosen for every part of it anew: products of sums stay where
 * multiplying them out would make them longer.
 */
export function simplify(graph: Graph, expr: Expr, mostTerms = DEFAULT_TERMS): Expr {
  const expander = new Expander(graph, mostTerms);
  expander.expand(expr);
  expander.refresh();
  const sizes = new Sizes();
  const best = new Map<Expr, Expr>();
  const inQuotient = new Set<Expr>();
  for (const node of reachable([expr])) if (node.op === 'power' || node.op === 'product') node.args.forEach((a) => inQuotient.add(a));
  for (const node of reachable([expr])) {
    const rebuilt = node.args.length === 0 ? node : graph.rebuild(node, node.args.map((a) => best.get(a)!));
    if (node.op === 'solve') {
      best.set(node, rebuilt);
      continue;
    }
    const form = expander.polynomial(node);
    // What an identity costs is spent by the expander; here each form is written out twice.
    if (form && !expander.spend(2 * form.length)) {
      best.set(node, rebuilt);
      continue;
    }
    const candidates = [expander.shortest(node), rebuilt];
    if (form && node.op === 'sum') {
      const terms = sorted(expander.shorten(form));
      candidates.push(inQuotient.has(node) ? factored(graph, terms) : collected(graph, terms));
    }
    best.set(node, candidates.reduce((a, b) => (sizes.of(b) < sizes.of(a) ? b : a)));
  }
  return best.get(expr)!;
}

/** About how long a node is when written out, shared parts counted as often as they occur. */
export class Sizes {
  private readonly sizes = new Map<Expr, number>();

  of(expr: Expr): number {
    const known = this.sizes.get(expr);
    if (known !== undefined) return known;
    const open = [expr];
    while (open.length > 0) {
      const node = open[open.length - 1]!;
      const missing = node.args.filter((a) => !this.sizes.has(a));
      if (missing.length > 0 && !this.sizes.has(node)) {
        open.push(...missing);
        continue;
      }
      open.pop();
      if (!this.sizes.has(node)) this.sizes.set(node, this.own(node));
    }
    return this.sizes.get(expr)!;
  }

  private own(node: Expr): number {
    let size = 1;
    for (const a of node.args) size += this.sizes.get(a)!;
    if (node.op === 'power') {
      const e = node.args[1]!;
      if (e.op === 'number' && (e.data as Rational).equals(Rational.MINUS_ONE)) size -= 1;
    } else if (node.op === 'product' && node.args[0] && isMinusOne(node.args[0])) size -= 1;
    return size;
  }
}

function isMinusOne(e: Expr): boolean {
  return e.op === 'number' && (e.data as Rational).equals(Rational.MINUS_ONE);
}
