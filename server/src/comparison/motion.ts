import type { Expr } from '../expression/node';
import { operators } from '../expression/operators';
import { Tape, type Column } from '../expression/tape';
import type { Derived } from '../mechanics/lagrange';
import { Projection } from './projection';

/**
 * Accelerations that the declared energies give, state by state. Lagrange's residuals are linear in the accelerations, so
 * their tape run at zero and at each unit acceleration gives right side and mass matrix without deriving either.
 */
export class Motion {
  private tape: Tape | undefined;
  private projector: Projection | undefined;

  constructor(private readonly derived: Derived) {}

  private get residuals(): Tape {
    return (this.tape ??= new Tape(this.derived.rows, { keepAll: true }));
  }

  private get projection(): Projection {
    return (this.projector ??= new Projection(this.derived));
  }

  get isConstrained(): boolean {
    return this.derived.system.constraints.length > 0;
  }

  /** The states moved onto the constraints, where there are any; the given columns stay as they are. */
  onConstraints(columns: ReadonlyMap<Expr, Column>, n: number): ReadonlyMap<Expr, Column> {
    return this.derived.system.constraints.length === 0 ? columns : this.projection.project(columns, n);
  }

  /** What the accelerations depend on, accelerations themselves left out. */
  get symbols(): readonly Expr[] {
    const own = new Set(this.derived.unknowns);
    const moving = this.derived.system.constraints.length > 0 ? this.projection.symbols : [];
    return [...new Set([...this.residuals.symbols.filter((s) => !own.has(s)), ...moving])];
  }

  /** The columns of all accelerations and multipliers, with error bounds; NaN where the mass matrix is singular. */
  solve(columns: ReadonlyMap<Expr, Column>, n: number): Map<Expr, Required<Column>> {
    const { unknowns } = this.derived;
    const size = unknowns.length;
    const tape = this.residuals;
    const roots = this.derived.rows;
    const zeros: Column = { values: new Float64Array(n) };
    const ones: Column = { values: new Float64Array(n).fill(1) };
    const at = new Map<Expr, Column>(columns);
    for (const u of unknowns) at.set(u, zeros);
    const registers = tape.run((s) => at.get(s), n);

    // One block of runs: the matrix by rows, the right sides, the solution.
    const v = new Float64Array((size * size + 2 * size) * n);
    const e = new Float64Array(v.length);
    const right = size * size;
    for (let i = 0; i < size; i++) {
      for (let s = 0; s < n; s++) {
        v[(right + i) * n + s] = -registers.value(roots[i]!, s);
        e[(right + i) * n + s] = registers.error(roots[i]!, s);
      }
    }
    unknowns.forEach((u, j) => {
      at.set(u, ones);
      const changed = new Set([u]);
      if (j > 0) {
        at.set(unknowns[j - 1]!, zeros);
        changed.add(unknowns[j - 1]!);
      }
      tape.rerun(registers, (s) => at.get(s), changed);
      for (let i = 0; i < size; i++) {
        for (let s = 0; s < n; s++) {
          v[(i * size + j) * n + s] = registers.value(roots[i]!, s) + v[(right + i) * n + s]!;
          e[(i * size + j) * n + s] = registers.error(roots[i]!, s) + e[(right + i) * n + s]!;
        }
      }
    });
    const args = Int32Array.from({ length: size * size + size }, (_, k) => k * n);
    const out = (size * size + size) * n;
    operators.solve.evaluate(v, e, out, args, n, size);
    const solution = new Map<Expr, Required<Column>>();
    unknowns.forEach((u, i) => {
      const start = out + i * n;
      solution.set(u, { values: v.slice(start, start + n), errors: e.slice(start, start + n) });
    });
    return solution;
  }

  /**
   * Residuals with the code's own accelerations put in. `scale` is the size of the largest term of each equation, against
   * which a residual counts as zero.
   */
  residual(columns: ReadonlyMap<Expr, Column>, n: number): { value: Float64Array; error: Float64Array; scale: Float64Array }[] {
    const registers = this.residuals.run((s) => columns.get(s), n);
    return this.derived.rows.map((root) => {
      const { values, errors } = registers.column(root);
      const scale = new Float64Array(n);
      const terms = root.op === 'sum' ? root.args.flatMap((a) => (a.op === 'sum' ? a.args : [a])) : [root];
      for (const term of terms) {
        for (let s = 0; s < n; s++) scale[s] = Math.max(scale[s]!, Math.abs(registers.value(term, s)));
      }
      return { value: values, error: errors, scale };
    });
  }
}
