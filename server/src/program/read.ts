import type { Rational } from '../expression/rational';
import type { Place } from '../text/span';
import { assignedValues } from './assigned';
import { assume } from './assumptions';
import { callFunctionValue, invoke, runBody } from './calls';
import { classInfo } from './classes';
import { enter, type Entry } from './entry';
import { evaluate } from './expressions';
import { genericAt } from './generics';
import { Machine } from './machine';
import { apply, mergeEndings, type Ending } from './merging';
import { readElement } from './members';
import { exportOf, loadModule, openModule } from './modules';
import { madeIn, readOutputs, type Ended } from './outputs';
import type { ClassNode, Expression } from './form';
import type { Ambiguity, OutputValue, ReadRequest, Reading } from './reading';
import { Scope, type Module } from './scope';
import { execute } from './statements';
import { NOTHING, type Value } from './values';

const MOST_ROUNDS = 5;
/** How many functions may be made one inside the other. */
const MOST_MADE = 4;

/**
 * Reads a function (or the methods of a class, or a file's top level) by symbolic execution: from generic arguments and
 * state, along every branch, to what the claims ask for. Nothing is run, and nothing throws: what can't be read is
 * `unread` with its reason and place.
 */
export function read(request: ReadRequest): Reading {
  const forced = new Set<string>();
  const ambiguities: Ambiguity[] = [];
  for (let round = 0; ; round++) {
    const m = new Machine(request, forced);
    let outputs: readonly OutputValue[];
    try {
      outputs = readOnce(m);
    } catch (error) {
      const reason = error instanceof RangeError ? 'this is nested too deeply to be read' : `reading it failed: ${String(error)}`;
      outputs = request.outputs.map(() => ({ kind: 'unread', reason, place: subjectPlace(request) }));
    }
    const conflicts = m.naming.conflicts();
    if (conflicts.length === 0 || round >= MOST_ROUNDS) return finished(m, outputs, ambiguities);
    for (const c of conflicts) {
      for (const key of c.keys) forced.add(key);
      ambiguities.push({ message: c.message, place: c.place });
    }
  }
}

function finished(m: Machine, outputs: readonly OutputValue[], ambiguities: readonly Ambiguity[]): Reading {
  return {
    outputs,
    bindings: [...m.bindings.values()],
    ambiguities: [...ambiguities, ...m.ambiguities.values()],
    free: m.free,
    conditions: [...m.conditions].map(([expr, place]) => ({ expr, place })),
    assigned: assignedValues(m),
    assumed: m.assumed,
    trace: m.trace,
    drops: [...m.drops.values()],
    touched: m.modules.get(m.request.file)?.touched ?? new Set(),
    files: [...m.files],
  };
}

function subjectPlace(request: ReadRequest): Place | undefined {
  const { subject } = request;
  return subject.kind === 'file' ? undefined : { file: request.file, span: subject.node.nameSpan };
}

function readOnce(m: Machine): OutputValue[] {
  const { request } = m;
  const { subject } = request;
  if (subject.kind === 'function' && subject.node.opaque !== undefined) {
    // Nothing it was to write can be taken from the state it began with.
    const reason = `can't read \`${subject.node.name}\`: it is ${subject.node.opaque}`;
    return request.outputs.map(() => ({ kind: 'unread', reason, place: subjectPlace(request) }));
  }
  for (const o of request.outputs) if (o.expression.kind === 'name') m.claimedNames.add(o.expression.name);
  m.evaluate = (scope, e) => evaluate(m, scope, e);
  m.execute = (scope, body) => execute(m, scope, body);
  m.invoke = (f, self, args, place) => invoke(m, f, self, args, place);
  m.callFunction = (module, f, args, place) => callFunctionValue(m, module, f, args, place);
  m.openModule = (module, from) => openModule(m, module, from);
  m.exportOf = (module, name, place) => exportOf(m, module, name, place);
  m.readElement = (module, object, key, place) => readElement(m, module, object, key, place);
  const module = loadModule(m, request.file, request.program, request.library);
  m.naming.settle((e) => constantIndex(m, module, e));
  const ended = request.subject.kind === 'function' ? runFunction(m, module) : runTop(m, module);
  const outputs = readOutputs(m, request.outputs, ended);
  if (subject.kind !== 'class') return outputs;
  return outputs.map((o, i) => {
    const { expression } = request.outputs[i]!;
    // What `reads` gives a meaning may stand in a formula of methods.
    if (expression.kind === 'name' && m.naming.hasRead(expression.name)) return o;
    if (o.kind === 'unread' || namesMethod(expression, subject.node)) return o;
    const reason = 'a class computes nothing by itself: claim what a method returns (`step.return`, `H(q)`), or put the claim above the method';
    return { kind: 'unread', reason, place: subjectPlace(request) };
  });
}

