import type { Graph } from './graph';
import type { Expr } from './node';
import { reachable } from './reach';

/** The roots with some nodes (symbols, mostly) replaced. Replacements are not looked into again. */
export function substitute(graph: Graph, roots: readonly Expr[], replacements: ReadonlyMap<Expr, Expr>): Expr[] {
  const done = new Map<Expr, Expr>();
  for (const node of reachable(roots)) {
    const replacement = replacements.get(node);
    if (replacement) {
      done.set(node, replacement);
      continue;
    }
    let changed = false;
    const args = node.args.map((a) => {
      const b = done.get(a)!;
      if (b !== a) changed = true;
      return b;
    });
    done.set(node, changed ? graph.rebuild(node, args) : node);
  }
  return roots.map((r) => done.get(r)!);
}
