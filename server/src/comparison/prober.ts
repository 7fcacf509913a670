import type { Expr, SymbolData } from '../expression/node';
import { Tape, type Column, type Registers } from '../expression/tape';
import type { Motion } from './motion';
import type { Pair } from './pair';

/** A difference counts only beyond this many times the rounding bound. */
export const SAFETY = 4;

/** How both sides of a claim compare at one state. */
export interface Comparison {
  readonly found: number;
  readonly expected: number;
  /** Largest difference over the pairs of the claim, and the largest share of it that rounding can explain. */
  readonly difference: number;
  readonly bound: number;
  /** Size of the numbers compared. */
  readonly size: number;
  /** False where a value is missing, or rounding hides too much: the state does not vote. */
  readonly votes: boolean;
  /** Both values are there; only the rounding bound keeps the state from voting. */
  readonly blurred: boolean;
  readonly agrees: boolean;
}

/** Evaluates claims (each one or several pairs) at given states. */
export class Prober {
  readonly tape: Tape;
  private readonly needsMotion: boolean;

  constructor(
    private readonly motion: Motion,
    readonly claims: readonly (readonly Pair[])[],
    readonly extra: readonly Expr[] = [],
  ) {
    this.tape = new Tape([...claims.flatMap((c) => c.flatMap((p) => [p.found, p.expected])), ...extra]);
    this.needsMotion = this.tape.symbols.some(isUnknown);
  }

  /** All symbols that need a value. */
  get symbols(): readonly Expr[] {
    const own = this.tape.symbols.filter((s) => !isUnknown(s));
    return this.needsMotion || this.motion.isConstrained ? [...new Set([...own, ...this.motion.symbols])] : own;
  }

  /** Runs at these states, moved onto the constraints where there are any; `columns` of the answer are the states taken. */
  run(
    columns: ReadonlyMap<Expr, Column>,
    n: number,
    bounds: 'guaranteed' | 'sampled' = 'guaranteed',
  ): { registers: Registers; columns: ReadonlyMap<Expr, Column> } {
    const at = this.motion.onConstraints(columns, n);
    const solution = this.needsMotion ? this.motion.solve(at, n) : undefined;
    const column = (s: Expr) => at.get(s) ?? solution?.get(s);
    return { registers: bounds === 'sampled' ? this.tape.runSampled(column, n) : this.tape.run(column, n), columns: at };
  }

  compare(registers: Registers, claim: number, sample: number): Comparison {
    let found = 0;
    let expected = 0;
    let difference = 0;
    let bound = 0;
    let size = 0;
    let clear = true;
    let agrees = true;
    for (const pair of this.claims[claim]!) {
      const f = registers.value(pair.found, sample);
      const e = registers.value(pair.expected, sample);
      const b = SAFETY * (registers.error(pair.found, sample) + registers.error(pair.expected, sample));
      const d = Math.abs(f - e);
      found += f;
      expected += e;
      if (!Number.isFinite(f) || !Number.isFinite(e) || !Number.isFinite(b)) clear = false;
      if (d > difference) difference = d;
      if (b > bound) bound = b;
      size = Math.max(size, Math.abs(f), Math.abs(e));
      if (!(d <= b)) agrees = false;
    }
    // A bound as large as a millionth of the values says nothing; absolute, for values that happen to be near zero.
    const votes = clear && bound <= 1e-6 * Math.max(size, 1e-3);
    const blurred = !votes && Number.isFinite(found) && Number.isFinite(expected);
    return { found, expected, difference, bound, size, votes, blurred, agrees };
  }
}

/** Accelerations and multipliers are solved for, not drawn. */
function isUnknown(symbol: Expr): boolean {
  const { role, order } = symbol.data as SymbolData;
  return role === 'multiplier' || (role === 'coordinate' && order === 2);
}
