import type { Expr } from '../expression/node';
import type { Rational } from '../expression/rational';
import type { Place } from '../text/span';
import { depthOf } from './broadcast';
import { compare } from './conditions';
import type { BinaryOperator } from './form';
import { multiplyMatrices, solveLinear, transpose } from './intrinsics/matrices';
import type { Machine } from './machine';
import { joinMasks } from './mask-arrays';
import { heldArray, matrixObject, onMatrixObjects } from './matrix-objects';
import { mergeValues } from './merging';
import { countOf, dataOf, describe, numeric } from './numbers';
import type { Module } from './scope';
import { isInteger } from './integers';
import { truncated } from './truncate';
import { isUnread, unread, type ListData, type Unread, type Value } from './values';

/** Arithmetic of values. */

export function binary(m: Machine, module: Module, op: BinaryOperator, a: Value, b: Value, place: Place): Value {
  if (a.kind === 'unread') return a;
  if (b.kind === 'unread') return b;
  switch (op) {
    case '<':
    case '<=':
    case '>':
    case '>=':
    case '==':
    case '!=':
      return compareVectors(m, module, op, a, b, place) ?? compare(m, op, a, b, place);
    case 'in':
      return contains(m, a, b, place);
    case 'instanceof':
      return instanceOf(m, a, b, place);
    case 'bit-and':
    case 'bit-or':
      return joinMasks(m, op, a, b, place);
    case 'bit':
      return unread('an operation on bits', place);
    default:
      break;
  }
  if (a.kind === 'choice') {
    return mergeValues(m, a.condition, binary(m, module, op, a.whenTrue, b, place), binary(m, module, op, a.whenFalse, b, place), place);
  }
  if (b.kind === 'choice') {
    return mergeValues(m, b.condition, binary(m, module, op, a, b.whenTrue, place), binary(m, module, op, a, b.whenFalse, place), place);
  }
  const made = onMatrixObjects(m, op, a, b, place, (o, p, q) => binary(m, module, o, p, q, place));
  if (made) return made;
  const x = listOf(m, a);
  const y = listOf(m, b);
  if (x || y) return onLists(m, module, op, a, b, x, y, place);
  if (op === '+' && (a.kind === 'string' || b.kind === 'string')) return joinTexts(a, b, place);
  const p = numeric(m, a, place);
  if (isUnread(p)) return p;
  const q = numeric(m, b, place);
  if (isUnread(q)) return q;
  const integer = isInteger(a) && isInteger(b);
  if (integer && op === '/' && module.program.dividesIntegers) return divided(m, p, q, place);
  const r = arithmetic(m, op, p, q, place);
  if (isUnread(r)) return r;
  return { kind: 'scalar', expr: r, place, ...(integer && STAYS_INTEGER.has(op) && !isBelowZero(q, op) ? { integer } : {}) };
}

const STAYS_INTEGER: ReadonlySet<BinaryOperator> = new Set(['+', '-', '*', '**', 'floor-divide', 'integer-divide', 'remainder-floor', '%'] as const);

/** An integer to a power below zero is none. */
function isBelowZero(exponent: Expr, op: BinaryOperator): boolean {
  return op === '**' && !(exponent.op === 'number' && (exponent.data as Rational).numerator >= 0n);
}

/** The quotient of two integers, which drops the rest. */
function divided(m: Machine, a: Expr, b: Expr, place: Place): Value {
  const exact = m.graph.divide(a, b);
  const expr = m.graph.apply('floor', [exact]);
  if (expr !== exact) m.dropped({ kind: 'division', place, exact });
  return { kind: 'scalar', expr, place, integer: true };
}

/** Comparisons of numeric vectors are made item by item where the language has them apart from plain lists. */
function compareVectors(m: Machine, module: Module, op: BinaryOperator, a: Value, b: Value, place: Place): Value | undefined {
  if (!module.program.listConcat) return undefined;
  const x = listOf(m, a);
  const y = listOf(m, b);
  if (!(x?.array && !x.outside) && !(y?.array && !y.outside)) return undefined;
  return elementwiseOperation(m, module, op, a, b, x, y, place);
}

