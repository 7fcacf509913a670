import { copyOfArray } from '../array-writes';
import { genericAt, hasWritesBelow } from '../generics';
import { asInteger } from '../integers';
import type { Machine } from '../machine';
import { depthOf } from '../broadcast';
import { countOf, itemsOf } from '../numbers';
import { unread, type Value } from '../values';
import { atLeast, axisIn, flat, given, mapEach, missing, one, shapeIn, shapeOf, zero } from './array-support';
import { isOfIntegers, kindIn, ofKind, shaped } from './array-views';
import { LISTS, isItems, itemsIn } from './lists';
import { heldArray, matrixObject } from '../matrix-objects';
import { inverse, transpose } from './matrices';
import type { Call, IntrinsicTable } from './table';

/** Making arrays, joining them and changing their shape. */

const LARGEST = 20_000;

function filled(m: Machine, call: Call, value: Value, shape: readonly number[]): Value {
  const [n, ...rest] = shape;
  if (n === undefined) return value;
  if (n < 0 || shape.reduce((a, b) => a * b, 1) > LARGEST) return unread('an array that is too large', call.place);
  return m.list(Array.from({ length: n }, () => filled(m, call, value, rest)), true);
}

/** `zeros(3)`, `ones((2, 2), dtype=int)` */
function constant(value: (m: Machine, call: Call) => Value) {
  return (m: Machine, call: Call): Value => {
    const shape = shapeIn(m, call, 0);
    // Nothing is known of it as a whole, but what is written to one of its places can be read there.
    return shape ? ofKind(m, call, filled(m, call, value(m, call), shape), kindIn(call, 1)) : m.object({ kind: 'broken', unread: unread('an array whose shape is not known', call.place), cells: [] });
  };
}

/** What an array holds before anything is written to it. */
const unwritten = (_: Machine, call: Call): Value => unread('a number of an empty array to which nothing was written', call.place);

/** An array of the shape of another; where that is not known, one that takes the shape of what is written to it. */
function like(value: (m: Machine, call: Call) => Value, kindAt = 1) {
  return (m: Machine, call: Call): Value => {
    const model = given(call, 0) ?? missing(call);
    if (model.kind === 'unread') return model;
    if (model.kind === 'scalar') return value(m, call);
    if (!itemsOf(m, model)) return m.object({ kind: 'list', items: [], array: true, open: true });
    const kind = kindIn(call, kindAt) ?? (isOfIntegers(m, model) ? 'integer' : 'real');
    return ofKind(m, call, mapEach(m, model, () => value(m, call)), kind);
  };
}

/** Arrays joined along an axis. */
function join(m: Machine, call: Call, parts: readonly Value[], axis: number): Value {
  const lists = parts.map((p) => itemsOf(m, p));
  const open = parts.find((p, k) => !lists[k] && (p.kind === 'unread' || p.kind === 'object'));
  if (open) return open.kind === 'unread' ? open : unread('an array whose length is not known', call.place);
  const known = lists.map((l, k) => l ?? [parts[k]!]);
  // What is joined shares nothing with its parts.
  if (axis <= 0) return m.list(known.flat().map((v) => copyOfArray(m, v)), true);
  const rows = known[0]?.length ?? 0;
  if (known.some((l) => l.length !== rows)) return unread('arrays of different length that are joined', call.place);
  return m.list(Array.from({ length: rows }, (_, i) => join(m, call, known.map((l) => l[i]!), axis - 1)), true);
}

function stack(m: Machine, call: Call, parts: readonly Value[], axis: number): Value {
  if (axis === 0) return m.list(parts.map((v) => copyOfArray(m, v)), true);
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
  const axis = call.args[1] ?? call.named.get('axis') ?? call.named.get('dim');
  // Without an axis at all everything is laid out in a row.
  if (axis?.kind === 'nothing' && parts.some((p) => depthOf(m, p) > 1)) return undefined;
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
  const order = call.named.get('order');
  if (order && !(order.kind === 'string' && order.value === 'C')) return unread('an array in an order that is not row by row', call.place);
  if (!shape) return unread('a shape that is not known', call.place);
  const size = flat(m, v).length;
  const rest = shape.filter((n) => n !== -1).reduce((a, b) => a * b, 1);
  const full = shape.map((n) => (n === -1 ? size / rest : n));
  if (full.reduce((a, b) => a * b, 1) !== size || full.some((n) => !Number.isInteger(n))) {
    return unread('an array that does not fit a shape', call.place);
  }
  return shaped(m, call, v, full);
}

