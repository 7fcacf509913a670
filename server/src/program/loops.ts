import type { Place } from '../text/span';
import { conditionOf } from './conditions';
import type { Pattern, Statement } from './form';
import { genericAt } from './generics';
import { countsSamples, genericPass, isSubsteps, startsFromLiteralState, type PassStart } from './generic-pass';
import { isWrap } from './limits';
import type { Machine } from './machine';
import { apply } from './merging';
import { dataOf, itemsOf } from './numbers';
import { bindPattern } from './patterns';
import { pathOf } from './paths';
import { Scope } from './scope';
import { assignTo } from './assignment';
import { join, split, type Exit, type Outcome } from './flow';
import { typeFacts } from './type-notes';
import { declare, readVariable, write } from './variables';
import { NOTHING, isUnread, unread, type Value } from './values';

/** Loops: unrolled where their passes are known; else one pass from a generic state. */

const MOST_PASSES = 2000;
const MOST_GUARDED_EXITS = 48;

type LoopStatement = Statement & { kind: 'loop' };
type ForEach = Statement & { kind: 'for-each' };

export function loop(m: Machine, scope: Scope, s: LoopStatement, place: Place, label?: string): Outcome {
  const outer = new Scope(scope, scope.frame);
  const first = m.execute(outer, s.initial);
  if (!first.normal) return first;
  if (m.request.withinLimits && isWrap(s)) return { exits: [], normal: true };
  if (isSubsteps(m, outer, s) || startsFromLiteralState(m, outer, [s.body, s.update]) || countsSamples(m, undefined, [s.body, s.update])) return pass(m, outer, s, place, label);
  const base = m.store;
  const traced = m.trace.length;
  m.store = base.child();
  const unrolled = unroll(m, outer, s, place, label);
  if (unrolled === 'unknown') {
    m.trace.length = Math.min(m.trace.length, traced);
    m.store = base;
    return pass(m, outer, s, place, label, unknownEnd(m, outer, s, place));
  }
  if (unrolled.exits.length === 0 && unrolled.normal) {
    const changes = m.store.changesSince(base);
    m.store = base;
    apply(base, changes);
  }
  return unrolled;
}

function isMine(x: Exit, kind: 'break' | 'continue', label: string | undefined): boolean {
  return x.kind === kind && (x.label === undefined || x.label === label);
}

/** Runs one pass's body; `breaks` collects the ways out of the loop, `others` those out of more. */
function runPass(m: Machine, body: () => Outcome, label: string | undefined, ways: Exit[], place: Place): boolean {
  const base = m.store;
  m.store = base.child();
  const outcome = body();
  const { mine, others } = split(m, outcome.exits, (x) => isMine(x, 'continue', label));
  ways.push(...others);
  return join(m, base, mine, outcome.normal, others.length > 0, place);
}

/** Ends the loop: its breaks and its normal end go on together, other ways out stay. */
function finish(m: Machine, base: Machine['store'], ways: readonly Exit[], normal: boolean, label: string | undefined, place: Place): Outcome {
  if (ways.length === 0) return { exits: [], normal };
  const { mine, others } = split(m, ways, (x) => isMine(x, 'break', label) && !(x.label !== undefined && x.label === label));
  return { exits: others, normal: join(m, base, mine, normal, others.length > 0, place) };
}

function unroll(m: Machine, outer: Scope, s: LoopStatement, place: Place, label: string | undefined): Outcome | 'unknown' {
  const base = m.store;
  const ways: Exit[] = [];
  let scope = freshCopy(m, outer, outer);
  for (let n = 0; ; n++) {
    if (n > MOST_PASSES || ways.length > MOST_GUARDED_EXITS) return 'unknown';
    if (s.condition && (s.testFirst || n > 0)) {
      m.counting++;
      const c = conditionOf(m, scope, s.condition);
      m.counting--;
      if (isUnread(c) || (c !== m.graph.true && c !== m.graph.false)) return 'unknown';
      if (c === m.graph.false) return finish(m, base, ways, true, label, place);
    }
    const stopped = m.spend(() => place);
    if (stopped) return { exits: [{ kind: 'return', value: stopped, store: m.store, guard: m.graph.true }], normal: false };
    const at = scope;
    const goesOn = runPass(m, () => m.execute(new Scope(at, at.frame), s.body), label, ways, place);
    if (!goesOn) return finish(m, base, ways, false, label, place);
    scope = freshCopy(m, outer, scope);
    m.execute(scope, s.update);
  }
}

/** Each pass has its own copy of the variables that the loop's head declares, for functions that keep them. */
function freshCopy(m: Machine, outer: Scope, from: Scope): Scope {
  const scope = new Scope(outer, outer.frame);
  for (const [name] of outer.variables) {
    const variable = from.variables.get(name);
    if (variable) declare(m, scope, name, readVariable(m, variable, undefined));
  }
  return scope;
}

