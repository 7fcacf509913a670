import type { Place } from '../text/span';
import { assignInto } from './array-writes';
import { settleField } from './classes';
import type { Expr } from '../expression/node';
import type { BinaryOperator, Expression, Pattern } from './form';
import { maskOf, writeMasked } from './mask-arrays';
import { clipsVariable } from './limits';
import type { Machine } from './machine';
import { assignMasked } from './masks';
import { readElement, readMember, writeElement, writeMember } from './members';
import { heldArray } from './matrix-objects';
import { withEach } from './merging';
import { dataOf, itemsOf } from './numbers';
import { binary } from './operators';
import { writeOpen } from './open-cells';
import { openPlace, readOpen, spoilRoot } from './open-index';
import { bindPattern } from './patterns';
import type { ClassInfo, Scope } from './scope';
import { sliceTargets } from './slices';
import { arriveAt, declare, readVariable, write } from './variables';
import { NOTHING, unread, type ObjectValue, type Value } from './values';

/** `a = v`, `a += v`, `i++`. */
export function assign(m: Machine, scope: Scope, e: Expression & { kind: 'assign' }, place: Place): Value {
  const { target } = e;
  if (target.kind === 'name') return assignName(m, scope, e, target.name, place);
  if (target.kind === 'place') return assignPlace(m, scope, e, target.target, place);
  if (e.op) return unread('an operator on several targets', place);
  const value = m.evaluate(scope, e.value);
  bindPattern(m, scope, target, value, (s, p, v) => assignTo(m, s, p, v));
  return value;
}

function assignName(m: Machine, scope: Scope, e: Expression & { kind: 'assign' }, name: string, place: Place): Value {
  const known = scope.find(name);
  const old = e.op ? (known ? readVariable(m, known, place) : unread(`\`${name}\` is used before it has a value`, place)) : NOTHING;
  const given = m.evaluate(scope, e.value);
  const variable = known ?? scope.find(name) ?? declare(m, scope.functionScope, name);
  const at = m.place(scope, e.value.span);
  let value: Value;
  if (e.op) value = joined(m, scope, e, old, given, place);
  else if (m.request.withinLimits && known && clipsVariable(m, readVariable(m, known, place), given)) value = readVariable(m, known, place);
  else value = arriveAt(m, scope, variable, given, at);
  write(m, variable, value);
  return e.yields === 'old' ? old : value;
}

function joined(m: Machine, scope: Scope, e: Expression & { kind: 'assign' }, old: Value, given: Value, place: Place): Value {
  const { listConcat } = scope.frame.module.program;
  const before = old.kind === 'object' ? dataOf(m, old) : undefined;
  const isPlain = before?.kind === 'list' && !before.array;
  const more = isPlain && given.kind === 'object' ? dataOf(m, given) : undefined;
  const isArray = more?.kind === 'list' && more.array;
  if (listConcat && e.op === '+' && isPlain && !isArray && old.kind === 'object') return extended(m, old, given, place);
  const value = binary(m, scope.frame.module, e.op!, old, given, place);
  if (listConcat && old.kind === 'object' && value.kind === 'object') return inPlace(m, old, value, place);
  if (value.kind === 'scalar') m.note(place, value.expr);
  return value;
}

/** `+=` of a plain list takes over the items of another. */
function extended(m: Machine, old: ObjectValue, given: Value, place: Place): Value {
  const items = itemsOf(m, given);
  const list = m.store.writable(old.id);
  if (list.kind !== 'list') return list.kind === 'broken' ? list.unread : old;
  if (items) list.items.push(...items);
  else {
    const why = given.kind === 'unread' ? given : unread('a list that is extended by one whose length is not known', place);
    m.breakObject(old.id, why);
    return why;
  }
  return old;
}

/** Python's `+=` changes a list or array itself, so that its other names see it. */
function inPlace(m: Machine, old: ObjectValue, value: ObjectValue, place: Place): Value {
  const items = itemsOf(m, value);
  if (!items || !itemsOf(m, old)) return value;
  const before = m.store.data(old.id);
  const made = m.store.data(value.id);
  if (before.kind !== 'list' || made.kind !== 'list') return value;
  // A plain list and an array make a new array.
  if (!before.array && made.array) return value;
  if (!before.array) {
    const list = m.store.writable(old.id);
    if (list.kind === 'list') list.items = [...items];
    return old;
  }
  if (before.integer && !made.integer) {
    const why = unread('an array of integers to which fractions are added in place, which is an error', place);
    m.breakObject(old.id, why);
    return why;
  }
  if (before.held) m.store.thaw(old.id);
  assignInto(m, old, value, place);
  return old;
}

