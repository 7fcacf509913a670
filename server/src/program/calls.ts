import type { Place } from '../text/span';
import { findMember } from './class-members';
import { callSuper, construct } from './classes';
import { changesReceiver, damage, unknownCall, unknownMethod } from './damage';
import type { Argument, Expression } from './form';
import { factsOf } from './facts';
import { childOf, copyOfGeneric, fallbackOf, genericAt, hasWritesBelow, valueOf } from './generics';
import { runIntrinsic, writtenTo } from './intrinsics/table';
import type { ScalarFunction } from './library';
import type { Machine } from './machine';
import { readMember } from './members';
import { apply, mergeEndings, withEach, type Ending } from './merging';
import { requireModule } from './modules';
import { dataOf, describe, itemsOf } from './numbers';
import { ENTRIES, bindParameters, type ArgumentValue } from './parameters';
import { lastName, pathOf } from './paths';
import { hoistedNames } from './scan';
import { applyScalar } from './scalar-call';
import { Scope, type Frame, type Module } from './scope';
import type { Exit } from './flow';
import { declare, readVariable } from './variables';
import { NOTHING, unread, type Assigned, type FunctionValue, type LibraryValue, type Unread, type Value } from './values';

/** Calls: of the code's own functions, by running them; of the library, by its table; of anything else, not at all. */

const DEEPEST_CALLS = 64;
/** Calls of a function inside itself, each on a branch that is not decided. */
const MOST_OPEN_CALLS = 3;

export function evaluateCall(m: Machine, scope: Scope, e: Expression & { kind: 'call' }, place: Place): Value {
  const text = pathOf(e);
  if (text !== undefined && m.naming.hasRead(text)) return callAsSaid(m, scope, e, text, place);
  const words = pathOf(e.callee);
  if (words !== undefined && scope.frame.module.library.ignorable.has(words) && !isOwn(scope, e.callee)) return NOTHING;
  if (e.callee.kind === 'super') {
    const args = argumentValues(m, scope, e.args, place);
    if (isProblem(args)) return args;
    const { self, home } = scope.frame;
    return self?.kind === 'object' && home ? callSuper(m, home, self, args, place) : unread('`super(...)` outside a class', place);
  }
  if (e.callee.kind === 'name' && e.callee.name === 'require' && !scope.find('require')) {
    const from = e.args[0]?.value;
    return from?.kind === 'string' ? requireModule(m, scope, from.value, place) : unread('`require` of a name that is not known', place);
  }
  let self: Value | undefined;
  if (e.callee.kind === 'member' && e.callee.object.kind !== 'super') {
    const object = m.evaluate(scope, e.callee.object);
    if (object.kind === 'nothing' && (e.callee.optional || e.optional)) return NOTHING;
    if (object.kind === 'unread') return consume(m, scope, e, object);
    const { name } = e.callee;
    const at = m.place(scope, e.callee.span);
    return withEach(m, object, place, (o) => {
      const f = forwarded(o, name) ? o : readMember(m, scope.frame.module, o, name, at);
      const args = argumentValues(m, scope, e.args, place);
      if (isProblem(args)) return args;
      if (f === o) return forward(m, scope, name, o, args, place);
      const copy = args.length === 0 ? copyOf(m, o, name) : undefined;
      if (copy) return copy;
      if (args.length === 0 && changesReceiver(m, e, name, f, o)) {
        return unknownMethod(m, o, args, place, wordsOf(e.callee));
      }
      return callValue(m, scope, f, o, args, place, wordsOf(e.callee), e.isNew);
    });
  }
  const callee = m.evaluate(scope, e.callee);
  if (callee.kind === 'nothing' && e.optional) return NOTHING;
  if (callee.kind === 'unread') return consume(m, scope, e, callee);
  const args = argumentValues(m, scope, e.args, place);
  if (isProblem(args)) return args;
  return callValue(m, scope, callee, self, args, place, wordsOf(e.callee), e.isNew);
}

/** A call that `reads` gives a meaning: it is not run, but what the code says it gives is held against that. */
function callAsSaid(m: Machine, scope: Scope, e: Expression & { kind: 'call' }, text: string, place: Place): Value {
  const doubted = m.doubted(text);
  if (doubted) return { kind: 'scalar', expr: doubted, place };
  const meaning = m.naming.read([text], place)!;
  const assigned = (): Assigned | undefined => {
    const callee = m.evaluate(scope, e.callee);
    if (callee.kind !== 'function') return undefined;
    const args = argumentValues(m, scope, e.args, place);
    if (isProblem(args)) return undefined;
    const value = callValue(m, scope, callee, undefined, args, place, text);
    return { value, place: m.place(callee.scope, callee.node.nameSpan), hasSymbol: () => true };
  };
  m.believe(text, { meaning, how: 'reads', assigned });
  return valueOf(m, meaning, place);
}

