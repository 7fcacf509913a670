import { truthOf } from '../conditions';
import { genericAt } from '../generics';
import type { Machine } from '../machine';
import { binary } from '../operators';
import { countOf, dataOf, itemsOf, numeric } from '../numbers';
import { NOTHING, isUnread, unread, type ListData, type Value } from '../values';
import type { Call, IntrinsicTable } from './table';

/** The items of an argument, or the reason why they are not known. */
export function itemsIn(m: Machine, call: Call, k: number): readonly Value[] | Value {
  const v = call.args[k];
  if (!v) return unread('a list that is not given', call.place);
  if (v.kind === 'unread') return v;
  if (v.kind === 'string') return [...v.value].map((value) => ({ kind: 'string', value }));
  const items = itemsOf(m, v);
  if (items) return items;
  const data = dataOf(m, v);
  if (data?.kind === 'broken') return data.unread;
  return unread('a list whose length is not known', call.place);
}

export function isItems(x: readonly Value[] | Value): x is readonly Value[] {
  return Array.isArray(x);
}

function writableList(m: Machine, v: Value | undefined): ListData | undefined {
  if (v?.kind !== 'object' || !itemsOf(m, v)) return undefined;
  const data = m.store.writable(v.id);
  return data.kind === 'list' ? data : undefined;
}

function count(m: Machine, call: Call, k: number, otherwise: number): number | undefined {
  const v = call.args[k];
  return v === undefined || v.kind === 'nothing' ? otherwise : countOf(m, v, call.place);
}

/** A place in a list as JavaScript's slice takes it: negative counts from the end. */
function clamp(k: number, length: number): number {
  return Math.max(0, Math.min(length, k < 0 ? length + k : k));
}

function filled(m: Machine, call: Call, value: Value, shape: readonly number[]): Value {
  const [n, ...rest] = shape;
  if (n === undefined) return value;
  if (n < 0 || shape.reduce((a, b) => a * b, 1) > 20_000) return unread('a list that is too long', call.place);
  return m.list(Array.from({ length: n }, () => filled(m, call, value, rest)), true);
}

/** A shape given as numbers, or as one list of them. */
function shapeIn(m: Machine, call: Call, from: number): number[] | undefined {
  const first = call.args[from] ?? call.named.get('shape');
  const list = first && itemsOf(m, first);
  const shape = (list ?? (first ? [first, ...call.args.slice(from + 1)] : [])).map((v) => countOf(m, v, call.place));
  return shape.includes(undefined) ? undefined : (shape as number[]);
}

function ofLength(m: Machine, call: Call, value: Value): Value {
  const [first] = call.args;
  if (!first) return m.list([]);
  if (itemsOf(m, first)) return m.list([first]);
  const n = countOf(m, first, call.place);
  if (n === undefined || n < 0 || n > 20_000) return unread('a list whose length is not known', call.place);
  return m.list(Array.from({ length: n }, () => value));
}

function constantList(value: (m: Machine) => Value) {
  return (m: Machine, call: Call): Value => {
    const shape = shapeIn(m, call, 0);
    return shape ? filled(m, call, value(m), shape) : unread('a list whose length is not known', call.place);
  };
}

export function sumOf(m: Machine, call: Call, items: readonly Value[]): Value {
  let total: Value = m.scalar(m.graph.zero, call.place);
  const [first, ...rest] = items;
  if (first) total = first;
  for (const item of rest) total = binary(m, call.module, '+', total, item, call.place);
  return total.kind === 'object' && items.length === 1 && !itemsOf(m, total) ? asNumber(m, call, total) : total;
}

function asNumber(m: Machine, call: Call, v: Value): Value {
  const n = numeric(m, v, call.place);
  return isUnread(n) ? n : m.scalar(n, call.place);
}

function extreme(op: 'min' | 'max') {
  return (m: Machine, call: Call): Value => {
    const list = call.args.length === 1 ? itemsIn(m, call, 0) : call.args;
    if (!isItems(list)) return list;
    const exprs = [];
    for (const v of list) {
      const n = numeric(m, v, call.place);
      if (isUnread(n)) return n;
      exprs.push(n);
    }
    if (exprs.length === 0) return unread(`the ${op} of an empty list`, call.place);
    return m.scalar(m.graph.apply(op, exprs), call.place);
  };
}

