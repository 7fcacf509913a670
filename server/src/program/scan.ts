import type { Expression, FunctionNode, Pattern, Program, Statement } from './form';

/** Looks over syntax without running it. Iterative, so that deep nesting does no harm. */

type Node = { readonly kind?: string } & object;

/** Every node below `start`, parents first. Functions inside are entered only where `inner` says so. */
export function* nodesOf(start: unknown, inner = true): Generator<Node> {
  const stack: unknown[] = [start];
  let first = true;
  while (stack.length > 0) {
    const x = stack.pop();
    if (x === null || typeof x !== 'object') continue;
    if (Array.isArray(x)) {
      for (let i = x.length - 1; i >= 0; i--) stack.push(x[i]);
      continue;
    }
    const node = x as Node;
    if (!first && !inner && isFunctionNode(node)) continue;
    first = false;
    if (node.kind === 'number') continue;
    yield node;
    const values = Object.values(node);
    for (let i = values.length - 1; i >= 0; i--) if (typeof values[i] === 'object') stack.push(values[i]);
  }
}

function isFunctionNode(node: Node): boolean {
  return 'bodySpan' in node && 'parameters' in node;
}

/** Names that a pattern declares or assigns. */
export function patternNames(pattern: Pattern): string[] {
  const names: string[] = [];
  const visit = (p: Pattern): void => {
    if (p.kind === 'name') names.push(p.name);
    else if (p.kind === 'list') p.items.forEach((i) => i && visit(i.pattern));
    else if (p.kind === 'record') {
      p.fields.forEach((f) => visit(f.item.pattern));
      if (p.rest) visit(p.rest);
    }
  };
  visit(pattern);
  return names;
}

/** Names that `var` and the like declare anywhere in a function's body. */
export function hoistedNames(body: readonly Statement[]): string[] {
  const names: string[] = [];
  for (const node of nodesOf(body, false)) {
    const s = node as Statement;
    if (s.kind === 'declare' && s.scope === 'function' && 'target' in s) names.push(...patternNames(s.target));
  }
  return names;
}

interface Assignments {
  /** Names that are re-assigned to something that is more than a constant, or augmented: their first value counts. */
  readonly computed: ReadonlySet<string>;
  readonly assigned: ReadonlySet<string>;
}

const assignmentsOf = new WeakMap<object, Assignments>();

export function assignments(node: FunctionNode | Program): Assignments {
  const known = assignmentsOf.get(node);
  if (known) return known;
  const computed = new Set<string>();
  const assigned = new Set<string>();
  for (const n of nodesOf(node.body)) {
    const e = n as Expression;
    if (e.kind !== 'assign' || !('target' in e)) continue;
    for (const name of patternNames(e.target)) {
      assigned.add(name);
      if (e.op !== undefined || !isConstantLike(e.value)) computed.add(name);
    }
  }
  const result = { computed, assigned };
  assignmentsOf.set(node, result);
  return result;
}

/** A literal, arithmetic of literals, or something fetched from outside: nothing computed from the function's own names. */
function isConstantLike(e: Expression): boolean {
  switch (e.kind) {
    case 'number':
    case 'string':
    case 'boolean':
    case 'nothing':
      return true;
    case 'unary':
      return isConstantLike(e.operand);
    case 'binary':
      return isConstantLike(e.left) && isConstantLike(e.right);
    case 'member':
      return true;
    case 'call':
      return e.args.length === 0;
    default:
      return false;
  }
}

/**
 * The thing a variable without a first value is given where it is set up: `pos = new Vec(0, 0)`, `pos = createVector()`. It
 * says of what kind the variable is; undefined where it is given anything else as well.
 */
export function firstMade(program: Program, name: string): Expression | undefined {
  if (!assignments(program).assigned.has(name)) return undefined;
  let made: Expression | undefined;
  for (const n of nodesOf(program.body)) {
    const e = n as Expression;
    if (e.kind !== 'assign' || !('target' in e) || e.target.kind !== 'name' || e.target.name !== name || e.op) continue;
    const isMaking = e.value.kind === 'call' && (e.value.isNew === true || (e.value.callee.kind === 'name' && /^create[A-Z]/.test(e.value.callee.name)));
    if (!isMaking) return undefined;
    made ??= e.value;
  }
  return made;
}

const membersOf = new WeakMap<Program, { assigned: Set<string>; used: Set<string> }>();