function isOwn(scope: Scope, callee: Expression): boolean {
  let e = callee;
  while (e.kind === 'member') e = e.object;
  return e.kind === 'name' && scope.find(e.name) !== undefined;
}

function wordsOf(callee: Expression): string {
  return pathOf(callee) ?? 'a function';
}

/** A call of something unread: what it is given may be changed by it. */
function consume(m: Machine, scope: Scope, e: Expression & { kind: 'call' }, why: Unread): Value {
  const args = argumentValues(m, scope, e.args, m.place(scope, e.span));
  if (!isProblem(args)) damage(m, args, why);
  return why;
}

export function argumentValues(m: Machine, scope: Scope, args: readonly Argument[], place: Place): ArgumentValue[] | Unread {
  const values: ArgumentValue[] = [];
  let problem: Unread | undefined;
  for (const a of args) {
    const value = m.evaluate(scope, a.value);
    if (!a.spread) {
      values.push({ value, ...(a.name !== undefined ? { name: a.name } : {}) });
      continue;
    }
    const items = itemsOf(m, value);
    const data = dataOf(m, value);
    if (items) values.push(...items.map((v) => ({ value: v })));
    else if (data?.kind === 'record') for (const [name, v] of data.members) values.push({ value: v, name });
    else if (data?.kind === 'generic' && a.name === ENTRIES) values.push({ value, name: ENTRIES });
    else problem ??= value.kind === 'unread' ? value : unread('arguments spread from a list whose length is not known', place);
  }
  return problem ?? values;
}

function isProblem(x: ArgumentValue[] | Unread): x is Unread {
  return !Array.isArray(x);
}

function forwarded(o: Value, name: string): boolean {
  return o.kind === 'function' && (name === 'call' || name === 'apply' || name === 'bind');
}

function forward(m: Machine, scope: Scope, name: string, f: Value, args: readonly ArgumentValue[], place: Place): Value {
  if (f.kind !== 'function') return unread('a call', place);
  const [self, ...rest] = args;
  if (name === 'call') return invoke(m, f, self?.value, rest, place);
  if (name === 'bind') {
    if (rest.length > 0) return unread('`bind` with arguments', place);
    return self ? { ...f, self: self.value } : f;
  }
  const items = rest[0] ? itemsOf(m, rest[0].value) : [];
  void scope;
  return items ? invoke(m, f, self?.value, items.map((value) => ({ value })), place) : unread('`apply` with a list that is not known', place);
}

export function callValue(
  m: Machine,
  scope: Scope,
  callee: Value,
  self: Value | undefined,
  args: readonly ArgumentValue[],
  place: Place,
  words: string,
  isNew = false,
): Value {
  switch (callee.kind) {
    case 'unread':
      damage(m, args, callee);
      return callee;
    case 'choice':
      return withEach(m, callee, place, (f) => callValue(m, scope, f, self, args, place, words, isNew));
    case 'function':
      return isNew ? constructPlain(m, callee, args, place) : invoke(m, callee, callee.self ?? self, args, place);
    case 'class':
      return construct(m, callee.info, args, place);
    case 'library':
      return callLibrary(m, callee, args, place);
    case 'method':
      return runIntrinsic(m, scope.frame.module, callee.intrinsic, callee.self, args, place);
    case 'object':
      return callObject(m, scope, callee, self, args, place, words);
    default:
      return unknownCall(m, args, place, callee.kind === 'nothing' ? words : `${words}\`, a ${describe(callee)}, \`(...)`);
  }
}

function callObject(m: Machine, scope: Scope, callee: Value & { kind: 'object' }, self: Value | undefined, args: readonly ArgumentValue[], place: Place, words: string): Value {
  const data = dataOf(m, callee)!;
  if (data.kind === 'record' && data.info) {
    const found = findMember(data.info, '__call__');
    if (found && found !== 'unknown' && found.member.node) {
      return invoke(m, { kind: 'function', node: found.member.node, scope: found.info.scope, home: found.info }, callee, args, place);
    }
  }
  // A call is how some languages take an element.
  if (data.kind === 'list' && scope.frame.module.program.elementwise && args.length > 0) {
    return runIntrinsic(m, scope.frame.module, 'list-element', callee, args, place);
  }
  if (data.kind !== 'generic') return unknownCall(m, args, place, words);
  const { generic } = data;
  // A name that is given another function later is not the one it began with.
  const known = factsOf(scope.frame.module.program).assigned.has(generic.path) ? undefined : fallbackOf(m, generic);
  if (known?.kind === 'function' || known?.kind === 'class') return callValue(m, scope, known, self, args, place, words);
  if (args.length === 0) return getter(m, callee, place);
  const shown = args.map((a) => argumentWords(m, a.value));
  if (!shown.includes(undefined)) {
    const paths = [generic.path, ...generic.aliases].map((p) => `${p}(${shown.join(', ')})`);
    const read = m.naming.read(paths, place);
    if (read) return valueOf(m, read, place);
  }
  const list = listOf(generic.path, (method) => scope.frame.module.library.methods.has(`list.${method}`));
  if (list !== undefined) {
    return unknownCall(m, args, place, words, `can't read the call \`${words}(...)\`: how many items \`${list}\` has is not known; bind it as a whole, \`reads ${list} = [...]\``);
  }
  return unknownMethod(m, self, args, place, words);
}

