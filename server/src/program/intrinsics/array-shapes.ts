import { genericAt } from '../generics';
import type { Machine } from '../machine';
import { depthOf } from '../operators';
import { countOf, itemsOf } from '../numbers';
import { unread, type Value } from '../values';
import { atLeast, axisIn, flat, given, mapEach, missing, one, shapeIn, shapeOf, zero } from './array-support';
import { isItems, itemsIn } from './lists';
import { transpose } from './matrices';
import type { Call, IntrinsicTable } from './table';

/** Making arrays, joining them and changing their shape. */

const LARGEST = 20_000;

function filled(m: Machine, call: Call, value: Value, shape: readonly number[]): Value {
  const [n, ...rest] = shape;
  if (n === undefined) return value;
  if (n < 0 || shape.reduce((a, b) => a * b, 1) > LARGEST) return unread('an array that is too large', call.place);
  return m.list(Array.from({ length: n }, () => filled(m, call, value, rest)), true);
}

function constant(value: (m: Machine, call: Call) => Value, from = 0) {
  return (m: Machine, call: Call): Value => {
    const shape = shapeIn(m, call, from);
    // Nothing is known of it as a whole, but what is written to one of its places can be read there.
    return shape ? filled(m, call, value(m, call), shape) : m.object({ kind: 'broken', unread: unread('an array whose shape is not known', call.place), cells: [] });
  };
}

/** An array of the shape of another; where that is not known, one that takes the shape of what is written to it. */
function like(value: (m: Machine, call: Call) => Value) {
  return (m: Machine, call: Call): Value => {
    const model = given(call, 0) ?? missing(call);
    if (model.kind === 'unread') return model;
    if (model.kind === 'scalar') return value(m, call);
    return itemsOf(m, model) ? mapEach(m, model, () => value(m, call)) : m.list([], true);
  };
}

/** Arrays joined along an axis. */
function join(m: Machine, call: Call, parts: readonly Value[], axis: number): Value {
  const lists = parts.map((p) => itemsOf(m, p));
  const open = parts.find((p, k) => !lists[k] && (p.kind === 'unread' || p.kind === 'object'));
  if (open) return open.kind === 'unread' ? open : unread('an array whose length is not known', call.place);
  const known = lists.map((l, k) => l ?? [parts[k]!]);
  if (axis <= 0) return m.list(known.flat(), true);
  const rows = known[0]?.length ?? 0;
  if (known.some((l) => l.length !== rows)) return unread('arrays of different length that are joined', call.place);
  return m.list(Array.from({ length: rows }, (_, i) => join(m, call, known.map((l) => l[i]!), axis - 1)), true);
}

function stack(m: Machine, call: Call, parts: readonly Value[], axis: number): Value {
  if (axis === 0) return m.list(parts, true);
  const lists = parts.map((p) => itemsOf(m, p));
  const n = lists[0]?.length;
  if (n === undefined || lists.some((l) => l?.length !== n)) return unread('arrays that do not fit on each other', call.place);
  return m.list(Array.from({ length: n }, (_, i) => stack(m, call, lists.map((l) => l![i]!), axis - 1)), true);
}

function joined(axisOf: (m: Machine, call: Call, parts: readonly Value[]) => number | undefined) {
  return (m: Machine, call: Call): Value => {
    const parts = itemsIn(m, call, 0);
    if (!isItems(parts)) return parts;
    const axis = axisOf(m, call, parts);
    return axis === undefined
      ? unread('an axis that is not known', call.place)
      : // Of a batch that is read as one row, the axis across rows is the only one left.
        join(m, call, parts, Math.min(axis, Math.max(0, depthOf(m, parts[0] ?? m.list([])) - 1)));
  };
}

function knownAxis(m: Machine, call: Call, parts: readonly Value[], extra: number): number | undefined {
  const axis = given(call, 1, 'axis') ?? call.named.get('dim');
  const n = axis && axis.kind !== 'nothing' ? countOf(m, axis, call.place) : 0;
  return n === undefined ? undefined : n < 0 ? n + depthOf(m, parts[0] ?? m.list([])) + extra : n;
}