/** An index given by a name: a constant of the file, or one declared at the head of the function. */
function constantIndex(m: Machine, module: Module, e: Expression): string | undefined {
  const { subject } = m.request;
  if (e.kind === 'name' && subject.kind === 'function') {
    for (const s of subject.node.body) {
      if (s.kind !== 'declare' || s.target.kind !== 'name' || s.target.name !== e.name) continue;
      if (s.value?.kind === 'number' && s.value.value.isInteger) return s.value.value.toString();
    }
  }
  const value = evaluate(m, module.scope, e);
  if (value.kind !== 'scalar' || value.expr.op !== 'number') return undefined;
  const r = value.expr.data as Rational;
  return r.isInteger ? r.toString() : undefined;
}

/** True for outputs such as `rates.return[1]`, `H(q)`, and `this.acceleration` where that is a getter. */
function namesMethod(e: Expression, node: ClassNode): boolean {
  switch (e.kind) {
    case 'call':
      return true;
    case 'member': {
      if (e.name === 'return') return true;
      if (e.object.kind !== 'self') return namesMethod(e.object, node);
      // What a base class has is not looked for here.
      return node.base !== undefined || node.members.some((x) => x.kind === 'getter' && x.name === e.name);
    }
    case 'index':
      return namesMethod(e.object, node);
    case 'unary':
      return namesMethod(e.operand, node);
    case 'binary':
      return namesMethod(e.left, node) || namesMethod(e.right, node);
    default:
      return false;
  }
}

function runFunction(m: Machine, module: Module): Ended {
  const { subject } = m.request;
  if (subject.kind !== 'function') return runTop(m, module);
  let ended = runEntered(m, module, enter(m, module, subject.node, subject.owner));
  // What stands above the maker of a function is about the function that is made.
  for (let k = 0; ended.returned.kind === 'function' && k < MOST_MADE; k++) {
    const f = ended.returned;
    const made = madeIn(f);
    if (f.node.opaque !== undefined || !made) break;
    ended = runEntered(m, f.scope.frame.module, enter(m, f.scope.frame.module, f.node, f.home?.node, made));
  }
  return ended;
}

function runEntered(m: Machine, module: Module, entry: Entry): Ended {
  const { scope } = entry;
  for (const a of m.request.assumptions) assume(m, scope, a);
  const before = m.store;
  m.store = before.child();
  const base = m.store;
  const { node } = scope.frame;
  const returned = runBody(m, scope, base, m.place(scope, node ? node.nameSpan : { start: 0, end: 0 }));
  return {
    module,
    outer: scope.parent ?? module.scope,
    entry,
    info: entry.info,
    self: scope.frame.self,
    before,
    names: scope.frame.names,
    returned,
  };
}

/** A file's top level as a script, or a class whose methods the outputs call. */
function runTop(m: Machine, module: Module): Ended {
  const { subject } = m.request;
  const info = subject.kind === 'class' ? classInfo(m, module.scope, subject.node) : undefined;
  const self: Value | undefined = info ? genericAt(m, 'this', m.place(module.scope, info.node.nameSpan), { info }) : undefined;
  const names = m.store.add({ kind: 'record', members: new Map() });
  m.frameNames.add(names);
  const scope = new Scope(info?.scope ?? module.scope, { module, names, depth: 0, ...(self ? { self } : {}) }, true);
  for (const a of m.request.assumptions) assume(m, scope, a);
  const before = m.store;
  m.store = before.child();
  if (subject.kind === 'file') runScript(m, module, scope);
  return { module, outer: scope, entry: undefined, info, self, before, names, returned: NOTHING };
}

function runScript(m: Machine, module: Module, scope: Scope): void {
  const base = m.store;
  m.store = base.child();
  const { exits, normal } = execute(m, scope, module.program.body);
  const atEnd = m.store;
  const endings: Ending[] = exits.map((x) => {
    m.store = x.store;
    if (x.kind === 'throw') m.die();
    return { guard: x.guard, changes: m.store.changesSince(base), value: NOTHING };
  });
  m.store = atEnd;
  if (normal || endings.length === 0) endings.push({ guard: m.graph.true, changes: m.store.changesSince(base), value: NOTHING });
  const merged = mergeEndings(m, base, endings, { file: module.file, span: { start: 0, end: 0 } });
  m.store = base;
  apply(base, merged.changes);
}
