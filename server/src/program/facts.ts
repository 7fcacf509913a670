import type { ClassNode, Expression, FunctionNode, Pattern, Program, Statement } from './form';
import { isConstantLike, patternNames, placesOf } from './scan';

/** What a whole file says here and there of its names and members, gathered in one walk over it. */
export interface Facts {
  /** Names that are assigned to after their declaration. */
  readonly assigned: ReadonlySet<string>;
  /** Those of them that are given more than a constant, or augmented: their first value counts. */
  readonly computed: ReadonlySet<string>;
  /** Where members of a name are written. */
  readonly memberWrites: ReadonlyMap<string, readonly MemberWrite[]>;
  /** Members of whose elements one is written somewhere: `self.x[0] = ...`. */
  readonly elementWrites: ReadonlySet<string>;
  /** Bare names that are used as things with members or elements. */
  readonly usedAsThings: ReadonlySet<string>;
  /** Names of things whose members or elements are written. */
  readonly writtenThings: ReadonlySet<string>;
  /** Names of things that a call changes: `trail.push(x)`, `Object.assign(options, given)`, `fill(table)`. */
  readonly changedThings: ReadonlySet<string>;
  /** Methods that are hung on a class from outside it: `Body.step` for `Body.prototype.step = ...`. */
  readonly patched: ReadonlySet<string>;
  readonly functions: readonly FunctionNode[];
  /** What a function is a method of: a record literal, or the variable that holds it or is given the function. */
  holderOf(node: FunctionNode): Expression | undefined;
  /** What each name is assigned, without an operator; undefined where it is augmented too. */
  readonly values: ReadonlyMap<string, readonly Expression[] | undefined>;
}

export interface MemberWrite {
  /** The class through whose receiver it is written, by `this.m = ...`; undefined for any other object. */
  readonly owner: ClassNode | undefined;
  /** What a constructor sets is an initial value, not a change. */
  readonly inConstructor: boolean;
  /** The name it is written through: `Body` of `Body.count = 0`. */
  readonly through?: string;
}

type Context = MemberWrite;

const OUTSIDE: Context = { owner: undefined, inConstructor: false };

const factsByProgram = new WeakMap<Program, Facts>();

export function factsOf(program: Program): Facts {
  let facts = factsByProgram.get(program);
  if (!facts) factsByProgram.set(program, (facts = gather(program)));
  return facts;
}

const NO_CHILDREN: ReadonlySet<string> = new Set(['span', 'nameSpan', 'opSpan', 'bodySpan', 'note']);