function listOf(m: Machine, v: Value): ListData | undefined {
  const data = dataOf(m, v);
  return data?.kind === 'list' ? data : undefined;
}

export function arithmetic(m: Machine, op: BinaryOperator, a: Expr, b: Expr, place: Place): Expr | Unread {
  const g = m.graph;
  switch (op) {
    case '+':
      return g.sum([a, b]);
    case '-':
      return g.subtract(a, b);
    case '*':
    case 'matmul':
    case 'elementwise-multiply':
      return g.product([a, b]);
    case '/':
    case 'elementwise-divide':
      return g.divide(a, b);
    case 'left-divide':
      return g.divide(b, a);
    case '**':
    case 'elementwise-power':
      return g.power(a, b);
    case 'floor-divide':
      return g.apply('floor', [g.divide(a, b)]);
    case 'integer-divide':
      return truncated(m.graph, g.divide(a, b));
    case 'remainder-floor':
      return m.request.withinLimits && isTurn(m, b) ? a : g.subtract(a, g.product([b, g.apply('floor', [g.divide(a, b)])]));
    case '%':
      return m.request.withinLimits && isTurn(m, b) ? a : g.subtract(a, g.product([b, truncated(m.graph, g.divide(a, b))]));
    default:
      return unread(`the operator \`${op}\``, place);
  }
}

/** A multiple of pi: the remainder is a wrapped angle. */
function isTurn(m: Machine, e: Expr): boolean {
  return e === m.graph.pi || (e.op === 'product' && e.args.length === 2 && e.args[0]!.op === 'number' && e.args[1] === m.graph.pi);
}

function onLists(
  m: Machine,
  module: Module,
  op: BinaryOperator,
  a: Value,
  b: Value,
  x: ListData | undefined,
  y: ListData | undefined,
  place: Place,
): Value {
  const { elementwise, listConcat, matrixProduct } = module.program;
  if (op === 'matmul' || (op === '*' && matrixProduct && x && y)) return multiplyMatrices(m, a, b, place);
  if (op === 'left-divide' && x) return solveLinear(m, a, b, place);
  if (op === '/' && matrixProduct && x && y) {
    const t = solveLinear(m, transpose(m, b, place), transpose(m, a, place), place);
    return t.kind === 'unread' ? t : transpose(m, t, place);
  }
  // Formulas of outputs are written as on paper.
  if (m.keepPlaces && op === '*' && x && y) return multiplyMatrices(m, a, b, place);
  const vectors = elementwise || m.keepPlaces || x?.array || y?.array || op.startsWith('elementwise');
  if (listConcat && op === '+' && x && y && ((x.outside && !y.array) || (y.outside && !x.array))) {
    return unread('a sum of lists of which one comes from outside: say with `np.array(...)` whether they are joined or added', place);
  }
  if (!vectors && listConcat) {
    if (op === '+' && x && y) return m.list([...x.items, ...y.items]);
    if (op === '*' && (x === undefined) !== (y === undefined)) {
      const n = countOf(m, x ? b : a, place);
      if (n === undefined || n > 10_000) return m.object({ kind: 'broken', unread: unread('a list repeated an unknown number of times', place), cells: [] });
      return m.list(Array.from({ length: Math.max(0, n) }, () => (x ?? y)!.items).flat());
    }
  }
  if (!vectors) return unread(`the operator \`${op}\` between lists`, place);
  return elementwiseOperation(m, module, op, a, b, x, y, place);
}

