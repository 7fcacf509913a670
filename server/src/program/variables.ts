import type { Expr } from '../expression/node';
import type { Place } from '../text/span';
import { addAlias, genericAt, valueOf } from './generics';
import type { Machine } from './machine';
import { lastName, memberPath } from './paths';
import { factsOf } from './facts';
import type { Meaning } from './reading';
import { assignments } from './scan';
import type { Scope, Variable } from './scope';
import { unread, type Value } from './values';

/** Variables: declaring, reading, writing, and what an assignment to a name with a meaning means. */

export function declare(m: Machine, scope: Scope, name: string, value?: Value): Variable {
  const variable: Variable = { name, location: m.store.reserve(), scope };
  scope.variables.set(name, variable);
  if (value) write(m, variable, value);
  return variable;
}

export function write(m: Machine, variable: Variable, value: Value): void {
  if (variable.lazy) readVariable(m, variable, undefined);
  m.store.set(variable.location, value);
  const names = m.store.writable(variable.scope.frame.names);
  if (names.kind === 'record') names.members.set(variable.name, value);
}

export function readVariable(m: Machine, variable: Variable, place: Place | undefined): Value {
  const value = m.store.value(variable.location);
  if (value) return value;
  if (!variable.lazy) return unread(`\`${variable.name}\` is used before it has a value`, place);
  if (variable.busy) return unread(`\`${variable.name}\` is defined by itself`, place);
  variable.busy = true;
  const found = m.atRoot(() => variable.lazy!());
  variable.busy = false;
  m.atRoot(() => m.store.set(variable.location, found));
  return found;
}

/** How a value comes to a name. */
export interface Arrival {
  readonly place: Place;
  /** The assignments of the function (or module) the name belongs to keep its first literal from standing for a symbol. */
  readonly isAccumulated: boolean;
  /** False at a module's top level. */
  readonly isLocal: boolean;
}

export function arrivalOf(scope: Scope, name: string, place: Place): Arrival {
  const { node, module } = scope.frame;
  const { computed } = node ? assignments(node) : factsOf(module.program);
  return { place, isAccumulated: computed.has(name), isLocal: node !== undefined };
}

/**
 * The value a name takes on: the value itself where it is built of declared symbols; else what `reads` or its own name
 * says the name means; else the value.
 */
export function arrive(m: Machine, name: string, value: Value, arrival: Arrival): Value {
  if (m.callSite) return value;
  // What can't be read is a thing from outside where `reads` says what its parts are.
  if (value.kind === 'unread' && !m.stopped && m.naming.hasReadBelow(name)) return genericAt(m, name, arrival.place);
  if (value.kind === 'object') {
    if (meansAnother(m, value, name)) return genericAt(m, name, arrival.place);
    addAlias(m, value, name);
    return settleList(m, name, value, arrival);
  }
  // What can't be told otherwise is what `reads` says of it, whatever becomes of the name later.
  const isLost = value.kind === 'unread' || (value.kind === 'scalar' && m.naming.containsFree(value.expr));
  if (arrival.isAccumulated && !(isLost && m.naming.hasRead(name))) return value;
  return settleName(m, name, name, value, arrival.place);
}

/** `I1 = p.inertia; I2 = p.inertia`: by their own names these are two different symbols, whatever the code has for both. */
function meansAnother(m: Machine, value: Value & { kind: 'object' }, name: string): boolean {
  const data = m.store.data(value.id);
  if (data.kind !== 'generic' || data.members.size > 0) return false;
  const { path, aliases } = data.generic;
  const meaning = m.naming.symbolOf(name);
  if (!meaning || m.naming.symbolOf(path) || m.naming.symbolOf(lastName(path) ?? '')) return false;
  return aliases.some((a) => {
    const other = m.naming.symbolOf(a);
    return other !== undefined && other !== meaning;
  });
}

/**
 * The value a variable takes on at an assignment. A constant stands for the symbol of the variable's name only where no
 * other value was there before: `let m; if (heavy) m = 2; else m = 1`, not `let x = s[0]; if (x < 0) x = 0`.
 */
export function arriveAt(m: Machine, scope: Scope, variable: Variable, value: Value, place: Place): Value {
  if (m.callSite) return value;
  const before = m.store.value(variable.location);
  const isFirst = (before === undefined && !variable.lazy) || before?.kind === 'nothing' || variable.standsForSymbol === true;
  if (!isFirst || variable.scope.frame !== scope.frame) {
    if (value.kind === 'object') addAlias(m, value, variable.name);
    return value;
  }
  const settled = arrive(m, variable.name, value, arrivalOf(variable.scope, variable.name, place));
  if (settled !== value && value.kind !== 'object') variable.standsForSymbol = true;
  return settled;
}

