/** A column as a sum of a few known columns, each times a constant: least squares by Gram-Schmidt, exact fits only. */
export class LinearFit<B> {
  private readonly basis: { readonly base: B; readonly q: Float64Array; readonly r: readonly number[]; readonly size: number }[] = [];

  /** @param bases what may occur; those that others before them make up are left out */
  constructor(
    bases: readonly { readonly expr: B; readonly value: Float64Array }[],
    private readonly n: number,
  ) {
    for (const { expr, value } of bases) {
      if (this.basis.length >= n - 5) break;
      const rest = value.slice();
      const r = this.project(rest);
      const size = norm(rest);
      if (!(size > 1e-6 * (norm(value) + 1e-9))) continue;
      this.basis.push({ base: expr, q: rest.map((x) => x / size), r, size });
    }
  }

  /** The terms of the sum, at most `most`; undefined where there is none that is exact. */
  sum(column: Float64Array, most = 4): { readonly base: B; readonly coefficient: number }[] | undefined {
    if (this.basis.length === 0 || !column.every(Number.isFinite)) return undefined;
    const rest = column.slice();
    const dots = this.project(rest);
    const whole = norm(column);
    if (!(norm(rest) <= 1e-7 * whole) || whole < 1e-9) return undefined;
    const coefficients = dots.slice();
    for (let i = this.basis.length - 1; i >= 0; i--) {
      coefficients[i] = coefficients[i]! / this.basis[i]!.size;
      for (let j = 0; j < i; j++) coefficients[j] = coefficients[j]! - coefficients[i]! * this.basis[i]!.r[j]!;
    }
    const terms = this.basis.map((b, i) => ({ base: b.base, coefficient: coefficients[i]! })).filter((t) => Math.abs(t.coefficient) > 1e-6);
    return terms.length > 0 && terms.length <= most ? terms : undefined;
  }

  /** Takes from a column what the basis makes up; twice, for the rounding. */
  private project(rest: Float64Array): number[] {
    const dots = this.basis.map(() => 0);
    for (let pass = 0; pass < 2; pass++) {
      this.basis.forEach(({ q }, i) => {
        let dot = 0;
        for (let s = 0; s < this.n; s++) dot += q[s]! * rest[s]!;
        dots[i] = dots[i]! + dot;
        for (let s = 0; s < this.n; s++) rest[s] = rest[s]! - dot * q[s]!;
      });
    }
    return dots;
  }
}

function norm(x: Float64Array): number {
  return Math.sqrt(x.reduce((t, y) => t + y * y, 0));
}
