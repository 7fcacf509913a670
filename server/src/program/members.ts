import type { Place } from '../text/span';
import { isChoiceOfNumbers } from './conditions';
import { findMember, readsWhatChanges } from './class-members';
import { factsOf } from './facts';
import { instanceField, staticMember } from './classes';
import { putItem } from './array-writes';
import { childOf, fieldValue } from './generics';
import { runIntrinsic } from './intrinsics/table';
import type { Machine } from './machine';
import { heldArray } from './matrix-objects';
import { withEach } from './merging';
import { countOf, dataOf, describe, scalarOf } from './numbers';
import { cellAt, writeOpen } from './open-cells';
import type { ClassInfo, Module } from './scope';
import { NOTHING, unread, type FunctionValue, type Assigned, type GenericData, type ListData, type ObjectValue, type RecordData, type Value } from './values';

/** Reading and writing members and elements. */

const LONGEST = 20_000;

export function readMember(m: Machine, module: Module, object: Value, key: string, place: Place): Value {
  switch (object.kind) {
    case 'unread':
      return object;
    case 'choice':
      return withEach(m, object, place, (v) => readMember(m, module, v, key, place));
    case 'library':
      return libraryMember(m, object.module, `${object.path}.${key}`, place);
    case 'module':
      return m.exportOf(object.module, key, place);
    case 'class':
      return staticMember(m, object.info, key, place);
    case 'function':
      return functionMember(m, object, key) ?? methodOf(m, module, 'function', object, key, place);
    case 'string':
      if (key === 'length') return m.scalar(m.graph.number(object.value.length), place);
      return methodOf(m, module, 'string', object, key, place);
    case 'scalar':
      // What is not there on this way through the function has no parts that are.
      if (object.expr === m.graph.nan) return object;
      return methodOf(m, module, 'scalar', object, key, place);
    case 'condition':
      return methodOf(m, module, 'scalar', object, key, place);
    case 'nothing':
      return unread(`\`.${key}\` of a variable without a value`, place);
    case 'method':
      return unread(`\`.${key}\` of a method`, place);
    case 'object':
      break;
  }
  const data = dataOf(m, object)!;
  switch (data.kind) {
    case 'broken': {
      const method = data.cells && methodOf(m, module, 'list', object, key, place);
      if (method && method.kind !== 'unread') return method;
      if (data.cells) m.breakObject(object.id, data.unread);
      return data.unread;
    }
    case 'list':
      if (key === 'return' && m.keepPlaces) return unread('a call means its value already: leave out `.return`', place);
      return listMember(m, module, object, data, key, place);
    case 'record':
      return recordMember(m, module, object, data, key, place);
    case 'generic':
      return genericMember(m, module, object, data, key, place);
  }
}

export function libraryMember(m: Machine, module: Module, path: string, place: Place): Value {
  const constant = module.library.constants.get(path);
  return constant ? m.scalar(constant(m.graph), place) : { kind: 'library', path, module };
}

function functionMember(m: Machine, f: FunctionValue, key: string): Value | undefined {
  if (key === 'return' && m.keepPlaces) return m.runSeparately(f);
  const members = m.store.get(m.membersOf(f.node));
  if (members?.kind !== 'record') return undefined;
  const found = members.members.get(key);
  if (found || key !== 'prototype') return found;
  const prototype = m.atRoot(() => m.object({ kind: 'record', members: new Map() }));
  m.atRoot(() => (m.store.writable(m.membersOf(f.node)) as RecordData).members.set(key, prototype));
  return prototype;
}

function methodOf(m: Machine, module: Module, kind: string, self: Value, key: string, place: Place): Value {
  const property = module.library.properties?.get(`${kind}.${key}`);
  if (property) return runIntrinsic(m, module, property, self, [], place);
  const method = module.library.methods.get(`${kind}.${key}`);
  if (method) return { kind: 'method', intrinsic: method, self };
  const scalar = kind === 'scalar' ? module.library.scalars.get(`scalar.${key}`) : undefined;
  if (scalar) return { kind: 'method', intrinsic: `scalar:scalar.${key}`, self };
  return unread(`\`.${key}\` of a ${kind === 'scalar' ? 'number' : kind}`, place);
}

