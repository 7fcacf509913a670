import type { Expr } from '../expression/node';
import type { Rational } from '../expression/rational';
import type { Expression, Statement } from './form';
import type { Machine } from './machine';
import { scalarOf } from './numbers';
import type { Value } from './values';

/**
 * `assume within limits`: a clip passes its argument through. What counts as one: min and max against a bound, a
 * comparison that replaces a value by the bound it is compared with, a wrap of an angle by whole turns.
 */

/** True where an expression has no coordinate, velocity or input in it: it can be a bound. */
function isBound(e: Expr): boolean {
  const stack = [e];
  const seen = new Set<number>();
  while (stack.length > 0) {
    const x = stack.pop()!;
    if (seen.has(x.id)) continue;
    seen.add(x.id);
    if (x.op === 'symbol') {
      const data = x.data as { role: string };
      if (data.role !== 'parameter' && data.role !== 'free') return false;
    }
    stack.push(...x.args);
  }
  return true;
}

/** The clipped argument of `min(max(x, low), high)` in any order, or the expression itself. */
export function unclip(e: Expr): Expr {
  let x = e;
  const bounds: { min?: Expr; max?: Expr } = {};
  while (x.op === 'min' || x.op === 'max') {
    const inner = x.args.filter((a) => !isBound(a));
    const bound = x.args.filter(isBound);
    if (inner.length !== 1) break;
    // Two bounds on one side are no clip: `min(-limit, min(limit, u))` never gives u where u is above -limit.
    if (bound.length > 1 || (bound.length === 1 && bounds[x.op])) return e;
    if (bound[0]) bounds[x.op] = bound[0];
    x = inner[0]!;
  }
  return bounds.min && bounds.max && areSwapped(bounds.max, bounds.min) ? e : x;
}

/** True for a lower bound that is at or above the upper one as far as one can see: nothing passes between them. */
export function areSwapped(low: Expr, high: Expr): boolean {
  const [l, h] = [factorOf(low), factorOf(high)];
  if (low.op === 'number' && high.op === 'number') return l.factor >= h.factor;
  return l.rest === h.rest && (l.factor === h.factor || (l.factor > 0 && h.factor < 0));
}

/** -2*a as -2 and what remains. */
function factorOf(e: Expr): { factor: number; rest: string } {
  if (e.op === 'number') return { factor: (e.data as Rational).toNumber(), rest: '' };
  if (e.op !== 'product') return { factor: 1, rest: String(e.id) };
  const numbers = e.args.filter((a) => a.op === 'number');
  const rest = e.args.filter((a) => a.op !== 'number').map((a) => a.id);
  return { factor: numbers.reduce((p, a) => p * (a.data as Rational).toNumber(), 1), rest: rest.sort().join(' ') };
}

/** The value that passes where a conditional expression clips: `x > hi ? hi : x`. */
export function clipped(condition: Expr, value: Value): Value {
  if (value.kind !== 'scalar' || value.expr.op !== 'select') return value;
  const c = condition.op === 'not' ? condition.args[0]! : condition;
  if (c.op !== 'less' && c.op !== 'lessEqual') return value;
  const [, a, b] = value.expr.args;
  const sides = [c.args[0]!, c.args[1]!];
  const passes = [a!, b!].find((x) => sides.includes(x) && !isBound(x));
  const bound = [a!, b!].find((x) => isBound(x));
  if (!passes || !bound || !(sides.includes(bound) || sides.some((s) => isBound(s)))) return value;
  return { ...value, expr: passes };
}

/** True for an assignment that puts a clipped or wrapped version of a variable back into it. */
export function clipsVariable(m: Machine, before: Value, given: Value): boolean {
  const b = scalarOf(m, before);
  if (!b || given.kind !== 'scalar' || isBound(b)) return false;
  return given.expr !== b && unclip(given.expr) === b;
}

