import type { Expr } from '../expression/node';
import type { Place } from '../text/span';
import { runBody } from './calls';
import { enter, type Entry } from './entry';
import { evaluate } from './expressions';
import type { Expression } from './form';
import { childOf } from './generics';
import type { Machine } from './machine';
import { heldArray } from './matrix-objects';
import { readMember } from './members';
import { dataOf, numeric } from './numbers';
import type { OutputRequest, OutputValue } from './reading';
import { Scope, type ClassInfo, type Frame, type Module } from './scope';
import type { Store } from './store';
import { declare } from './variables';
import { isUnread, unread, type FunctionValue, type GenericData, type Value } from './values';

/** What the claims ask for, once the function has ended. */

export interface Ended {
  readonly module: Module;
  /** The scope names are looked up in beyond the locals. */
  readonly outer: Scope;
  readonly entry: Entry | undefined;
  readonly info: ClassInfo | undefined;
  readonly self: Value | undefined;
  /** The store when the function was entered. */
  readonly before: Store;
  /** Location of the locals by name. */
  readonly names: number;
  readonly returned: Value;
}

export function readOutputs(m: Machine, requests: readonly OutputRequest[], ended: Ended): OutputValue[] {
  m.keepPlaces = true;
  const after = m.store;
  let run = 0;
  m.runSeparately = (f) => runSeparately(m, ended, f, ++run);
  const scope = claimScope(m, ended, after, true);
  const outputs = requests.map((r) => {
    m.store = after.child();
    const value = outputOf(m, scope, r.expression);
    if (!r.increment) return value;
    m.store = ended.before.child();
    const start = outputOf(m, claimScope(m, ended, ended.before, false), r.expression);
    m.store = after.child();
    return difference(m, value, start);
  });
  m.keepPlaces = false;
  m.store = after;
  return outputs;
}

/** A scope in which `return`, the locals by their last values, and the owner's methods are names. */
function claimScope(m: Machine, ended: Ended, store: Store, atExit: boolean): Scope {
  m.store = store;
  const names = m.store.add({ kind: 'record', members: new Map() });
  const frame: Frame = {
    module: ended.module,
    names,
    depth: 0,
    ...(ended.self ? { self: ended.self } : {}),
    ...(ended.info ? { home: ended.info } : {}),
  };
  const scope = new Scope(ended.outer, frame, true);
  const locals = store.data(ended.names);
  if (ended.info && ended.self) {
    const { self } = ended;
    for (let at: ClassInfo | 'unknown' | undefined = ended.info, k = 0; at && at !== 'unknown' && k < 32; at = at.base(), k++) {
      for (const member of at.node.members) {
        if (member.kind === 'constructor' || scope.variables.has(member.name)) continue;
        const variable = declare(m, scope, member.name);
        const place = m.place(ended.outer, member.span);
        variable.lazy = () =>
          member.isStatic && ended.info
            ? readMember(m, ended.module, { kind: 'class', info: ended.info }, member.name, place)
            : readMember(m, ended.module, self, member.name, place);
      }
    }
  }
  if (!atExit) for (const [name, value] of m.entries) declare(m, scope, name, value);
  if (locals.kind === 'record') for (const [name, value] of locals.members) declare(m, scope, name, value);
  if (atExit) declare(m, scope, 'return', heldArray(m, ended.returned) ?? ended.returned);
  return scope;
}

function runSeparately(m: Machine, ended: Ended, f: FunctionValue, run: number): Value {
  const here = m.store;
  const made = madeIn(f);
  // A function the run has made knows what it left behind; any other meets the state the run began with.
  const before = made ? here : ended.before;
  m.store = before.child();
  m.keepPlaces = false;
  const runBefore = m.naming.run;
  m.naming.run = run;
  const owner = f.home?.node;
  const entry = enter(m, f.scope.frame.module, f.node, owner, made);
  const base = m.store;
  m.store = base.child();
  const inside = m.store;
  const value = f.node.opaque !== undefined ? unread(`can't read \`${f.node.name}\`: it is ${f.node.opaque}`, undefined) : runBody(m, entry.scope, inside, m.place(entry.scope, f.node.nameSpan));
  const changes = m.store.changesSince(before);
  m.naming.run = runBefore;
  m.keepPlaces = true;
  m.store = here;
  // What the run made is known here too; what it changed is not.
  for (const [location, content] of changes) if (here.get(location) === undefined) here.set(location, content);
  return value;
}

/** The scope a function closes over, if a run has filled it. */
export function madeIn(f: FunctionValue): Scope | undefined {
  const { frame } = f.scope;
  return frame.node && !frame.isAround ? f.scope : undefined;
}

function outputOf(m: Machine, scope: Scope, e: Expression): OutputValue {
  const place = m.place(scope, e.span);
  if (e.kind === 'name' && !scope.find(e.name) && !m.libraryNames(scope.frame.module.library).has(e.name)) {
    if (!m.naming.hasRead(e.name) && !m.naming.byName(e.name)) {
      if (m.cut) return { kind: 'unread', reason: m.cut.reason, place: m.cut.place };
      const words = `there is no variable, parameter or function \`${e.name}\` here`;
      return { kind: 'unread', reason: words, place: undefined };
    }
  }
  const value = evaluate(m, scope, e);
  const isComputed = e.kind === 'binary' || e.kind === 'unary' || e.kind === 'conditional' || e.kind === 'logical';
  return toOutput(m, value, isComputed ? undefined : place, isComputed, 0);
}