function block(m: Machine, call: Call, v: Value): Value {
  const rows = itemsOf(m, v);
  if (!rows) return unread('blocks that are not known', call.place);
  const nested = rows.some((r) => (itemsOf(m, r) ?? []).some((x) => itemsOf(m, x)));
  if (!nested) return join(m, call, rows.map((r) => atLeast(m, r, 1)), 0);
  const lines = rows.map((r) => join(m, call, (itemsOf(m, r) ?? [r]).map((x) => atLeast(m, x, 2)), 1));
  const lost = lines.find((l) => l.kind === 'unread');
  return lost ?? join(m, call, lines, 0);
}

function reshape(m: Machine, call: Call): Value {
  const v = given(call, 0) ?? missing(call);
  if (v.kind === 'unread') return v;
  const shape = shapeIn(m, { ...call, named: new Map([...call.named].map(([k, x]) => [k === 'newshape' ? 'shape' : k, x])) }, 1);
  if (!itemsOf(m, v) && v.kind !== 'scalar') return unread('an array whose shape is not known', call.place);
  const all = flat(m, v);
  if (!shape) return unread('a shape that is not known', call.place);
  const rest = shape.filter((n) => n !== -1).reduce((a, b) => a * b, 1);
  const full = shape.map((n) => (n === -1 ? all.length / rest : n));
  if (full.reduce((a, b) => a * b, 1) !== all.length || full.some((n) => !Number.isInteger(n))) {
    return unread('an array that does not fit a shape', call.place);
  }
  const build = (sizes: readonly number[], items: readonly Value[]): Value => {
    const [n, ...inner] = sizes;
    if (n === undefined) return items[0]!;
    const each = items.length / Math.max(1, n);
    return m.list(Array.from({ length: n }, (_, k) => build(inner, items.slice(k * each, (k + 1) * each))), true);
  };
  return build(full, all);
}

function squeeze(m: Machine, v: Value): Value {
  const items = itemsOf(m, v);
  if (!items) return v;
  return items.length === 1 ? squeeze(m, items[0]!) : m.list(items.map((x) => squeeze(m, x)), true);
}

/** What is written to a copy of a thing from outside does not show in the thing itself. */
function copyOfOutside(m: Machine, v: Value): Value {
  const data = v.kind === 'object' ? m.store.data(v.id) : undefined;
  if (data?.kind !== 'generic') return v;
  const { path, aliases, place, ...more } = data.generic;
  const made = genericAt(m, path, place, { aliases, ...more });
  if (data.members.size > 0) {
    const own = m.store.writable(made.id);
    if (own.kind === 'generic') for (const [k, x] of data.members) own.members.set(k, x);
  }
  return made;
}

