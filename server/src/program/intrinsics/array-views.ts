import { broadcast } from '../broadcast';
import type { Machine } from '../machine';
import { itemsOf } from '../numbers';
import { truncated } from '../truncate';
import { asInteger } from '../integers';
import { isUnread, unread, type ListData, type Value, type ViewItem } from '../values';
import { numeric } from '../numbers';
import { flat } from './array-support';
import type { Call } from './table';

/** Arrays that show the numbers of another in another shape, and the kinds of numbers that arrays hold. */

interface Leaf {
  readonly value: Value;
  /** Where it is kept; none in a plain list, of which an array is a copy. */
  readonly at: ViewItem | undefined;
}

/** Every number of an array, row after row, with its place. */
export function leavesOf(m: Machine, v: Value, depth = 0): Leaf[] {
  const items = itemsOf(m, v);
  if (!items || v.kind !== 'object' || depth > 12) return [{ value: v, at: undefined }];
  const data = m.store.data(v.id);
  const list = data.kind === 'list' ? data : undefined;
  return items.flatMap((x, k) =>
    x.kind === 'object' && itemsOf(m, x) ? leavesOf(m, x, depth + 1) : [{ value: x, at: list?.array ? (list.view?.[k] ?? { id: v.id, at: k }) : undefined }],
  );
}

/** True where numbers lie one after the other in memory, so that another shape of them is a view and no copy. */
function isContiguous(m: Machine, v: Value): boolean {
  const items = itemsOf(m, v);
  if (!items || v.kind !== 'object') return true;
  const data = m.store.data(v.id);
  return data.kind !== 'list' || (!data.view && items.every((x) => isContiguous(m, x)));
}

/** A list that shows these numbers. */
export function viewOf(m: Machine, model: Value, leaves: readonly Leaf[]): Value {
  if (leaves.some((l) => !l.at)) return m.list(leaves.map((l) => l.value), true);
  const data = m.store.data(leafHolder(m, model));
  const of: Partial<ListData> = data.kind === 'list' ? data : {};
  return m.object({
    kind: 'list',
    items: leaves.map((l) => l.value),
    array: true,
    view: leaves.map((l) => l.at!),
    ...(of.integer ? { integer: true } : {}),
    ...(of.outside ? { outside: true } : {}),
    ...(of.held ? { held: of.held } : {}),
  });
}

function leafHolder(m: Machine, v: Value): number {
  for (let at = v; ; ) {
    const items = itemsOf(m, at);
    if (at.kind !== 'object' || !items?.[0] || !itemsOf(m, items[0])) return at.kind === 'object' ? at.id : -1;
    at = items[0];
  }
}

/** The same numbers in another shape: a view where they lie in order, else a copy that may or may not be one. */
export function shaped(m: Machine, call: Call, v: Value, shape: readonly number[]): Value {
  const leaves = leavesOf(m, v);
  const sure = isContiguous(m, v);
  const held = unread('an array in another shape that is written to: whether it is a copy depends on how it lies in memory', call.place);
  const build = (sizes: readonly number[], part: readonly Leaf[]): Value => {
    const [n, ...inner] = sizes;
    if (n === undefined) return part[0]?.value ?? unread('a number of an empty array', call.place);
    if (inner.length === 0) {
      const made = viewOf(m, v, part);
      const data = made.kind === 'object' ? m.store.data(made.id) : undefined;
      return sure || data?.kind !== 'list' || !data.view ? made : m.object({ ...data, held });
    }
    const each = part.length / Math.max(1, n);
    return m.list(Array.from({ length: n }, (_, k) => build(inner, part.slice(k * each, (k + 1) * each))), true);
  };
  return build(shape, leaves);
}

export type NumberKind = 'integer' | 'real' | 'other';

/** What `dtype=` or its place says; undefined where nothing is said. */
export function kindIn(call: Call, k?: number): NumberKind | undefined {
  const v = call.named.get('dtype') ?? (k === undefined ? undefined : call.args[k]);
  if (!v || v.kind === 'nothing') return undefined;
  const name = v.kind === 'library' ? v.path.slice(v.path.lastIndexOf('.') + 1) : v.kind === 'string' ? v.value : '';
  if (/^(?:u?int\w*|long\w*|short\w*|[iu]\d?|byte|intp|int_)$/.test(name)) return 'integer';
  if (/^(?:bool\w*|complex\w*|c\d+|b|\?|str\w*|S\d*|U\d*)$/.test(name)) return 'other';
  return 'real';
}

/** The array as one of another kind of numbers. */
export function ofKind(m: Machine, call: Call, v: Value, kind: NumberKind | undefined): Value {
  if (kind === undefined || v.kind === 'unread') return v;
  if (kind === 'other') return unread('an array of numbers of another kind', call.place);
  const one = (x: Value): Value => {
    if (x.kind === 'unread' || kind === 'real') return asInteger(x, false);
    const n = numeric(m, x, call.place);
    return isUnread(n) ? n : { kind: 'scalar', expr: truncated(m.graph, n), place: call.place, integer: true };
  };
  return broadcast(m, [v], ([x]) => one(x!), call.place);
}

/** True where an array, or a list that becomes one, holds integers only. */
export function isOfIntegers(m: Machine, v: Value): boolean {
  const all = flat(m, v);
  return all.length > 0 && all.every((x) => x.kind === 'scalar' && x.integer === true);
}
