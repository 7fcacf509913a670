import type { Place } from '../text/span';
import { copyOfArray } from './array-writes';
import type { Expression } from './form';
import type { Machine } from './machine';
import { maskedValue } from './masks';
import { readElement } from './members';
import { maskOf, picked } from './mask-arrays';
import { heldArray } from './matrix-objects';
import { countOf, dataOf, itemsOf } from './numbers';
import { openPlace, readOpen } from './open-index';
import { depthOf } from './broadcast';
import type { Scope } from './scope';
import { positions, sliceItems } from './slices';
import { NOTHING, unread, type Value, type ViewItem } from './values';

/** Elements and parts of lists: `y[0]`, `y[2:]`, `M[:, 1]`, `x[..., 0]`. */

export function indexValue(m: Machine, scope: Scope, e: Expression & { kind: 'index' }, place: Place): Value {
  const { module } = scope.frame;
  const masked = maskedValue(m, scope, e);
  if (masked) return masked;
  const open = openPlace(m, scope, e);
  if (open) return readOpen(m, scope, open, place);
  const given = m.evaluate(scope, e.object);
  if (given.kind === 'nothing' && e.optional) return NOTHING;
  const held = heldArray(m, given);
  if (held && (e.indices.length !== 2 || e.indices.some((i) => i.kind === 'slice'))) return unread('a part of a matrix', place);
  const object = held ?? given;
  return indexWith(m, scope, object, e.indices, place, module.program.indexBase);
}

function indexWith(m: Machine, scope: Scope, object: Value, indices: readonly Expression[], place: Place, base: number): Value {
  const [first, ...rest] = indices;
  if (!first) return object;
  if (first.kind === 'slice' && first.rest) {
    const whole = Math.max(0, depthOf(m, object) - rest.length);
    const ranges = Array.from({ length: whole }, (): Expression => ({ kind: 'slice', span: first.span }));
    return indexWith(m, scope, object, [...ranges, ...rest], place, base);
  }
  if (first.kind === 'slice') {
    if (rest.length > 0 && rest.every((i) => i.kind !== 'nothing') && isBatch(m, first, object, rest.length)) return indexWith(m, scope, object, rest, place, base);
    const items = sliceItems(m, scope, object, first, place);
    if (!isSlice(items)) return items;
    if (rest.length === 0) return partOf(m, scope, object, first, items, place);
    return viewOfRows(m, scope, items, rest, place) ?? m.list(items.map((row) => indexWith(m, scope, row, rest, place, base)), true);
  }
  const key = m.evaluate(scope, first);
  if (key.kind === 'nothing' && scope.frame.module.program.listConcat) return m.list([indexWith(m, scope, object, rest, place, base)], true);
  const mask = maskOf(m, key);
  if (mask) return rest.length > 0 ? unread('a mask beside another index', place) : picked(m, object, mask, place);
  const list = itemsOf(m, key);
  if (list) {
    const picked = list.map((k) => indexWith(m, scope, readElement(m, scope.frame.module, object, k, place), rest, place, base));
    return scope.frame.module.program.listConcat ? copyOfArray(m, m.list(picked, true)) : m.list(picked, true);
  }
  // A single row is indexed by its column where a matrix is a list of rows.
  const element = readElement(m, scope.frame.module, object, key, place);
  return indexWith(m, scope, element, rest, place, base);
}

/** `x[:, 0]` of a single state: a batch of states is read as one generic row. */
function isBatch(m: Machine, s: Expression & { kind: 'slice' }, object: Value, more: number): boolean {
  if (s.from || s.to || s.step) return false;
  const data = dataOf(m, object);
  if (data?.kind === 'generic') return data.members.size === 0;
  return data?.kind === 'list' && data.outside === true && depthOf(m, object) <= more;
}

/** The part of a list that a slice takes: of a numeric vector a view of it where the language has views, else a copy. */
function partOf(m: Machine, scope: Scope, object: Value, s: Expression & { kind: 'slice' }, items: readonly Value[], place: Place): Value {
  const data = dataOf(m, object);
  const { listConcat } = scope.frame.module.program;
  if (data?.kind !== 'list' || object.kind !== 'object' || !listConcat) return m.list(items, true);
  if (!data.array) return m.list(items);
  const picked = positions(m, scope, s, data.items.length, place) ?? [];
  const view = picked.map((at) => data.view?.[at] ?? { id: object.id, at });
  const held = data.held ?? (data.outside ? unread('a part of a list from outside that is written to: say with `np.array(...)` whether it is a view or a copy', place) : undefined);
  return m.object({
    kind: 'list',
    items: [...items],
    array: true,
    view,
    ...(data.outside ? { outside: true } : {}),
    ...(data.integer ? { integer: true } : {}),
    ...(held ? { held } : {}),
  });
}

/** A column, `M[:, 1]`, of rows that are lists themselves. */
function viewOfRows(m: Machine, scope: Scope, rows: readonly Value[], rest: readonly Expression[], place: Place): Value | undefined {
  const { listConcat, negativeIndex, indexBase } = scope.frame.module.program;
  const [only, ...more] = rest;
  if (!listConcat || !only || more.length > 0 || only.kind === 'slice') return undefined;
  const k = countOf(m, m.evaluate(scope, only), place);
  if (k === undefined) return undefined;
  const items: Value[] = [];
  const view: ViewItem[] = [];
  let integer = true;
  for (const row of rows) {
    const data = dataOf(m, row);
    if (data?.kind !== 'list' || row.kind !== 'object') return undefined;
    const at = k < 0 && negativeIndex ? data.items.length + k : k - indexBase;
    const item = data.items[at];
    if (!item) return undefined;
    if (!data.array || item.kind === 'object') return undefined;
    integer &&= data.integer === true;
    items.push(item);
    view.push(data.view?.[at] ?? { id: row.id, at });
  }
  return m.object({ kind: 'list', items, array: true, view, ...(integer && items.length > 0 ? { integer } : {}) });
}

function isSlice(x: readonly Value[] | Value): x is readonly Value[] {
  return Array.isArray(x);
}
