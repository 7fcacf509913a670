import type { Expr } from '../expression/node';
import type { Rational } from '../expression/rational';
import type { Place } from '../text/span';
import type { BinaryOperator, Expression } from './form';
import { meaningOf } from './generics';
import type { Machine } from './machine';
import { settle } from './settle';
import { dataOf, numeric } from './numbers';
import { shapeOf } from './paths';
import { isUsedAsThing } from './facts';
import type { Scope } from './scope';
import { fork } from './merging';
import { isUnread, unread, type Generic, type Unread, type Value } from './values';

/** Conditions: what they say, and whether that is known. */

/** A condition as written, as an expression that may be the constant true or false. */
export function conditionOf(m: Machine, scope: Scope, e: Expression): Expr | Unread {
  const place = m.place(scope, e.span);
  const known = m.assumedShapes.size > 0 ? m.assumedShapes.get(shapeOf(e)) : undefined;
  if (known !== undefined) return known ? m.graph.true : m.graph.false;
  if (e.kind === 'logical' && e.op !== 'coalesce') {
    const left = conditionOf(m, scope, e.left);
    if (isUnread(left)) return left;
    const settled = settle(m, left);
    if (e.op === 'and' ? settled === m.graph.false : settled === m.graph.true) return settled;
    if (settled === m.graph.true || settled === m.graph.false) return conditionOf(m, scope, e.right);
    const inBranch = (): Value => {
      const right = conditionOf(m, scope, e.right);
      return isUnread(right) ? right : { kind: 'condition', expr: settle(m, right) };
    };
    const still = (): Value => ({ kind: 'condition', expr: e.op === 'and' ? m.graph.false : m.graph.true });
    const both = e.op === 'and' ? fork(m, settled, place, inBranch, still) : fork(m, settled, place, still, inBranch);
    if (both.kind === 'unread') return both;
    return both.kind === 'condition' ? both.expr : unread('a condition of mixed kinds', place);
  }
  if (e.kind === 'unary' && e.op === 'not') {
    const inner = conditionOf(m, scope, e.operand);
    return isUnread(inner) ? inner : settle(m, m.graph.not(inner));
  }
  const value = m.evaluate(scope, e);
  const truth = truthOf(m, value, place);
  return isUnread(truth) ? truth : settle(m, truth);
}

/** Whether a value counts as true. */
export function truthOf(m: Machine, value: Value, place: Place): Expr | Unread {
  const g = m.graph;
  const constant = (b: boolean): Expr => (b ? g.true : g.false);
  switch (value.kind) {
    case 'condition':
      return value.expr;
    case 'scalar':
      return g.not(g.equal(value.expr, g.zero));
    case 'string':
      return constant(value.value !== '');
    case 'nothing':
      return g.false;
    case 'unread':
      return value;
    case 'choice': {
      const a = truthOf(m, value.whenTrue, place);
      if (isUnread(a)) return a;
      const b = truthOf(m, value.whenFalse, place);
      if (isUnread(b)) return b;
      return g.or(g.and(value.condition, a), g.and(g.not(value.condition), b));
    }
    case 'object': {
      const data = dataOf(m, value);
      if (!data || data.kind === 'broken') return unread('a condition on a thing that is not known', place);
      if (data.kind !== 'generic') return g.true;
      return genericTruth(m, data.generic, data.members.size > 0, place);
    }
    default:
      return g.true;
  }
}

function genericTruth(m: Machine, generic: Generic, written: boolean, place: Place): Expr | Unread {
  const g = m.graph;
  const given = givenOf(m, generic);
  if (given) return truthOf(m, given, place);
  if (written || generic.info) return g.true;
  const meaning = meaningOf(m, generic);
  if (meaning && isUnread(meaning)) return g.true;
  if (meaning) return g.not(g.equal(meaning.expr, g.zero));
  if (isThing(m, generic)) return g.true;
  return g.equal(flag(m, generic, place), g.one);
}

/** True for a thing from outside that the code uses as one, by its members or elements. */
export function isThing(m: Machine, generic: Generic): boolean {
  return [generic.path, ...generic.aliases].some((p) => isUsedAsThing(m.request.program, p) || m.naming.hasReadBelow(p));
}

