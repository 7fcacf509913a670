import type { Machine } from '../machine';
import { depthOf } from '../broadcast';
import { countOf, itemsOf } from '../numbers';
import { unread, type Value } from '../values';
import type { Call } from './table';

/** Numeric arrays as numpy and its like have them: lists of lists, with axes and shapes. */

export function given(call: Call, k: number, name?: string): Value | undefined {
  const v = call.args[k] ?? (name === undefined ? undefined : call.named.get(name));
  return v?.kind === 'nothing' ? undefined : v;
}

export function missing(call: Call): Value {
  return unread('an array that is not given', call.place);
}

/** Every number of an array, row after row. */
export function flat(m: Machine, v: Value, depth = 0): Value[] {
  const items = itemsOf(m, v);
  return items && depth < 12 ? items.flatMap((x) => flat(m, x, depth + 1)) : [v];
}

export function shapeOf(m: Machine, v: Value): number[] {
  const shape: number[] = [];
  for (let items = itemsOf(m, v); items && shape.length < 12; items = items[0] && itemsOf(m, items[0])) shape.push(items.length);
  return shape;
}

export function mapEach(m: Machine, v: Value, f: (v: Value) => Value): Value {
  const items = itemsOf(m, v);
  return items ? m.list(items.map((x) => mapEach(m, x, f)), true) : f(v);
}

/** A shape given as one number, a list, or several numbers; a type after it says nothing. */
export function shapeIn(m: Machine, call: Call, from: number): number[] | undefined {
  const first = given(call, from, 'shape') ?? call.named.get('size');
  if (!first) return undefined;
  const list = itemsOf(m, first);
  const rest = list ? [] : call.args.slice(from + 1).filter((v) => v.kind === 'scalar');
  const shape = (list ?? [first, ...rest]).map((v) => countOf(m, v, call.place));
  return shape.includes(undefined) ? undefined : (shape as number[]);
}

/** The axis that is asked for, from 0; undefined for all of them together. */
export function axisIn(m: Machine, call: Call, v: Value, k = 1, name = 'axis'): number | undefined | 'unknown' {
  const axis = given(call, k, name) ?? call.named.get('dim');
  if (!axis || axis.kind === 'nothing') return undefined;
  const n = countOf(m, axis, call.place);
  return n === undefined ? 'unknown' : n < 0 ? depthOf(m, v) + n : n;
}

/** A number becomes a vector of one, a vector a matrix of one row. */
export function atLeast(m: Machine, v: Value, depth: number): Value {
  let made = v;
  for (let k = depthOf(m, v); k < depth; k++) made = m.list([made], true);
  return made;
}

export const zero = (m: Machine): Value => m.scalar(m.graph.zero);
export const one = (m: Machine): Value => m.scalar(m.graph.one);