/** `carts` of `carts.map`, where `map` is a method of lists. */
function listOf(path: string, isListMethod: (name: string) => boolean): string | undefined {
  const method = lastName(path);
  if (method === undefined || !path.endsWith(`.${method}`) || !isListMethod(method)) return undefined;
  return path.slice(0, -method.length - 1);
}

/** `state.clone()`: a thing of its own, with the same members to begin with. */
function copyOf(m: Machine, object: Value, name: string): Value | undefined {
  if (object.kind !== 'object' || (name !== 'clone' && name !== 'copy' && name !== 'slice')) return undefined;
  const data = dataOf(m, object);
  if (data?.kind !== 'generic' || data.generic.info) return undefined;
  if (name === 'slice') return copyOfGeneric(m, object.id, data);
  if (hasWritesBelow(m, object.id)) return undefined;
  return m.object({ ...data, members: new Map(data.members) });
}

function getter(m: Machine, callee: Value & { kind: 'object' }, place: Place): Value {
  const data = m.store.data(callee.id);
  if (data.kind !== 'generic') return unread('a call', place);
  const { generic } = data;
  // Known as a child of its own, so that it is the same thing at each call.
  const key = '()';
  const paths = [generic.path, ...generic.aliases].map((p) => `${p}()`);
  const child = childOf(m, callee.id, { ...generic, path: '', aliases: [] }, key, place);
  const made = m.store.data(child.id);
  if (made.kind === 'generic' && made.generic.path !== paths[0]) {
    const fresh = genericAt(m, paths[0]!, place, { aliases: paths.slice(1) });
    m.atRoot(() => m.store.set(child.id, m.store.data(fresh.id)));
  }
  return child;
}

function argumentWords(m: Machine, v: Value): string | undefined {
  if (v.kind === 'string') return JSON.stringify(v.value);
  if (v.kind === 'scalar' && v.expr.op === 'number') return String(v.expr.data);
  if (v.kind !== 'object') return undefined;
  const data = m.store.data(v.id);
  return data.kind === 'generic' ? data.generic.path : undefined;
}

function callLibrary(m: Machine, callee: LibraryValue, args: readonly ArgumentValue[], place: Place): Value {
  const { library } = callee.module;
  if (library.ignorable.has(callee.path)) return NOTHING;
  const intrinsic = library.intrinsics.get(callee.path);
  if (intrinsic) return runIntrinsic(m, callee.module, intrinsic, undefined, args, place);
  const scalar = library.scalars.get(callee.path);
  if (scalar) return callScalar(m, scalar, args, place);
  const name = lastName(callee.path);
  return unknownCall(m, args, place, callee.path, name === 'random' ? 'a random number' : undefined);
}

/** Named arguments of a scalar function: a type says nothing, `out` is written to, and any other is not known. */
function callScalar(m: Machine, f: ScalarFunction, args: readonly ArgumentValue[], place: Place): Value {
  const named = args.filter((a) => a.name !== undefined && a.name !== 'dtype');
  const value = (): Value => applyScalar(m, f, args.filter((a) => a.name === undefined).map((a) => a.value), place);
  if (named.length === 0) return value();
  const [only] = named;
  if (named.length === 1 && only!.name === 'out') return writtenTo(m, only!.value, place, value);
  const why = unread('a function of the library with arguments that are not known', place);
  damage(m, args, why);
  return why;
}

/** `new F(...)` of a plain function: JavaScript before classes. */
function constructPlain(m: Machine, f: FunctionValue, args: readonly ArgumentValue[], place: Place): Value {
  const prototype = readMember(m, f.scope.frame.module, f, 'prototype', place);
  const self = m.object({
    kind: 'record',
    members: new Map(),
    ...(prototype.kind === 'object' ? { prototype: prototype.id } : {}),
  });
  const result = invoke(m, f, self, args, place);
  return result.kind === 'unread' || result.kind === 'object' ? result : self;
}

