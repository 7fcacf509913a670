import type { Expression, FunctionNode, Pattern, Statement } from './form';

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

/** What is assigned in a function, those inside it included. */
export function assignments(node: FunctionNode): Assignments {
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
export function isConstantLike(e: Expression): boolean {
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

/** Parameters that a constructor stores in fields just as they are: `this.mass = mass`, `self.l = l or 1.0`. */
export function storedParameters(constructor: FunctionNode): Map<string, string[]> {
  const fields = new Map<string, string[]>();
  for (const p of constructor.parameters) if (p.field && p.pattern.kind === 'name') fields.set(p.pattern.name, [p.pattern.name]);
  for (const n of nodesOf(constructor.body, false)) {
    const e = n as Expression;
    if (e.kind !== 'assign' || e.op || !('target' in e) || e.target.kind !== 'place') continue;
    const { target } = e.target;
    const value = e.value.kind === 'logical' && e.value.op !== 'and' ? e.value.left : e.value;
    if (target.kind !== 'member' || target.object.kind !== 'self' || value.kind !== 'name') continue;
    fields.set(value.name, [...(fields.get(value.name) ?? []), target.name]);
  }
  return fields;
}

/** The member and index expressions that a pattern writes to. */
export function placesOf(pattern: Pattern): Expression[] {
  if (pattern.kind === 'place') return [pattern.target];
  if (pattern.kind === 'list') return pattern.items.flatMap((i) => (i ? placesOf(i.pattern) : []));
  if (pattern.kind === 'record') return pattern.fields.flatMap((f) => placesOf(f.item.pattern));
  return [];
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
    if (e.kind === 'assign' && 'target' in e) names.push(...patternNames(e.target), ...placesOf(e.target).flatMap(rootName));
  }
  return names;
}

/** `config` of `config.total`. */
function rootName(place: Expression): string[] {
  let at = place;
  while (at.kind === 'member' || at.kind === 'index') at = at.object;
  return at.kind === 'name' ? [at.name] : [];
}
