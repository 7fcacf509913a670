import type { Expr } from './node';

/** Every node the roots depend on, themselves included, arguments before users (ascending id). */
export function reachable(roots: Iterable<Expr>): Expr[] {
  const stack: Expr[] = [];
  let top = -1;
  for (const root of roots) {
    stack.push(root);
    if (root.id > top) top = root.id;
  }
  const seen = new Uint8Array(top + 1);
  const found: Expr[] = [];
  for (const root of stack) {
    if (!seen[root.id]) {
      seen[root.id] = 1;
      found.push(root);
    }
  }
  // The list grows while it is walked: what it holds past `next` is still to be opened.
  for (let next = 0; next < found.length; next++) {
    for (const arg of found[next]!.args) {
      if (!seen[arg.id]) {
        seen[arg.id] = 1;
        found.push(arg);
      }
    }
  }
  // Where most nodes are wanted, laying them out by id is faster than sorting.
  if (found.length * 8 < seen.length) return found.sort(ascending);
  const slots = new Array<Expr>(seen.length);
  for (const node of found) slots[node.id] = node;
  let next = 0;
  for (let id = 0; id < slots.length; id++) if (seen[id]) found[next++] = slots[id]!;
  return found;
}

function ascending(a: Expr, b: Expr): number {
  return a.id - b.id;
}

/** The symbols an expression depends on, in order of creation. */
export function symbolsOf(...roots: readonly Expr[]): Expr[] {
  return reachable(roots).filter((e) => e.op === 'symbol');
}

/**
 * For each root the first symbol it depends on that `wanted` accepts; one pass however many roots there are.
 */
export function firstSymbols(roots: readonly Expr[], wanted: (symbol: Expr) => boolean): (Expr | undefined)[] {
  const first = new Map<Expr, Expr>();
  for (const node of reachable(roots)) {
    if (node.op === 'symbol') {
      if (wanted(node)) first.set(node, node);
      continue;
    }
    if (first.size === 0) continue;
    for (const arg of node.args) {
      const symbol = first.get(arg);
      if (!symbol) continue;
      first.set(node, symbol);
      break;
    }
  }
  return roots.map((r) => first.get(r));
}

/** Marks, by id, which nodes depend on one of some symbols; `nodes` in order, arguments before users. */
export function dependents(nodes: readonly Expr[], symbols: ReadonlySet<Expr>): Uint8Array {
  const marks = new Uint8Array(nodes.length > 0 ? nodes[nodes.length - 1]!.id + 1 : 0);
  for (const node of nodes) {
    if (symbols.has(node)) marks[node.id] = 1;
    else for (const arg of node.args) if (marks[arg.id]) {
      marks[node.id] = 1;
      break;
    }
  }
  return marks;
}
