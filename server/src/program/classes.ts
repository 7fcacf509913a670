import type { Place } from '../text/span';
import type { ArgumentValue } from './parameters';
import { findMember } from './class-members';
import type { ClassNode, Member } from './form';
import type { Expr } from '../expression/node';
import { fieldValue, genericAt, valueOf } from './generics';
import type { Machine } from './machine';
import { factsOf, type MemberWrite } from './facts';
import { memberPath } from './paths';
import { patternNames, storedParameters } from './scan';
import { Scope, type ClassInfo, type Frame } from './scope';
import { declare, settleName } from './variables';
import { NOTHING, unread, type Assigned, type FunctionValue, type ObjectValue, type Value } from './values';

/** Classes: their members, instances, and the fields of an instance from outside. */

export function classInfo(m: Machine, scope: Scope, node: ClassNode): ClassInfo {
  const known = m.classes.get(node);
  if (known && known.scope.parent === scope) return known;
  const inner = new Scope(scope, scope.frame);
  let base: ClassInfo | 'unknown' | undefined | null = null;
  const info: ClassInfo = {
    node,
    scope: inner,
    statics: m.atRoot(() => m.store.add({ kind: 'record', members: new Map() })),
    base: () => {
      if (base === null) {
        base = undefined;
        const value = node.base ? m.evaluate(scope, node.base) : NOTHING;
        base = value.kind === 'class' ? value.info : node.base ? 'unknown' : undefined;
      }
      return base;
    },
  };
  m.classes.set(node, info);
  // The class knows itself by name, also where it is an expression.
  if (node.name !== '' && !scope.variables.has(node.name)) declare(m, inner, node.name, { kind: 'class', info });
  return info;
}

export function staticMember(m: Machine, info: ClassInfo, key: string, place: Place): Value {
  const written = m.store.data(info.statics);
  const own = written.kind === 'record' ? written.members.get(key) : undefined;
  if (own) return own;
  const found = findMember(info, key, undefined, true);
  if (found === 'unknown') return unread(`\`.${key}\` of a class whose base is not read`, place);
  if (!found) return findInstanceMethod(m, info, key, place);
  const { member } = found;
  const self: Value = { kind: 'class', info: found.info };
  if (member.node) {
    const f: FunctionValue = { kind: 'function', node: member.node, scope: found.info.scope, self, home: found.info };
    return member.kind === 'getter' ? m.invoke(f, self, [], place) : f;
  }
  if (isStaticWritten(found.info, key)) {
    const { value: initial } = member;
    return m.atRoot(() => {
      const fallback = initial ? { fallback: () => m.evaluate(bodyScope(m, found.info, self), initial) } : {};
      const state = genericAt(m, `${info.node.name}.${key}`, place, fallback);
      setStatic(m, found.info, key, state);
      return state;
    });
  }
  if (!member.value) return NOTHING;
  const value = m.atRoot(() => {
    const v = m.evaluate(bodyScope(m, found.info, self), member.value!);
    return settleName(m, key, `${info.node.name}.${key}`, v, m.place(found.info.scope, member.span));
  });
  m.atRoot(() => setStatic(m, found.info, key, value));
  return value;
}

function setStatic(m: Machine, info: ClassInfo, key: string, value: Value): void {
  const data = m.store.writable(info.statics);
  if (data.kind === 'record') data.members.set(key, value);
}

/** True where a static member is written outside its initialiser: `Body.count = 0`, `static { this.count = 0; }`. */
function isStaticWritten(info: ClassInfo, key: string): boolean {
  const { node } = info;
  const writes = factsOf(info.scope.frame.module.program).memberWrites.get(key) ?? [];
  const inStatic = (w: MemberWrite): boolean => w.owner === node && !node.members.some((x) => x.name === key && !x.isStatic);
  return writes.some((w) => w.through === node.name || inStatic(w));
}

/** Python's `Base.method(self, ...)`. */
function findInstanceMethod(m: Machine, info: ClassInfo, key: string, place: Place): Value {
  if (key === 'prototype') return { kind: 'class', info };
  const found = findMember(info, key);
  if (found && found !== 'unknown' && found.member.kind === 'method' && found.member.node) {
    return { kind: 'function', node: found.member.node, scope: found.info.scope, home: found.info };
  }
  void m;
  return found ? unread(`\`.${key}\` of a class`, place) : NOTHING;
}

