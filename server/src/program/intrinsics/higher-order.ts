import { truthOf } from '../conditions';
import type { Machine } from '../machine';
import { damage } from '../damage';
import { countOf, dataOf, itemsOf } from '../numbers';
import { isUnread, unread, type Unread, type Value } from '../values';
import { isItems, itemsIn } from './lists';
import type { Call, IntrinsicTable } from './table';

/** Operations that call a function of the code for each item. */

function apply(m: Machine, call: Call, f: Value | undefined, args: readonly Value[]): Value {
  if (!f) return unread('a function that is not given', call.place);
  if (f.kind === 'unread') return f;
  if (f.kind === 'function') return m.invoke(f, f.self, args.map((value) => ({ value })), call.place);
  return m.callFunction(call.module, f, args, call.place);
}

/** An item as it is now: the function may have changed the list. */
function live(m: Machine, call: Call, k: number, before: Value): Value {
  return (call.args[0] && itemsOf(m, call.args[0])?.[k]) ?? before;
}

function index(m: Machine, call: Call, k: number): Value {
  return m.scalar(m.graph.number(k + call.module.program.indexBase), call.place);
}

/** A function's answer for an item, as a decided condition. */
function decided(m: Machine, call: Call, v: Value): boolean | Unread {
  const c = truthOf(m, v, call.place);
  if (isUnread(c)) return c;
  if (c === m.graph.true) return true;
  if (c === m.graph.false) return false;
  return unread('a list filtered by a condition that is not decided', call.place);
}

export const HIGHER_ORDER: IntrinsicTable = {
  'list-map': (m, call) => {
    const items = itemsIn(m, call, 0);
    if (!isItems(items)) return items;
    return m.list([...items].map((v, k) => apply(m, call, call.args[1], [live(m, call, k, v), index(m, call, k), call.args[0]!])));
  },
  /** `map(f, xs, ys)`: the function comes first. */
  'list-map-function-first': (m, call) => {
    const lists = call.args.slice(1).map((_, k) => itemsIn(m, call, k + 1));
    const open = lists.find((l) => !isItems(l));
    if (open) return open as Value;
    const known = lists as (readonly Value[])[];
    const n = Math.min(...known.map((l) => l.length));
    return m.list(Array.from({ length: known.length > 0 ? n : 0 }, (_, k) => apply(m, call, call.args[0], known.map((l) => l[k]!))));
  },
  'list-flat-map': (m, call) => {
    const items = itemsIn(m, call, 0);
    if (!isItems(items)) return items;
    const joined = items.flatMap((v, k) => {
      const r = apply(m, call, call.args[1], [v, index(m, call, k)]);
      return [...(itemsOf(m, r) ?? [r])];
    });
    return m.list(joined);
  },
  'list-for-each': (m, call) => {
    const items = itemsIn(m, call, 0);
    if (!isItems(items)) {
      const why = items as Unread;
      const f = call.args[1];
      if (f) damage(m, [{ value: f }], why);
      return why;
    }
    for (const [k, v] of [...items].entries()) apply(m, call, call.args[1], [live(m, call, k, v), index(m, call, k), call.args[0]!]);
    return { kind: 'nothing' };
  },
  'list-reduce': (m, call) => {
    const items = itemsIn(m, call, 0);
    if (!isItems(items)) return items;
    const started = call.args.length > 2;
    let total = started ? call.args[2]! : items[0];
    if (!total) return unread('the reduction of an empty list', call.place);
    for (const [k, v] of [...items].entries()) {
      if (k > 0 || started) total = apply(m, call, call.args[1], [total, live(m, call, k, v), index(m, call, k), call.args[0]!]);
    }
    return total;
  },
  'list-filter': (m, call) => {
    const items = itemsIn(m, call, 0);
    if (!isItems(items)) return items;
    const kept: Value[] = [];
    for (const [k, v] of items.entries()) {
      const keep = decided(m, call, apply(m, call, call.args[1], [v, index(m, call, k)]));
      if (typeof keep === 'object') return keep;
      if (keep) kept.push(v);
    }
    return m.list(kept);
  },
  'list-find': (m, call) => find(m, call, false, (v) => v, { kind: 'nothing' }),
  'list-find-last': (m, call) => find(m, call, true, (v) => v, { kind: 'nothing' }),
  'list-find-index': (m, call) => find(m, call, false, (_, k) => index(m, call, k), m.scalar(m.graph.minusOne, call.place)),
  'list-find-last-index': (m, call) => find(m, call, true, (_, k) => index(m, call, k), m.scalar(m.graph.minusOne, call.place)),
  'list-reduce-right': (m, call) => {
    const items = itemsIn(m, call, 0);
    if (!isItems(items)) return items;
    const started = call.args.length > 2;
    let total = started ? call.args[2]! : items[items.length - 1];
    if (!total) return unread('the reduction of an empty list', call.place);
    for (let k = items.length - (started ? 1 : 2); k >= 0; k--) total = apply(m, call, call.args[1], [total, items[k]!, index(m, call, k)]);
    return total;
  },
  'list-some': (m, call) => some(m, call, false),
  'list-every': (m, call) => some(m, call, true),
  /** `Array.from(list, f)`, `Array.from({ length: n }, f)`. */
  'list-from': (m, call) => {
    const [first, f] = call.args;
    if (!first) return m.list([]);
    const data = dataOf(m, first);
    let items = itemsOf(m, first);
    if (!items && data?.kind === 'record') {
      const n = countOf(m, data.members.get('length') ?? { kind: 'nothing' }, call.place);
      if (n !== undefined && n >= 0 && n <= 20_000) items = Array.from({ length: n }, (): Value => ({ kind: 'nothing' }));
    }
    if (!items) return first.kind === 'unread' ? first : unread('a list whose length is not known', call.place);
    return m.list(f && f.kind !== 'nothing' ? items.map((v, k) => apply(m, call, f, [v, index(m, call, k)])) : items);
  },
  /** `ntuple(f, n)`: the function of each index. */
  'list-build': (m, call) => {
    const n = countOf(m, call.args[1] ?? { kind: 'nothing' }, call.place);
    if (n === undefined || n < 0 || n > 2000) return unread('a list whose length is not known', call.place);
    return m.list(Array.from({ length: n }, (_, k) => apply(m, call, call.args[0], [index(m, call, k)])));
  },
};

function find(m: Machine, call: Call, last: boolean, answer: (v: Value, k: number) => Value, none: Value): Value {
  const items = itemsIn(m, call, 0);
  if (!isItems(items)) return items;
  const order = [...items.entries()];
  for (const [k, v] of last ? order.reverse() : order) {
    const found = decided(m, call, apply(m, call, call.args[1], [v, index(m, call, k)]));
    if (typeof found === 'object') return found;
    if (found) return answer(v, k);
  }
  return none;
}

function some(m: Machine, call: Call, all: boolean): Value {
  const items = itemsIn(m, call, 0);
  if (!isItems(items)) return items;
  const g = m.graph;
  let result = all ? g.true : g.false;
  for (const [k, v] of items.entries()) {
    const c = truthOf(m, apply(m, call, call.args[1], [v, index(m, call, k)]), call.place);
    if (isUnread(c)) return c;
    result = all ? g.and(result, c) : g.or(result, c);
  }
  return { kind: 'condition', expr: result, place: call.place };
}
