import type { Graph } from '../graph';
import type { Data, Expr } from '../node';

/**
 * What an operator means, one rule per question. A new operator is one entry in one family file; everything that walks
 * graphs (evaluation, differentiation, the exact test) finds it here.
 */
export interface Operator {
  /**
   * Values and running error bounds over all samples at once. `v` and `e` hold one run of `n` numbers per register; `out`
   * and `args` are offsets into them. A bound says how far rounding (here and before) can have moved the value; it is
   * Infinity where rounding may have decided a branch.
   */
  readonly evaluate: (v: Float64Array, e: Float64Array, out: number, args: Int32Array, n: number, data: Data) => void;
  /** The derivative by argument `k`; undefined where it is zero everywhere it exists. */
  readonly partial?: (graph: Graph, node: Expr, k: number) => Expr | undefined;
}

/** Twice the unit roundoff of doubles: each operation is granted one unit in the last place, as good libraries keep. */
export const ULP = 2 ** -52;