function listMember(m: Machine, module: Module, object: ObjectValue, data: ListData, key: string, place: Place): Value {
  if (key === 'length') return m.scalar(m.graph.number(data.items.length), place);
  if (/^\d+$/.test(key)) return data.items[Number(key) - module.program.indexBase] ?? NOTHING;
  return methodOf(m, module, 'list', object, key, place);
}

function recordMember(m: Machine, module: Module, object: ObjectValue, data: RecordData, key: string, place: Place): Value {
  if (heldArray(m, object)) return methodOf(m, module, 'matrix', object, key, place);
  const own = data.members.get(key);
  if (own) return own;
  const getter = data.getters?.get(key);
  if (getter) return m.invoke(getter, object, [], place);
  if (data.info) {
    const found = fromClass(m, data.info, object, key, place);
    if (found) return found;
  }
  if (data.prototype !== undefined) {
    const inherited = m.store.data(data.prototype);
    if (inherited.kind === 'record' && inherited.members.has(key)) return inherited.members.get(key)!;
  }
  const method = module.library.methods.get(`record.${key}`);
  if (method) return { kind: 'method', intrinsic: method, self: object };
  return NOTHING;
}

/** The value of a getter that keeps it: of a thing from outside it is known only where what it is made of stays as it is. */
function cachedMember(m: Machine, info: ClassInfo, object: ObjectValue, key: string, f: FunctionValue, place: Place): Value {
  const value = m.invoke(f, object, [], place);
  if (m.store.data(object.id).kind === 'record') m.setMember(object, key, value);
  else if (readsWhatChanges(info.node, f.node)) return unread(`\`.${key}\`, which keeps its first value while what it is made of changes`, place);
  return value;
}

/** A getter's value or a method, from the class of an instance. */
function fromClass(m: Machine, info: ClassInfo, object: ObjectValue, key: string, place: Place): Value | undefined {
  const found = findMember(info, key);
  if (found === 'unknown') return unread(`\`.${key}\` of a class whose base is not read`, place);
  if (!found?.member.node) return undefined;
  const { patched } = factsOf(found.info.scope.frame.module.program);
  const { name } = found.info.node;
  if (patched.size > 0 && (patched.has(`${name}.${key}`) || patched.has(`${name}.*`))) return unread(`\`${name}.prototype.${key}\`, which is changed after the class`, place);
  const f: FunctionValue = { kind: 'function', node: found.member.node, scope: found.info.scope, self: object, home: found.info };
  if (found.member.kind === 'getter' && found.member.isCached) return cachedMember(m, info, object, key, f, place);
  if (found.member.kind === 'getter') return m.invoke(f, object, [], place);
  return found.member.kind === 'method' ? f : undefined;
}

function genericMember(m: Machine, module: Module, object: ObjectValue, data: GenericData, key: string, place: Place): Value {
  const written = data.members.get(key);
  if (written) return written;
  const { generic } = data;
  const bound = [generic.path, ...generic.aliases].some((path) => m.naming.hasRead(m.naming.member(path, key)));
  const method = bound || generic.info ? undefined : module.library.methods.get(`generic.${key}`);
  if (method) return { kind: 'method', intrinsic: method, self: object };
  const { info } = generic;
  const id = data.copyOf ?? object.id;
  if (!info) return childOf(m, id, generic, key, place, { constant: generic.constant === true && !m.isAssignedMember(key) });
  if (bound) return childOf(m, id, generic, key, place, { assigned: () => assignedMember(m, info, object, generic.path, key, place) });
  const found = fromClass(m, info, object, key, place);
  if (found && found.kind !== 'unread') return found;
  if (found && findMember(info, key) !== 'unknown') return found;
  const field = instanceField(m, info, object, generic.path, key);
  return field.function ?? childOf(m, id, generic, key, place, field);
}

