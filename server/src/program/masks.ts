import type { Place } from '../text/span';
import type { Expression } from './form';
import type { Machine } from './machine';
import { readElement, writeElement } from './members';
import { mergeValues } from './merging';
import { itemsOf } from './numbers';
import { binary } from './operators';
import { shapeOf } from './paths';
import type { Scope } from './scope';
import { unread, type Value } from './values';

/**
 * Assignments to the entries for which a condition holds: `d[d > 0] = d[d > 0]**-1.5`. Entry by entry, the value is the
 * one on the right where the condition holds and the one before elsewhere.
 */

type Assign = Expression & { kind: 'assign' };
type Index = Expression & { kind: 'index' };

/** Undefined where the index is no list of conditions. */
export function assignMasked(m: Machine, scope: Scope, e: Assign, target: Index, place: Place): Value | undefined {
  const [index, ...more] = target.indices;
  if (!index || more.length > 0 || !(isComparison(index) || index.kind === 'name')) return undefined;
  const mask = m.evaluate(scope, index);
  if (!isMask(m, mask)) return undefined;
  const object = m.evaluate(scope, target.object);
  if (object.kind === 'unread') return object;
  const key = shapeOf(index);
  const why = unread('an assignment to the entries for which a condition holds, of a value that mixes entries', place);
  let value: Value = why;
  if (isEntrywise(m, scope, e.value, key)) {
    m.masks.push(key);
    value = m.evaluate(scope, e.value);
    m.masks.pop();
    if (e.op) value = binary(m, scope.frame.module, e.op, object, value, place);
  }
  if (value.kind === 'unread') {
    if (object.kind === 'object') m.breakObject(object.id, value);
    return value;
  }
  put(m, scope, object, mask, value, place);
  return value;
}

/** While the right side of such an assignment is read, `d[d > 0]` stands for all entries of `d`. */
export function maskedValue(m: Machine, scope: Scope, e: Index): Value | undefined {
  const [index] = e.indices;
  if (m.masks.length === 0 || e.indices.length !== 1 || !m.masks.includes(shapeOf(index!))) return undefined;
  return m.evaluate(scope, e.object);
}

function isComparison(e: Expression): boolean {
  if (e.kind === 'binary') return ['<', '<=', '>', '>=', '==', '!='].includes(e.op);
  if (e.kind === 'logical') return isComparison(e.left) && isComparison(e.right);
  return e.kind === 'unary' && e.op === 'not' && isComparison(e.operand);
}

function isMask(m: Machine, v: Value): boolean {
  const items = itemsOf(m, v);
  return items !== undefined && items.length > 0 && items.every((x) => x.kind === 'condition' || isMask(m, x));
}

/** True for a value each entry of which depends on the same entry of the lists in it alone. */
function isEntrywise(m: Machine, scope: Scope, e: Expression, key: string): boolean {
  switch (e.kind) {
    case 'number':
      return true;
    case 'unary':
      return (e.op === '-' || e.op === '+') && isEntrywise(m, scope, e.operand, key);
    case 'binary':
      return ['+', '-', '*', '/', '**'].includes(e.op) && isEntrywise(m, scope, e.left, key) && isEntrywise(m, scope, e.right, key);
    case 'index':
      if (e.indices.length === 1 && shapeOf(e.indices[0]!) === key) return true;
      return itemsOf(m, m.evaluate(scope, e)) === undefined;
    case 'name':
    case 'member':
      return itemsOf(m, m.evaluate(scope, e)) === undefined;
    case 'call': {
      const f = m.evaluate(scope, e.callee);
      return f.kind === 'library' && f.module.library.scalars.has(f.path) && e.args.every((a) => !a.spread && a.name === undefined && isEntrywise(m, scope, a.value, key));
    }
    default:
      return false;
  }
}

function put(m: Machine, scope: Scope, object: Value, mask: Value, value: Value, place: Place): void {
  const { module } = scope.frame;
  const conditions = itemsOf(m, mask) ?? [];
  const items = itemsOf(m, object);
  const values = itemsOf(m, value);
  if (!items || items.length !== conditions.length || (values && values.length !== items.length)) {
    if (object.kind === 'object') m.breakObject(object.id, unread('a condition on the entries of a list of another shape', place));
    return;
  }
  conditions.forEach((c, k) => {
    const key = m.scalar(m.graph.number(k + module.program.indexBase));
    const given = values ? values[k]! : value;
    if (itemsOf(m, c)) put(m, scope, items[k]!, c, given, place);
    else if (c.kind === 'condition') {
      if (c.expr !== m.graph.true && c.expr !== m.graph.false) m.condition(c.expr, place);
      writeElement(m, module, object, key, mergeValues(m, c.expr, given, readElement(m, module, object, key, place), place), place);
    }
  });
}
