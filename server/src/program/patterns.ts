import type { Place } from '../text/span';
import type { Pattern, PatternItem } from './form';
import type { Machine } from './machine';
import { readElement, readMember } from './members';
import { withEach } from './merging';
import { dataOf, itemsOf } from './numbers';
import type { Scope } from './scope';
import { unread, type Value } from './values';

/** Taking values apart. `put` stores a value in a name or place. */

export type Put = (scope: Scope, pattern: Pattern, value: Value, fromDefault: boolean) => void;

export function bindPattern(m: Machine, scope: Scope, pattern: Pattern, value: Value, put: Put, fromDefault = false): void {
  const place = m.place(scope, pattern.span);
  switch (pattern.kind) {
    case 'name':
    case 'place':
      put(scope, pattern, value, fromDefault);
      return;
    case 'opaque':
      return;
    case 'list':
      bindList(m, scope, pattern.items, value, put, place);
      return;
    case 'record': {
      const taken: string[] = [];
      for (const field of pattern.fields) {
        taken.push(field.name);
        const part = withEach(m, value, place, (v) => readMember(m, scope.frame.module, v, field.name, m.place(scope, field.item.pattern.span)));
        bindItem(m, scope, field.item, part, put);
      }
      if (pattern.rest) bindPattern(m, scope, pattern.rest, restOf(m, value, taken, place), put);
    }
  }
}

export function bindItem(m: Machine, scope: Scope, item: PatternItem, value: Value, put: Put): void {
  if (value.kind === 'nothing' && !value.isNull && item.initial) {
    bindPattern(m, scope, item.pattern, m.evaluate(scope, item.initial), put, true);
  } else bindPattern(m, scope, item.pattern, value, put);
}

function bindList(m: Machine, scope: Scope, items: readonly (PatternItem | undefined)[], value: Value, put: Put, place: Place): void {
  const { module } = scope.frame;
  const star = items.findIndex((i) => i?.rest);
  const known = itemsOf(m, value);
  const wrong = known && module.program.lateBinding && (star < 0 ? known.length !== items.length : known.length < items.length - 1);
  if (wrong) {
    const why = unread(`${items.length} names that are given a list of ${known.length}`, place);
    for (const item of items) if (item) bindPattern(m, scope, item.pattern, why, put);
    return;
  }
  items.forEach((item, k) => {
    if (!item) return;
    const at = m.place(scope, item.pattern.span);
    if (k === star) {
      const after = items.length - 1 - star;
      const rest = known ? m.list(known.slice(star, known.length - after)) : restList(value, place);
      bindPattern(m, scope, item.pattern, rest, put);
      return;
    }
    const fromEnd = star >= 0 && k > star && known ? known.length - (items.length - k) : k;
    const key = m.scalar(m.graph.number(fromEnd + module.program.indexBase));
    bindItem(m, scope, item, value.kind === 'unread' ? value : readElement(m, module, value, key, at), put);
  });
}

function restList(value: Value, place: Place): Value {
  return value.kind === 'unread' ? value : unread('the rest of a list whose length is not known', place);
}

function restOf(m: Machine, value: Value, taken: readonly string[], place: Place): Value {
  const data = dataOf(m, value);
  if (data?.kind === 'record') {
    return m.object({ kind: 'record', members: new Map([...data.members].filter(([k]) => !taken.includes(k))) });
  }
  // The rest of a thing from outside has the members it had itself.
  if (data?.kind === 'generic') return value;
  return value.kind === 'unread' ? value : unread('the rest of a thing whose members are not known', place);
}
