import type { Expr } from '../expression/node';
import type { Place } from '../text/span';
import { putItem } from './array-writes';
import { broadcast } from './broadcast';
import type { Machine } from './machine';
import { mergeValues } from './merging';
import { itemsOf } from './numbers';
import { unread, type ObjectValue, type Value } from './values';

/** Arrays of conditions: `&`, `|`, `~` of them, and the numbers of an array that one of them picks. */

export function joinMasks(m: Machine, op: 'bit-and' | 'bit-or', a: Value, b: Value, place: Place): Value {
  return broadcast(
    m,
    [a, b],
    ([x, y]) => {
      if (x!.kind === 'unread') return x!;
      if (y!.kind === 'unread') return y!;
      if (x!.kind !== 'condition' || y!.kind !== 'condition') return unread('an operation on bits', place);
      const expr = op === 'bit-and' ? m.graph.and(x.expr, y.expr) : m.graph.or(x.expr, y.expr);
      return { kind: 'condition', expr, place };
    },
    place,
  );
}

/** `~mask`; of a single condition it is an operation on the bits of a number. */
export function invertMask(m: Machine, v: Value, place: Place): Value {
  if (!itemsOf(m, v)) return unread('an operation on bits', place);
  const one = (x: Value): Value =>
    x.kind === 'unread' ? x : x.kind === 'condition' ? { kind: 'condition', expr: m.graph.not(x.expr), place } : unread('an operation on bits', place);
  return broadcast(m, [v], ([x]) => one(x!), place);
}

/** The conditions of a mask; undefined for what is none. */
export function maskOf(m: Machine, v: Value): Expr[] | undefined {
  const items = itemsOf(m, v);
  if (!items || items.length === 0 || !items.every((x) => x.kind === 'condition')) return undefined;
  return items.map((x) => (x.kind === 'condition' ? x.expr : m.graph.false));
}

/** `y[mask]`: what is picked is known only where the mask is. */
export function picked(m: Machine, object: Value, mask: readonly Expr[], place: Place): Value {
  const items = itemsOf(m, object);
  if (items?.length !== mask.length) return unread('a mask that does not fit an array', place);
  if (mask.some((c) => c !== m.graph.true && c !== m.graph.false)) return unread('the numbers of an array that a mask picks by their values', place);
  return m.list(items.filter((_, k) => mask[k] === m.graph.true), true);
}

/** `y[mask] = v`, `y[mask] *= v`: each number by its own condition. */
export function writeMasked(m: Machine, object: ObjectValue, mask: readonly Expr[], value: Value, change: (old: Value) => Value, place: Place): void {
  const items = itemsOf(m, object);
  const inner = itemsOf(m, value);
  const rows = items?.some((x) => itemsOf(m, x));
  if (!items || items.length !== mask.length || rows || (inner && inner.length !== 1)) {
    m.breakObject(object.id, value.kind === 'unread' ? value : unread('an array that is written to by a mask', place));
    return;
  }
  items.forEach((old, k) => {
    const c = mask[k]!;
    if (c === m.graph.false) return;
    const list = m.store.writable(object.id);
    if (list.kind !== 'list') return;
    if (c !== m.graph.true) m.condition(c, place);
    putItem(m, object, list, k, mergeValues(m, c, change(old), old, place), place);
  });
}
