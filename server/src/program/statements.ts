import type { Expr } from '../expression/node';
import type { Place } from '../text/span';
import { classInfo } from './classes';
import { compare, conditionOf } from './conditions';
import { join, split, type Exit, type Outcome } from './flow';
import { withDefaults } from './defaults';
import type { FunctionNode, Handler, Pattern, Statement } from './form';
import { isClipGuard } from './limits';
import { forEach, loop } from './loops';
import type { Machine } from './machine';
import { settle } from './settle';
import { apply, mergePair, spoilWritten } from './merging';
import { bindPattern } from './patterns';
import { Scope } from './scope';
import { annotate } from './type-notes';
import { arriveAt, declare, write } from './variables';
import { NOTHING, isUnread, unread, type Unread, type Value } from './values';



const GOES_ON: Outcome = { exits: [], normal: true };

export function execute(m: Machine, scope: Scope, body: readonly Statement[]): Outcome {
  hoist(m, scope, body);
  const exits: Exit[] = [];
  for (const s of body) {
    const outcome = executeOne(m, scope, s);
    exits.push(...outcome.exits);
    if (!outcome.normal) return { exits, normal: false };
  }
  return { exits, normal: true };
}

/** Functions and classes are known before the statements of their block run. */
export function hoist(m: Machine, scope: Scope, body: readonly Statement[]): void {
  for (const s of body) {
    if (s.kind === 'function') {
      const self = s.node.inheritsSelf ? scope.frame.self : undefined;
      declare(m, scope, s.node.name, { kind: 'function', node: s.node, scope, ...(self ? { self } : {}) });
    } else if (s.kind === 'class') {
      declare(m, scope, s.node.name, { kind: 'class', info: classInfo(m, scope, s.node) });
    } else if (s.kind === 'declare' && s.scope === 'block') {
      // A use before the declaration must not find an outer variable of that name.
      for (const name of namesOf(s.target)) if (!scope.variables.has(name)) declare(m, scope, name);
    }
  }
}

function namesOf(p: Pattern): string[] {
  return p.kind === 'name' ? [p.name] : [];
}

function exit(m: Machine, kind: Exit['kind'], value: Value, label?: string): Outcome {
  const way: Exit = { kind, value, store: m.store, guard: m.graph.true, ...(label !== undefined ? { label } : {}) };
  return { exits: [way], normal: false };
}

export function executeOne(m: Machine, scope: Scope, s: Statement): Outcome {
  const place = m.place(scope, s.span);
  const stopped = m.spend(() => place);
  if (stopped) return exit(m, 'return', stopped);
  return m.nested(
    () => place,
    () => run(m, scope, s, place),
    (u) => exit(m, 'return', u),
  );
}

function run(m: Machine, scope: Scope, s: Statement, place: Place): Outcome {
  switch (s.kind) {
    case 'declare':
      executeDeclare(m, scope, s);
      return GOES_ON;
    case 'expression':
      m.discarded = s.value;
      m.evaluate(scope, s.value);
      return GOES_ON;
    case 'return':
      return exit(m, 'return', s.value ? m.evaluate(scope, s.value) : NOTHING);
    case 'if':
      return executeIf(m, scope, s, place);
    case 'loop':
      return loop(m, scope, s, place);
    case 'for-each':
      return forEach(m, scope, s, place);
    case 'switch':
      return executeSwitch(m, scope, s);
    case 'break':
    case 'continue':
      return exit(m, s.kind, NOTHING, s.label);
    case 'labelled':
      return executeLabelled(m, scope, s, place);
    case 'throw':
      if (s.value) m.evaluate(scope, s.value);
      return { exits: [{ kind: 'throw', value: NOTHING, store: m.store, guard: m.graph.true, ...(s.type === undefined ? {} : { thrown: s.type }) }], normal: false };
    case 'try':
      return executeTry(m, scope, s, place);
    case 'block':
      return execute(m, new Scope(scope, scope.frame), s.body);
    case 'enum':
      executeEnum(m, scope, s);
      return GOES_ON;
    case 'opaque':
      return spoil(m, unread(s.reason, place));
    case 'function':
      redefine(m, scope, s.node);
      return GOES_ON;
    case 'class':
    case 'import':
    case 'export':
    case 'empty':
      return GOES_ON;
  }
}

/** Where a definition is a statement, it gives the name its function, and the function its defaults, when it is reached. */
function redefine(m: Machine, scope: Scope, node: FunctionNode): void {
  const variable = scope.find(node.name);
  if (!variable || !scope.frame.module.program.lateBinding) return;
  const self = node.inheritsSelf ? scope.frame.self : undefined;
  write(m, variable, withDefaults(m, { kind: 'function', node, scope, ...(self ? { self } : {}) }));
}

/** A statement that can't be read may do anything: nothing after it is known. */
function spoil(m: Machine, why: Unread): Outcome {
  m.cut ??= why;
  return exit(m, 'return', why);
}

