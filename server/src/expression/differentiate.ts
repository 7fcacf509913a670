import type { Graph } from './graph';
import type { Expr, SymbolData } from './node';
import { operators } from './operators';
import { reachable } from './reach';

/**
 * Derivatives as new nodes of the same graph. Both sweeps visit each node once, so what they add is linear in the graph
 * (A. Griewank and A. Walther, Evaluating Derivatives, chapters 3 and 4); doing one after the other is the
 * forward-over-reverse sweep that gives Lagrange's equations.
 */

/** Directional derivatives of the roots (forward sweep); `seed` gives a symbol's direction, undefined for none. */
export function tangents(graph: Graph, roots: readonly Expr[], seed: (symbol: Expr) => Expr | undefined): Expr[] {
  const dot = new Map<Expr, Expr>();
  // Derivatives of the outputs of a `solve`, found once for all its components.
  const outputs = new Map<Expr, readonly Expr[]>();
  for (const node of reachable(roots)) {
    let d: Expr | undefined;
    if (node.op === 'symbol') d = seed(node);
    else if (node.op === 'solve') {
      if (node.args.some((a) => dot.has(a))) outputs.set(node, solveTangents(graph, node, dot));
    } else if (node.op === 'component') d = outputs.get(node.args[0]!)?.[node.data as number];
    else if (node.args.length > 0) {
      const terms: Expr[] = [];
      for (let k = 0; k < node.args.length; k++) {
        const da = dot.get(node.args[k]!);
        if (!da) continue;
        if (node.op === 'select') terms.push(selectPart(graph, node, k, da));
        else {
          const partial = operators[node.op].partial?.(graph, node, k);
          if (partial) terms.push(graph.product([partial, da]));
        }
      }
      if (terms.length > 0) d = graph.sum(terms);
    }
    if (d && d !== graph.zero) dot.set(node, d);
  }
  return roots.map((r) => dot.get(r) ?? graph.zero);
}

/**
 * Sum over roots of `weights[i]` times the gradient of `roots[i]`, by each symbol of `by` (reverse sweep). The weights are
 * taken as constants.
 */
export function gradient(graph: Graph, roots: readonly Expr[], weights: readonly Expr[], by: readonly Expr[]): Expr[] {
  const nodes = reachable(roots);
  // Only nodes between the wanted symbols and the roots matter.
  const wanted = new Set(by);
  const active = new Set<Expr>();
  for (const node of nodes) if (wanted.has(node) || node.args.some((a) => active.has(a))) active.add(node);

  const shares = new Map<Expr, Expr[]>();
  const give = (node: Expr, share: Expr): void => {
    if (share === graph.zero || !active.has(node)) return;
    const list = shares.get(node);
    if (list) list.push(share);
    else shares.set(node, [share]);
  };
  roots.forEach((root, i) => give(root, weights[i]!));
  const solves = new Map<Expr, Map<number, Expr>>();
  for (let i = nodes.length - 1; i >= 0; i--) {
    const node = nodes[i]!;
    if (node.op === 'solve') {
      const bars = solves.get(node);
      if (bars) solveAdjoints(graph, node, bars, give);
      continue;
    }
    const own = shares.get(node);
    if (!own) continue;
    const bar = graph.sum(own);
    shares.set(node, [bar]);
    if (node.op === 'component') {
      const bars = solves.get(node.args[0]!) ?? new Map<number, Expr>();
      bars.set(node.data as number, bar);
      solves.set(node.args[0]!, bars);
      continue;
    }
    if (node.op === 'symbol') continue;
    for (let k = 0; k < node.args.length; k++) {
      const arg = node.args[k]!;
      if (!active.has(arg)) continue;
      if (node.op === 'select') {
        if (k > 0) give(arg, selectPart(graph, node, k, bar));
        continue;
      }
      const partial = operators[node.op].partial?.(graph, node, k);
      if (partial) give(arg, partial === graph.one ? bar : graph.product([bar, partial]));
    }
  }
  return by.map((symbol) => shares.get(symbol)?.[0] ?? graph.zero);
}

/** The partial derivative by one symbol. */
export function derivative(graph: Graph, expr: Expr, by: Expr): Expr {
  return tangents(graph, [expr], (s) => (s === by ? graph.one : undefined))[0]!;
}

/** The symbol of next higher order: th -> th' -> th''. */
export function rate(graph: Graph, symbol: Expr): Expr {
  const data = symbol.data as SymbolData;
  return graph.symbol({ name: data.name, role: data.role, order: data.order + 1 });
}

/** Total time derivative: coordinates and inputs go to their next order, time to one, all else is constant. */
export function timeDerivatives(graph: Graph, roots: readonly Expr[]): Expr[] {
  return tangents(graph, roots, (symbol) => {
    const { role } = symbol.data as SymbolData;
    if (role === 'coordinate' || role === 'input') return rate(graph, symbol);
    return role === 'time' ? graph.one : undefined;
  });
}

/** Keeps the branch: the derivative of the side not taken may have no value where it is not taken. */
function selectPart(graph: Graph, node: Expr, k: number, d: Expr): Expr {
  if (k === 0) return graph.zero;
  return k === 1 ? graph.select(node.args[0]!, d, graph.zero) : graph.select(node.args[0]!, graph.zero, d);
}

/** A x = b: A x' = b' - A' x. */
function solveTangents(graph: Graph, node: Expr, dot: ReadonlyMap<Expr, Expr>): readonly Expr[] {
  const n = node.data as number;
  const matrix = node.args.slice(0, n * n);
  const x = graph.solve(matrix, node.args.slice(n * n));
  const right: Expr[] = [];
  for (let i = 0; i < n; i++) {
    const terms: Expr[] = [dot.get(node.args[n * n + i]!) ?? graph.zero];
    for (let j = 0; j < n; j++) {
      const da = dot.get(matrix[i * n + j]!);
      if (da) terms.push(graph.negate(graph.product([da, x[j]!])));
    }
    right.push(graph.sum(terms));
  }
  return graph.solve(matrix, right);
}

/** With w = A^-T x_bar: b_bar = w and A_bar[i][j] = -w[i] x[j]. */
function solveAdjoints(
  graph: Graph,
  node: Expr,
  bars: ReadonlyMap<number, Expr>,
  give: (node: Expr, share: Expr) => void,
): void {
  const n = node.data as number;
  const matrix = node.args.slice(0, n * n);
  const x = graph.solve(matrix, node.args.slice(n * n));
  const transposed: Expr[] = [];
  for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) transposed.push(matrix[j * n + i]!);
  const w = graph.solve(
    transposed,
    Array.from({ length: n }, (_, k) => bars.get(k) ?? graph.zero),
  );
  for (let i = 0; i < n; i++) {
    give(node.args[n * n + i]!, w[i]!);
    for (let j = 0; j < n; j++) give(matrix[i * n + j]!, graph.negate(graph.product([w[i]!, x[j]!])));
  }
}
