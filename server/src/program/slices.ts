import type { Place } from '../text/span';
import type { Expression } from './form';
import type { Machine } from './machine';
import { readElement } from './members';
import { countOf, dataOf, itemsOf } from './numbers';
import { depthOf } from './broadcast';
import type { Scope } from './scope';
import { unread, type Unread, type Value } from './values';

/** Slices: `y[0:2]`, `A(:, 1)`. */

type Slice = Expression & { kind: 'slice' };

/** The positions, from 0, that a slice of a list of `length` takes; a base of 1 counts the last one in. */
export function positions(m: Machine, scope: Scope, s: Slice, length: number, place: Place): number[] | undefined {
  const { indexBase, negativeIndex } = scope.frame.module.program;
  const bound = (e: Expression | undefined, otherwise: number): number | undefined =>
    e ? countOf(m, m.evaluate(scope, e), place) : otherwise;
  const step = bound(s.step, 1);
  if (step === undefined || step === 0) return undefined;
  const inclusive = indexBase === 1;
  let from = bound(s.from, step > 0 ? indexBase : length - 1 + indexBase);
  let to = bound(s.to, step > 0 ? length - 1 + indexBase + (inclusive ? 0 : 1) : indexBase - (inclusive ? 0 : 1));
  if (from === undefined || to === undefined) return undefined;
  if (negativeIndex && s.from && from < 0) from += length;
  if (negativeIndex && s.to && to < 0) to += length;
  const picked: number[] = [];
  for (let k = from; step > 0 ? (inclusive ? k <= to : k < to) : inclusive ? k >= to : k > to; k += step) {
    const at = k - indexBase;
    if (at >= 0 && at < length) picked.push(at);
    if (picked.length > 20_000) return undefined;
  }
  return picked;
}

export function sliceItems(m: Machine, scope: Scope, object: Value, s: Slice, place: Place): readonly Value[] | Value {
  if (object.kind === 'unread') return object;
  const items = itemsOf(m, object);
  if (items) {
    const picked = positions(m, scope, s, items.length, place);
    return picked ? picked.map((k) => items[k]!) : unread('a slice whose bounds are not known', place);
  }
  // A part of a list from outside, with both ends in sight.
  if (dataOf(m, object)?.kind === 'generic' && s.to) {
    const { indexBase } = scope.frame.module.program;
    const to = countOf(m, m.evaluate(scope, s.to), place);
    if (to !== undefined && to >= 0 && to < 10_000) {
      const picked = positions(m, scope, s, to + (indexBase === 1 ? 0 : 0), place);
      if (picked) return picked.map((k) => readElement(m, scope.frame.module, object, m.scalar(m.graph.number(k + indexBase)), place));
    }
  }
  return unread('a slice of a list whose length is not known', place);
}

export interface Target {
  readonly object: Value;
  readonly key: Value;
  readonly value: Value;
}

/** Where the parts of `value` go when it is assigned to a slice. */
export function sliceTargets(m: Machine, scope: Scope, object: Value, indices: readonly Expression[], value: Value, place: Place): Target[] | Unread {
  const [first, ...rest] = indices;
  if (!first) return unread('an assignment to nothing', place);
  const { indexBase } = scope.frame.module.program;
  const { module } = scope.frame;
  if (first.kind === 'slice' && first.rest) {
    const whole = Math.max(0, depthOf(m, object) - rest.length);
    const ranges = Array.from({ length: whole }, (): Expression => ({ kind: 'slice', span: first.span }));
    return sliceTargets(m, scope, object, [...ranges, ...rest], value, place);
  }
  if (first.kind !== 'slice') {
    const key = m.evaluate(scope, first);
    if (rest.length === 0) return [{ object, key, value }];
    return sliceTargets(m, scope, readElement(m, module, object, key, place), rest, value, place);
  }
  const items = itemsOf(m, object);
  // A value of fewer axes than the part it is written to goes to each of its rows.
  const axes = depthOf(m, object) - indices.filter((i) => i.kind !== 'slice').length;
  const values = depthOf(m, value) < axes ? undefined : itemsOf(m, value);
  let picked: number[] | undefined;
  if (items) picked = positions(m, scope, first, items.length, place);
  else if (values && rest.length === 0) {
    const start = first.from ? countOf(m, m.evaluate(scope, first.from), place) : indexBase;
    if (start !== undefined) picked = values.map((_, k) => start - indexBase + k);
  }
  if (!picked) return unread('an assignment to a slice whose bounds are not known', place);
  if (values && values.length !== picked.length && values.length !== 1) return unread('an assignment of a list to a slice of another length', place);
  const targets: Target[] = [];
  for (const [n, k] of picked.entries()) {
    const part = values ? (values.length === 1 ? values[0]! : values[n]!) : value;
    const key = m.scalar(m.graph.number(k + indexBase));
    if (rest.length === 0) targets.push({ object, key, value: part });
    else {
      const inner = sliceTargets(m, scope, readElement(m, module, object, key, place), rest, part, place);
      if ('kind' in inner) return inner;
      targets.push(...inner);
    }
  }
  return targets;
}
