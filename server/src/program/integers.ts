import type { Rational } from '../expression/rational';
import type { Place } from '../text/span';
import type { Machine } from './machine';
import { truncated } from './truncate';
import type { ListData, Value } from './values';

/** Languages in which integers are numbers of a kind of their own: which values are integers, and what that costs. */

export function isInteger(v: Value): boolean {
  return v.kind === 'scalar' && v.integer === true;
}

/** The same number, an integer or not. */
export function asInteger(v: Value, integer: boolean): Value {
  if (v.kind !== 'scalar' || (v.integer === true) === integer) return v;
  const { integer: _, ...rest } = v;
  return integer ? { ...rest, integer } : rest;
}

/**
 * An array of these items. It is one of integers where all of them are, through all its rows; else none of them is one any
 * more.
 */
export function typedArray(m: Machine, items: readonly Value[]): ListData {
  const integer = items.length > 0 && items.every((v) => isInteger(v) || rowIsInteger(m, v));
  return { kind: 'list', items: integer ? [...items] : items.map((v) => real(m, v)), array: true, ...(integer ? { integer } : {}) };
}

function rowIsInteger(m: Machine, v: Value): boolean {
  const data = v.kind === 'object' ? m.store.data(v.id) : undefined;
  return data?.kind === 'list' && data.integer === true;
}

function real(m: Machine, v: Value): Value {
  if (isInteger(v)) return asInteger(v, false);
  if (v.kind !== 'object' || !rowIsInteger(m, v)) return v;
  const data = m.store.data(v.id);
  if (data.kind !== 'list') return v;
  const { integer: _, view: _view, ...rest } = data;
  return m.object({ ...rest, items: data.items.map((x) => real(m, x)) });
}

/** What an array of integers keeps of a value that is written to it. */
export function stored(m: Machine, value: Value, place: Place): Value {
  if (value.kind !== 'scalar' || value.integer) return value;
  const expr = truncated(m.graph, value.expr);
  if (expr !== value.expr) m.dropped({ kind: 'element', place, exact: value.expr });
  return { kind: 'scalar', expr, place, integer: true };
}

/** True for a number that is known and whole. */
export function isWhole(v: Value): boolean {
  return v.kind === 'scalar' && v.expr.op === 'number' && (v.expr.data as Rational).isInteger;
}
