import type { Expr, SymbolData } from '../expression/node';
import { symbolsOf } from '../expression/reach';
import type { Belief, Machine } from './machine';
import { itemsOf, scalarOf } from './numbers';
import type { AssignedValue, Meaning } from './reading';
import type { Assigned, Value } from './values';

/**
 * What the code itself gives to places whose meaning was taken as `reads` or their name says, worked out once the reading
 * is over. Only values that are built of declared symbols alone can be held against a meaning: a literal, a default or a
 * setting from outside says nothing of what it stands for.
 */
export function assignedValues(m: Machine): AssignedValue[] {
  const found: AssignedValue[] = [];
  if (m.believed.size === 0 || m.stopped) return found;
  m.quiet++;
  const store = m.store;
  // New beliefs may come up on the way.
  for (const [path, belief] of m.believed) {
    m.store = store.root.child();
    const assigned = belief.assigned();
    if (assigned) compare(m, path, belief.meaning, belief.how, assigned.value, assigned, found);
  }
  m.store = store;
  m.quiet--;
  return found;
}

function compare(m: Machine, path: string, meaning: Meaning, how: Belief['how'], value: Value, assigned: Assigned, found: AssignedValue[]): void {
  if (meaning.kind === 'list') {
    const items = itemsOf(m, value);
    const base = m.request.program.indexBase;
    meaning.items.forEach((item, k) => items?.[k] && compare(m, `${path}[${k + base}]`, item, how, items[k], assigned, found));
    return;
  }
  const given = scalarOf(m, value);
  if (!given || given === meaning.expr || !isOfDeclared(m, given)) return;
  const { place, hasSymbol } = assigned;
  const code = m.inWords(path);
  const isTaken = meaning.expr.op === 'symbol' && (symbolsOf(given).includes(meaning.expr) || hasSymbol(meaning.expr));
  // A declared symbol that is nothing else there may have any value, this one too.
  if (meaning.expr.op === 'symbol' && (!isTaken || (how === 'reads' && isState(meaning.expr)))) return;
  found.push({ path, code, how, meaning: meaning.expr, value: given, place, isTaken });
}

/** A coordinate or velocity: what it begins with is not what it is. */
function isState(symbol: Expr): boolean {
  return (symbol.data as SymbolData).role === 'coordinate';
}

function isOfDeclared(m: Machine, e: Expr): boolean {
  const symbols = symbolsOf(e);
  return symbols.length > 0 && symbols.every((s) => m.request.meanings.isDeclared(s));
}