/** Calls a value that is handed over as a function. */
export function callFunctionValue(m: Machine, module: Module, f: Value, args: readonly Value[], place: Place): Value {
  return callValue(m, module.scope, f, undefined, args.map((value) => ({ value })), place, 'a function');
}

/** Runs a function of the code. */
export function invoke(m: Machine, f: FunctionValue, self: Value | undefined, args: readonly ArgumentValue[], place: Place): Value {
  const { node } = f;
  if (node.wrapped !== undefined) {
    return unreadable(m, f, self, args, unread(`can't read the call of \`${node.name}\`: ${node.wrapped}`, place));
  }
  if (node.opaque !== undefined) {
    return unreadable(m, f, self, args, unread(`can't read \`${node.name}\`: it is ${node.opaque}`, place));
  }
  if (m.calls >= DEEPEST_CALLS) return unreadable(m, f, self, args, unread(`can't read \`${node.name}\`: it calls itself, or calls are nested too deeply (recursion)`, place));
  // A call of itself on a branch that is not decided may go on without end, and doubles the work each time it is two.
  if (m.running.filter((r) => r.node === node && r.facts < m.facts.length).length >= MOST_OPEN_CALLS) {
    return unreadable(m, f, self, args, unread(`can't read \`${node.name}\`: how often it calls itself depends on data (recursion)`, place));
  }
  m.calls++;
  m.running.push({ node, facts: m.facts.length });
  const base = m.store;
  const receiver = node.inheritsSelf ? (f.self ?? f.scope.frame.self) : (f.self ?? self);
  const home = node.inheritsSelf ? (f.home ?? f.scope.frame.home) : f.home;
  const names = m.store.add({ kind: 'record', members: new Map() });
  m.frameNames.add(names);
  const frame: Frame = {
    module: f.scope.frame.module,
    node,
    names,
    depth: m.calls,
    ...(receiver ? { self: receiver } : {}),
    ...(home ? { home } : {}),
  };
  const scope = new Scope(f.scope, frame, true);
  const value = m.meaning(frame.module, place, () => {
    bindParameters(m, f, scope, args, node.selfParameter ? receiver : undefined);
    if (node.allArguments !== undefined) declare(m, scope, node.allArguments, m.list(args.map((x) => x.value)));
    return runBody(m, scope, base, place);
  });
  m.calls--;
  m.running.pop();
  return value;
}

/** A function of the code that is not read may change whatever it assigns, its receiver and its arguments. */
function unreadable(m: Machine, f: FunctionValue, self: Value | undefined, args: readonly ArgumentValue[], why: Unread): Unread {
  damage(m, [{ value: f }, ...args], why);
  const receiver = f.self ?? self;
  if (receiver?.kind === 'object') m.breakObject(receiver.id, why);
  return why;
}

/** Runs the body of a function whose parameters are bound, and brings its ways out together in `base`. */
export function runBody(m: Machine, scope: Scope, base: Machine['store'], place: Place): Value {
  const { node } = scope.frame;
  if (!node) return NOTHING;
  for (const name of hoistedNames(node.body)) if (!scope.variables.has(name)) declare(m, scope, name, undefined);
  for (const r of node.results ?? []) if (!scope.variables.has(r.name)) declare(m, scope, r.name, undefined);
  const { exits, normal } = m.execute(scope, node.body);
  const atEnd = m.store;
  const endings: Ending[] = exits.map((x) => endingOf(m, scope, x, base));
  m.store = atEnd;
  if (normal || endings.length === 0) {
    endings.push({ guard: m.graph.true, changes: m.store.changesSince(base), value: resultsOf(m, scope) });
  }
  const merged = mergeEndings(m, base, endings, m.place(scope, node.nameSpan));
  m.store = base;
  apply(base, merged.changes);
  void place;
  return merged.value;
}

function endingOf(m: Machine, scope: Scope, exit: Exit, base: Machine['store']): Ending {
  m.store = exit.store;
  if (exit.kind === 'throw') m.die();
  const value = exit.kind === 'return' ? (scope.frame.node?.results ? resultsOf(m, scope) : exit.value) : NOTHING;
  return { guard: exit.guard, changes: m.store.changesSince(base), value };
}

/** The result variables of a language whose functions name them. */
function resultsOf(m: Machine, scope: Scope): Value {
  const results = scope.frame.node?.results;
  if (!results || results.length === 0) return NOTHING;
  const values = results.map((r) => {
    const variable = scope.variables.get(r.name);
    return variable ? readVariable(m, variable, m.place(scope, r.span)) : NOTHING;
  });
  return values.length === 1 ? values[0]! : m.list(values);
}