function elementwiseOperation(
  m: Machine,
  module: Module,
  op: BinaryOperator,
  a: Value,
  b: Value,
  x: ListData | undefined,
  y: ListData | undefined,
  place: Place,
): Value {
  if (x && y) {
    if (x.items.length === y.items.length && depthOf(m, a) === depthOf(m, b)) {
      return m.list(x.items.map((v, k) => binary(m, module, op, v, y.items[k]!, place)), true);
    }
    if (depthOf(m, a) < depthOf(m, b)) return m.list(y.items.map((v) => binary(m, module, op, a, v, place)), true);
    if (depthOf(m, a) > depthOf(m, b)) return m.list(x.items.map((v) => binary(m, module, op, v, b, place)), true);
    if (x.items.length === 1) return m.list(y.items.map((v) => binary(m, module, op, x.items[0]!, v, place)), true);
    if (y.items.length === 1) return m.list(x.items.map((v) => binary(m, module, op, v, y.items[0]!, place)), true);
    return unread(`a list of ${x.items.length} and one of ${y.items.length} do not fit`, place);
  }
  if (x) return m.list(x.items.map((v) => binary(m, module, op, v, b, place)), true);
  return m.list(y!.items.map((v) => binary(m, module, op, a, v, place)), true);
}

function joinTexts(a: Value, b: Value, place: Place): Value {
  const text = (v: Value): string | undefined => {
    if (v.kind === 'string') return v.value;
    if (v.kind === 'scalar' && v.expr.op === 'number') {
      const r = v.expr.data as Rational;
      return r.isInteger ? r.toString() : String(r.toNumber());
    }
    return undefined;
  };
  const x = text(a);
  const y = text(b);
  if (x === undefined || y === undefined) return unread('a text that is put together from values', place);
  return { kind: 'string', value: x + y };
}

function contains(m: Machine, key: Value, thing: Value, place: Place): Value {
  const data = dataOf(m, thing);
  const answer = (t: boolean): Value => ({ kind: 'condition', expr: t ? m.graph.true : m.graph.false, place });
  if (data?.kind === 'record' && key.kind === 'string') return answer(data.members.has(key.value));
  if (data?.kind === 'generic' && key.kind === 'string') return answer(true);
  if (data?.kind === 'list') {
    const constants = data.items.every((v) => (v.kind === 'scalar' && v.expr.op === 'number') || v.kind === 'string');
    if (constants && key.kind === 'string') return answer(data.items.some((v) => v.kind === 'string' && v.value === key.value));
    if (constants && key.kind === 'scalar' && key.expr.op === 'number') {
      return answer(data.items.some((v) => v.kind === 'scalar' && v.expr === key.expr));
    }
  }
  return unread('whether a thing is in another', place);
}

function instanceOf(m: Machine, thing: Value, type: Value, place: Place): Value {
  const answer = (t: boolean): Value => ({ kind: 'condition', expr: t ? m.graph.true : m.graph.false, place });
  const data = dataOf(m, thing);
  if (type.kind === 'library' && !/Array$/.test(type.path)) return unread(`whether a thing is a \`${type.path}\``, place);
  if (type.kind === 'library') return answer(data?.kind === 'list');
  if (type.kind !== 'class') return unread(`whether a thing is a ${describe(type)}`, place);
  if (!data) return answer(false);
  if (data.kind === 'generic' && !data.generic.info) return unread('the class of a thing from outside', place);
  let info = data.kind === 'record' ? data.info : data.kind === 'generic' ? data.generic.info : undefined;
  for (let k = 0; info && k < 64; k++) {
    if (info === type.info || info.node === type.info.node) return answer(true);
    const base = info.base();
    if (base === 'unknown') return unread('a class whose base is not read', place);
    info = base;
  }
  return answer(false);
}

export function negate(m: Machine, v: Value, place: Place): Value {
  const items = listOf(m, v);
  if (items) return m.list(items.items.map((x) => negate(m, x, place)), true);
  const held = heldArray(m, v);
  if (held) return matrixObject(m, negate(m, held, place), place);
  const n = numeric(m, v, place);
  return isUnread(n) ? n : { kind: 'scalar', expr: m.graph.negate(n), place, ...(isInteger(v) ? { integer: true } : {}) };
}