function bodyScope(m: Machine, info: ClassInfo, self: Value): Scope {
  const outer = info.scope.frame;
  const names = m.atRoot(() => m.store.add({ kind: 'record', members: new Map() }));
  const frame: Frame = { ...outer, self, home: info, names };
  return new Scope(info.scope, frame, true);
}

export function construct(m: Machine, info: ClassInfo, args: readonly ArgumentValue[], place: Place): Value {
  const self = m.object({ kind: 'record', members: new Map(), info });
  if (info.scope.frame.module.program.classFields) initialiseClassFields(m, info, self);
  const problem = initialise(m, info, self, args, place);
  return problem ?? self;
}

/** Runs field initialisers and constructors, the base's first. */
export function initialise(m: Machine, info: ClassInfo, self: ObjectValue, args: readonly ArgumentValue[], place: Place): Value | undefined {
  const base = info.base();
  const constructor = info.node.members.find((x) => x.kind === 'constructor' && x.node);
  if (base === undefined || base === 'unknown') initialiseFields(m, info, self);
  else if (!constructor) {
    const problem = initialise(m, base, self, args, place);
    initialiseFields(m, info, self);
    return problem;
  }
  if (!constructor) return undefined;
  const f: FunctionValue = { kind: 'function', node: constructor.node!, scope: info.scope, self, home: info };
  const result = m.invoke(f, self, args, place);
  return result.kind === 'unread' ? result : undefined;
}

/** `super(...)`: the base's part, then this class's own fields. */
export function callSuper(m: Machine, info: ClassInfo, self: ObjectValue, args: readonly ArgumentValue[], place: Place): Value {
  const base = info.base();
  if (base && base !== 'unknown') {
    const problem = initialise(m, base, self, args, place);
    initialiseFields(m, info, self);
    return problem ?? NOTHING;
  }
  return NOTHING;
}

/** What instances see of the class bodies, the base's first. */
function initialiseClassFields(m: Machine, info: ClassInfo, self: ObjectValue): void {
  const chain: ClassInfo[] = [];
  for (let at: ClassInfo | 'unknown' | undefined = info; at && at !== 'unknown' && chain.length < 64; at = at.base()) chain.unshift(at);
  for (const one of chain) setFields(m, one, self);
}

function initialiseFields(m: Machine, info: ClassInfo, self: ObjectValue): void {
  if (!info.scope.frame.module.program.classFields) setFields(m, info, self);
}

function setFields(m: Machine, info: ClassInfo, self: ObjectValue): void {
  const scope = bodyScope(m, info, self);
  for (const member of info.node.members) {
    if (member.kind !== 'field' || member.isStatic || !member.value) continue;
    const place = m.place(scope, member.span);
    const value = shared(m, member, () => m.evaluate(scope, member.value!), place);
    const settled = m.constructing?.id === self.id ? fieldValue(m, m.constructing, member.name, value, place) : settleField(m, info, member.name, value, place);
    const data = m.store.writable(self.id);
    if (data.kind === 'record') data.members.set(member.name, settled);
  }
}

/** What a class body makes is shared by the instances, where fields belong to the class. */
function shared(m: Machine, member: Member, make: () => Value, place: Place): Value {
  const known = m.sharedFields.get(member);
  if (known) return known;
  const value = make();
  const data = value.kind === 'object' && m.request.program.classFields ? m.store.data(value.id) : undefined;
  if (data?.kind !== 'list' && data?.kind !== 'record') return value;
  const one = m.atRoot(() => m.object({ ...data, held: unread('a thing of the class that is changed: all instances share it', place) }));
  m.sharedFields.set(member, one);
  return one;
}

/** A literal that a class gives to a field, and nothing else ever does, stands for the symbol of the field's name. */
export function settleField(m: Machine, info: ClassInfo, key: string, value: Value, place: Place): Value {
  if (value.kind !== 'scalar' || value.expr.op !== 'number' || m.isAssignedMember(key)) return value;
  return settleName(m, key, `${info.node.name}.${key}`, value, place);
}

/**
 * What is known of a field of an instance from outside: its initial value, as far as a constructor run on generic
 * arguments tells, whether that stays its value, and a function it holds.
 * @param path what the instance is called
 */
