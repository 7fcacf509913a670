import type { Machine } from './machine';
import { itemsOf } from './numbers';
import type { Place } from '../text/span';
import { unread, type Value } from './values';

/** How many lists deep a value is. */
export function depthOf(m: Machine, v: Value): number {
  let depth = 0;
  let items = itemsOf(m, v);
  while (items && depth < 8) {
    depth++;
    items = items.length > 0 ? itemsOf(m, items[0]!) : undefined;
  }
  return depth;
}

/**
 * A function of numbers over arrays: axes are matched from the last one, and an axis of length one goes with any other
 * (numpy's rule).
 */
export function broadcast(m: Machine, args: readonly Value[], f: (args: readonly Value[]) => Value, place: Place): Value {
  const depths = args.map((a) => depthOf(m, a));
  const depth = Math.max(0, ...depths);
  if (depth === 0) return f(args);
  const lists = args.map((a, k) => (depths[k] === depth ? itemsOf(m, a)! : undefined));
  const lengths = lists.flatMap((l) => (l ? [l.length] : []));
  const length = lengths.includes(0) ? 0 : Math.max(...lengths);
  if (lengths.some((n) => n !== length && n !== 1)) return unread('lists of different length', place);
  const at = (k: number): Value[] => args.map((a, i) => (lists[i] ? lists[i][lists[i].length === 1 ? 0 : k]! : a));
  return m.list(Array.from({ length }, (_, k) => broadcast(m, at(k), f, place)), true);
}
