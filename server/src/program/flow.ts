import type { Expr } from '../expression/node';
import type { Place } from '../text/span';
import type { Machine } from './machine';
import { apply, mergeEndings, type Ending } from './merging';
import type { Store } from './store';
import { NOTHING, type Value } from './values';

/** A way out of a block that is taken only under some condition is kept with its guard and its own store. */
export interface Exit {
  readonly kind: 'return' | 'break' | 'continue' | 'throw';
  readonly label?: string;
  readonly value: Value;
  readonly store: Store;
  /** The class of what is thrown, where the source names it. */
  readonly thrown?: string;
  /** Taken when this holds and no earlier exit was taken. */
  readonly guard: Expr;
}

export interface Outcome {
  readonly exits: readonly Exit[];
  /** True where control can reach the end; the machine's store is then the one that goes on. */
  readonly normal: boolean;
}

/** Ends that go on together: those of `taken`, and the current store where `normal`. Others stay outside. */
export function join(m: Machine, base: Store, taken: readonly Exit[], normal: boolean, keepsBase: boolean, place: Place): boolean {
  const endings: Ending[] = taken.map((x) => ({ guard: x.guard, changes: x.store.changesSince(base), value: NOTHING }));
  if (normal) endings.push({ guard: m.graph.true, changes: m.store.changesSince(base), value: NOTHING });
  if (endings.length === 0) return false;
  const merged = mergeEndings(m, base, endings, place);
  m.store = keepsBase ? base.child() : base;
  apply(m.store, merged.changes);
  return true;
}

/** Those of the ways out that end here, and the others, which are taken only where none of the first was before. */
export function split(m: Machine, exits: readonly Exit[], isMine: (x: Exit) => boolean): { mine: Exit[]; others: Exit[] } {
  const mine: Exit[] = [];
  const others: Exit[] = [];
  let open = m.graph.true;
  for (const x of exits) {
    if (isMine(x)) {
      mine.push(x);
      open = m.graph.and(open, m.graph.not(x.guard));
    } else others.push({ ...x, guard: m.graph.and(open, x.guard) });
  }
  return { mine, others };
}