export const ARRAY_SHAPES: IntrinsicTable = {
  'array-zeros': constant(zero),
  'array-ones': constant(one),
  'array-full': (m, call) => {
    const value = given(call, 1, 'fill_value') ?? missing(call);
    const shape = shapeIn(m, { ...call, args: call.args.slice(0, 1) }, 0);
    return shape ? filled(m, call, value, shape) : unread('an array whose shape is not known', call.place);
  },
  'array-zeros-like': like(zero),
  'array-ones-like': like(one),
  'array-full-like': like((_, call) => given(call, 1, 'fill_value') ?? missing(call)),
  'array-concatenate': joined((m, call, parts) => knownAxis(m, call, parts, 0)),
  'array-hstack': joined((m, _, parts) => (parts.some((p) => depthOf(m, p) > 1) ? 1 : 0)),
  'array-vstack': (m, call) => {
    const parts = itemsIn(m, call, 0);
    return isItems(parts) ? join(m, call, parts.map((p) => atLeast(m, p, 2)), 0) : parts;
  },
  'array-stack': (m, call) => {
    const parts = itemsIn(m, call, 0);
    if (!isItems(parts)) return parts;
    const axis = knownAxis(m, call, parts, 1);
    return axis === undefined ? unread('an axis that is not known', call.place) : stack(m, call, parts, Math.min(axis, depthOf(m, parts[0] ?? m.list([]))));
  },
  'array-columns': (m, call) => {
    const parts = itemsIn(m, call, 0);
    if (!isItems(parts)) return parts;
    const columns = parts.map((p) => (depthOf(m, p) > 1 ? p : m.list((itemsOf(m, p) ?? [p]).map((x) => m.list([x], true)), true)));
    return join(m, call, columns, 1);
  },
  'array-append': (m, call) => {
    const [a, b] = call.args;
    if (!a || !b || call.named.size > 0) return unread('an array that grows along an axis', call.place);
    return join(m, call, [a, b].map((v) => (itemsOf(m, v) ? m.list(flat(m, v), true) : v)), 0);
  },
  'array-block': (m, call) => block(m, call, given(call, 0) ?? missing(call)),
  'array-block-diagonal': (m, call) => {
    const parts = call.args.map((v) => itemsOf(m, atLeast(m, v, 2))!.map((r) => itemsOf(m, r) ?? []));
    const widths = parts.map((p) => p[0]?.length ?? 0);
    const total = widths.reduce((a, b) => a + b, 0);
    const rows = parts.flatMap((p, k) => {
      const before = widths.slice(0, k).reduce((a, b) => a + b, 0);
      return p.map((r) => {
        const pad = (n: number): Value[] => Array.from({ length: n }, () => zero(m));
        return m.list([...pad(before), ...r, ...pad(total - before - r.length)], true);
      });
    });
    return m.list(rows, true);
  },
  'array-reshape': reshape,
  'array-flat': (m, call) => {
    const v = given(call, 0) ?? missing(call);
    if (v.kind === 'unread' || v.kind === 'scalar') return v;
    return itemsOf(m, v) ? m.list(flat(m, v), true) : v;
  },
  'array-squeeze': (m, call) => squeeze(m, given(call, 0) ?? missing(call)),
  'array-at-least-1': (m, call) => atLeast(m, given(call, 0) ?? missing(call), 1),
  'array-at-least-2': (m, call) => atLeast(m, given(call, 0) ?? missing(call), 2),
  'array-expand': (m, call) => {
    const v = given(call, 0) ?? missing(call);
    const axis = axisIn(m, call, v);
    const expand = (x: Value, at: number): Value => (at <= 0 ? m.list([x], true) : m.list((itemsOf(m, x) ?? []).map((r) => expand(r, at - 1)), true));
    if (axis === 'unknown' || axis === undefined) return unread('an axis that is not known', call.place);
    const asked = given(call, 1, 'axis') ?? call.named.get('dim');
    const negative = asked && (countOf(m, asked, call.place) ?? 0) < 0;
    return expand(v, negative ? axis + 1 : axis);
  },
  'array-transpose': (m, call) => {
    if (call.args.length > 1 || call.named.size > 0) return unread('a transpose with axes in an order of its own', call.place);
    return transpose(m, given(call, 0) ?? missing(call), call.place);
  },
  'array-shape': (m, call) => {
    const v = given(call, 0) ?? missing(call);
    if (!itemsOf(m, v)) return unread('the shape of an array that is not known', call.place);
    return m.list(shapeOf(m, v).map((n) => m.scalar(m.graph.number(n), call.place)));
  },
  'array-size': (m, call) => {
    const v = given(call, 0) ?? missing(call);
    if (!itemsOf(m, v)) return unread('the size of an array that is not known', call.place);
    return m.scalar(m.graph.number(flat(m, v).length), call.place);
  },
  'array-depth': (m, call) => m.scalar(m.graph.number(depthOf(m, given(call, 0) ?? missing(call))), call.place),
  'array-copy': (m, call) => {
    const v = given(call, 0) ?? missing(call);
    const copy = (x: Value): Value => {
      const items = itemsOf(m, x);
      return items ? m.list(items.map(copy), true) : x;
    };
    return itemsOf(m, v) ? copy(v) : copyOfOutside(m, v);
  },
  'array-matrix': (m, call) => {
    const v = given(call, 0) ?? missing(call);
    if (v.kind === 'string') return unread('a matrix that is written as text', call.place);
    m.hasMatrices = true;
    const copy = (x: Value): Value => m.list((itemsOf(m, x) ?? []).map((y) => (itemsOf(m, y) ? copy(y) : y)), true);
    return itemsOf(m, v) ? atLeast(m, copy(v), 2) : v;
  },
  'array-item': (m, call) => {
    const v = given(call, 0) ?? missing(call);
    const all = flat(m, v);
    if (call.args.length > 1) {
      const k = countOf(m, call.args[1]!, call.place);
      return k === undefined ? unread('an element whose index is not known', call.place) : (all.at(k) ?? missing(call));
    }
    return all.length === 1 ? all[0]! : unread('the only number of an array that has several', call.place);
  },
};
