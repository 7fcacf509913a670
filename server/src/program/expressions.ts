import type { Place } from '../text/span';
import { assign } from './assignment';
import { evaluateCall } from './calls';
import { findMember } from './class-members';
import { classInfo } from './classes';
import { comprehend } from './comprehensions';
import { conditionOf, isOpenFlag, isThing, truthOf } from './conditions';
import type { Expression } from './form';
import { clipped } from './limits';
import { valueOf } from './generics';
import { withDefaults } from './defaults';
import { indexValue } from './indexing';
import { invertMask } from './mask-arrays';
import { asInteger, isInteger } from './integers';
import type { Machine } from './machine';
import { settle } from './settle';
import { readMember } from './members';
import { listLiteral, recordLiteral } from './literals';
import { fork, spoilWritten } from './merging';
import { unknownName } from './modules';
import { dataOf, itemsOf, numeric } from './numbers';
import { binary, negate } from './operators';
import { pathOf } from './paths';
import { transpose } from './intrinsics/matrices';
import type { Scope } from './scope';
import { readVariable } from './variables';
import { NOTHING, isUnread, unread, type FunctionValue, type Value } from './values';

/** The value of an expression. */
export function evaluate(m: Machine, scope: Scope, e: Expression): Value {
  const place = m.place(scope, e.span);
  const stopped = m.spend(() => place);
  if (stopped) return stopped;
  return m.nested(
    () => place,
    () => placed(m, e, place, evaluateInside(m, scope, e, place)),
    (u) => u,
  );
}

/** Notes a number's place, and puts in its stead what the caller asked for. */
function placed(m: Machine, e: Expression, place: Place, value: Value): Value {
  if (m.callSite) return value.kind === 'scalar' && !m.keepPlaces ? { ...value, place: m.callSite } : value;
  const { override } = m.request;
  if (override && override.span.start === e.span.start && override.span.end === e.span.end && override.file === place.file) {
    const n = value.kind === 'unread' ? value : numeric(m, value, place);
    if (!isUnread(n)) value = { kind: 'scalar', expr: override.value(n), place };
  }
  if (value.kind === 'object' && !m.quiet && m.request.isNumber?.(e)) {
    const n = numeric(m, value, place);
    if (!isUnread(n) && m.naming.containsDeclared(n)) value = { kind: 'scalar', expr: n, place };
  }
  if (value.kind !== 'scalar') return value;
  m.note(place, value.expr);
  const { tag } = m.request;
  const expr = tag && !m.quiet ? tag(place, e, value.expr) : value.expr;
  const clip = value.clip && expr === value.expr ? { clip: value.clip } : {};
  const integer = value.integer && expr === value.expr ? { integer: true } : {};
  return { kind: 'scalar', expr, place: m.keepPlaces ? value.place : place, ...clip, ...integer };
}

function evaluateInside(m: Machine, scope: Scope, e: Expression, place: Place): Value {
  const { graph } = m;
  switch (e.kind) {
    case 'number':
      return { kind: 'scalar', expr: graph.number(e.value), place, ...(e.integer && m.request.program.integers ? { integer: true } : {}) };
    case 'string':
      return { kind: 'string', value: e.value };
    case 'boolean':
      return { kind: 'condition', expr: e.value ? graph.true : graph.false, place };
    case 'nothing':
      return e.isNull ? { kind: 'nothing', isNull: true } : NOTHING;
    case 'symbolic':
      return m.scalar(e.expr, place);
    case 'name': {
      const variable = scope.find(e.name);
      return variable ? readVariable(m, variable, place) : unknownName(m, scope, e.name, place);
    }
    case 'self':
      return scope.frame.self ?? unread('`this` where there is none', place);
    case 'super':
      return scope.frame.self ?? unread('`super` where there is none', place);
    case 'member':
      return memberValue(m, scope, e, place);
    case 'index':
      return indexValue(m, scope, e, place);
    case 'slice':
      return unread('a slice by itself', place);
    case 'call':
      return evaluateCall(m, scope, e, place);
    case 'unary':
      return unary(m, scope, e, place);
    case 'binary':
      return binaryChain(m, scope, e);
    case 'logical':
      return logical(m, scope, e, place);
    case 'conditional':
      return conditional(m, scope, e, place);
    case 'assign':
      return assign(m, scope, e, place);
    case 'function': {
      const self = e.node.inheritsSelf ? scope.frame.self : undefined;
      const home = e.node.inheritsSelf ? scope.frame.home : undefined;
      const f: FunctionValue = { kind: 'function', node: e.node, scope, ...(self ? { self } : {}), ...(home ? { home } : {}) };
      return withDefaults(m, f);
    }
    case 'class':
      return { kind: 'class', info: classInfo(m, scope, e.node) };
    case 'list':
      return listLiteral(m, scope, e, place);
    case 'record':
      return recordLiteral(m, scope, e.fields, place);
    case 'comprehension':
      return comprehend(m, scope, e, place);
    case 'sequence': {
      let last: Value = NOTHING;
      for (const item of e.items) last = evaluate(m, scope, item);
      return last;
    }
    case 'opaque':
      return unread(e.reason, place);
  }
}

function memberValue(m: Machine, scope: Scope, e: Expression & { kind: 'member' }, place: Place): Value {
  if (e.object.kind === 'super') return superMember(m, scope, e.name, place);
  const object = evaluate(m, scope, e.object);
  if (object.kind === 'nothing' && e.optional) return NOTHING;
  if (object.kind === 'module') {
    const path = pathOf(e);
    const read = path === undefined ? undefined : m.naming.read([path], place);
    if (read) return valueOf(m, read, place);
  }
  return readMember(m, scope.frame.module, object, e.name, place);
}

