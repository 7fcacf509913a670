import type { Program } from '../../program/form';
import { contains, type Span } from '../../text/span';

/** Members of the form that hold statements in order. */
const BLOCKS: ReadonlySet<string> = new Set(['body', 'whenTrue', 'whenFalse', 'finalizer', 'initial', 'update']);

/** The innermost statement around a place, before which others could stand. Iterative, so that deep code does no harm. */
export function statementAround(program: Program, place: Span): Span | undefined {
  let best: Span | undefined;
  const stack: unknown[] = [program.body];
  const consider = (list: readonly unknown[]): void => {
    for (const item of list) {
      const span = (item as { readonly span?: Span } | null)?.span;
      if (!span || !contains(span, place.start) || !contains(span, place.end)) continue;
      if (!best || span.end - span.start <= best.end - best.start) best = span;
    }
  };
  consider(program.body);
  while (stack.length > 0) {
    const x = stack.pop();
    if (Array.isArray(x)) {
      stack.push(...(x as unknown[]));
      continue;
    }
    if (typeof x !== 'object' || x === null) continue;
    const span = (x as { readonly span?: Span }).span;
    if (span && (!contains(span, place.start) || !contains(span, place.end))) continue;
    for (const [key, value] of Object.entries(x)) {
      if (typeof value !== 'object' || value === null) continue;
      if (BLOCKS.has(key) && Array.isArray(value)) consider(value as unknown[]);
      stack.push(value);
    }
  }
  return best;
}