/** True for `if (v > vmax) v = vmax` and for `if (th > pi) th -= 2*pi`: nothing in it counts within limits. */
export function isClipGuard(m: Machine, s: Statement & { kind: 'if' }, condition: Expr): boolean {
  if (condition === m.graph.true || condition === m.graph.false) return false;
  if (s.whenFalse.length > 0 && !s.whenFalse.every((x) => x.kind === 'if' && isClipShape(x))) return false;
  return isClipShape(s);
}

function isClipShape(s: Statement & { kind: 'if' }): boolean {
  const compared = comparedNames(s.condition);
  if (compared.length === 0) return false;
  const body = s.whenTrue.flatMap((x) => (x.kind === 'block' ? x.body : [x]));
  if (body.length === 0) return false;
  const touches = body.every((x) => {
    if (x.kind !== 'expression' || x.value.kind !== 'assign') return false;
    const target = x.value.target.kind === 'name' ? x.value.target.name : x.value.target.kind === 'place' ? text(x.value.target.target) : '';
    if (compared.includes(target)) return isBoundText(x.value.value) || x.value.op === '+' || x.value.op === '-';
    // The speed that is set to zero at a wall.
    return !x.value.op && x.value.value.kind === 'number' && x.value.value.value.isZero;
  });
  const hits = body.some((x) => {
    if (x.kind !== 'expression' || x.value.kind !== 'assign') return false;
    const { target } = x.value;
    return compared.includes(target.kind === 'name' ? target.name : target.kind === 'place' ? text(target.target) : '');
  });
  return touches && hits && s.whenFalse.every((x) => x.kind === 'if' && isClipShape(x));
}

/** A bound: a number, a name, or such with a sign, a factor; not a formula with calls. */
function isBoundText(e: Expression): boolean {
  switch (e.kind) {
    case 'number':
    case 'name':
    case 'self':
      return true;
    case 'member':
      return isBoundText(e.object);
    case 'index':
      return isBoundText(e.object);
    case 'unary':
      return isBoundText(e.operand);
    case 'binary':
      return isBoundText(e.left) && isBoundText(e.right);
    case 'call':
      return e.args.length <= 1 && e.args.every((a) => isBoundText(a.value));
    default:
      return false;
  }
}

function comparedNames(e: Expression): string[] {
  if (e.kind === 'logical') return [...comparedNames(e.left), ...comparedNames(e.right)];
  if (e.kind !== 'binary' || !['<', '<=', '>', '>='].includes(e.op)) return [];
  return [e.left, e.right].map((x) => text(x.kind === 'call' && x.args.length === 1 ? x.args[0]!.value : x)).filter((t) => t !== '');
}

function text(e: Expression): string {
  switch (e.kind) {
    case 'name':
      return e.name;
    case 'self':
      return 'this';
    case 'member': {
      const o = text(e.object);
      return o === '' ? '' : `${o}.${e.name}`;
    }
    case 'index': {
      const o = text(e.object);
      const [i] = e.indices;
      if (o === '' || e.indices.length !== 1 || !i) return '';
      return i.kind === 'number' ? `${o}[${i.text}]` : i.kind === 'name' ? `${o}[${i.name}]` : '';
    }
    default:
      return '';
  }
}

/** True for `while (th > pi) th -= 2*pi`: it ends by wrapping what it tests. */
export function isWrap(s: Statement & { kind: 'loop' }): boolean {
  if (!s.condition || s.initial.length > 0 || s.update.length > 0) return false;
  const compared = comparedNames(s.condition);
  const body = s.body.flatMap((x) => (x.kind === 'block' ? x.body : [x]));
  return (
    body.length === 1 &&
    body.every((x) => {
      if (x.kind !== 'expression' || x.value.kind !== 'assign') return false;
      const { target, op, value } = x.value;
      const name = target.kind === 'name' ? target.name : target.kind === 'place' ? text(target.target) : '';
      return compared.includes(name) && (op === '+' || op === '-' ? isBoundText(value) : false);
    })
  );
}