function toOutput(m: Machine, value: Value, place: Place | undefined, isComputed: boolean, depth: number): OutputValue {
  const lost = (reason: string): OutputValue => ({ kind: 'unread', reason, place });
  if (depth > 12) return lost('a value nested too deeply');
  if (m.stopped) return { kind: 'unread', reason: m.stopped.reason, place: m.stopped.place };
  if (m.dead === m.graph.true && value.kind !== 'unread') return lost('every way through this function ends in an error');
  switch (value.kind) {
    case 'unread':
      return { kind: 'unread', reason: value.reason, place: value.place };
    case 'nothing':
      return lost('there is no value here');
    case 'choice': {
      if (value.whenTrue.kind === 'nothing' || value.whenFalse.kind === 'nothing') {
        return lost('one way through the function ends without a value here; say with `assume` which way is meant');
      }
      const a = toOutput(m, value.whenTrue, place, isComputed, depth + 1);
      const b = toOutput(m, value.whenFalse, place, isComputed, depth + 1);
      return chosen(m, value.condition, a, b, place);
    }
    case 'scalar':
    case 'condition': {
      const n = numeric(m, value, place ?? NOWHERE);
      if (isUnread(n)) return { kind: 'unread', reason: n.reason, place: n.place };
      const at = isComputed ? undefined : value.place;
      return { kind: 'scalar', expr: m.graph.select(m.dead, m.graph.nan, n), place: at };
    }
    case 'object':
      return objectOutput(m, value, place, isComputed, depth);
    case 'function': {
      const name = /^\w+$/.test(value.node.name) ? `the function \`${value.node.name}\`` : 'a function';
      return lost(value.node.opaque !== undefined ? `this is ${name}, which is ${value.node.opaque}` : `this is ${name}, not what it returns: put the declaration above that function`);
    }
    default:
      return lost('this is no number, list or record');
  }
}

/** What is returned on one of two branches, slot by slot. */
function chosen(m: Machine, condition: Expr, a: OutputValue, b: OutputValue, place: Place | undefined): OutputValue {
  if (a.kind === 'unread') return a;
  if (b.kind === 'unread') return b;
  if (a.kind === 'scalar' && b.kind === 'scalar') {
    return { kind: 'scalar', expr: m.graph.select(condition, a.expr, b.expr), place: a.expr === b.expr ? a.place : place };
  }
  if (a.kind === 'list' && b.kind === 'list' && a.items.length === b.items.length) {
    return { kind: 'list', items: a.items.map((x, k) => chosen(m, condition, x, b.items[k]!, x.place)), place };
  }
  if (a.kind === 'scalar' && b.kind === 'list' && a.expr === m.graph.nan) {
    return { kind: 'list', items: b.items.map((y) => chosen(m, condition, a, y, place)), place: b.place };
  }
  if (a.kind === 'list' && b.kind === 'scalar' && b.expr === m.graph.nan) {
    return { kind: 'list', items: a.items.map((x) => chosen(m, condition, x, b, place)), place: a.place };
  }
  return { kind: 'unread', reason: 'a value whose shape differs between two branches', place };
}

const NOWHERE: Place = { file: '', span: { start: 0, end: 0 } };

function objectOutput(m: Machine, value: Value & { kind: 'object' }, place: Place | undefined, isComputed: boolean, depth: number): OutputValue {
  const data = dataOf(m, value)!;
  const listed = (items: readonly Value[]): OutputValue => ({
    kind: 'list',
    items: items.map((v) => toOutput(m, v, place, isComputed, depth + 1)),
    place,
  });
  switch (data.kind) {
    case 'broken':
      return { kind: 'unread', reason: data.unread.reason, place: data.unread.place };
    case 'list':
      return listed(data.items);
    case 'record':
      return listed([...data.members.values()].filter((v) => v.kind !== 'function'));
    case 'generic':
      if (data.members.size > 0) return listed(writtenItems(m, value.id, data));
      return toOutput(m, asScalar(m, value), place, isComputed, depth + 1);
  }
}

function asScalar(m: Machine, value: Value): Value {
  const n = numeric(m, value, NOWHERE);
  return isUnread(n) ? n : { kind: 'scalar', expr: n };
}

/** What the code wrote into a thing from outside: slots in their order, or members as they came. */
function writtenItems(m: Machine, id: number, data: GenericData): Value[] {
  const keys = [...data.members.keys()];
  if (!keys.every((k) => /^\d+$/.test(k))) return [...data.members.values()];
  const last = Math.max(...keys.map(Number));
  const base = m.request.program.indexBase;
  if (last > 10_000) return [...data.members.values()];
  return Array.from({ length: last - base + 1 }, (_, k) => {
    const key = String(k + base);
    return data.members.get(key) ?? childOf(m, data.copyOf ?? id, data.generic, key, data.generic.place);
  });
}

/** `a - b`, where `a` is a sum that starts from `b`, without the rounding that taking it away again would bring in. */
function less(m: Machine, a: Expr, b: Expr): Expr {
  if (a.op === 'sum' && a.args.includes(b)) return m.graph.sum(a.args.filter((x) => x !== b));
  return m.graph.subtract(a, b);
}

function difference(m: Machine, end: OutputValue, start: OutputValue): OutputValue {
  if (end.kind === 'unread') return end;
  if (start.kind === 'unread') return { ...start, reason: `its value at the function's entry is not known: ${start.reason}` };
  if (end.kind === 'scalar' && start.kind === 'scalar') {
    return { kind: 'scalar', expr: less(m, end.expr, start.expr), place: end.place };
  }
  if (end.kind === 'list' && start.kind === 'list' && end.items.length === start.items.length) {
    return { ...end, items: end.items.map((e, k) => difference(m, e, start.items[k]!)) };
  }
  return { kind: 'unread', reason: 'its shape changes from entry to exit', place: end.place };
}