function executeDeclare(m: Machine, scope: Scope, s: Statement & { kind: 'declare' }): void {
  const owner = s.scope === 'function' ? scope.functionScope : scope;
  if (!s.value) {
    for (const name of namesOf(s.target)) {
      const known = owner.variables.get(name);
      if (!known) declare(m, owner, name, NOTHING);
      else if (!m.store.value(known.location)) write(m, known, NOTHING);
    }
    return;
  }
  const value = m.evaluate(scope, s.value);
  if (s.note && s.target.kind === 'name') annotate(m, value, { note: s.note, scope });
  bindPattern(m, scope, s.target, value, (_, pattern, v) => {
    if (pattern.kind !== 'name') return;
    const place = s.target.kind === 'name' ? m.place(scope, s.value!.span) : m.place(scope, pattern.span);
    // A block's own variable may have been looked for before: it keeps its location.
    const known = owner.variables.get(pattern.name);
    const variable = known ?? declare(m, owner, pattern.name);
    write(m, variable, arriveAt(m, owner, variable, v, place));
  });
}

function executeIf(m: Machine, scope: Scope, s: Statement & { kind: 'if' }, place: Place): Outcome {
  const c = conditionOf(m, scope, s.condition);
  const at = m.place(scope, s.condition.span);
  if (isUnread(c)) return unknownBranch(m, scope, s, c);
  if (m.request.withinLimits && isClipGuard(m, s, c)) return GOES_ON;
  return branch(
    m,
    c,
    at,
    place,
    () => execute(m, new Scope(scope, scope.frame), s.whenTrue),
    () => execute(m, new Scope(scope, scope.frame), s.whenFalse),
  );
}

/** Which branch is taken can't be read: what either of them writes is not known. */
function unknownBranch(m: Machine, scope: Scope, s: Statement & { kind: 'if' }, why: Unread): Outcome {
  const exits: Exit[] = [];
  const sides = [s.whenTrue, s.whenFalse].map((side) => (): void => {
    const outcome = execute(m, new Scope(scope, scope.frame), side);
    for (const x of outcome.exits) if (x.kind !== 'throw') exits.push(x);
  });
  spoilWritten(m, why, sides);
  // Whether the function goes on at all is not known either.
  if (exits.length > 0) return spoil(m, why);
  return GOES_ON;
}

export function branch(m: Machine, c: Expr, conditionPlace: Place, place: Place, whenTrue: () => Outcome, whenFalse: () => Outcome): Outcome {
  const g = m.graph;
  if (c === g.true) return whenTrue();
  if (c === g.false) return whenFalse();
  m.condition(c, conditionPlace);
  const base = m.store;
  m.store = base.child();
  const a = m.onBranch(c, whenTrue);
  const storeA = m.store;
  m.store = base.child();
  const b = m.onBranch(g.not(c), whenFalse);
  const storeB = m.store;
  const exits = [
    ...a.exits.map((x) => ({ ...x, guard: g.and(c, x.guard) })),
    ...b.exits.map((x) => ({ ...x, guard: g.and(g.not(c), x.guard) })),
  ];
  if (a.normal && b.normal) {
    const merged = mergePair(
      m,
      base,
      c,
      { changes: storeA.changesSince(base), value: NOTHING },
      { changes: storeB.changesSince(base), value: NOTHING },
      place,
    );
    m.store = exits.length > 0 ? base.child() : base;
    apply(m.store, merged.changes);
  } else m.store = (a.normal ? storeA : storeB).child();
  return { exits, normal: a.normal || b.normal };
}

function executeLabelled(m: Machine, scope: Scope, s: Statement & { kind: 'labelled' }, place: Place): Outcome {
  const base = m.store;
  m.store = base.child();
  const inner = s.body.kind === 'loop' ? loop(m, scope, s.body, place, s.label) : s.body.kind === 'for-each' ? forEach(m, scope, s.body, place, s.label) : executeOne(m, scope, s.body);
  const { mine, others } = split(m, inner.exits, (x) => x.kind === 'break' && x.label === s.label);
  const normal = join(m, base, mine, inner.normal, others.length > 0, place);
  return { exits: others, normal };
}

function executeSwitch(m: Machine, scope: Scope, s: Statement & { kind: 'switch' }): Outcome {
  const place = m.place(scope, s.span);
  const value = m.evaluate(scope, s.value);
  const inner = new Scope(scope, scope.frame);
  hoist(m, inner, s.cases.flatMap((c) => c.body));
  const base = m.store;
  m.store = base.child();
  const outcome = fromCase(m, inner, s, value, 0);
  const { mine, others } = split(m, outcome.exits, (x) => x.kind === 'break' && x.label === undefined);
  const normal = join(m, base, mine, outcome.normal, others.length > 0, place);
  return { exits: others, normal };
}

