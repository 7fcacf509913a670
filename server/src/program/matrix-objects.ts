import type { Rational } from '../expression/rational';
import type { Place } from '../text/span';
import { copyOfArray } from './array-writes';
import { depthOf } from './broadcast';
import type { BinaryOperator } from './form';
import type { Machine } from './machine';
import { dataOf, itemsOf } from './numbers';
import { unread, type ObjectValue, type Value } from './values';

/**
 * Matrices whose `*` is the matrix product (numpy's `matrix` class). Whatever does not know them takes one for a record and
 * does not read it.
 */
const HELD = '(matrix)';

/** The array in such a matrix; undefined for anything else. */
export function heldArray(m: Machine, v: Value): ObjectValue | undefined {
  const data = v.kind === 'object' ? dataOf(m, v) : undefined;
  const held = data?.kind === 'record' ? data.members.get(HELD) : undefined;
  return held?.kind === 'object' ? held : undefined;
}

/** A matrix of an array of two axes; a vector becomes its one row. */
export function matrixObject(m: Machine, v: Value, place: Place): Value {
  if (v.kind === 'unread') return v;
  if (heldArray(m, v)) return v;
  const depth = depthOf(m, v);
  if (depth < 1 || depth > 2) return unread('a matrix of something that is no list of rows', place);
  const rows = copyOfArray(m, v);
  const held = depth === 1 ? m.list([rows], true) : rows;
  return m.object({ kind: 'record', members: new Map([[HELD, held]]) });
}

/** What an operator makes of operands of which one is such a matrix; undefined where none is. */
export function onMatrixObjects(
  m: Machine,
  op: BinaryOperator,
  a: Value,
  b: Value,
  place: Place,
  apply: (op: BinaryOperator, a: Value, b: Value) => Value,
): Value | undefined {
  const x = heldArray(m, a);
  const y = heldArray(m, b);
  if (!x && !y) return undefined;
  const left = x ?? a;
  const right = y ?? b;
  const isNumber = (v: Value): boolean => !itemsOf(m, v);
  const made = (v: Value): Value => (itemsOf(m, v) ? matrixObject(m, v, place) : v);
  const same = depthOf(m, left) === depthOf(m, right);
  if (op === '*' || op === 'matmul') {
    if (op === '*' && (isNumber(left) || isNumber(right))) return made(apply('*', left, right));
    return same ? made(apply('matmul', left, right)) : unread('a product of a matrix and an array of another number of axes', place);
  }
  if ((op === '+' || op === '-') && (same || isNumber(left) || isNumber(right))) return made(apply(op, left, right));
  if (op === '/' && isNumber(right)) return made(apply('/', left, right));
  if (op === '**' && x) return power(b, (v) => made(apply('matmul', v, left)), left, made, place);
  return unread(`the operator \`${op}\` of matrices`, place);
}

function power(exponent: Value, times: (v: Value) => Value, base: Value, made: (v: Value) => Value, place: Place): Value {
  const n = exponent.kind === 'scalar' && exponent.expr.op === 'number' ? (exponent.expr.data as Rational).toNumber() : NaN;
  if (n === 1) return made(base);
  return n === 2 ? times(base) : unread('a power of a matrix', place);
}
