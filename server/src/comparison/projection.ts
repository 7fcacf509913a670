import { gradient } from '../expression/differentiate';
import type { Domain, Expr } from '../expression/node';
import { ULP } from '../expression/operators';
import { Tape, type Column } from '../expression/tape';
import type { Derived } from '../mechanics/lagrange';

const MOST_STEPS = 60;

/**
 * Moves states onto the constraint manifold: coordinates by Newton steps of least norm, then velocities, in which the
 * conditions are linear, by one such step (E. Hairer, C. Lubich, G. Wanner, Geometric Numerical Integration, section IV.4).
 * What is left off the manifold enters as error of the coordinates, so that rounding there is not taken for a difference.
 */
export class Projection {
  /** Everything the constraints depend on. */
  readonly symbols: readonly Expr[];
  private readonly positions: Level | undefined;
  private readonly velocities: Level;
  private readonly count: number;

  constructor(derived: Derived) {
    const { coordinates, constraints, graph, domains } = derived.system;
    const holonomic = constraints.filter((c) => c.kind === 'holonomic');
    this.count = coordinates.length;
    const q = coordinates.map((c) => c.symbol);
    const v = coordinates.map((c) => c.velocity);
    const conditions = derived.velocityConstraints;
    this.positions =
      holonomic.length > 0
        ? new Level(holonomic.map((c) => c.expr), holonomic.map((c) => c.gradient), q, domains)
        : undefined;
    const slopes = conditions.map((c) => gradient(graph, [c], [graph.one], v));
    this.velocities = new Level(conditions, slopes, v, domains);
    this.symbols = [...new Set([...(this.positions?.tape.symbols ?? []), ...this.velocities.tape.symbols, ...q, ...v])];
  }

  project(columns: ReadonlyMap<Expr, Column>, n: number): Map<Expr, Column> {
    const out = new Map<Expr, Column>(columns);
    if (this.positions) this.positions.solve(out, n, MOST_STEPS);
    // Linear: a second step only takes away the rounding of the first; more are for variables that are held.
    this.velocities.solve(out, n, 3 + 2 * this.count);
    return out;
  }
}

/** Conditions c = 0 on some variables, with their gradients. */
class Level {
  readonly tape: Tape;

  constructor(
    private readonly conditions: readonly Expr[],
    private readonly slopes: readonly (readonly Expr[])[],
    private readonly variables: readonly Expr[],
    private readonly domains: ReadonlyMap<Expr, Domain>,
  ) {
    this.tape = new Tape([...conditions, ...slopes.flat()]);
  }

  /**
   * Replaces the variables' columns; a state that does not get there becomes NaN and will not vote. A variable that would
   * leave its declared range keeps the value it was drawn with, and the others move.
   */
  solve(columns: Map<Expr, Column>, n: number, most: number): void {
    const k = this.conditions.length;
    const m = this.variables.length;
    const values = this.variables.map((x) => Float64Array.from(columns.get(x)!.values.subarray(0, n)));
    const errors = this.variables.map(() => new Float64Array(n));
    this.variables.forEach((x, j) => columns.set(x, { values: values[j]!, errors: errors[j]! }));
    const drawn = values.map((v) => Float64Array.from(v));
    const held = this.variables.map(() => new Uint8Array(n));
    const done = new Uint8Array(n);
    for (let step = 0; step < most && done.includes(0); step++) {
      const registers = this.tape.run((s) => columns.get(s), n);
      for (let s = 0; s < n; s++) {
        if (done[s]) continue;
        const A = this.slopes.map((row) => row.map((e, j) => (held[j]![s] ? 0 : registers.value(e, s))));
        const c = this.conditions.map((e) => registers.value(e, s));
        const normal: number[][] = A.map((row) => A.map((other) => row.reduce((t, x, j) => t + x * other[j]!, 0)));
        const w = solveSmall(normal, c);
        if (!w) {
          done[s] = 2;
          continue;
        }
        let moved = 0;
        let size = 0;
        for (let j = 0; j < m; j++) {
          let d = 0;
          for (let i = 0; i < k; i++) d -= A[i]![j]! * w[i]!;
          values[j]![s] = values[j]![s]! + d;
          moved = Math.max(moved, Math.abs(d));
          size = Math.max(size, Math.abs(values[j]![s]!));
          errors[j]![s] = Math.abs(d) + 2 * ULP * Math.abs(values[j]![s]!);
        }
        if (!Number.isFinite(moved) || size > 1e6) done[s] = 2;
        else if (moved <= 16 * ULP * Math.max(size, 1e-3)) {
          const out = this.variables.findIndex((x, j) => !held[j]![s] && leaves(values[j]![s]!, this.domains.get(x)));
          if (out < 0) done[s] = 1;
          else {
            held[out]![s] = 1;
            values[out]![s] = drawn[out]![s]!;
            errors[out]![s] = Infinity;
          }
        }
      }
    }
    for (let s = 0; s < n; s++) {
      if (done[s] === 1) continue;
      // Bounds carry what the last step still moved; a step that is not small means there is no such state nearby.
      const open =
        done[s] === 2 ||
        this.variables.some((x, j) => {
          const value = values[j]![s]!;
          return errors[j]![s]! > 1e-12 * (1 + Math.abs(value)) || (!held[j]![s] && leaves(value, this.domains.get(x)));
        });
      if (open) for (const v of values) v[s] = NaN;
    }
  }
}

function leaves(x: number, domain: Domain | undefined): boolean {
  return domain !== undefined && ((domain.low !== undefined && x < domain.low) || (domain.high !== undefined && x > domain.high));
}

/** Elimination with partial pivoting; undefined when singular. */
function solveSmall(matrix: number[][], right: readonly number[]): number[] | undefined {
  const n = right.length;
  const a = matrix.map((row, i) => [...row, right[i]!]);
  const largest = Math.max(...matrix.flat().map(Math.abs));
  for (let k = 0; k < n; k++) {
    let p = k;
    for (let i = k + 1; i < n; i++) if (Math.abs(a[i]![k]!) > Math.abs(a[p]![k]!)) p = i;
    if (!(Math.abs(a[p]![k]!) > 1e-13 * largest)) return undefined;
    [a[k], a[p]] = [a[p]!, a[k]!];
    for (let i = 0; i < n; i++) {
      if (i === k) continue;
      const f = a[i]![k]! / a[k]![k]!;
      for (let j = k; j <= n; j++) a[i]![j] = a[i]![j]! - f * a[k]![j]!;
    }
  }
  return a.map((row, i) => row[n]! / row[i]!);
}