/** Iterative, so that deep nesting does no harm; parents come first, in the order of the source. */
function gather(program: Program): Facts {
  const assigned = new Set<string>();
  const computed = new Set<string>();
  const memberWrites = new Map<string, MemberWrite[]>();
  const elementWrites = new Set<string>();
  const usedAsThings = new Set<string>();
  const writtenThings = new Set<string>();
  const changedThings = new Set<string>();
  const patched = new Set<string>();
  const passed: { readonly callee: string; readonly at: number; readonly name: string }[] = [];
  const functions: FunctionNode[] = [];
  const holders = new Map<FunctionNode, Expression>();
  const variables = new Map<Expression, Expression>();
  const values = new Map<string, Expression[] | undefined>();

  const onAssign = (e: Expression & { kind: 'assign' }, context: Context): void => {
    for (const name of patternNames(e.target)) {
      assigned.add(name);
      if (e.op !== undefined || !isConstantLike(e.value)) computed.add(name);
      if (e.target.kind !== 'name') continue;
      if (e.op !== undefined) values.set(name, undefined);
      else if (!values.has(name)) values.set(name, [e.value]);
      else values.get(name)?.push(e.value);
    }
    if (e.target.kind === 'name' && !e.op) variables.set(e.value, { ...e.target });
    for (const place of placesOf(e.target)) {
      if (place.kind === 'member') {
        if (e.value.kind === 'function' && !e.op && place.object.kind === 'name') holders.set(e.value.node, place.object);
        const own = place.object.kind === 'self';
        const through = place.object.kind === 'name' ? { through: place.object.name } : {};
        const write = own ? context : { owner: undefined, inConstructor: context.inConstructor, ...through };
        const { object } = place;
        if (object.kind === 'member' && object.name === 'prototype' && object.object.kind === 'name') patched.add(`${object.object.name}.${place.name}`);
        const known = memberWrites.get(place.name);
        if (known) known.push(write);
        else memberWrites.set(place.name, [write]);
      }
      let root = place;
      while (root.kind === 'member' || root.kind === 'index') {
        if (root.kind === 'member' && root !== place) elementWrites.add(root.name);
        root = root.object;
      }
      if (root.kind === 'name') writtenThings.add(root.name);
    }
  };

  const onCall = (e: Expression & { kind: 'call' }): void => {
    const { callee, args } = e;
    const [first] = args;
    if (callee.kind === 'member' && CHANGING_METHODS.has(callee.name)) addRoot(callee.object, changedThings);
    if (callee.kind === 'member' && callee.object.kind === 'name' && CHANGING_FUNCTIONS.has(`${callee.object.name}.${callee.name}`) && first) {
      addRoot(first.value, changedThings);
      const of = first.value;
      if (of.kind === 'member' && of.name === 'prototype' && of.object.kind === 'name') patched.add(`${of.object.name}.*`);
    }
    if (callee.kind !== 'name') return;
    args.forEach((a, at) => a.value.kind === 'name' && passed.push({ callee: callee.name, at, name: a.value.name }));
  };

  const nodes: unknown[] = [program.body];
  const contexts: Context[] = [OUTSIDE];
  while (nodes.length > 0) {
    const node = nodes.pop();
    let context = contexts.pop()!;
    if (Array.isArray(node)) {
      for (let i = node.length - 1; i >= 0; i--) {
        if (node[i] === null || typeof node[i] !== 'object' || isLeaf(node[i] as object)) continue;
        nodes.push(node[i]);
        contexts.push(context);
      }
      continue;
    }
    const n = node as Expression & { readonly target?: Pattern };
    if (n.kind === 'number' || n.kind === 'string') continue;
    if ((n.kind as string) === 'declare' && n.target?.kind === 'name' && 'value' in n) variables.set(n.value as Expression, { ...n.target });
    if (n.kind === 'assign' && 'target' in n) onAssign(n, context);
    else if (n.kind === 'call' && 'callee' in n) onCall(n);
    else if ((n.kind === 'member' || n.kind === 'index') && 'object' in n) {
      if (n.object.kind === 'name') usedAsThings.add(n.object.name);
    } else if (n.kind === 'record' && 'fields' in n) {
      for (const f of n.fields) if ('kind' in f && f.kind === 'field' && f.value.kind === 'function') holders.set(f.value.node, n);
    } else if (isFunction(n)) {
      functions.push(n);
    } else if (n.kind === 'function' && 'node' in n) {
      // A function inside a method has a receiver of its own.
      if (!n.node.inheritsSelf && context.owner) context = { owner: undefined, inConstructor: context.inConstructor };
    } else if (isClass(n)) {
      for (let i = n.members.length - 1; i >= 0; i--) {
        const member = n.members[i]!;
        nodes.push(member);
        contexts.push({ owner: n, inConstructor: member.kind === 'constructor' });
      }
      if (n.base) {
        nodes.push(n.base);
        contexts.push(context);
      }
      continue;
    }
    const keys = Object.keys(n);
    for (let i = keys.length - 1; i >= 0; i--) {
      const child = (n as unknown as Record<string, unknown>)[keys[i]!];
      if (child === null || typeof child !== 'object' || isLeaf(child) || NO_CHILDREN.has(keys[i]!)) continue;
      nodes.push(child);
      contexts.push(context);
    }
  }
  const holderOf = (node: FunctionNode): Expression | undefined => {
    const holder = holders.get(node);
    const variable = holder && variables.get(holder);
    // A variable that is given other things too need not hold this one.
    const isSole = variable?.kind === 'name' && (values.get(variable.name)?.length ?? (assigned.has(variable.name) ? 2 : 0)) <= 1;
    return isSole ? variable : holder;
  };
  addPassedOn(passed, functions, writtenThings, changedThings);
  return { assigned, computed, memberWrites, elementWrites, usedAsThings, writtenThings, changedThings, patched, functions, holderOf, values };
}

const CHANGING_METHODS: ReadonlySet<string> = new Set(
  'push pop shift unshift splice sort reverse fill copyWithin set add delete clear append extend insert remove update'.split(' '),
);
const CHANGING_FUNCTIONS: ReadonlySet<string> = new Set(
  'Object.assign Object.defineProperty Object.defineProperties Object.setPrototypeOf Reflect.set Reflect.defineProperty'.split(' '),
);

function addRoot(e: Expression, names: Set<string>): void {
  let root = e;
  while (root.kind === 'member' || root.kind === 'index') root = root.object;
  if (root.kind === 'name') names.add(root.name);
}

