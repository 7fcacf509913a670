import { settle } from './settle';
import type { Expr } from '../expression/node';
import { reachable } from '../expression/reach';
import type { Place } from '../text/span';
import { childOf, numberOf } from './generics';
import { DEAD, type Machine } from './machine';
import type { Store } from './store';
import { NOTHING, isData, isUnread, unread, type Content, type Data, type Unread, type Value } from './values';

/** Bringing branches together: what one of them wrote becomes `select(condition, a, b)`. */

export type Changes = Map<number, Content>;

/** One end of a branch: by `guard`, if none before it in the list was taken. */
export interface Ending {
  readonly guard: Expr;
  readonly changes: Changes;
  readonly value: Value;
}

/** Merges endings, of which the last is taken if no other is. */
export function mergeEndings(m: Machine, base: Store, endings: readonly Ending[], place: Place): { changes: Changes; value: Value } {
  let merged = { changes: endings[endings.length - 1]!.changes, value: endings[endings.length - 1]!.value };
  for (let i = endings.length - 2; i >= 0; i--) {
    const e = endings[i]!;
    merged = mergePair(m, base, e.guard, e, merged, place);
  }
  return merged;
}

export function mergePair(
  m: Machine,
  base: Store,
  condition: Expr,
  a: { changes: Changes; value: Value },
  b: { changes: Changes; value: Value },
  place: Place,
): { changes: Changes; value: Value } {
  const deadA = isDead(m, a.changes);
  const deadB = isDead(m, b.changes);
  // Where an error was thrown nothing votes, so that the other side's values may stand for both.
  if (deadA !== deadB) {
    const alive = deadA ? b : a;
    const changes = new Map(alive.changes);
    changes.set(DEAD, mergeContent(m, base, condition, a.changes.get(DEAD), b.changes.get(DEAD), DEAD, place)!);
    return { changes, value: alive.value };
  }
  const changes: Changes = new Map();
  for (const k of [...a.changes.keys(), ...b.changes.keys()]) {
    if (changes.has(k)) continue;
    const merged = mergeContent(m, base, condition, a.changes.get(k), b.changes.get(k), k, place);
    if (merged) changes.set(k, merged);
  }
  return { changes, value: mergeValues(m, condition, a.value, b.value, place) };
}

export function apply(store: Store, changes: Changes): void {
  for (const [k, v] of changes) store.set(k, v);
}

function isDead(m: Machine, changes: Changes): boolean {
  const c = changes.get(DEAD);
  return c?.kind === 'condition' && c.expr === m.graph.true;
}

function mergeContent(
  m: Machine,
  base: Store,
  condition: Expr,
  a: Content | undefined,
  b: Content | undefined,
  location: number,
  place: Place,
): Content | undefined {
  const before = base.get(location);
  const x = a ?? before;
  const y = b ?? before;
  // Made on one side only: the other cannot reach it.
  if (!x || !y) return x ?? y;
  if (x === y) return x;
  if (isData(x) && isData(y)) return mergeData(m, condition, x, y, location, place);
  if (!isData(x) && !isData(y)) return mergeValues(m, condition, x, y, place);
  return { kind: 'broken', unread: unread('a thing that is of a different kind on each branch', place) };
}

function mergeData(m: Machine, condition: Expr, a: Data, b: Data, id: number, place: Place): Data {
  if (a.kind === 'list' && b.kind === 'list' && a.items.length === b.items.length) {
    return { ...a, items: a.items.map((v, k) => mergeValues(m, condition, v, b.items[k]!, place)) };
  }
  if (a.kind === 'record' && b.kind === 'record') {
    if (m.isFrameNames(id)) return { ...a, members: mergeLocals(m, condition, a.members, b.members, place) };
    const members = mergeMembers(m, condition, a.members, b.members, () => NOTHING, place);
    return { ...a, members };
  }
  if (a.kind === 'generic' && b.kind === 'generic') {
    const members = mergeMembers(m, condition, a.members, b.members, (key) => childOf(m, a.copyOf ?? id, a.generic, key, place), place);
    return { ...a, members };
  }
  if (a.kind === 'broken') return { kind: 'broken', unread: a.unread };
  if (b.kind === 'broken') return { kind: 'broken', unread: b.unread };
  return { kind: 'broken', unread: unread('a list whose length differs between two branches', place) };
}

function mergeMembers(
  m: Machine,
  condition: Expr,
  a: Map<string, Value>,
  b: Map<string, Value>,
  missing: (key: string) => Value,
  place: Place,
): Map<string, Value> {
  const members = new Map<string, Value>();
  for (const key of new Set([...a.keys(), ...b.keys()])) {
    members.set(key, mergeValues(m, condition, a.get(key) ?? missing(key), b.get(key) ?? missing(key), place));
  }
  return members;
}