function memberScan(program: Program): { assigned: Set<string>; used: Set<string> } {
  let found = membersOf.get(program);
  if (found) return found;
  found = { assigned: new Set(), used: new Set() };
  const constructors = new Set<object>();
  for (const n of nodesOf(program.body)) {
    if ((n as { kind?: string }).kind === 'constructor' && 'node' in n) constructors.add(n);
  }
  const scan = (start: unknown, inConstructor: boolean): void => {
    for (const n of nodesOf(start)) {
      const e = n as Expression;
      if (e.kind === 'assign' && 'target' in e && !inConstructor) {
        for (const t of placesOf(e.target)) if (t.kind === 'member') found!.assigned.add(t.name);
      } else if ((e.kind === 'member' || e.kind === 'index') && 'object' in e && e.object.kind === 'name') {
        found!.used.add(e.object.name);
      }
    }
  };
  // What a constructor sets is an initial value, not a change.
  scan(program.body, false);
  if (constructors.size > 0) {
    const elsewhere = new Set<string>();
    const inside = new Set<object>();
    for (const c of constructors) for (const n of nodesOf(c)) inside.add(n);
    for (const n of nodesOf(program.body)) {
      const e = n as Expression;
      if (e.kind !== 'assign' || !('target' in e) || inside.has(n)) continue;
      for (const t of placesOf(e.target)) if (t.kind === 'member') elsewhere.add(t.name);
    }
    found.assigned = elsewhere;
  }
  membersOf.set(program, found);
  return found;
}

/** The member and index expressions that a pattern writes to. */
export function placesOf(pattern: Pattern): Expression[] {
  if (pattern.kind === 'place') return [pattern.target];
  if (pattern.kind === 'list') return pattern.items.flatMap((i) => (i ? placesOf(i.pattern) : []));
  if (pattern.kind === 'record') return pattern.fields.flatMap((f) => placesOf(f.item.pattern));
  return [];
}

/** True where some code outside constructors assigns to a member of this name. */
export function memberIsAssigned(program: Program, name: string): boolean {
  return memberScan(program).assigned.has(name);
}

/** True where a bare name is used as a thing with members or elements. */
export function isUsedAsThing(program: Program, name: string): boolean {
  return memberScan(program).used.has(name);
}

const writtenOf = new WeakMap<Program, Set<string>>();

/** Names of things whose members or elements are written somewhere. */
export function writtenThings(program: Program): ReadonlySet<string> {
  let known = writtenOf.get(program);
  if (known) return known;
  known = new Set();
  for (const n of nodesOf(program.body)) {
    const e = n as Expression;
    if (e.kind !== 'assign' || !('target' in e)) continue;
    for (let t of placesOf(e.target)) {
      while (t.kind === 'member' || t.kind === 'index') t = t.object;
      if (t.kind === 'name') known.add(t.name);
    }
  }
  writtenOf.set(program, known);
  return known;
}

const factsOfPrograms = new WeakMap<Program, string>();

/**
 * What a reading of any function may have asked of the whole file: which names and members are assigned somewhere. Two
 * programs with the same facts answer alike.
 */
export function factsOf(program: Program): string {
  let facts = factsOfPrograms.get(program);
  if (facts === undefined) {
    const { assigned, computed } = assignments(program);
    const members = memberScan(program);
    facts = [assigned, computed, members.assigned, members.used, writtenThings(program)].map((names) => [...names].sort().join(' ')).join('|');
    factsOfPrograms.set(program, facts);
  }
  return facts;
}

/** Names that a statement of a file's top level makes known there. */
export function declaredNames(s: Statement): string[] {
  switch (s.kind) {
    case 'function':
    case 'class':
      return [s.node.name];
    case 'enum':
      return [s.name];
    case 'declare':
      return patternNames(s.target);
    case 'import':
      return [...s.names.map((n) => n.local), ...(s.namespace === undefined ? [] : [s.namespace])];
    case 'export':
      return s.names.map((n) => n.exported);
    case 'block':
    case 'if':
    case 'loop':
    case 'for-each':
    case 'try':
    case 'switch':
    case 'labelled':
    case 'expression':
      // What may declare or assign names from inside counts for each of them.
      return [...new Set([...hoistedNames([s]), ...assignedIn(s)])];
    default:
      return [];
  }
}

function assignedIn(s: Statement): string[] {
  const names: string[] = [];
  for (const n of nodesOf(s, false)) {
    const e = n as Expression;
    if (e.kind === 'assign' && 'target' in e) names.push(...patternNames(e.target));
  }
  return names;
}