export const LISTS: IntrinsicTable = {
  'list-of': (m, call) => m.list(call.args),
  'list-copy': (m, call) => {
    const items = itemsIn(m, call, 0);
    return isItems(items) ? m.list(items, listIsArray(m, call.args[0])) : items;
  },
  /** A numeric vector (or matrix) of a list. */
  'list-array': (m, call) => {
    const deep = (v: Value): Value => {
      const items = itemsOf(m, v);
      return items ? m.list(items.map(deep), true) : v;
    };
    return call.args[0] ? deep(call.args[0]) : m.list([], true);
  },
  'list-zeros': constantList((m) => m.scalar(m.graph.zero)),
  'list-ones': constantList((m) => m.scalar(m.graph.one)),
  /** `new Array(n)` has n elements without a value; of several arguments it is the list. */
  'list-new': (m, call) => (call.args.length > 1 ? m.list(call.args) : ofLength(m, call, NOTHING)),
  /** `new Float64Array(n)` is n zeros, `new Float64Array(list)` a copy. */
  'numbers-new': (m, call) => {
    const items = call.args[0] && itemsOf(m, call.args[0]);
    return items ? m.list(items) : ofLength(m, call, m.scalar(m.graph.zero, call.place));
  },
  'list-range': (m, call) => {
    const bounds = call.args.map((v) => countOf(m, v, call.place));
    const open = call.args.find((v) => v.kind === 'unread');
    if (open) return open;
    // How many items it has is not known, but each is a number.
    if (bounds.includes(undefined)) return genericAt(m, 'range', call.place, { origin: 'this is an item of a range whose bounds are not known' });
    const [a, b, step = 1] = bounds as number[];
    const from = bounds.length > 1 ? a! : 0;
    const to = bounds.length > 1 ? b! : a!;
    const items: Value[] = [];
    if (step === 0) return unread('a range of step zero', call.place);
    for (let k = from; step > 0 ? k < to : k > to; k += step) {
      if (items.length > 2001) return unread('a range that is too long', call.place);
      items.push({ kind: 'scalar', expr: m.graph.number(k), place: call.place, integer: true });
    }
    return m.list(items);
  },
  'list-slice': (m, call) => {
    const [object] = call.args;
    if (object && dataOf(m, object)?.kind === 'generic' && !itemsOf(m, object)) return genericSlice(m, call, object);
    const items = itemsIn(m, call, 0);
    if (!isItems(items)) return items;
    const from = count(m, call, 1, 0);
    const to = count(m, call, 2, items.length);
    if (from === undefined || to === undefined) return unread('a slice whose bounds are not known', call.place);
    return m.list(items.slice(clamp(from, items.length), clamp(to, items.length)), listIsArray(m, object));
  },
  'list-concat': (m, call) => {
    const joined: Value[] = [];
    for (const [k, v] of call.args.entries()) {
      const items = itemsOf(m, v);
      if (items) joined.push(...items);
      else if (k === 0 || (v.kind === 'object' && dataOf(m, v)?.kind === 'generic')) return v.kind === 'unread' ? v : unread('a list whose length is not known', call.place);
      else joined.push(v);
    }
    return m.list(joined, listIsArray(m, call.args[0]));
  },
  /** numpy's: the lists to join come as one list. */
  'lists-joined': (m, call) => {
    const parts = itemsIn(m, call, 0);
    if (!isItems(parts)) return parts;
    const joined: Value[] = [];
    for (const p of parts) joined.push(...(itemsOf(m, p) ?? [p]));
    return m.list(joined, true);
  },
  'list-push': (m, call) => {
    const list = writableList(m, call.args[0]);
    if (list) list.items.push(...call.args.slice(1));
    else breakIt(m, call);
    return list ? m.scalar(m.graph.number(list.items.length), call.place) : unread('an element added to a list that is not known', call.place);
  },
  'list-pop': (m, call) => {
    const list = writableList(m, call.args[0]);
    if (!list) return unread('an element taken from a list that is not known', call.place);
    return list.items.pop() ?? NOTHING;
  },
  'list-shift': (m, call) => {
    const list = writableList(m, call.args[0]);
    if (!list) return unread('an element taken from a list that is not known', call.place);
    return list.items.shift() ?? NOTHING;
  },
  'list-unshift': (m, call) => {
    const list = writableList(m, call.args[0]);
    if (list) list.items.unshift(...call.args.slice(1));
    else breakIt(m, call);
    return NOTHING;
  },
  'list-fill': (m, call) => {
    const list = writableList(m, call.args[0]);
    if (!list) {
      breakIt(m, call);
      return unread('a list whose length is not known', call.place);
    }
    const from = count(m, call, 2, 0);
    const to = count(m, call, 3, list.items.length);
    if (from === undefined || to === undefined) return unread('a part of a list that is not known', call.place);
    for (let k = clamp(from, list.items.length); k < clamp(to, list.items.length); k++) list.items[k] = call.args[1] ?? NOTHING;
    return call.args[0]!;
  },
  /** Copies a list's items into another: `out.set(list, offset)`. */
  'list-set-from': (m, call) => {
    const list = writableList(m, call.args[0]);
    const items = itemsIn(m, call, 1);
    const offset = count(m, call, 2, 0);
    if (!isItems(items) || offset === undefined) {
      breakIt(m, call);
      return NOTHING;
    }
    if (list) items.forEach((v, k) => (list.items[offset + k] = v));
    else items.forEach((v, k) => m.setMember(call.args[0] as never, String(offset + k + call.module.program.indexBase), v));
    return NOTHING;
  },
  'list-reverse': (m, call) => {
    const list = writableList(m, call.args[0]);
    if (!list) return unread('a list whose length is not known', call.place);
    list.items.reverse();
    return call.args[0]!;
  },
  'list-flat': (m, call) => {
    const items = itemsIn(m, call, 0);
    if (!isItems(items)) return items;
    return m.list(items.flatMap((v) => itemsOf(m, v) ?? [v]));
  },
  'list-at': (m, call) => {
    const items = itemsIn(m, call, 0);
    if (!isItems(items)) return items;
    const k = count(m, call, 1, 0);
    if (k === undefined) return unread('an element whose index is not known', call.place);
    return items.at(k) ?? NOTHING;
  },
  'list-element': (m, call) => {
    let v = call.args[0]!;
    for (const key of call.args.slice(1)) v = m.readElement(call.module, v, key, call.place);
    return v;
  },
  'list-length': (m, call) => {
    const items = itemsIn(m, call, 0);
    return isItems(items) ? { kind: 'scalar', expr: m.graph.number(items.length), place: call.place, integer: true } : items;
  },
  'list-keys': (m, call) => {
    const items = itemsIn(m, call, 0);
    return isItems(items) ? m.list(items.map((_, k) => m.scalar(m.graph.number(k), call.place))) : items;
  },
  'list-entries': (m, call) => {
    const items = itemsIn(m, call, 0);
    const start = count(m, call, 1, call.module.program.indexBase) ?? 0;
    return isItems(items) ? m.list(items.map((v, k) => m.list([m.scalar(m.graph.number(k + start), call.place), v]))) : items;
  },
  'list-zip': (m, call) => {
    const lists = call.args.map((_, k) => itemsIn(m, call, k));
    const open = lists.find((l) => !isItems(l));
    if (open) return open as Value;
    const known = lists as (readonly Value[])[];
    const n = Math.min(...known.map((l) => l.length));
    return m.list(Array.from({ length: known.length > 0 ? n : 0 }, (_, k) => m.list(known.map((l) => l[k]!))));
  },
  'list-index-of': (m, call) => position(m, call, false),
  'list-last-index-of': (m, call) => position(m, call, true),
  'list-splice': (m, call) => {
    const list = writableList(m, call.args[0]);
    const from = count(m, call, 1, 0);
    const removed = count(m, call, 2, list?.items.length ?? 0);
    if (!list || from === undefined || removed === undefined) {
      breakIt(m, call);
      return unread('a part of a list that is not known', call.place);
    }
    return m.list(list.items.splice(clamp(from, list.items.length), Math.max(0, removed), ...call.args.slice(3)));
  },
  'list-with': (m, call) => {
    const items = itemsIn(m, call, 0);
    const k = count(m, call, 1, 0);
    if (!isItems(items)) return items;
    if (k === undefined) return unread('an element whose index is not known', call.place);
    return m.list(items.map((v, i) => (i === (k < 0 ? items.length + k : k) ? (call.args[2] ?? NOTHING) : v)));
  },
  'list-reversed': (m, call) => {
    const items = itemsIn(m, call, 0);
    return isItems(items) ? m.list([...items].reverse(), listIsArray(m, call.args[0])) : items;
  },
  'list-sort': (m, call) => {
    breakIt(m, call);
    return unread('the order of a sorted list', call.place);
  },
  'list-sorted': (_, call) => unread('the order of a sorted list', call.place),
  'list-join': (_, call) => unread('a text that is put together from values', call.place),
  'list-copy-within': (m, call) => {
    breakIt(m, call);
    return unread('a list whose parts are moved', call.place);
  },
  /** A view shares its numbers with the list: reading it is a copy, and writing to either is not followed. */
  'list-view': (_, call) => unread('a view of a part of a list', call.place),
  'list-includes': (m, call) => {
    const items = itemsIn(m, call, 0);
    if (!isItems(items)) return items;
    for (const v of items) {
      const same = sameConstant(v, call.args[1]);
      if (same === undefined) return unread('whether a list has a value that is not known', call.place);
      if (same) return { kind: 'condition', expr: m.graph.true, place: call.place };
    }
    return { kind: 'condition', expr: m.graph.false, place: call.place };
  },
  'is-list': (m, call) => {
    const v = call.args[0] ?? NOTHING;
    if (v.kind === 'unread') return v;
    const data = dataOf(m, v);
    const t = data?.kind === 'list' ? m.graph.true : data?.kind === 'generic' ? truthOf(m, v, call.place) : m.graph.false;
    return isUnread(t) ? t : { kind: 'condition', expr: t, place: call.place };
  },
  'list-sum': (m, call) => {
    const items = itemsIn(m, call, 0);
    return isItems(items) ? sumOf(m, call, items) : items;
  },
  'list-product': (m, call) => {
    const items = itemsIn(m, call, 0);
    if (!isItems(items)) return items;
    let total: Value = m.scalar(m.graph.one, call.place);
    for (const v of items) total = binary(m, call.module, '*', total, v, call.place);
    return total;
  },
  'list-min': extreme('min'),
  'list-max': extreme('max'),
};