/**
 * Locals by name: one that is declared on one branch only is asked for there. States of the other branch do not vote on it;
 * where a flag from outside chooses the branch, it is the flag for which there is such a local.
 */
function mergeLocals(m: Machine, condition: Expr, a: Map<string, Value>, b: Map<string, Value>, place: Place): Map<string, Value> {
  const members = new Map<string, Value>();
  const isPartial = a.size !== b.size || [...a.keys()].some((key) => !b.has(key));
  const isOpen = isPartial && m.free.size > 0 && reachable([condition]).some((e) => m.free.has(e));
  const none: Value = { kind: 'scalar', expr: m.graph.nan, place };
  for (const key of new Set([...a.keys(), ...b.keys()])) {
    const [x, y] = [a.get(key), b.get(key)];
    if (isOpen && (!x || !y)) members.set(key, (x ?? y)!);
    else members.set(key, mergeValues(m, condition, x ?? none, y ?? none, place));
  }
  return members;
}

export function mergeValues(m: Machine, condition: Expr, a: Value, b: Value, place: Place): Value {
  if (condition === m.graph.true || a === b) return a;
  if (condition === m.graph.false) return b;
  if (a.kind === 'unread') return a;
  if (b.kind === 'unread') return b;
  if (a.kind === 'object' && b.kind === 'object' && a.id === b.id) return a;
  if (a.kind === 'string' && b.kind === 'string' && a.value === b.value) return a;
  if (a.kind === 'nothing' && b.kind === 'nothing') return a;
  if (a.kind === 'class' && b.kind === 'class' && a.info === b.info) return a;
  if (a.kind === 'library' && b.kind === 'library' && a.path === b.path) return a;
  if (a.kind === 'function' && b.kind === 'function' && a.node === b.node && a.scope === b.scope && a.self === b.self) return a;
  if (a.kind === 'condition' && b.kind === 'condition') {
    const g = m.graph;
    return { kind: 'condition', expr: g.or(g.and(condition, a.expr), g.and(g.not(condition), b.expr)), place };
  }
  if (a.kind === 'scalar' || b.kind === 'scalar') {
    const x = plainNumber(m, a);
    const y = plainNumber(m, b);
    if (x && y) {
      const at = x.place && y.place && x.place.span === y.place.span ? x.place : x.expr === y.expr ? x.place : place;
      return { kind: 'scalar', expr: m.graph.select(condition, x.expr, y.expr), ...(at ? { place: at } : {}) };
    }
  }
  return { kind: 'choice', condition, whenTrue: a, whenFalse: b };
}

function plainNumber(m: Machine, v: Value): { expr: Expr; place?: Place } | undefined {
  if (v.kind === 'scalar') return v;
  if (v.kind === 'condition') {
    return { expr: m.graph.select(v.expr, m.graph.one, m.graph.zero), ...(v.place ? { place: v.place } : {}) };
  }
  if (v.kind !== 'object') return undefined;
  const data = m.store.data(v.id);
  if (data.kind !== 'generic' || data.members.size > 0) return undefined;
  const n = numberOf(m, v.id, data);
  return isUnread(n) ? undefined : n;
}

/** Runs `whenTrue` and `whenFalse` in branches of their own and merges their values and what they wrote. */
export function fork(m: Machine, condition: Expr, place: Place, whenTrue: () => Value, whenFalse: () => Value): Value {
  if (condition === m.graph.true) return whenTrue();
  if (condition === m.graph.false) return whenFalse();
  const base = m.store;
  m.store = base.child();
  const a = m.onBranch(condition, whenTrue);
  const changesA = m.store.changesSince(base);
  m.store = base.child();
  const b = m.onBranch(m.graph.not(condition), whenFalse);
  const changesB = m.store.changesSince(base);
  m.store = base;
  const merged = mergePair(m, base, condition, { changes: changesA, value: a }, { changes: changesB, value: b }, place);
  apply(base, merged.changes);
  return merged.value;
}

/** What branches write of which nobody knows whether they are taken is not known afterwards. */
export function spoilWritten(m: Machine, why: Unread, branches: readonly (() => void)[]): void {
  const base = m.store;
  const touched = new Set<number>();
  for (const run of branches) {
    m.store = base.child();
    run();
    for (const k of m.store.changesSince(base).keys()) touched.add(k);
  }
  m.store = base;
  touched.delete(DEAD);
  for (const k of touched) if (base.get(k)) m.spoilLocation(k, why);
}

/** Does `use` with a value; where it is one of two, with each of them in a branch of its own. */
export function withEach(m: Machine, value: Value, place: Place, use: (v: Value) => Value): Value {
  if (value.kind === 'unread') return value;
  if (value.kind !== 'choice') return use(value);
  const { whenTrue, whenFalse } = value;
  const condition = settle(m, value.condition);
  return fork(
    m,
    condition,
    place,
    () => withEach(m, whenTrue, place, use),
    () => withEach(m, whenFalse, place, use),
  );
}