/** Where and why the number of passes is not known. */
function unknownEnd(m: Machine, scope: Scope, s: LoopStatement, place: Place): PassStart {
  if (!s.condition) return { place, origin: 'the end of this loop depends on data' };
  return { place: m.place(scope, s.condition.span), origin: 'how often this loop runs depends on data' };
}

function pass(m: Machine, outer: Scope, s: LoopStatement, place: Place, label: string | undefined, start: PassStart = { place }): Outcome {
  const run = (): Outcome => {
    const base = m.store;
    const ways: Exit[] = [];
    const scope = new Scope(outer, outer.frame);
    const goesOn = runPass(m, () => m.execute(scope, s.body), label, ways, place);
    const outcome = finish(m, base, ways, goesOn, label, place);
    if (outcome.normal) m.execute(new Scope(outer, outer.frame), s.update);
    return outcome;
  };
  return genericPass(m, outer, start, run);
}

export function forEach(m: Machine, scope: Scope, s: ForEach, place: Place, label?: string): Outcome {
  const over = m.evaluate(scope, s.over);
  const items = s.keys ? keysOf(m, scope, over) : passesOf(m, over);
  const bindTo = (inner: Scope, value: Value): void => bindTarget(m, inner, s, value);
  if (!items || items.length > MOST_PASSES || startsFromLiteralState(m, scope, [s.body]) || countsSamples(m, s.target, [s.body])) {
    const one = genericItem(m, scope, s, over);
    if (s.target.kind === 'name') m.entries.set(s.target.name, one);
    const start = items ? { place } : { place: m.place(scope, s.over.span), origin: 'this loop runs over a list whose length is not known' };
    return genericPass(m, scope, start, () => {
      const base = m.store;
      const ways: Exit[] = [];
      const inner = new Scope(scope, scope.frame);
      bindTo(inner, one);
      const goesOn = runPass(m, () => m.execute(inner, s.body), label, ways, place);
      return finish(m, base, ways, goesOn, label, place);
    });
  }
  const base = m.store;
  m.store = base.child();
  const start = m.store;
  const ways: Exit[] = [];
  let goesOn = true;
  // The list is looked at anew for each pass: the body may change it.
  const length = (): number => (s.keys ? items.length : (itemsOf(m, over)?.length ?? items.length));
  for (let k = 0; k < Math.min(length(), MOST_PASSES); k++) {
    const inner = new Scope(scope, scope.frame);
    bindTo(inner, (s.keys ? undefined : itemsOf(m, over)?.[k]) ?? items[k] ?? NOTHING);
    goesOn = runPass(m, () => m.execute(new Scope(inner, inner.frame), s.body), label, ways, place);
    if (!goesOn) break;
  }
  const outcome = finish(m, start, ways, goesOn, label, place);
  if (outcome.exits.length === 0 && outcome.normal) {
    const changes = m.store.changesSince(base);
    m.store = base;
    apply(base, changes);
  }
  return outcome;
}

function bindTarget(m: Machine, scope: Scope, s: ForEach, value: Value): void {
  bindPattern(m, scope, s.target, value, (sc, p, v) => {
    if (p.kind === 'name' && s.declares) declare(m, sc, p.name, v);
    else if (p.kind === 'name') {
      const known = sc.find(p.name) ?? declare(m, sc.functionScope, p.name);
      write(m, known, v);
    } else assignTo(m, sc, p, v);
  });
}

function passesOf(m: Machine, over: Value): readonly Value[] | undefined {
  if (over.kind === 'string') return [...over.value].map((value) => ({ kind: 'string', value }));
  const items = itemsOf(m, over);
  if (items) return [...items];
  return undefined;
}

function keysOf(m: Machine, scope: Scope, over: Value): readonly Value[] | undefined {
  const data = dataOf(m, over);
  if (data?.kind === 'record') return [...data.members.keys()].map((value) => ({ kind: 'string', value }));
  if (data?.kind === 'list') {
    const base = scope.frame.module.program.indexBase;
    return data.items.map((_, k) => m.scalar(m.graph.number(k + base)));
  }
  return undefined;
}

/** An item of a list that is not known, or a reason why there is none. */
function genericItem(m: Machine, scope: Scope, s: ForEach, over: Value): Value {
  const at = m.place(scope, s.over.span);
  if (over.kind === 'unread') return over;
  const name = nameOf(s.target);
  const data = dataOf(m, over);
  const path = data?.kind === 'generic' ? `${data.generic.path}[each]` : `${pathOf(s.over) ?? 'list'}[each]`;
  if (name === undefined && s.target.kind !== 'record' && s.target.kind !== 'list') return NOTHING;
  if (!data) return unread('a loop over something that is no list', at);
  const { typed } = data?.kind === 'generic' ? data.generic : { typed: undefined };
  const item = typed?.note.item && { note: typed.note.item, scope: typed.scope };
  return genericAt(m, path, at, { aliases: name === undefined ? [] : [name], ...typeFacts(m, item) });
}

function nameOf(p: Pattern): string | undefined {
  return p.kind === 'name' ? p.name : undefined;
}
