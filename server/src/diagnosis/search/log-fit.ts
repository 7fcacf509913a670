/** A column as a constant times small whole powers of known columns, found by least squares of logarithms. */
export class LogFit<B> {
  private readonly rows: number[][];
  private readonly normal: number[][] | undefined;
  private readonly bases: readonly { readonly expr: B; readonly value: Float64Array }[];

  /** @param bases what may occur, with their columns; none may come near zero */
  constructor(
    bases: readonly { readonly expr: B; readonly value: Float64Array }[],
    private readonly n: number,
  ) {
    this.bases = independent(bases.filter((b) => b.value.every((x) => Math.abs(x) > 1e-9)), n);
    this.rows = Array.from({ length: n }, (_, s) => [1, ...this.bases.map((b) => Math.log(Math.abs(b.value[s]!)))]);
    const m = this.bases.length + 1;
    const normal = Array.from({ length: m }, (_, i) => Array.from({ length: m }, (_, j) => this.rows.reduce((t, r) => t + r[i]! * r[j]!, 0)));
    this.normal = invert(normal);
  }

  /** NaN marks states that don't count. */
  product(column: Float64Array): { readonly constant: number; readonly powers: readonly { readonly base: B; readonly power: number }[] } | undefined {
    if (column.some(Number.isNaN)) return this.without(column);
    if (!this.normal || !column.every((x) => Number.isFinite(x) && x !== 0)) return undefined;
    const y = Array.from(column, (x) => Math.log(Math.abs(x)));
    const right = this.rows[0]!.map((_, i) => this.rows.reduce((t, r, s) => t + r[i]! * y[s]!, 0));
    const exponents = this.normal.map((row) => Math.round(2 * row.reduce((t, x, j) => t + x * right[j]!, 0)) / 2);
    const powers = this.bases.map((b, i) => ({ base: b.expr, power: exponents[i + 1]! })).filter((p) => p.power !== 0);
    if (powers.length > 5 || powers.some((p) => Math.abs(p.power) > 4)) return undefined;
    let constant: number | undefined;
    for (let s = 0; s < this.n; s++) {
      let rest = column[s]!;
      this.bases.forEach((b, i) => {
        if (exponents[i + 1] !== 0) rest /= b.value[s]! ** exponents[i + 1]!;
      });
      constant ??= rest;
      if (!(Math.abs(rest - constant) <= 1e-6 * Math.abs(constant))) return undefined;
    }
    return constant === undefined || Math.abs(constant) < 1e-3 || Math.abs(constant) > 1e3 ? undefined : { constant, powers };
  }

  private without(column: Float64Array): ReturnType<LogFit<B>['product']> {
    const states = [...column.keys()].filter((s) => !Number.isNaN(column[s]!));
    if (states.length < 6 || states.length === this.n) return undefined;
    const pick = (x: Float64Array): Float64Array => Float64Array.from(states, (s) => x[s]!);
    return new LogFit(this.bases.map((b) => ({ expr: b.expr, value: pick(b.value) })), states.length).product(pick(column));
  }
}

/** Those whose logarithms no others before them (and no constant) make up; the first count. */
function independent<T extends { readonly value: Float64Array }>(bases: readonly T[], n: number): T[] {
  const basis: Float64Array[] = [new Float64Array(n).fill(1 / Math.sqrt(n))];
  const out: T[] = [];
  for (const b of bases) {
    if (out.length >= n - 5) break;
    const rest = b.value.map((x) => Math.log(Math.abs(x)));
    const size = norm(rest);
    for (let k = 0; k < 2; k++) {
      for (const q of basis) {
        const dot = rest.reduce((t, x, s) => t + x * q[s]!, 0);
        for (let s = 0; s < n; s++) rest[s] = rest[s]! - dot * q[s]!;
      }
    }
    const left = norm(rest);
    if (!(left > 1e-6 * (1 + size))) continue;
    basis.push(rest.map((x) => x / left));
    out.push(b);
  }
  return out;
}

function norm(x: Float64Array): number {
  return Math.sqrt(x.reduce((t, y) => t + y * y, 0));
}

function invert(matrix: readonly (readonly number[])[]): number[][] | undefined {
  const n = matrix.length;
  const a = matrix.map((row, i) => [...row, ...row.map((_, j) => (i === j ? 1 : 0))]);
  for (let k = 0; k < n; k++) {
    let p = k;
    for (let i = k + 1; i < n; i++) if (Math.abs(a[i]![k]!) > Math.abs(a[p]![k]!)) p = i;
    [a[k], a[p]] = [a[p]!, a[k]!];
    const pivot = a[k]![k]!;
    if (!(Math.abs(pivot) > 1e-9)) return undefined;
    a[k] = a[k]!.map((x) => x / pivot);
    for (let i = 0; i < n; i++) {
      if (i === k) continue;
      const f = a[i]![k]!;
      if (f !== 0) a[i] = a[i]!.map((x, j) => x - f * a[k]![j]!);
    }
  }
  return a.map((row) => row.slice(n));
}