function superMember(m: Machine, scope: Scope, name: string, place: Place): Value {
  const base = scope.frame.home?.base();
  if (!base || base === 'unknown') return unread(`\`super.${name}\` of a class whose base is not read`, place);
  const found = findMember(base, name);
  if (!found || found === 'unknown' || !found.member.node) return unread(`\`super.${name}\`, which is not read`, place);
  const self = scope.frame.self;
  const f: FunctionValue = {
    kind: 'function',
    node: found.member.node,
    scope: found.info.scope,
    home: found.info,
    ...(self ? { self } : {}),
  };
  return found.member.kind === 'getter' ? m.invoke(f, self, [], place) : f;
}

function unary(m: Machine, scope: Scope, e: Expression & { kind: 'unary' }, place: Place): Value {
  if (e.op === 'not') {
    const c = conditionOf(m, scope, e.operand);
    return isUnread(c) ? c : { kind: 'condition', expr: m.graph.not(c), place };
  }
  const v = evaluate(m, scope, e.operand);
  if (v.kind === 'unread') return v;
  switch (e.op) {
    case '-':
      return negate(m, v, place);
    case '+': {
      if (itemsOf(m, v)) return v;
      const n = numeric(m, v, place);
      return isUnread(n) ? n : asInteger(m.scalar(n, place), isInteger(v));
    }
    case 'transpose':
      return transpose(m, v, place);
    case 'typeof':
      return typeOf(m, v);
    case 'bit-not':
      return invertMask(m, v, place);
    case 'bit':
      return unread('an operation on bits', place);
  }
}

function typeOf(m: Machine, v: Value): Value {
  const text = (value: string): Value => ({ kind: 'string', value });
  switch (v.kind) {
    case 'scalar':
      return text('number');
    case 'condition':
      return text('boolean');
    case 'string':
      return text('string');
    case 'nothing':
      return text('undefined');
    case 'function':
    case 'class':
    case 'method':
      return text('function');
    case 'object': {
      const data = dataOf(m, v);
      if (data?.kind !== 'generic') return text('object');
      return text(isThing(m, data.generic) ? 'object' : 'number');
    }
    default:
      return text('object');
  }
}

/** Long sums nest deeply to the left: they are taken from the bottom, without recursion. */
function binaryChain(m: Machine, scope: Scope, top: Expression & { kind: 'binary' }): Value {
  const chain: (Expression & { kind: 'binary' })[] = [top];
  for (let e = top.left; e.kind === 'binary'; e = e.left) chain.push(e);
  let left = evaluate(m, scope, chain[chain.length - 1]!.left);
  for (let k = chain.length - 1; k >= 0; k--) {
    const e = chain[k]!;
    const place = m.place(scope, e.span);
    const right = evaluate(m, scope, e.right);
    left = binary(m, scope.frame.module, e.op, left, right, place);
    if (k > 0) {
      const stopped = m.spend(() => place);
      if (stopped) return stopped;
      left = placed(m, e, place, left);
    }
  }
  return left;
}

function logical(m: Machine, scope: Scope, e: Expression & { kind: 'logical' }, place: Place): Value {
  const left = evaluate(m, scope, e.left);
  const right = (): Value => evaluate(m, scope, e.right);
  if (left.kind === 'unread') {
    spoilWritten(m, left, [right]);
    return left;
  }
  if (left.kind === 'choice' && e.op !== 'and') {
    return fork(m, left.condition, place, () => or(m, e.op, left.whenTrue, right, place), () => or(m, e.op, left.whenFalse, right, place));
  }
  if (e.op !== 'and') return or(m, e.op, left, right, place);
  const c = truthOf(m, left, place);
  if (isUnread(c)) {
    spoilWritten(m, c, [right]);
    return c;
  }
  return fork(m, settle(m, c), place, right, () => left);
}

/** `a || b` and `a ?? b`: a number or a thing from outside counts as given, so that a default does not stand in for it. */
function or(m: Machine, op: 'and' | 'or' | 'coalesce', left: Value, right: () => Value, place: Place): Value {
  if (left.kind === 'nothing') return right();
  if (op === 'coalesce' || left.kind === 'unread') return left;
  if (left.kind === 'scalar') {
    if (left.expr.op === 'number' && left.expr === m.graph.zero) return right();
    return left;
  }
  if (left.kind === 'object' && !isOpenFlag(m, left)) return left;
  if (left.kind === 'object') {
    const other = right();
    const isDefault = other.kind === 'scalar' || other.kind === 'string' || other.kind === 'object' || other.kind === 'nothing';
    const isConstant = other.kind === 'condition' && (other.expr === m.graph.false || other.expr === m.graph.true);
    if ((isDefault && !isOpenFlag(m, other)) || isConstant || other.kind === 'unread') return left;
    const c = truthOf(m, left, place);
    const d = truthOf(m, other, place);
    if (isUnread(c)) return c;
    return isUnread(d) ? d : { kind: 'condition', expr: m.graph.or(c, d), place };
  }
  const c = truthOf(m, left, place);
  if (isUnread(c)) return c;
  return fork(m, settle(m, c), place, () => left, right);
}

function conditional(m: Machine, scope: Scope, e: Expression & { kind: 'conditional' }, place: Place): Value {
  const c = conditionOf(m, scope, e.condition);
  if (isUnread(c)) {
    spoilWritten(m, c, [() => evaluate(m, scope, e.whenTrue), () => evaluate(m, scope, e.whenFalse)]);
    return c;
  }
  if (c !== m.graph.true && c !== m.graph.false) m.condition(c, m.place(scope, e.condition.span));
  const value = fork(
    m,
    c,
    place,
    () => evaluate(m, scope, e.whenTrue),
    () => evaluate(m, scope, e.whenFalse),
  );
  return m.request.withinLimits ? clipped(c, value) : value;
}
