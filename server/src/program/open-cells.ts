import type { Expr } from '../expression/node';
import type { Place } from '../text/span';
import type { Machine } from './machine';
import { dataOf } from './numbers';
import type { Module } from './scope';
import { unread, type Cell, type Value } from './values';

/**
 * Elements at indices that are not known: what was written at an index is read back at the same index, as long as nothing
 * was written since at one that might be the same.
 */

/** What the code itself wrote there, or a reason why that is not known; undefined where it wrote to other places only. */
export function cellAt(m: Machine, module: Module, object: Value, keys: readonly Expr[], place: Place): Value | undefined {
  const data = dataOf(m, object);
  if (data?.kind !== 'broken') return undefined;
  if (!data.cells) return data.unread;
  for (const cell of data.cells) {
    const n = Math.min(cell.keys.length, keys.length);
    if (isApart(m, cell.keys.slice(0, n), keys.slice(0, n))) continue;
    const isWithin = cell.keys.length <= keys.length && cell.keys.every((k, i) => k === keys[i]);
    if (!isWithin) return unread('an element that may have been written to by another index', place);
    return keys.slice(n).reduce<Value>((v, k) => m.readElement(module, v, m.scalar(k), place), cell.value);
  }
  return undefined;
}

/** True where no two indices can be the same: `i` and `i + 1`. */
function isApart(m: Machine, a: readonly Expr[], b: readonly Expr[]): boolean {
  return a.some((x, i) => {
    const difference = m.graph.sum([...termsOf(x), ...termsOf(b[i]!).map((t) => m.graph.negate(t))]);
    return difference.op === 'number' && difference !== m.graph.zero;
  });
}

function termsOf(e: Expr): readonly Expr[] {
  return e.op === 'sum' ? e.args.flatMap(termsOf) : [e];
}

/** Writes at an index that is not known: of everything else in the list only what is certainly elsewhere stays known. */
export function writeOpen(m: Machine, object: Value, keys: readonly Expr[], value: Value, place: Place): void {
  if (object.kind !== 'object') return;
  const data = dataOf(m, object);
  if (!data) return;
  const why = unread('a list written to at an index that is not known', place);
  const before = data.kind === 'broken' ? data.cells : [];
  m.breakObject(object.id, data.kind === 'broken' ? data.unread : why);
  if (!before || (data.kind === 'list' && data.view)) return;
  const cells: Cell[] = [{ keys, value }, ...before];
  m.store.set(object.id, { kind: 'broken', unread: data.kind === 'broken' ? data.unread : why, cells });
}

/** A method called on a list of which only single places are known: of one that grows the last entry is known. */
export function changesOpen(m: Machine, self: Value, name: string, args: readonly Value[]): boolean {
  const data = dataOf(m, self);
  if (data?.kind !== 'broken' || !data.cells || self.kind !== 'object') return false;
  const [value] = args;
  const cells = name === 'list-push' && value && args.length === 1 ? [{ keys: [m.graph.number(-1)], value }] : undefined;
  m.store.set(self.id, { kind: 'broken', unread: data.unread, ...(cells ? { cells } : {}) });
  return true;
}