/** Tests the cases from the k-th on, in order; the default is taken where none fits. */
function fromCase(m: Machine, scope: Scope, s: Statement & { kind: 'switch' }, value: Value, k: number): Outcome {
  let at = k;
  while (at < s.cases.length && !s.cases[at]!.test) at++;
  if (at >= s.cases.length) {
    const other = s.cases.findIndex((c) => !c.test);
    return other < 0 ? GOES_ON : bodyFrom(m, scope, s, other);
  }
  const test = s.cases[at]!.test!;
  const place = m.place(scope, test.span);
  const same = compare(m, '==', value, m.evaluate(scope, test), place);
  if (same.kind !== 'condition') return spoil(m, same.kind === 'unread' ? same : unread('a case', place));
  return branch(
    m,
    settle(m, same.expr),
    place,
    place,
    () => bodyFrom(m, scope, s, at),
    () => fromCase(m, scope, s, value, at + 1),
  );
}

function bodyFrom(m: Machine, scope: Scope, s: Statement & { kind: 'switch' }, k: number): Outcome {
  const body = s.fallsThrough ? s.cases.slice(k).flatMap((c) => c.body) : s.cases[k]!.body;
  return execute(m, scope, body);
}

function executeTry(m: Machine, scope: Scope, s: Statement & { kind: 'try' }, place: Place): Outcome {
  const base = m.store;
  m.store = base.child();
  const body = execute(m, new Scope(scope, scope.frame), s.body);
  const exits: Exit[] = [];
  let normal = body.normal;
  const ends: Exit[] = [];
  const after = m.store;
  let open = m.graph.true;
  for (const x of body.exits) {
    const handler = x.kind === 'throw' ? handlerOf(s, x, place) : undefined;
    if (!handler) {
      exits.push({ ...x, guard: m.graph.and(open, x.guard) });
      continue;
    }
    const handled = 'kind' in handler ? spoilAt(m, x, handler) : handle(m, scope, handler, x, place);
    exits.push(...handled.exits.map((y) => ({ ...y, guard: m.graph.and(open, m.graph.and(x.guard, y.guard)) })));
    if (handled.normal) ends.push({ ...x, store: m.store });
    open = m.graph.and(open, m.graph.not(x.guard));
  }
  m.store = after;
  if (ends.length > 0) normal = join(m, base, ends, body.normal, exits.length > 0, place);
  return s.finalizer.length > 0 ? finalise(m, scope, s.finalizer, { exits, normal }) : { exits, normal };
}

/** What stands in `finally` is done on every way out, and may take another. */
function finalise(m: Machine, scope: Scope, body: readonly Statement[], before: Outcome): Outcome {
  const after = m.store;
  const exits: Exit[] = [];
  for (const x of before.exits) {
    m.store = x.store.child();
    const last = execute(m, new Scope(scope, scope.frame), body);
    exits.push(...last.exits.map((y) => ({ ...y, guard: m.graph.and(x.guard, y.guard) })));
    if (last.normal) exits.push({ ...x, store: m.store });
  }
  m.store = after;
  if (!before.normal) return { exits, normal: false };
  const last = execute(m, new Scope(scope, scope.frame), body);
  return { exits: [...exits, ...last.exits], normal: last.normal };
}

/** The handler that takes what is thrown, or why that is not known. */
function handlerOf(s: Statement & { kind: 'try' }, x: Exit, place: Place): Handler | Unread | undefined {
  for (const h of s.handlers ?? []) {
    const takes = h.catches ? h.catches(x.thrown) : true;
    if (takes === undefined) return unread('which of several handlers takes an error', place);
    if (takes) return h;
  }
  return undefined;
}

function spoilAt(m: Machine, x: Exit, why: Unread): Outcome {
  m.store = x.store.child();
  return spoil(m, why);
}

function handle(m: Machine, scope: Scope, handler: Handler, x: Exit, place: Place): Outcome {
  m.store = x.store.child();
  const inner = new Scope(scope, scope.frame);
  if (handler.parameter) {
    bindPattern(m, inner, handler.parameter, unread('an error that was caught', place), (sc, p, v) => {
      if (p.kind === 'name') declare(m, sc, p.name, v);
    });
  }
  return execute(m, inner, handler.body);
}

function executeEnum(m: Machine, scope: Scope, s: Statement & { kind: 'enum' }): void {
  declare(m, scope, s.name, enumValue(m, scope, s));
}

export function enumValue(m: Machine, scope: Scope, s: Statement & { kind: 'enum' }): Value {
  const members = new Map<string, Value>();
  const inner = new Scope(scope, scope.frame);
  let next: Value = m.scalar(m.graph.zero);
  for (const member of s.members) {
    const value = member.value ? m.evaluate(inner, member.value) : next;
    members.set(member.name, value);
    declare(m, inner, member.name, value);
    next = value.kind === 'scalar' ? m.scalar(m.graph.add(value.expr, m.graph.one)) : unread('an enum member after one that is no number', m.place(scope, member.span));
  }
  return m.object({ kind: 'record', members });
}
