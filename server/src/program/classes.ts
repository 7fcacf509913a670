import type { Place } from '../text/span';
import type { ArgumentValue } from './calls';
import { findMember } from './class-members';
import type { ClassNode, Member } from './form';
import { fieldValue, genericAt, valueOf } from './generics';
import type { Machine } from './machine';
import { Scope, type ClassInfo, type Frame } from './scope';
import { declare, settleName } from './variables';
import { NOTHING, unread, type FunctionValue, type ObjectValue, type Value } from './values';

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
  if (!member.value) return NOTHING;
  const value = m.atRoot(() => {
    const v = m.evaluate(bodyScope(m, found.info, self), member.value!);
    return settleName(m, key, `${info.node.name}.${key}`, v, m.place(found.info.scope, member.span));
  });
  m.atRoot(() => {
    const data = m.store.writable(found.info.statics);
    if (data.kind === 'record') data.members.set(key, value);
  });
  return value;
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
    const value = m.evaluate(scope, member.value);
    const place = m.place(scope, member.span);
    const settled = m.constructing === self.id ? fieldValue(m, member.name, value, place) : settleField(m, info, member.name, value, place);
    const data = m.store.writable(self.id);
    if (data.kind === 'record') data.members.set(member.name, settled);
  }
}

/** A literal that a class gives to a field, and nothing else ever does, stands for the symbol of the field's name. */
export function settleField(m: Machine, info: ClassInfo, key: string, value: Value, place: Place): Value {
  if (value.kind !== 'scalar' || value.expr.op !== 'number' || m.isAssignedMember(key)) return value;
  return settleName(m, key, `${info.node.name}.${key}`, value, place);
}

/**
 * What is known of a field of an instance from outside: its initial value, as far as a constructor run on generic
 * arguments tells, whether that stays its value, and a function it holds.
 */
export function instanceField(
  m: Machine,
  info: ClassInfo,
  object: ObjectValue,
  key: string,
): { fallback?: () => Value | undefined; constant?: boolean; function?: Value } {
  const found = findMember(info, key, 'field');
  const field = found && found !== 'unknown' ? found : undefined;
  if (field?.member.value?.kind === 'function') {
    return { function: m.evaluate(bodyScope(m, field.info, object), field.member.value) };
  }
  const constant = field?.member.isConstant === true;
  const fallback = (): Value | undefined => {
    const data = m.store.data(constructed(m, info).id);
    return data.kind === 'record' ? data.members.get(key) : undefined;
  };
  return { fallback, constant };
}

/** An instance made by the constructor from generic arguments, once per class. */
function constructed(m: Machine, info: ClassInfo): ObjectValue {
  const known = m.instances.get(info.node);
  if (known) return known;
  return m.atRoot(() => {
    const self = m.object({ kind: 'record', members: new Map(), info });
    m.instances.set(info.node, self);
    // Its arguments are things of their own: they must not be held against the fields they are stored in.
    const { run } = m.naming;
    const before = m.constructing;
    m.naming.run = -1 - 2 * m.instances.size;
    m.constructing = self.id;
    const args = genericArguments(m, info);
    if (info.scope.frame.module.program.classFields) initialiseClassFields(m, info, self);
    initialise(m, info, self, args, m.place(info.scope, info.node.nameSpan));
    m.naming.run = run;
    m.constructing = before;
    return self;
  });
}

function genericArguments(m: Machine, info: ClassInfo): ArgumentValue[] {
  let at: ClassInfo | 'unknown' | undefined = info;
  for (let k = 0; at && at !== 'unknown' && k < 64; k++) {
    const constructor: Member | undefined = at.node.members.find((x) => x.kind === 'constructor' && x.node);
    if (constructor) {
      const parameters = constructor.node!.parameters.slice(constructor.node!.selfParameter ? 1 : 0);
      return parameters
        .filter((p) => !p.rest && !p.restNamed)
        .map((p) => {
          const name = p.pattern.kind === 'name' ? p.pattern.name : '';
          const place = m.place(info.scope, p.pattern.span);
          const meaning = name === '' ? undefined : m.naming.read([name], place);
          const { initial } = p;
          const fallback = initial ? { fallback: () => m.evaluate(info.scope, initial) } : {};
          return { value: meaning ? valueOf(m, meaning, place) : genericAt(m, name, place, fallback) };
        });
    }
    at = at.base();
  }
  return [];
}