/** What is handed to a function of the file that changes its parameter is changed. */
function addPassedOn(
  passed: readonly { readonly callee: string; readonly at: number; readonly name: string }[],
  functions: readonly FunctionNode[],
  written: ReadonlySet<string>,
  changed: Set<string>,
): void {
  const byName = new Map<string, FunctionNode[]>();
  for (const f of functions) byName.set(f.name, [...(byName.get(f.name) ?? []), f]);
  for (let round = 0, size = -1; size !== changed.size && round < 8; round++) {
    size = changed.size;
    for (const { callee, at, name } of passed) {
      for (const f of byName.get(callee) ?? []) {
        const p = f.parameters[at]?.pattern;
        if (p?.kind === 'name' && (written.has(p.name) || changed.has(p.name))) changed.add(name);
      }
    }
  }
}

/** Nothing is below it, and nothing is asked of it. */
function isLeaf(node: object): boolean {
  const { kind } = node as { readonly kind?: string };
  return kind === 'name' || kind === 'number' || kind === 'string' || kind === 'self' || kind === 'boolean';
}

function isFunction(n: object): n is FunctionNode {
  return 'bodySpan' in n && 'parameters' in n;
}

function isClass(n: object): n is ClassNode {
  return 'members' in n && 'nameSpan' in n;
}

/** True where some code outside constructors assigns to a member of this name. */
export function memberIsAssigned(program: Program, name: string): boolean {
  return factsOf(program).memberWrites.get(name)?.some((w) => !w.inConstructor) ?? false;
}

/** True where a bare name is used as a thing with members or elements. */
export function isUsedAsThing(program: Program, name: string): boolean {
  return factsOf(program).usedAsThings.has(name);
}

/**
 * The thing a variable without a first value is given where it is set up: `pos = new Vec(0, 0)`, `pos = createVector()`. It
 * says of what kind the variable is; undefined where it is given anything else as well.
 */
export function firstMade(program: Program, name: string): Expression | undefined {
  const given = factsOf(program).values.get(name);
  return given?.every(isMaking) ? given[0] : undefined;
}

/** The function that a variable without a first value is given, once: `let rates; rates = (s) => ...`. */
export function onlyFunction(program: Program, name: string): Expression | undefined {
  const given = factsOf(program).values.get(name);
  return given?.length === 1 && given[0]!.kind === 'function' ? given[0] : undefined;
}

function isMaking(e: Expression): boolean {
  return e.kind === 'call' && (e.isNew === true || (e.callee.kind === 'name' && /^create[A-Z]/.test(e.callee.name)));
}

const digests = new WeakMap<Program, string>();

/**
 * What a reading of any function may have asked of the whole file, as text: which names and members are assigned somewhere,
 * and how. Two programs with the same digest answer alike.
 */
export function digestOf(program: Program): string {
  let digest = digests.get(program);
  if (digest === undefined) {
    const { assigned, computed, memberWrites, usedAsThings, writtenThings, changedThings, patched } = factsOf(program);
    const writes = [...memberWrites].map(([name, list]) => `${name}:${list.map((w) => `${w.owner?.name ?? w.through ?? ''}${w.inConstructor ? '*' : ''}`).sort().join(',')}`);
    digest = [assigned, computed, writes, usedAsThings, writtenThings, changedThings, patched].map((names) => [...names].sort().join(' ')).join('|');
    digests.set(program, digest);
  }
  return digest;
}

/**
 * Members that are given to things by a statement of their own among `statements` (`config.total = a + b`) and by nothing
 * else in the program, by the thing's name.
 */
export function givenOnce(program: Program, statements: readonly Statement[]): ReadonlyMap<string, ReadonlyMap<string, Expression>> {
  let given = givenOf.get(statements);
  if (given) return given;
  given = new Map();
  for (const s of statements) {
    const e = s.kind === 'expression' ? s.value : undefined;
    if (e?.kind !== 'assign' || e.op || e.target.kind !== 'place') continue;
    const { target } = e.target;
    if (target.kind !== 'member' || target.object.kind !== 'name' || factsOf(program).memberWrites.get(target.name)?.length !== 1) continue;
    const members = given.get(target.object.name) ?? new Map<string, Expression>();
    given.set(target.object.name, members.set(target.name, e.value));
  }
  givenOf.set(statements, given);
  return given;
}

const givenOf = new WeakMap<readonly Statement[], Map<string, Map<string, Expression>>>();