function position(m: Machine, call: Call, last: boolean): Value {
  const items = itemsIn(m, call, 0);
  if (!isItems(items)) return items;
  const order = [...items.entries()];
  for (const [k, v] of last ? order.reverse() : order) {
    const same = sameConstant(v, call.args[1]);
    if (same === undefined) return unread('the position of a value that is not known', call.place);
    if (same) return m.scalar(m.graph.number(k + call.module.program.indexBase), call.place);
  }
  return m.scalar(m.graph.minusOne, call.place);
}

function sameConstant(a: Value, b: Value | undefined): boolean | undefined {
  if (!b) return false;
  if (a.kind === 'string' && b.kind === 'string') return a.value === b.value;
  if (a.kind === 'object' && b.kind === 'object') return a.id === b.id;
  if (a.kind === 'scalar' && b.kind === 'scalar') {
    if (a.expr === b.expr) return true;
    return a.expr.op === 'number' && b.expr.op === 'number' ? false : undefined;
  }
  return a.kind === b.kind ? undefined : false;
}

function listIsArray(m: Machine, v: Value | undefined): boolean {
  if (v?.kind !== 'object') return false;
  const data = m.store.data(v.id);
  return data.kind === 'list' && data.array;
}

function breakIt(m: Machine, call: Call): void {
  const [v] = call.args;
  if (v?.kind === 'object') m.breakObject(v.id, unread('a list that is changed while it is not known', call.place));
}

function genericSlice(m: Machine, call: Call, object: Value): Value {
  const from = count(m, call, 1, 0);
  const to = count(m, call, 2, -1);
  if (from === undefined || to === undefined || from < 0 || to < from || to > 2000) {
    return unread('a slice of a list whose length is not known', call.place);
  }
  const base = call.module.program.indexBase;
  const items = Array.from({ length: to - from }, (_, k) =>
    m.readElement(call.module, object, m.scalar(m.graph.number(from + k + base)), call.place),
  );
  return m.list(items);
}
