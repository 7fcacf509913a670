import type { Place } from '../text/span';
import type { Expression, Field } from './form';
import { childOf, copyOfGeneric } from './generics';
import type { Machine } from './machine';
import { withEach } from './merging';
import { dataOf, itemsOf } from './numbers';
import type { Scope } from './scope';
import { unread, type FunctionValue, type Value } from './values';

/** Literals of lists and records, with what is spread into them. */

/** All parts are worked out first, so that none of their effects is lost where one of them can't be read. */
export function listLiteral(m: Machine, scope: Scope, e: Expression & { kind: 'list' }, place: Place): Value {
  const parts = e.items.map((item) => ({ value: m.evaluate(scope, item.value), spread: item.spread === true }));
  const array = scope.frame.module.program.elementwise === true;
  const open = parts.findIndex((p) => p.spread && p.value.kind === 'choice');
  if (open >= 0) {
    return withEach(m, parts[open]!.value, place, (v) => joinParts(m, parts.map((p, k) => (k === open ? { ...p, value: v } : p)), array, place));
  }
  return joinParts(m, parts, array, place);
}

function joinParts(m: Machine, parts: readonly { value: Value; spread: boolean }[], array: boolean, place: Place): Value {
  const [only] = parts;
  if (parts.length === 1 && only!.spread && only!.value.kind === 'object' && isOutside(m, only!.value)) {
    const data = dataOf(m, only!.value);
    if (data?.kind === 'generic') return copyOfGeneric(m, only!.value.id, data);
  }
  const items: Value[] = [];
  for (const { value, spread } of parts) {
    if (!spread) {
      items.push(value);
      continue;
    }
    const inner = itemsOf(m, value);
    if (!inner) return value.kind === 'unread' ? value : unread('a list that is spread out and whose length is not known', place);
    items.push(...inner);
  }
  return m.list(items, array);
}

type Part =
  | { readonly kind: 'member'; readonly name: string; readonly value: Value }
  | { readonly kind: 'getter' | 'setter'; readonly name: string; readonly value: FunctionValue }
  | { readonly kind: 'spread'; readonly value: Value };

export function recordLiteral(m: Machine, scope: Scope, fields: readonly Field[], place: Place): Value {
  const parts: Part[] = [];
  let problem: Value | undefined;
  for (const field of fields) {
    if (field.kind === 'field') parts.push({ kind: 'member', name: field.name, value: m.evaluate(scope, field.value) });
    else if (field.kind === 'getter' || field.kind === 'setter') parts.push({ kind: field.kind, name: field.name, value: { kind: 'function', node: field.node, scope } });
    else if (field.kind === 'spread') parts.push({ kind: 'spread', value: m.evaluate(scope, field.value) });
    else if (field.kind === 'computed') {
      const key = m.evaluate(scope, field.name);
      const value = m.evaluate(scope, field.value);
      const name = key.kind === 'string' ? key.value : key.kind === 'scalar' && key.expr.op === 'number' ? String(key.expr.data) : undefined;
      if (name === undefined) problem ??= unread('a record with a name that is not known', place);
      else parts.push({ kind: 'member', name, value });
    }
  }
  return problem ?? joinFields(m, parts, 0, place);
}

function joinFields(m: Machine, parts: readonly Part[], from: number, place: Place): Value {
  const open = parts.findIndex((p, k) => k >= from && p.kind === 'spread' && p.value.kind === 'choice');
  if (open >= 0) {
    return withEach(m, parts[open]!.value, place, (v) =>
      joinFields(m, parts.map((p, k) => (k === open ? { kind: 'spread', value: v } : p)), open + 1, place),
    );
  }
  const members = new Map<string, Value>();
  const getters = new Map<string, FunctionValue>();
  const setters = new Map<string, FunctionValue>();
  const outside = parts.findIndex((p) => p.kind === 'spread' && isOutside(m, p.value));
  if (outside >= 0) return joinOutside(m, parts, outside, place);
  for (const part of parts) {
    if (part.kind === 'member') members.set(part.name, part.value);
    else if (part.kind === 'getter') getters.set(part.name, part.value);
    else if (part.kind === 'setter') setters.set(part.name, part.value);
    else {
      const problem = spreadInto(m, members, part.value, place);
      if (problem) return problem;
    }
  }
  return m.object({ kind: 'record', members, getters, ...(setters.size > 0 ? { setters } : {}) });
}

function isOutside(m: Machine, value: Value): boolean {
  const data = dataOf(m, value);
  return data?.kind === 'generic';
}

/**
 * `{ ...state, x: 1 }` of a thing from outside: a copy of it, on which the members that follow are written. What stands
 * before it is a default, as in `{ m: 1, ...options }`.
 */
function joinOutside(m: Machine, parts: readonly Part[], at: number, place: Place): Value {
  const spread = parts[at]!;
  const data = spread.kind === 'spread' ? dataOf(m, spread.value) : undefined;
  if (spread.kind !== 'spread' || spread.value.kind !== 'object' || data?.kind !== 'generic') return unread('a spread', place);
  const before = joinFields(m, parts.slice(0, at), 0, place);
  if (before.kind === 'unread') return before;
  const defaults = dataOf(m, before);
  const members = new Map(data.members);
  const source = data.copyOf ?? spread.value.id;
  if (defaults?.kind === 'record') {
    for (const [key, v] of defaults.members) {
      if (!members.has(key)) members.set(key, childOf(m, source, data.generic, key, place, { fallback: () => v }));
    }
  }
  for (const part of parts.slice(at + 1)) {
    if (part.kind === 'member') members.set(part.name, part.value);
    else if (part.kind === 'getter' || part.kind === 'setter') return unread('a getter beside members that are not known', place);
    else {
      const problem = spreadInto(m, members, part.value, place);
      if (problem) return problem;
    }
  }
  // Methods and getters of a class are not spread.
  const { info, ...plain } = data.generic;
  return m.object({ kind: 'generic', generic: info ? plain : data.generic, copyOf: source, members });
}

function spreadInto(m: Machine, members: Map<string, Value>, value: Value, place: Place): Value | undefined {
  if (value.kind === 'nothing') return undefined;
  if (value.kind === 'unread') return value;
  const data = dataOf(m, value);
  if (data?.kind === 'record') {
    for (const [k, v] of data.members) members.set(k, v);
    return undefined;
  }
  if (data?.kind === 'list') {
    data.items.forEach((v, k) => members.set(String(k), v));
    return undefined;
  }
  return unread('a thing that is spread out and whose members are not known', place);
}