/** The same for a place with a path: a static field, a member of a constant record. */
export function settleName(m: Machine, name: string, path: string, value: Value, place: Place): Value {
  if (m.callSite) return value;
  if (value.kind === 'object') return settleMembers(m, path, value, place, 0);
  if (value.kind !== 'scalar' && value.kind !== 'unread') return value;
  if (value.kind === 'unread' && m.stopped) return value;
  const isBound = m.naming.hasRead(path) || m.naming.hasRead(name);
  if (value.kind === 'scalar' && isBuilt(m, value.expr, isBound)) return value;
  const read = m.naming.read([path, name], place);
  if (read) return valueOf(m, read, place);
  // What the code computes as an acceleration, or as a claimed output, is its answer: it can't mean the right one by its name.
  if (m.naming.isAcceleration(name) || (m.claimedNames.has(name) && value.kind === 'unread' && m.naming.isState(name))) return value;
  if (m.naming.isFormula(name)) return value;
  const literal = value.kind === 'scalar' && value.expr.op === 'number';
  const origin = literal ? `${name} = ${literalText(value)}` : path;
  const expr = m.naming.agree(name, path, origin, place);
  // An integer literal stays one for the arithmetic of a language that tells them apart.
  const integer = value.kind === 'scalar' && value.integer && path === name ? { integer: true } : {};
  return expr ? { kind: 'scalar', expr, place: value.place ?? place, ...integer } : value;
}

function literalText(value: Value): string {
  return value.kind === 'scalar' && value.expr.op === 'number' ? String(value.expr.data) : '';
}

/** A list of constants whose name is bound by `reads` or is a family's stands for those symbols. */
function settleList(m: Machine, name: string, value: Value & { kind: 'object' }, arrival: Arrival): Value {
  const data = m.store.data(value.id);
  if (data.kind === 'record') {
    if (!data.info) settleMembers(m, name, value, arrival.place, 0, arrival.isLocal);
    return value;
  }
  if (data.kind !== 'list' || data.items.length === 0 || arrival.isAccumulated) return value;
  const numbers = countOpen(m, value, m.naming.hasRead(name));
  if (!numbers) return value;
  const read = m.naming.read([name], arrival.place);
  const meanings = read ? leavesOf(read) : m.naming.family([name]);
  if (!meanings) return value;
  if (meanings.length !== numbers) {
    if (!read) return value;
    return unread(`\`${name}\` has ${meanings.length} entries by its \`reads\`, and ${numbers} here`, arrival.place);
  }
  const left = [...meanings];
  const settled = (v: Value): Value => {
    const inner = v.kind === 'object' ? m.store.data(v.id) : undefined;
    return inner?.kind === 'list' ? m.list(inner.items.map(settled), inner.array) : valueOf(m, left.shift()!, arrival.place);
  };
  const items = data.items.map(settled);
  const list = m.store.writable(value.id);
  if (list.kind === 'list') list.items = items;
  return value;
}

/** How many numbers a list holds, rows within rows; undefined where one of them is known to be built of declared symbols. */
function countOpen(m: Machine, value: Value, isBound: boolean, depth = 0): number | undefined {
  if (value.kind === 'scalar') return isBuilt(m, value.expr, isBound) ? undefined : 1;
  const data = value.kind === 'object' && depth < 8 ? m.store.data(value.id) : undefined;
  if (data?.kind !== 'list') return undefined;
  const counts = data.items.map((v) => countOpen(m, v, isBound, depth + 1));
  return counts.includes(undefined) ? undefined : counts.reduce<number>((a, b) => a + b!, 0);
}

/**
 * True for a value that is built of declared symbols. What also contains things that nothing says the meaning of could not
 * be told, so that a name bound by `reads` says it: a controller's output.
 */
function isBuilt(m: Machine, expr: Expr, isBound: boolean): boolean {
  return m.naming.containsDeclared(expr) && !(isBound && m.naming.containsFree(expr));
}

function leavesOf(meaning: Meaning): Meaning[] {
  return meaning.kind === 'list' ? meaning.items.flatMap(leavesOf) : [meaning];
}

/** Constants stored in a record by a name with a meaning stand for it: `{ m: 1.0, l: 0.5 }`. */
function settleMembers(m: Machine, path: string, value: Value & { kind: 'object' }, place: Place, depth: number, isLocal = false): Value {
  const data = m.store.data(value.id);
  if (data.kind !== 'record' || depth > 8) return value;
  for (const [key, member] of data.members) {
    const at = memberPath(path, key);
    // A local record that is summed up into starts from its literals.
    if (isLocal && m.isAssignedMember(key) && !m.naming.hasRead(at)) continue;
    // A local record of numbers by the names of coordinates is more likely a result than the state.
    if (isLocal && m.naming.isState(key) && !m.naming.hasRead(at)) continue;
    const settled = settleName(m, key, at, member, (member.kind === 'scalar' && member.place) || place);
    if (settled !== member) {
      const record = m.store.writable(value.id);
      if (record.kind === 'record') record.members.set(key, settled);
    }
  }
  return value;
}