/** True for a value whose truth nothing settles: a flag from outside. */
export function isOpenFlag(m: Machine, value: Value): boolean {
  if (value.kind !== 'object') return false;
  const data = dataOf(m, value);
  if (data?.kind !== 'generic' || data.members.size > 0 || data.generic.info) return false;
  return givenOf(m, data.generic) !== undefined || (!isThing(m, data.generic) && meaningOf(m, data.generic) === undefined);
}

function flag(m: Machine, generic: Generic, place: Place): Expr {
  const words = generic.path;
  return m.freeSymbol(
    words,
    `which branch is meant is not said: add \`assume ${words}\` or \`assume not ${words}\``,
    place,
  );
}

export function givenOf(m: Machine, generic: Generic): Value | undefined {
  for (const path of [generic.path, ...generic.aliases]) {
    const v = m.given.get(path);
    if (v) return v;
  }
  return undefined;
}

const MIRRORED: Partial<Record<BinaryOperator, BinaryOperator>> = { '>': '<', '>=': '<=' };

export function compare(m: Machine, op: BinaryOperator, a: Value, b: Value, place: Place): Value {
  if (MIRRORED[op]) return compare(m, MIRRORED[op]!, b, a, place);
  const g = m.graph;
  const result = (expr: Expr): Value => ({ kind: 'condition', expr, place });
  if (a.kind === 'unread') return a;
  if (b.kind === 'unread') return b;
  if (a.kind === 'choice' || b.kind === 'choice') {
    const [choice, other] = a.kind === 'choice' ? [a, b] : [b as typeof a & { kind: 'choice' }, a];
    const one = (v: Value): Value => (choice === a ? compare(m, op, v, other, place) : compare(m, op, other, v, place));
    const x = one(choice.kind === 'choice' ? choice.whenTrue : choice);
    const y = one(choice.kind === 'choice' ? choice.whenFalse : choice);
    if (x.kind !== 'condition' || y.kind !== 'condition' || choice.kind !== 'choice') return x.kind === 'unread' ? x : y;
    return result(g.or(g.and(choice.condition, x.expr), g.and(g.not(choice.condition), y.expr)));
  }
  if (op === '==' || op === '!=') {
    const same = equality(m, a, b, place);
    if (isUnread(same)) return same;
    return result(op === '==' ? same : g.not(same));
  }
  const x = numeric(m, a, place);
  if (isUnread(x)) return x;
  const y = numeric(m, b, place);
  if (isUnread(y)) return y;
  if (x.op === 'nan' || y.op === 'nan') return result(g.false);
  const split = splitSelect(m, x, y, (p, q) => compare(m, op, { kind: 'scalar', expr: p }, { kind: 'scalar', expr: q }, place));
  if (split) return result(split);
  const order = constantOrder(x, y);
  if (order !== undefined) return result(op === '<' ? (order < 0 ? g.true : g.false) : order <= 0 ? g.true : g.false);
  return result(op === '<' ? g.less(x, y) : g.lessEqual(x, y));
}

/** A comparison of constants that a condition chooses between is said by the condition itself. */
function splitSelect(m: Machine, x: Expr, y: Expr, one: (a: Expr, b: Expr) => Value): Expr | undefined {
  const g = m.graph;
  const [choice, other] = x.op === 'select' ? [x, y] : [y, x];
  if (choice.op !== 'select' || other.op !== 'number' || !isChoiceOfNumbers(choice, 0)) return undefined;
  const [c, a, b] = choice.args;
  const p = choice === x ? one(a!, other) : one(other, a!);
  const q = choice === x ? one(b!, other) : one(other, b!);
  if (p.kind !== 'condition' || q.kind !== 'condition') return undefined;
  return g.or(g.and(c!, p.expr), g.and(g.not(c!), q.expr));
}

/** True for `select` between numbers, nested a little. */
export function isChoiceOfNumbers(e: Expr, depth: number): boolean {
  if (e.op === 'number') return true;
  return e.op === 'select' && depth < 8 && isChoiceOfNumbers(e.args[1]!, depth + 1) && isChoiceOfNumbers(e.args[2]!, depth + 1);
}