/** Without axes of length one: all of them, or the one that is asked for. */
function squeeze(m: Machine, call: Call): Value {
  const v = given(call, 0) ?? missing(call);
  if (!itemsOf(m, v)) return v;
  const axis = axisIn(m, call, v);
  if (axis === 'unknown') return unread('an axis that is not known', call.place);
  const shape = shapeOf(m, v);
  // Of a batch that is read as one row the axis may be gone already.
  if (axis !== undefined && shape[axis] !== 1) return v;
  return shaped(m, call, v, shape.filter((n, k) => (axis === undefined ? n !== 1 : k !== axis)));
}

/** What is written to a copy of a thing from outside does not show in the thing itself. */
function copyOfOutside(m: Machine, v: Value): Value {
  const data = v.kind === 'object' ? m.store.data(v.id) : undefined;
  if (v.kind !== 'object' || data?.kind !== 'generic') return v;
  if (hasWritesBelow(m, v.id)) return unread('a copy of a thing whose parts were written to', v.kind === 'object' ? data.generic.place : undefined);
  const { path, aliases, place, ...more } = data.generic;
  const made = genericAt(m, path, place, { aliases, ...more });
  if (data.members.size > 0) {
    const own = m.store.writable(made.id);
    if (own.kind === 'generic') for (const [k, x] of data.members) own.members.set(k, x);
  }
  return made;
}

/** An operation on the array in a matrix; `wrap` where it gives a matrix again. */
function ofHeld(f: (m: Machine, call: Call, held: Value) => Value, wrap: boolean) {
  return (m: Machine, call: Call): Value => {
    const held = heldArray(m, call.args[0] ?? missing(call));
    if (!held || call.args.length > 1 || call.named.size > 0) return unread('a method of a matrix with arguments', call.place);
    const v = f(m, call, held);
    return wrap ? matrixObject(m, v, call.place) : v;
  };
}