/** What a class gives a member that is bound by `reads`: its getter's value, or what its constructor puts there. */
function assignedMember(m: Machine, info: ClassInfo, object: ObjectValue, path: string, key: string, place: Place): Assigned | undefined {
  const found = findMember(info, key);
  const getter = found && found !== 'unknown' && found.member.kind === 'getter' ? found.member.node : undefined;
  if (!getter) return instanceField(m, info, object, path, key).assigned?.();
  const value = fromClass(m, info, object, key, place);
  return value && { value, place: m.place(info.scope, getter.nameSpan), hasSymbol: () => true };
}

/** A key that is known: text, or a whole number as the source counts. */
export function keyOf(m: Machine, key: Value, place: Place): string | number | undefined {
  if (key.kind === 'string') return key.value;
  return countOf(m, key, place);
}

/** An index that a condition chooses is two indices, each on its own branch. */
function chosen(m: Machine, key: Value): Value {
  const expr = scalarOf(m, key);
  if (!expr || expr.op !== 'select' || !isChoiceOfNumbers(expr, 0)) return key;
  const [condition, a, b] = expr.args;
  return {
    kind: 'choice',
    condition: condition!,
    whenTrue: chosen(m, { kind: 'scalar', expr: a! }),
    whenFalse: chosen(m, { kind: 'scalar', expr: b! }),
  };
}

export function readElement(m: Machine, module: Module, object: Value, given: Value, place: Place): Value {
  const key = chosen(m, given);
  if (object.kind === 'unread') return object;
  if (key.kind === 'unread') return key;
  if (object.kind === 'choice') return withEach(m, object, place, (v) => readElement(m, module, v, key, place));
  if (key.kind === 'choice') return withEach(m, key, place, (v) => readElement(m, module, object, v, place));
  if (object.kind === 'scalar' && object.expr === m.graph.nan) return object;
  const known = keyOf(m, key, place);
  if (known === undefined) {
    const open = scalarOf(m, key);
    return (open && cellAt(m, module, object, [open], place)) ?? unread('an element whose index is not known', place);
  }
  if (typeof known === 'string') return readMember(m, module, object, known, place);
  if (object.kind === 'string') {
    const c = object.value[known - module.program.indexBase];
    return c === undefined ? NOTHING : { kind: 'string', value: c };
  }
  const data = dataOf(m, object);
  if (data?.kind === 'list') return elementAt(m, module, data, known);
  if (data?.kind === 'broken') return cellAt(m, module, object, [m.graph.number(known)], place) ?? data.unread;
  // What is indexed by the first place is no number: its one entry goes by the name of the whole.
  if (object.kind === 'scalar' && module.program.listConcat && known === module.program.indexBase) return object;
  if (!data) return unread(`an element of a ${describe(object)}`, place);
  return readMember(m, module, object, String(known), place);
}

function elementAt(m: Machine, module: Module, data: ListData, index: number): Value {
  const { indexBase, negativeIndex, elementwise } = module.program;
  const k = index < 0 && negativeIndex ? data.items.length + index : index - indexBase;
  const item = data.items[k];
  if (!item) return NOTHING;
  // A column is a list of rows of one.
  if (elementwise && item.kind === 'object') {
    const row = m.store.data(item.id);
    if (row.kind === 'list' && row.items.length === 1 && data.items.length > 1) return row.items[0]!;
    if (row.kind === 'list' && data.items.length === 1) return row.items[index - indexBase] ?? NOTHING;
  }
  return item;
}