/** The order of constants that the graph leaves as they are, such as pi against 3. */
function constantOrder(x: Expr, y: Expr): number | undefined {
  const a = constantValue(x);
  const b = constantValue(y);
  if (a === undefined || b === undefined) return undefined;
  return Math.abs(a - b) > 1e-9 * Math.max(Math.abs(a), Math.abs(b)) ? a - b : x === y ? 0 : undefined;
}

function constantValue(e: Expr): number | undefined {
  if (e.op === 'number') return (e.data as Rational).toNumber();
  if (e.op === 'pi') return Math.PI;
  if (e.op === 'product') {
    let p = 1;
    for (const f of e.args) {
      const v = constantValue(f);
      if (v === undefined) return undefined;
      p *= v;
    }
    return p;
  }
  return undefined;
}

function equality(m: Machine, a: Value, b: Value, place: Place): Expr | Unread {
  const g = m.graph;
  const constant = (t: boolean): Expr => (t ? g.true : g.false);
  const x = resolved(m, a);
  const y = resolved(m, b);
  if (x.kind === 'nothing' || y.kind === 'nothing') return constant(x.kind === y.kind);
  if (x.kind === 'string' && y.kind === 'string') return constant(x.value === y.value);
  if (x.kind === 'condition' && y.kind === 'condition') {
    return g.or(g.and(x.expr, y.expr), g.and(g.not(x.expr), g.not(y.expr)));
  }
  if (x.kind === 'object' && y.kind === 'object' && x.id === y.id) return g.true;
  const [text, thing] = x.kind === 'string' ? [x, y] : [y, x];
  if (text.kind === 'string') return textEquality(m, text.value, thing, place);
  if (x.kind === 'condition' || y.kind === 'condition') {
    const [c, other] = x.kind === 'condition' ? [x, y] : [y as typeof x & { kind: 'condition' }, x];
    if (other.kind === 'object' && c.kind === 'condition') {
      const t = truthOf(m, other, place);
      if (isUnread(t)) return t;
      return g.or(g.and(c.expr, t), g.and(g.not(c.expr), g.not(t)));
    }
  }
  const isMade = (v: Value): boolean => v.kind === 'object' && m.store.data(v.id).kind !== 'generic';
  if (isMade(x) || isMade(y)) return g.false;
  // Two things from outside that go by different names are not the same one.
  if (isOutsideThing(m, x) && isOutsideThing(m, y)) return g.false;
  const p = numeric(m, x, place);
  if (isUnread(p)) return p;
  const q = numeric(m, y, place);
  if (isUnread(q)) return q;
  if (p.op === 'nan' || q.op === 'nan') return g.false;
  const split = splitSelect(m, p, q, (r, s) => ({ kind: 'condition', expr: g.equal(r, s) }));
  return split ?? g.equal(p, q);
}

function isOutsideThing(m: Machine, v: Value): boolean {
  if (v.kind !== 'object') return false;
  const data = m.store.data(v.id);
  return data.kind === 'generic' && (data.generic.info !== undefined || data.members.size > 0 || isThing(m, data.generic));
}

function textEquality(m: Machine, text: string, thing: Value, place: Place): Expr | Unread {
  // Whether a number is turned into text first is the language's and the operator's own.
  if (thing.kind === 'scalar' || thing.kind === 'condition') return unread('whether a text and a number are the same', place);
  if (thing.kind !== 'object') return m.graph.false;
  const data = dataOf(m, thing);
  if (data?.kind !== 'generic') return m.graph.false;
  const words = `${data.generic.path} == ${JSON.stringify(text)}`;
  const symbol = m.freeSymbol(words, `which branch is meant is not said: add \`assume ${words}\``, place);
  return m.graph.equal(symbol, m.graph.one);
}

/** A generic thing that `assume` gives a value is that value. */
function resolved(m: Machine, v: Value): Value {
  if (v.kind !== 'object') return v;
  const data = m.store.data(v.id);
  return data.kind === 'generic' ? (givenOf(m, data.generic) ?? v) : v;
}
