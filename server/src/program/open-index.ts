import type { Expr } from '../expression/node';
import type { Place } from '../text/span';
import { isChoiceOfNumbers } from './conditions';
import type { Expression } from './form';
import { valueOf } from './generics';
import type { Machine } from './machine';
import { readElement } from './members';
import { countOf, itemsOf, scalarOf } from './numbers';
import { cellAt } from './open-cells';
import { indexChain } from './open-keys';
import { Scope } from './scope';
import { unread, type Unread, type Value } from './values';

/** Elements at an index that is not known, as the source writes them: `v[i + 1] = v[i] + a*dt` in a loop over samples. */

export interface OpenPlace {
  readonly root: Expression;
  readonly indices: readonly Expression[];
  readonly keys: readonly Expr[];
}

/** `v[i][k]`, `v[i, k]`: the list it is in and all its indices; undefined where these are all known, or no numbers. */
export function openPlace(m: Machine, scope: Scope, e: Expression & { kind: 'index' }): OpenPlace | undefined {
  const { root, indices } = indexChain(e);
  if (indices.every((i) => i.kind === 'number' || i.kind === 'string' || i.kind === 'slice')) return undefined;
  if (!indices.every(isPlain)) return undefined;
  const keys: Expr[] = [];
  let isOpen = m.naming.openRead(root, indices) !== undefined;
  m.quiet++;
  const from = m.keepPlaces ? atStart(m, scope) : scope;
  for (const i of indices) {
    const value = i.kind === 'slice' ? undefined : m.evaluate(from, i);
    const place = m.place(scope, i.span);
    const count = value && countOf(m, value, place);
    const key = count !== undefined ? m.graph.number(count) : value && scalarOf(m, value);
    if (count === undefined) isOpen = true;
    // One that a condition chooses is read on a branch for each.
    if (key && !(key.op === 'select' && isChoiceOfNumbers(key, 0))) keys.push(key);
  }
  m.quiet--;
  return isOpen && keys.length === indices.length ? { root, indices, keys } : undefined;
}

/** An index that does nothing else, so that it may be worked out twice. */
function isPlain(e: Expression): boolean {
  switch (e.kind) {
    case 'number':
    case 'string':
    case 'slice':
    case 'name':
    case 'self':
      return true;
    case 'member':
      return isPlain(e.object);
    case 'unary':
      return isPlain(e.operand);
    case 'binary':
      return isPlain(e.left) && isPlain(e.right);
    default:
      return false;
  }
}

/** A claim counts samples as the pass does that it is about, whose end may go on to the next. */
function atStart(m: Machine, scope: Scope): Scope {
  const inner = new Scope(scope, scope.frame);
  for (const name of m.naming.openNames) {
    const value = m.entries.get(name);
    if (value) inner.variables.set(name, { name, location: m.store.reserve(), scope: inner, lazy: () => value });
  }
  return inner;
}

export function readOpen(m: Machine, scope: Scope, open: OpenPlace, place: Place): Value {
  const object = m.evaluate(scope, open.root);
  const cell = cellAt(m, scope.frame.module, object, open.keys, place);
  if (cell) return cell;
  const read = m.naming.openRead(open.root, open.indices);
  if (!read) return object.kind === 'unread' ? object : NOT_KNOWN(place);
  m.naming.recordRead(read.path, read.meaning, place);
  let value = valueOf(m, read.meaning, place);
  for (const key of open.keys.slice(read.length)) value = readElement(m, scope.frame.module, value, m.scalar(key), place);
  return value;
}

const NOT_KNOWN = (place: Place): Unread => unread('an element whose index is not known', place);

/** Something is written through a part that can't be read: all that it may be in is no longer known. */
export function spoilRoot(m: Machine, scope: Scope, target: Expression, why: Unread): void {
  m.quiet++;
  let at = target;
  while (at.kind === 'index' || at.kind === 'member') {
    at = at.object;
    const value = m.evaluate(scope, at);
    if (value.kind !== 'object') continue;
    breakAll(m, value, why, 0);
    break;
  }
  m.quiet--;
}

function breakAll(m: Machine, value: Value, why: Unread, depth: number): void {
  if (value.kind !== 'object' || depth > 6) return;
  for (const item of itemsOf(m, value) ?? []) breakAll(m, item, why, depth + 1);
  if (m.store.data(value.id).kind === 'list') m.breakObject(value.id, why);
}