function assignPlace(m: Machine, scope: Scope, e: Expression & { kind: 'assign' }, target: Expression, place: Place): Value {
  const { module } = scope.frame;
  if (target.kind === 'member') {
    const object = m.evaluate(scope, target.object);
    const maker = !e.op && e.value.kind === 'number' && target.object.kind === 'self' ? constructorOf(m, scope) : undefined;
    const settled = (v: Value): Value => (maker ? settleField(m, maker, target.name, v, place) : v);
    return through(
      m,
      scope,
      e,
      object,
      place,
      (o) => readMember(m, module, o, target.name, place),
      (o, v) => writeMember(m, module, o, target.name, settled(v), place),
    );
  }
  if (target.kind === 'index') {
    const masked = assignMasked(m, scope, e, target, place);
    if (masked) return masked;
    const open = openPlace(m, scope, target);
    if (open) {
      const object = m.evaluate(scope, open.root);
      const read = (): Value => readOpen(m, scope, open, place);
      return through(m, scope, e, object, place, read, (o, v) => writeOpen(m, o, open.keys, v, place));
    }
    let object = m.evaluate(scope, target.object);
    if (target.indices.length === 2) object = heldArray(m, object) ?? object;
    if (target.indices.some((i) => i.kind === 'slice')) return assignSlice(m, scope, e, target, object, place);
    const keys = target.indices.map((i) => m.evaluate(scope, i));
    const mask = keys.length === 1 ? maskOf(m, keys[0]!) : undefined;
    if (mask && object.kind === 'object') return writeByMask(m, scope, e, object, mask, place);
    for (const k of keys.slice(0, -1)) object = readElement(m, module, object, k, place);
    const key = keys[keys.length - 1]!;
    if (object.kind === 'unread') spoilRoot(m, scope, target, object);
    return through(m, scope, e, object, place, (o) => readElement(m, module, o, key, place), (o, v) => writeElement(m, module, o, key, v, place));
  }
  if (target.kind === 'name') return assignName(m, scope, e, target.name, place);
  m.evaluate(scope, e.value);
  return unread('an assignment to something that is no variable, member or element', place);
}

/** The class whose constructor is running, where an instance is made by the code itself. */
function constructorOf(m: Machine, scope: Scope): ClassInfo | undefined {
  const { home, node } = scope.frame;
  if (!home || m.constructing !== undefined) return undefined;
  return home.node.members.some((x) => x.kind === 'constructor' && x.node === node) ? home : undefined;
}

function through(
  m: Machine,
  scope: Scope,
  e: Expression & { kind: 'assign' },
  object: Value,
  place: Place,
  read: (object: Value) => Value,
  put: (object: Value, value: Value) => void,
): Value {
  if (object.kind === 'unread') {
    m.evaluate(scope, e.value);
    return object;
  }
  return withEach(m, object, place, (o) => {
    const old = e.op ? read(o) : NOTHING;
    const given = m.evaluate(scope, e.value);
    let value = e.op ? joined(m, scope, e, old, given, place) : given;
    if (!e.op && m.request.withinLimits && given.kind === 'scalar') {
      const before = read(o);
      if (clipsVariable(m, before, given)) value = before;
    }
    put(o, value);
    return e.yields === 'old' ? old : value;
  });
}

/** A list of the same items, which stays as it is when the list is written to. */
function shallow(m: Machine, v: Value): Value {
  const data = dataOf(m, v);
  return data?.kind === 'list' ? m.list(data.items, data.array) : v;
}

function writeByMask(m: Machine, scope: Scope, e: Expression & { kind: 'assign' }, object: ObjectValue, mask: readonly Expr[], place: Place): Value {
  const given = m.evaluate(scope, e.value);
  const change = (old: Value): Value => (e.op ? binary(m, scope.frame.module, e.op, old, given, place) : given);
  writeMasked(m, object, mask, given, change, place);
  return given;
}

function assignSlice(m: Machine, scope: Scope, e: Expression & { kind: 'assign' }, target: Expression & { kind: 'index' }, object: Value, place: Place): Value {
  return writeSlice(m, scope, target, object, m.evaluate(scope, e.value), place, e.op);
}

function writeSlice(m: Machine, scope: Scope, target: Expression & { kind: 'index' }, object: Value, given: Value, place: Place, op?: BinaryOperator): Value {
  const { module } = scope.frame;
  const value = module.program.listConcat && itemsOf(m, given) ? shallow(m, given) : given;
  const targets = sliceTargets(m, scope, object, target.indices, value, place);
  if ('kind' in targets) {
    if (object.kind === 'object') m.breakObject(object.id, targets);
    return targets;
  }
  // All is worked out before anything is written: what is written may be a part of what is read.
  const parts = targets.map((t) => (op ? binary(m, module, op, readElement(m, module, t.object, t.key, place), t.value, place) : t.value));
  targets.forEach((t, k) => writeElement(m, module, t.object, t.key, parts[k]!, place));
  return value;
}

/** Assigns to a pattern that is no declaration. */
export function assignTo(m: Machine, scope: Scope, pattern: Pattern, value: Value): void {
  if (pattern.kind === 'name') {
    const variable = scope.find(pattern.name) ?? declare(m, scope.functionScope, pattern.name);
    const place = m.place(scope, pattern.span);
    write(m, variable, arriveAt(m, scope, variable, value, place));
  } else if (pattern.kind === 'place') {
    const { module } = scope.frame;
    const place = m.place(scope, pattern.span);
    const t = pattern.target;
    if (t.kind === 'member') writeMember(m, module, m.evaluate(scope, t.object), t.name, value, place);
    else if (t.kind === 'index' && t.indices.some((i) => i.kind === 'slice')) {
      writeSlice(m, scope, t, m.evaluate(scope, t.object), value, place);
    } else if (t.kind === 'index') {
      let object = m.evaluate(scope, t.object);
      const keys = t.indices.map((i) => m.evaluate(scope, i));
      for (const k of keys.slice(0, -1)) object = readElement(m, module, object, k, place);
      writeElement(m, module, object, keys[keys.length - 1]!, value, place);
    }
  }
}