/** @returns a reason where the write can't be read; the object is then broken already */
export function writeMember(m: Machine, module: Module, object: Value, key: string, value: Value, place: Place): void {
  switch (object.kind) {
    case 'choice':
      withEach(m, object, place, (v) => {
        writeMember(m, module, v, key, value, place);
        return NOTHING;
      });
      return;
    case 'class': {
      const statics = m.store.writable(object.info.statics);
      if (statics.kind === 'record') statics.members.set(key, value);
      return;
    }
    case 'function': {
      const members = m.store.writable(m.membersOf(object.node));
      if (members.kind === 'record') members.members.set(key, value);
      return;
    }
    case 'object':
      break;
    default:
      return;
  }
  dataOf(m, object);
  const before = m.store.data(object.id);
  const info = before.kind === 'record' ? before.info : before.kind === 'generic' ? before.generic.info : undefined;
  if (info && callSetter(m, info, object, key, value, place)) return;
  if (before.kind === 'record' && before.frozen) {
    m.breakObject(object.id, unread('a write to a frozen thing', place));
    return;
  }
  const own = before.kind === 'record' ? before.setters?.get(key) : undefined;
  if (own) {
    m.invoke(own, object, [{ value }], place);
    return;
  }
  // In strict code a value that only has a getter can't be written to.
  if (before.kind === 'record' && before.getters?.has(key)) return;
  const data = m.store.writable(object.id);
  if (data.kind === 'record' && m.constructing?.id === object.id) data.members.set(key, fieldValue(m, m.constructing, key, value, place));
  else if (data.kind === 'record' || data.kind === 'generic') data.members.set(key, value);
  else if (data.kind === 'list') {
    if (/^\d+$/.test(key)) setItem(m, object, data, Number(key) - module.program.indexBase, value, place);
    else if (key === 'length') {
      const n = countOf(m, value, place);
      if (n !== undefined && n <= data.items.length) data.items.length = Math.max(0, n);
      else m.breakObject(object.id, unread('a list whose length is set to a value that is not known', place));
    }
  }
}

function callSetter(m: Machine, info: ClassInfo, object: ObjectValue, key: string, value: Value, place: Place): boolean {
  const found = findMember(info, key, 'setter');
  if (!found || found === 'unknown' || !found.member.node) return false;
  const f: FunctionValue = { kind: 'function', node: found.member.node, scope: found.info.scope, self: object, home: found.info };
  m.invoke(f, object, [{ value }], place);
  return true;
}

function setItem(m: Machine, object: ObjectValue, data: ListData, k: number, value: Value, place: Place): void {
  if (k < 0 || k > LONGEST) {
    m.breakObject(object.id, unread('a list written to outside its bounds', place));
    return;
  }
  putItem(m, object, data, k, value, place);
}

export function writeElement(m: Machine, module: Module, object: Value, given: Value, value: Value, place: Place): void {
  const key = chosen(m, given);
  if (object.kind === 'choice') {
    withEach(m, object, place, (v) => {
      writeElement(m, module, v, key, value, place);
      return NOTHING;
    });
    return;
  }
  if (key.kind === 'choice') {
    withEach(m, key, place, (k) => {
      writeElement(m, module, object, k, value, place);
      return NOTHING;
    });
    return;
  }
  const known = key.kind === 'unread' ? undefined : keyOf(m, key, place);
  if (known === undefined) {
    if (object.kind === 'object') {
      const open = scalarOf(m, key);
      if (open) writeOpen(m, object, [open], value, place);
      else m.breakObject(object.id, key.kind === 'unread' ? key : unread('a list written to at an index that is not known', place));
    }
    return;
  }
  if (typeof known === 'number' && object.kind === 'object') {
    const { negativeIndex, indexBase } = module.program;
    const data = dataOf(m, object);
    if (data?.kind === 'list') {
      const list = m.store.writable(object.id);
      if (list.kind !== 'list') return;
      const k = known < 0 && negativeIndex ? list.items.length + known : known - indexBase;
      const item = list.items[k];
      if (module.program.elementwise && item?.kind === 'object') {
        const row = m.store.writable(item.id);
        if (row.kind === 'list' && row.items.length === 1 && value.kind !== 'object') {
          row.items[0] = value;
          return;
        }
      }
      setItem(m, object, list, k, value, place);
      return;
    }
    if (data?.kind === 'broken') {
      writeOpen(m, object, [m.graph.number(known)], value, place);
      return;
    }
  }
  writeMember(m, module, object, String(known), value, place);
}
