import type { Expr } from './node';

/** Every node the roots depend on, themselves included, arguments before users (ascending id). */
export function reachable(roots: Iterable<Expr>): Expr[] {
  const seen = new Set<Expr>();
  const stack: Expr[] = [];
  for (const root of roots) {
    if (!seen.has(root)) {
      seen.add(root);
      stack.push(root);
    }
  }
  while (stack.length > 0) {
    for (const arg of stack.pop()!.args) {
      if (!seen.has(arg)) {
        seen.add(arg);
        stack.push(arg);
      }
    }
  }
  return [...seen].sort((a, b) => a.id - b.id);
}

/** The symbols an expression depends on, in order of creation. */
export function symbolsOf(...roots: readonly Expr[]): Expr[] {
  return reachable(roots).filter((e) => e.op === 'symbol');
}
