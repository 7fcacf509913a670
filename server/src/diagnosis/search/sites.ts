import type { Expression, FunctionNode, Pattern, Program, Statement } from '../../program/form';
import type { Span } from '../../text/span';

/** A sub-expression of the source: where a fault could be. */
export interface Site {
  readonly node: Expression;
  readonly parent: Site | undefined;
  /** What it is to its parent, or to its statement. */
  readonly role: Role;
  readonly span: Span;
  /** The innermost function around it. */
  readonly owner: FunctionNode | undefined;
  /** The assignment or declaration whose whole value this is. */
  readonly assignment: Assignment | undefined;
  /** False where a number must stay a plain number: indices, loop bounds, exponents, sizes. */
  readonly mayVary: boolean;
}

export type Role = 'left' | 'right' | 'operand' | 'argument' | 'item' | 'object' | 'branch' | 'whole' | 'other';

export interface Assignment {
  readonly span: Span;
  readonly target: Pattern;
  readonly value: Expression;
  /** `+` of `+=`; undefined for plain assignments and declarations. */
  readonly op: string | undefined;
  readonly isDeclaration: boolean;
}

/** A row of list items or of statements in one block: things that may have been exchanged. */
export interface Siblings {
  readonly sites: readonly Site[];
}

export interface SourceMap {
  readonly sites: readonly Site[];
  readonly byNode: ReadonlyMap<Expression, Site>;
  readonly siblings: readonly Siblings[];
  readonly functions: readonly FunctionNode[];
}

interface Context {
  readonly parent: Site | undefined;
  readonly role: Role;
  readonly owner: FunctionNode | undefined;
  readonly mayVary: boolean;
  readonly assignment?: Assignment;
}

type Task = { readonly x: unknown; readonly context: Context };

/** Functions whose arguments are numbers to compute with, by the last part of their name. */
const SCALAR = /^(a?(sin|cos|tan)h?|atan2|arctan2?|arcsin|arccos|sqrt|abs|exp|log|fabs|hypot|cbrt|sinf|cosf|sqrtf)$/i;
const POWER = /^(pow|power|powf|powi|float_power)$/i;

const MOST_SITES = 40_000;

/** A call of a function of numbers. */
export function isScalarCall(e: Expression & { readonly kind: 'call' }): boolean {
  return SCALAR.test(calleeName(e)) || POWER.test(calleeName(e));
}

function calleeName(e: Expression & { readonly kind: 'call' }): string {
  return e.callee.kind === 'member' || e.callee.kind === 'name' ? e.callee.name : '';
}

/**
 * All sub-expressions of a program. Iterative, so that long chains do no harm.
 */
export function mapSource(program: Program): SourceMap {
  const sites: Site[] = [];
  const byNode = new Map<Expression, Site>();
  const siblings: Siblings[] = [];
  const rows: Expression[][] = [];
  const functions: FunctionNode[] = [];
  const stack: Task[] = [];
  const push = (x: unknown, context: Context): void => {
    if (x !== undefined && x !== null) stack.push({ x, context });
  };
  const base: Context = { parent: undefined, role: 'whole', owner: undefined, mayVary: true };
  push(program.body, base);
  while (stack.length > 0) {
    const { x, context } = stack.pop()!;
    if (Array.isArray(x)) {
      for (let i = x.length - 1; i >= 0; i--) push(x[i], context);
      continue;
    }
    if (typeof x !== 'object' || x === null) continue;
    const node = x as { readonly kind?: string; readonly span?: Span };
    if (sites.length > MOST_SITES) break;
    if (isExpression(node)) {
      const site: Site = {
        node,
        parent: context.parent,
        role: context.role,
        span: node.span,
        owner: context.owner,
        assignment: context.assignment,
        mayVary: context.mayVary,
      };
      sites.push(site);
      byNode.set(node, site);
      inside(node, site, context, push, rows);
    } else {
      if ('parameters' in node && 'bodySpan' in node) functions.push(node as FunctionNode);
      outside(node, context, push, rows);
    }
  }
  for (const row of rows) {
    const found = row.map((e) => byNode.get(e)).filter((s) => s !== undefined);
    if (found.length > 1) siblings.push({ sites: found });
  }
  sites.sort((a, b) => a.span.start - b.span.start || b.span.end - a.span.end);
  return { sites, byNode, siblings, functions };
}

const EXPRESSIONS = new Set<string>([
  'number', 'string', 'boolean', 'nothing', 'name', 'self', 'super', 'member', 'index', 'slice', 'call', 'unary', 'binary',
  'logical', 'conditional', 'assign', 'list', 'record', 'comprehension', 'sequence', 'symbolic',
]);