export const ARRAY_SHAPES: IntrinsicTable = {
  'matrix-object': (m, call) => {
    if (call.args[0]?.kind === 'string') return unread('a matrix that is written as text', call.place);
    if (call.args.length > 1 || call.named.size > 0) return unread('a matrix of another kind of numbers', call.place);
    return matrixObject(m, given(call, 0) ?? missing(call), call.place);
  },
  'matrix-object-turned': ofHeld((m, call, held) => transpose(m, held, call.place), true),
  'matrix-object-inverse': ofHeld((m, call, held) => inverse(m, { ...call, args: [held] }), true),
  'matrix-object-array': ofHeld((m, _, held) => copyOfArray(m, held), false),
  'matrix-object-row': ofHeld((m, _, held) => m.list(flat(m, held), true), false),
  'matrix-object-shape': ofHeld((m, call, held) => m.list(shapeOf(m, held).map((n) => m.scalar(m.graph.number(n), call.place))), false),
  'array-zeros': constant(zero),
  'array-empty': constant(unwritten),
  'array-ones': constant(one),
  'array-full': (m, call) => {
    const value = given(call, 1, 'fill_value') ?? missing(call);
    const shape = shapeIn(m, { ...call, args: call.args.slice(0, 1) }, 0);
    return shape ? ofKind(m, call, filled(m, call, value, shape), kindIn(call, 2)) : unread('an array whose shape is not known', call.place);
  },
  'array-zeros-like': like(zero),
  'array-ones-like': like(one),
  'array-empty-like': like(unwritten),
  'array-full-like': like((_, call) => given(call, 1, 'fill_value') ?? missing(call), 2),
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
    if (call.args.length > 1 || call.named.size > 0) return unread('an array in an order that is not row by row', call.place);
    return itemsOf(m, v) ? shaped(m, call, v, [flat(m, v).length]) : v;
  },
  'array-flat-copy': (m, call) => {
    const v = given(call, 0) ?? missing(call);
    if (v.kind === 'unread' || v.kind === 'scalar') return v;
    if (call.args.length > 1 || call.named.size > 0) return unread('an array in an order that is not row by row', call.place);
    return itemsOf(m, v) ? m.list(flat(m, v), true) : copyOfOutside(m, v);
  },
  'array-squeeze': squeeze,
  'array-at-least-1': (m, call) => atLeast(m, given(call, 0) ?? missing(call), 1),
  'array-at-least-2': (m, call) => atLeast(m, given(call, 0) ?? missing(call), 2),
  'array-expand': (m, call) => {
    const v = given(call, 0) ?? missing(call);
    const axis = axisIn(m, call, v);
    if (axis === 'unknown' || axis === undefined) return unread('an axis that is not known', call.place);
    const asked = given(call, 1, 'axis') ?? call.named.get('dim');
    const negative = asked && (countOf(m, asked, call.place) ?? 0) < 0;
    const at = Math.max(0, negative ? axis + 1 : axis);
    const shape = shapeOf(m, v);
    return itemsOf(m, v) ? shaped(m, call, v, [...shape.slice(0, at), 1, ...shape.slice(at)]) : m.list([v], true);
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
    const given0 = given(call, 0) ?? missing(call);
    const v = heldArray(m, given0) ?? given0;
    return itemsOf(m, v) ? ofKind(m, call, copyOfArray(m, v), kindIn(call, call.isMethod ? undefined : 1)) : copyOfOutside(m, v);
  },
  /** The thing itself under another name. */
  'array-alias': (_, call) => given(call, 0) ?? missing(call),
  /** `x.astype(float)` */
  'array-of-kind': (m, call) => {
    const v = given(call, 0) ?? missing(call);
    return itemsOf(m, v) ? ofKind(m, call, copyOfArray(m, v), kindIn(call, 1) ?? 'real') : copyOfOutside(m, v);
  },
  /** The array itself; of a plain list an array. */
  'array-same': (m, call) => {
    const v = given(call, 0) ?? missing(call);
    const matrix = heldArray(m, v);
    if (matrix) return copyOfArray(m, matrix);
    const data = v.kind === 'object' && itemsOf(m, v) ? m.store.data(v.id) : undefined;
    const kind = kindIn(call, 1);
    if (data?.kind !== 'list') return v;
    // Of what comes from outside it is not known whether it is an array already.
    const held = unread('an array made of a list from outside that is written to: say with `np.array(...)` whether it is a copy', call.place);
    if (data.outside) return m.object({ kind: 'list', items: [...data.items], array: true, view: data.items.map((_, k) => data.view?.[k] ?? { id: (v as { id: number }).id, at: k }), held });
    if (data.array && (kind === undefined || (kind === 'integer') === isOfIntegers(m, v))) return v;
    return ofKind(m, call, copyOfArray(m, v), kind);
  },
  'array-kind': (m, call) => {
    const v = given(call, 0) ?? missing(call);
    return { kind: 'string', value: isOfIntegers(m, v) ? 'int64' : 'float64' };
  },
  'array-range': (m, call) => {
    const range = LISTS['list-range']!(m, { ...call, named: new Map() });
    const items = itemsOf(m, range);
    const integer = call.args.every((v) => v.kind !== 'scalar' || v.integer === true);
    return items ? ofKind(m, call, m.list(items.map((x) => asInteger(x, integer)), true), kindIn(call)) : range;
  },
  'array-flip': (m, call) => {
    const items = itemsIn(m, call, 0);
    if (!isItems(items)) return items;
    if (call.args.length > 1 || depthOf(m, call.args[0]!) > 1) return unread('an array turned round along an axis', call.place);
    return m.list([...items].reverse(), true);
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
