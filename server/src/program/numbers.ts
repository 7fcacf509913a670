import type { Expr } from '../expression/node';
import type { Rational } from '../expression/rational';
import type { Place } from '../text/span';
import { numberOf, structure } from './generics';
import type { Machine } from './machine';
import { isUnread, unread, type Data, type Unread, type Value } from './values';

/** A value as a number, or the reason why it is none. */
export function numeric(m: Machine, value: Value, place: Place): Expr | Unread {
  switch (value.kind) {
    case 'scalar':
      return value.expr;
    case 'condition':
      return m.graph.select(value.expr, m.graph.one, m.graph.zero);
    case 'unread':
      return value;
    case 'choice': {
      const a = numeric(m, value.whenTrue, place);
      if (isUnread(a)) return a;
      const b = numeric(m, value.whenFalse, place);
      return isUnread(b) ? b : m.graph.select(value.condition, a, b);
    }
    case 'object': {
      const data = m.store.data(value.id);
      if (data.kind === 'broken') return data.unread;
      if (data.kind === 'generic') {
        const n = numberOf(m, value.id, data);
        return isUnread(n) ? n : n.expr;
      }
      // A matrix or vector of one entry is a number in most numeric libraries.
      if (data.kind === 'list' && data.items.length === 1 && data.array) return numeric(m, data.items[0]!, place);
      return unread(`a ${data.kind} stands where a number is expected`, place);
    }
    case 'nothing':
      return unread('a variable without a value stands where a number is expected', place);
    default:
      return unread(`a ${describe(value)} stands where a number is expected`, place);
  }
}

export function describe(value: Value): string {
  switch (value.kind) {
    case 'scalar':
      return 'number';
    case 'string':
      return 'string';
    case 'object':
      return 'thing';
    case 'library':
      return `name of the library (\`${value.path}\`)`;
    case 'method':
      return 'method';
    default:
      return value.kind;
  }
}

/** The contents of a value that is a list or record, after a look at what `reads` says it is. */
export function dataOf(m: Machine, value: Value): Data | undefined {
  if (value.kind !== 'object') return undefined;
  structure(m, value.id);
  return m.store.data(value.id);
}

/** The items of a known list. */
export function itemsOf(m: Machine, value: Value): readonly Value[] | undefined {
  const data = dataOf(m, value);
  return data?.kind === 'list' ? data.items : undefined;
}

/** A whole number that is known, or undefined. */
export function countOf(m: Machine, value: Value, place: Place): number | undefined {
  if (value.kind !== 'scalar' && value.kind !== 'object') return undefined;
  m.counting++;
  const n = numeric(m, value, place);
  m.counting--;
  if (isUnread(n) || n.op !== 'number') return undefined;
  const r = n.data as Rational;
  if (!r.isInteger) return undefined;
  const x = Number(r.numerator);
  return Number.isSafeInteger(x) ? x : undefined;
}

/** A value's expression where it is a number, without a reason where it is none. */
export function scalarOf(m: Machine, value: Value): Expr | undefined {
  if (value.kind === 'scalar') return value.expr;
  if (value.kind !== 'object') return undefined;
  const data = m.store.data(value.id);
  if (data.kind !== 'generic') return undefined;
  const n = numberOf(m, value.id, data);
  return isUnread(n) ? undefined : n.expr;
}