/** Function, class and opaque exist as statements too; the first two hold only what is walked anyway. */
function isExpression(node: object): node is Expression {
  const { kind } = node as { kind?: string };
  if (kind === 'name' || kind === 'list' || kind === 'record') return !isPattern(node);
  return kind !== undefined && EXPRESSIONS.has(kind);
}

/** Patterns are pushed by nobody but `outside`, which leaves them out; this tells lists of pattern items apart. */
function isPattern(node: object): boolean {
  const items = (node as { items?: readonly unknown[] }).items?.[0];
  return typeof items === 'object' && items !== null && 'pattern' in items;
}

function inside(e: Expression, site: Site, context: Context, push: (x: unknown, c: Context) => void, rows: Expression[][]): void {
  const child = (role: Role, mayVary = context.mayVary): Context => ({ parent: site, role, owner: context.owner, mayVary });
  switch (e.kind) {
    case 'member':
      push(e.object, child('object', false));
      return;
    case 'index':
      push(e.object, child('object', false));
      push(e.indices, child('other', false));
      return;
    case 'call': {
      const name = calleeName(e);
      push(e.callee, child('object', false));
      const isPower = POWER.test(name);
      e.args.forEach((a, i) => push(a.value, child('argument', context.mayVary && (SCALAR.test(name) || (isPower && i === 0) || a.value.kind !== 'number'))));
      return;
    }
    case 'unary':
      push(e.operand, child('operand'));
      return;
    case 'binary': {
      const isArithmetic = /^([+\-*/]|elementwise-\w+|matmul|integer-divide|floor-divide)$/.test(e.op);
      push(e.left, child('left', context.mayVary && (isArithmetic || e.op.includes('*') || e.left.kind !== 'number')));
      push(e.right, child('right', context.mayVary && (isArithmetic || e.right.kind !== 'number') && !e.op.endsWith('**')));
      return;
    }
    case 'conditional':
      push(e.condition, child('other', false));
      push(e.whenTrue, child('branch'));
      push(e.whenFalse, child('branch'));
      return;
    case 'assign':
      push(e.value, {
        ...child('whole'),
        assignment: { span: e.span, target: e.target, value: e.value, op: e.op, isDeclaration: false },
      });
      if (e.target.kind === 'place') push(e.target.target, child('other', false));
      return;
    case 'list':
      rows.push(e.items.map((i) => i.value));
      push(e.items.map((i) => i.value), child('item'));
      return;
    case 'record': {
      const values = e.fields.flatMap((f) => ('value' in f ? [f.value] : []));
      rows.push(values);
      push(values, child('item'));
      for (const f of e.fields) if ('node' in f) push(f.node, child('other'));
      return;
    }
    case 'logical':
      push([e.left, e.right], child('other'));
      return;
    case 'comprehension':
      push(e.body, child('whole'));
      for (const l of e.loops) push([l.over, l.conditions], child('other', false));
      return;
    case 'sequence':
      push(e.items, child('whole'));
      return;
    default:
  }
}

function outside(node: object, context: Context, push: (x: unknown, c: Context) => void, rows: Expression[][]): void {
  const s = node as Statement & FunctionNode;
  if ('parameters' in node && 'bodySpan' in node) {
    const f = node as FunctionNode;
    const inner: Context = { ...context, parent: undefined, role: 'whole', owner: f, mayVary: true };
    for (const p of f.parameters) push(p.initial, inner);
    push(f.body, inner);
    rows.push(assignedIn(f.body));
    return;
  }
  const plain: Context = { ...context, role: 'whole', parent: undefined };
  switch (s.kind) {
    case 'declare':
      if (s.value) {
        const assignment = { span: s.span, target: s.target, value: s.value, op: undefined, isDeclaration: true };
        push(s.value, { ...plain, assignment });
      }
      return;
    case 'loop':
      push([s.initial, s.condition, s.update], { ...plain, mayVary: false });
      push(s.body, plain);
      return;
    case 'for-each':
      push(s.over, { ...plain, mayVary: false });
      push(s.body, plain);
      return;
    case 'if':
      push(s.condition, { ...plain, mayVary: false });
      push([s.whenTrue, s.whenFalse], plain);
      return;
    case 'switch':
      push(s.value, { ...plain, mayVary: false });
      for (const c of s.cases) push(c.body, plain);
      return;
    default:
  }
  for (const [key, value] of Object.entries(node)) {
    if (key === 'target' || key.endsWith('pan')) continue;
    if (typeof value === 'object' && value !== null) push(value, plain);
  }
}

/** The values assigned by the statements of one body, in order. */
function assignedIn(body: readonly Statement[]): Expression[] {
  const out: Expression[] = [];
  for (const s of body) {
    if (s.kind === 'declare' && s.value) out.push(s.value);
    else if (s.kind === 'expression' && s.value.kind === 'assign') out.push(s.value.value);
  }
  return out.length <= 24 ? out : [];
}
