import type { Place } from '../text/span';
import { stored } from './integers';
import type { Machine } from './machine';
import { itemsOf } from './numbers';
import { unread, type ListData, type ObjectValue, type Value } from './values';

/**
 * Writing into numeric arrays as numpy does: a row that is written to takes over numbers, not the thing that held them;
 * shapes are broadcast; an array of integers stays one.
 */

/** True where arrays are values of their own beside plain lists, which hold things as they are. */
function copiesRows(m: Machine, data: ListData): boolean {
  return data.array && m.request.program.listConcat === true;
}

/** Puts a value into place k (from 0) of a list that is writable. */
export function putItem(m: Machine, object: ObjectValue, data: ListData, k: number, value: Value, place: Place): void {
  if (!copiesRows(m, data)) return store(m, data, k, value);
  if (k < 0 || k >= data.items.length) {
    // An array whose length is not known yet takes the shape of what is written to it.
    if (k < 0 || data.items.length > 0 && !data.open) return m.breakObject(object.id, unread('an array written to outside its bounds', place));
    return store(m, data, k, value);
  }
  const item = data.items[k]!;
  if (item.kind === 'object' && itemsOf(m, item)) return assignInto(m, item, value, place);
  const inner = itemsOf(m, value);
  if (inner && inner.length !== 1) return m.breakObject(object.id, unread('a list written to a place of an array that holds one number', place));
  if (inner) return putItem(m, object, data, k, inner[0]!, place);
  store(m, data, k, data.integer ? stored(m, value, place) : value);
}

function store(m: Machine, data: ListData, k: number, value: Value): void {
  const part = data.view?.[k];
  if (part) {
    const source = m.store.writable(part.id);
    if (source.kind === 'list') source.items[part.at] = value;
    return;
  }
  while (data.items.length < k) data.items.push({ kind: 'nothing' });
  data.items[k] = value;
}

/** `target[...] = value` with numbers copied and shapes broadcast. */
export function assignInto(m: Machine, target: ObjectValue, value: Value, place: Place): void {
  itemsOf(m, target);
  assign(m, target, copyOfArray(m, value), place);
}

function assign(m: Machine, target: ObjectValue, value: Value, place: Place): void {
  const data = m.store.writable(target.id);
  if (data.kind !== 'list') return;
  const values = itemsOf(m, value);
  const depth = depthIn(m, target);
  const n = data.items.length;
  const across = !values || depthIn(m, value) < depth;
  if (!across && values.length !== n && values.length !== 1) {
    m.breakObject(target.id, unread(`a list of ${values.length} written to an array of ${n}`, place));
    return;
  }
  for (let k = 0; k < n; k++) {
    const list = m.store.writable(target.id);
    if (list.kind !== 'list') return;
    putItem(m, target, list, k, across ? value : values.length === 1 ? values[0]! : values[k]!, place);
  }
}

function depthIn(m: Machine, v: Value): number {
  let depth = 0;
  for (let items = itemsOf(m, v); items && depth < 8; items = items[0] && itemsOf(m, items[0])) depth++;
  return depth;
}

/** An array with the same numbers that shares nothing. */
export function copyOfArray(m: Machine, v: Value): Value {
  const items = itemsOf(m, v);
  return items ? m.list(items.map((x) => copyOfArray(m, x)), true) : v;
}
