import type { Graph } from '../expression/graph';
import type { Expr } from '../expression/node';

/** What a formula evaluates to: a scalar, a vector, or a matrix (a list of its rows). */
export type Quantity =
  | { readonly kind: 'scalar'; readonly expr: Expr }
  | { readonly kind: 'list'; readonly items: readonly Quantity[] };

/** Why a combination makes no sense, in words for the user. */
export interface Misfit {
  readonly misfit: string;
}

export function scalar(expr: Expr): Quantity {
  return { kind: 'scalar', expr };
}

export function vector(exprs: readonly Expr[]): Quantity {
  return { kind: 'list', items: exprs.map(scalar) };
}

export function isMisfit(x: Quantity | Misfit | readonly Expr[] | Expr): x is Misfit {
  return 'misfit' in x;
}

/** `a number`, `a vector of 3`, `a 2 by 2 matrix`. */
export function shapeText(q: Quantity): string {
  if (q.kind === 'scalar') return 'a number';
  const first = q.items[0];
  if (first?.kind === 'list') return `a ${q.items.length} by ${first.items.length} matrix`;
  return `a vector of ${q.items.length}`;
}

/** The components of a vector of scalars; a scalar counts as a vector of one. */
export function components(q: Quantity): readonly Expr[] | undefined {
  if (q.kind === 'scalar') return [q.expr];
  const out: Expr[] = [];
  for (const item of q.items) {
    if (item.kind !== 'scalar') return undefined;
    out.push(item.expr);
  }
  return out;
}

export function rowsOf(q: Quantity): readonly (readonly Expr[])[] | undefined {
  if (q.kind === 'scalar' || q.items.length === 0) return undefined;
  const rows: (readonly Expr[])[] = [];
  for (const item of q.items) {
    const row = item.kind === 'list' ? components(item) : undefined;
    if (!row || (rows[0] && row.length !== rows[0].length)) return undefined;
    rows.push(row);
  }
  return rows;
}

export function matrix(rows: readonly (readonly Expr[])[]): Quantity {
  return { kind: 'list', items: rows.map(vector) };
}

export function map(q: Quantity, f: (e: Expr) => Expr): Quantity {
  return q.kind === 'scalar' ? scalar(f(q.expr)) : { kind: 'list', items: q.items.map((i) => map(i, f)) };
}

/** All scalars of a value, in order. */
export function flatten(q: Quantity): Expr[] {
  return q.kind === 'scalar' ? [q.expr] : q.items.flatMap(flatten);
}

/** Sum or difference, component by component. */
export function addQuantities(g: Graph, a: Quantity, b: Quantity, sign: 1 | -1): Quantity | Misfit {
  if (a.kind === 'scalar' && b.kind === 'scalar') {
    return scalar(sign > 0 ? g.add(a.expr, b.expr) : g.subtract(a.expr, b.expr));
  }
  if (a.kind === 'list' && b.kind === 'list' && a.items.length === b.items.length) {
    const items: Quantity[] = [];
    for (let i = 0; i < a.items.length; i++) {
      const item = addQuantities(g, a.items[i]!, b.items[i]!, sign);
      if (isMisfit(item)) return item;
      items.push(item);
    }
    return { kind: 'list', items };
  }
  return { misfit: `${shapeText(a)} and ${shapeText(b)} can't be ${sign > 0 ? 'added' : 'subtracted'}` };
}

/** Number times anything, matrix times vector, matrix times matrix. Two vectors need `dot` or `cross`. */
export function multiplyQuantities(g: Graph, a: Quantity, b: Quantity): Quantity | Misfit {
  if (a.kind === 'scalar') return map(b, (e) => g.multiply(a.expr, e));
  if (b.kind === 'scalar') return map(a, (e) => g.multiply(e, b.expr));
  const left = rowsOf(a);
  if (left) {
    const right = rowsOf(b);
    if (right && left[0]!.length === right.length) {
      return matrix(left.map((row) => right[0]!.map((_, j) => g.sum(row.map((x, k) => g.multiply(x, right[k]![j]!))))));
    }
    const v = components(b);
    if (v && left[0]!.length === v.length) {
      return vector(left.map((row) => g.sum(row.map((x, k) => g.multiply(x, v[k]!)))));
    }
  }
  return { misfit: `${shapeText(a)} times ${shapeText(b)} could mean several things: write dot(a, b) or cross(a, b)` };
}

export function dot(g: Graph, a: readonly Expr[], b: readonly Expr[]): Expr | Misfit {
  if (a.length !== b.length) return { misfit: `dot of vectors with ${a.length} and ${b.length} components` };
  return g.sum(a.map((x, i) => g.multiply(x, b[i]!)));
}

export function cross(g: Graph, a: readonly Expr[], b: readonly Expr[]): Quantity | Misfit {
  const minor = (i: number, j: number) => g.subtract(g.multiply(a[i]!, b[j]!), g.multiply(a[j]!, b[i]!));
  if (a.length === 2 && b.length === 2) return scalar(minor(0, 1));
  if (a.length === 3 && b.length === 3) return vector([minor(1, 2), minor(2, 0), minor(0, 1)]);
  return { misfit: `cross needs two vectors of 3 (or of 2, for the component across the plane)` };
}

/** By first row; meant for the small matrices people type. */
export function determinant(g: Graph, rows: readonly (readonly Expr[])[]): Expr | Misfit {
  const n = rows.length;
  if (rows.some((r) => r.length !== n)) return { misfit: 'det needs a square matrix' };
  if (n > 6) return { misfit: `det of a ${n} by ${n} matrix is too large to expand` };
  if (n === 1) return rows[0]![0]!;
  const terms: Expr[] = [];
  for (let j = 0; j < n; j++) {
    const minor = determinant(g, rows.slice(1).map((r) => r.filter((_, k) => k !== j)));
    if (isMisfit(minor)) return minor;
    const term = g.multiply(rows[0]![j]!, minor);
    terms.push(j % 2 === 0 ? term : g.negate(term));
  }
  return g.sum(terms);
}
