import { truthOf } from '../conditions';
import type { Machine } from '../machine';
import { asInteger } from '../integers';
import { binary } from '../operators';
import { countOf, dataOf, itemsOf } from '../numbers';
import { isUnread, unread, type Value } from '../values';
import { flat, given, missing, zero } from './array-support';
import { LISTS, isItems, itemsIn } from './lists';
import { NUMBERS } from './numbers';
import type { Call, IntrinsicTable } from './table';

/** What general languages do with lists and records that are no numeric arrays. */

function smallest(m: Machine, call: Call, op: 'min' | 'max'): Value {
  if (call.named.size > 0) return unread(`the ${op} by a measure of its own`, call.place);
  return call.args.length === 1 ? LISTS[`list-${op}`]!(m, call) : NUMBERS[`number-${op}`]!(m, call);
}

function allOf(m: Machine, call: Call, all: boolean): Value {
  const items = call.args[0] && itemsOf(m, call.args[0]) ? flat(m, call.args[0]) : itemsIn(m, call, 0);
  if (!isItems(items)) return items;
  let result = all ? m.graph.true : m.graph.false;
  for (const v of items) {
    const c = truthOf(m, v, call.place);
    if (isUnread(c)) return c;
    result = all ? m.graph.and(result, c) : m.graph.or(result, c);
  }
  return { kind: 'condition', expr: result, place: call.place };
}

export const PLAIN_LISTS: IntrinsicTable = {
  'plain-list': (m, call) => {
    if (call.args.length === 0) return m.list([]);
    const items = itemsIn(m, call, 0);
    return isItems(items) ? m.list(items) : items;
  },
  'plain-sum': (m, call) => {
    const items = itemsIn(m, call, 0);
    if (!isItems(items)) return items;
    const start = given(call, 1, 'start') ?? asInteger(zero(m), true);
    return items.reduce((a, b) => binary(m, call.module, '+', a, b, call.place), start);
  },
  'plain-entries': (m, call) => {
    const items = itemsIn(m, call, 0);
    if (!isItems(items)) return items;
    const from = given(call, 1, 'start');
    const start = from ? countOf(m, from, call.place) : 0;
    if (start === undefined) return unread('a count whose start is not known', call.place);
    return m.list(items.map((v, k) => m.list([{ kind: 'scalar', expr: m.graph.number(k + start), place: call.place, integer: true }, v])));
  },
  'plain-product': (m, call) => {
    const lists = call.args.map((v) => itemsOf(m, v));
    if (lists.some((l) => !l) || call.named.size > 0) return unread('lists whose length is not known', call.place);
    if (lists.reduce((n, l) => n * l!.length, 1) > 4096) return unread('a product of lists that is too long', call.place);
    return m.list(lists.reduce<Value[][]>((rows, l) => rows.flatMap((r) => l!.map((v) => [...r, v])), [[]]).map((r) => m.list(r)));
  },
  'plain-min': (m, call) => smallest(m, call, 'min'),
  'plain-max': (m, call) => smallest(m, call, 'max'),
  'list-extend': (m, call) => {
    const [list, more] = call.args;
    const items = more && itemsOf(m, more);
    if (list?.kind !== 'object' || !itemsOf(m, list) || !items) {
      if (list?.kind === 'object') m.breakObject(list.id, unread('a list that is extended by one that is not known', call.place));
      return { kind: 'nothing' };
    }
    const data = m.store.writable(list.id);
    if (data.kind === 'list') data.items.push(...items);
    return { kind: 'nothing' };
  },
  'list-insert': (m, call) => {
    const [list, at, value] = call.args;
    const k = at && countOf(m, at, call.place);
    if (list?.kind !== 'object') return { kind: 'nothing' };
    const data = itemsOf(m, list) ? m.store.writable(list.id) : undefined;
    if (data?.kind !== 'list' || k === undefined || !value) m.breakObject(list.id, unread('a list that is changed at a place that is not known', call.place));
    else data.items.splice(k < 0 ? Math.max(0, data.items.length + k) : k, 0, value);
    return { kind: 'nothing' };
  },
  /** The length of a list; -1 of what is known to be none. */
  'sequence-length': (m, call) => {
    const v = given(call, 0) ?? missing(call);
    const data = dataOf(m, v);
    if (v.kind === 'unread' || data?.kind === 'generic') return v.kind === 'unread' ? v : unread('whether a thing from outside is a list', call.place);
    return { kind: 'scalar', expr: m.graph.number(data?.kind === 'list' ? data.items.length : -1), place: call.place, integer: true };
  },
  'list-all': (m, call) => allOf(m, call, true),
  'list-any': (m, call) => allOf(m, call, false),
  /** `reduce(f, xs, start)`: the function comes first. */
  'reduce-function-first': (m, call) => {
    const items = itemsIn(m, call, 1);
    const [f, , start] = call.args;
    if (!isItems(items) || !f) return isItems(items) ? missing(call) : items;
    const all = start ? [start, ...items] : items;
    if (all.length === 0) return unread('the reduction of an empty list', call.place);
    return all.reduce((a, b) => m.callFunction(call.module, f, [a, b], call.place));
  },
  'list-pop-at': (m, call) => {
    const [list, at] = call.args;
    if (!at) return LISTS['list-pop']!(m, call);
    const k = countOf(m, at, call.place);
    const items = list && itemsOf(m, list);
    if (list?.kind !== 'object' || !items || k === undefined) {
      if (list?.kind === 'object') m.breakObject(list.id, unread('a list that is changed at a place that is not known', call.place));
      return unread('an element taken from a list that is not known', call.place);
    }
    const data = m.store.writable(list.id);
    return (data.kind === 'list' ? data.items.splice(k < 0 ? items.length + k : k, 1)[0] : undefined) ?? { kind: 'nothing' };
  },
  /** All entries one under the other: numbers and the numbers of vectors. */
  'list-numbers': (m, call) => m.list(call.args.flatMap((v) => (itemsOf(m, v) ? flat(m, v) : [v])), true),
  'shallow-copy': (m, call) => {
    const v = given(call, 0) ?? missing(call);
    const data = dataOf(m, v);
    if (data?.kind === 'list') return m.list(data.items, data.array);
    if (data?.kind === 'record') return m.object({ ...data, frozen: false, members: new Map(data.members) });
    return v;
  },
  /** `d.update(other, a=1)` */
  'record-update': (m, call) => {
    const [record, other] = call.args;
    if (record?.kind !== 'object') return { kind: 'nothing' };
    const data = other && dataOf(m, other);
    if (other && data?.kind !== 'record') m.breakObject(record.id, unread('members that are not known', call.place));
    if (data?.kind === 'record') for (const [k, v] of data.members) m.setMember(record, k, v);
    for (const [k, v] of call.named) m.setMember(record, k, v);
    return { kind: 'nothing' };
  },
};