export function instanceField(m: Machine, info: ClassInfo, object: ObjectValue, path: string, key: string): InstanceField {
  const found = findMember(info, key, 'field');
  const field = found && found !== 'unknown' ? found : undefined;
  if (field?.member.value?.kind === 'function') {
    return { function: m.evaluate(bodyScope(m, field.info, object), field.member.value) };
  }
  const constant = field?.member.isConstant === true;
  const fallback = (): Value | undefined => {
    const data = m.store.data(constructed(m, info, path).id);
    return data.kind === 'record' ? data.members.get(key) : undefined;
  };
  return { fallback, constant, assigned: () => assignedField(m, info, path, key) };
}

export interface InstanceField {
  readonly fallback?: () => Value | undefined;
  readonly constant?: boolean;
  readonly assigned?: () => Assigned | undefined;
  readonly function?: Value;
}

/** What constructor and initialisers give to a field that nothing else writes, in symbols that their names mean. */
function assignedField(m: Machine, info: ClassInfo, path: string, key: string): Assigned | undefined {
  if (!m.isSetOnce(familyOf(info), key)) return undefined;
  const places = new Map<string, Place>();
  const data = m.atRoot(() => m.store.data(makeInstance(m, info, path, places).id));
  const value = data.kind === 'record' ? data.members.get(key) : undefined;
  if (!value) return undefined;
  return { value, place: places.get(key) ?? m.place(info.scope, info.node.nameSpan), hasSymbol: (s) => parameterMeans(m, info, s) };
}

/** A class and those it extends. */
function familyOf(info: ClassInfo): Set<ClassNode> {
  const family = new Set<ClassNode>();
  for (let at: ClassInfo | 'unknown' | undefined = info; at && at !== 'unknown' && family.size < 64; at = at.base()) family.add(at.node);
  return family;
}

function parameterMeans(m: Machine, info: ClassInfo, symbol: Expr): boolean {
  return (constructorOf(info)?.node?.parameters ?? []).some((p) => patternNames(p.pattern).some((name) => m.naming.symbolOf(name) === symbol));
}

/** An instance made by the constructor from generic arguments, once per class and name. */
function constructed(m: Machine, info: ClassInfo, path: string): ObjectValue {
  const known = m.instances.get(info.node)?.get(path);
  return known ?? m.atRoot(() => makeInstance(m, info, path));
}

/** @param places where fields are to keep what they are given, for the places of that */
function makeInstance(m: Machine, info: ClassInfo, path: string, places?: Map<string, Place>): ObjectValue {
  const self = m.object({ kind: 'record', members: new Map(), info });
  const made = m.instances.get(info.node) ?? new Map<string, ObjectValue>();
  m.instances.set(info.node, made);
  if (!places) made.set(path, self);
  // Its arguments are things of their own: they must not be held against the fields they are stored in.
  const { run } = m.naming;
  const before = m.constructing;
  m.naming.run = -1 - 2 * m.constructions++;
  m.constructing = { id: self.id, path, ...(places ? { places } : {}) };
  const args = genericArguments(m, info, path);
  if (info.scope.frame.module.program.classFields) initialiseClassFields(m, info, self);
  initialise(m, info, self, args, m.place(info.scope, info.node.nameSpan));
  m.naming.run = run;
  m.constructing = before;
  return self;
}

function constructorOf(info: ClassInfo): Member | undefined {
  let at: ClassInfo | 'unknown' | undefined = info;
  for (let k = 0; at && at !== 'unknown' && k < 64; k++) {
    const found: Member | undefined = at.node.members.find((x) => x.kind === 'constructor' && x.node);
    if (found) return found;
    at = at.base();
  }
  return undefined;
}

function genericArguments(m: Machine, info: ClassInfo, path: string): ArgumentValue[] {
  const node = constructorOf(info)?.node;
  if (!node) return [];
  const fields = storedParameters(node);
  return node.parameters
    .slice(node.selfParameter ? 1 : 0)
    .filter((p) => !p.rest && !p.restNamed)
    .map((p) => {
      const name = p.pattern.kind === 'name' ? p.pattern.name : '';
      const place = m.place(info.scope, p.pattern.span);
      const meaning = name === '' ? undefined : m.naming.read([name], place);
      if (meaning) return { value: valueOf(m, meaning, place) };
      const { initial } = p;
      const fallback = initial ? { fallback: () => m.evaluate(info.scope, initial) } : {};
      // A parameter that says nothing by its name is what the field is that it is stored in.
      const aliases = name === '' || m.naming.byName(name) ? [] : (fields.get(name) ?? []).map((field) => memberPath(path, field));
      return { value: genericAt(m, name, place, { aliases, ...fallback }) };
    });
}
