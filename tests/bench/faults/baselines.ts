import { readDeclaration } from '../../support/declaration';
import type { Fixture, Section } from '../../support/fixtures';
import { Mechanics, type Instant } from '../../support/lagrange';
import { compileRun, type Run } from '../../support/run-code';

/**
 * What a careful team does without the product: an energy-drift test and a golden trajectory, both with a Runge-Kutta
 * integrator of order 4 at default parameters (every parameter 1, damping and inputs 0, as examples ship).
 */
export class Baselines {
  private readonly energyOf: ((q: readonly number[], v: readonly number[]) => number) | undefined;
  private readonly golden: number[][] | undefined;
  private readonly columns: readonly number[];
  private readonly coordinates: readonly string[];
  private readonly defaults: ReadonlyMap<string, readonly number[]>;
  private readonly symbols: readonly string[];
  private readonly declared: ReturnType<typeof readDeclaration>;

  constructor(
    private readonly fixture: Fixture,
    private readonly section: Section,
    private readonly others: ReadonlyMap<string, string>,
  ) {
    const declared = readDeclaration(section.name, fixture.text.slice(fixture.text.indexOf('@visviva', section.start), section.end));
    this.declared = declared;
    this.coordinates = declared.coordinates.map((c) => c.name);
    this.columns = this.coordinates.map((name) => declared.claims.findIndex((c) => c.op === '=' && c.right.trim() === `${name}''`));
    const defaults = new Map<string, readonly number[]>();
    for (const p of declared.parameters) defaults.set(p.name, [p.low === 0 ? 0 : inside(1, p), 0, 0, 0]);
    for (const u of declared.inputs) defaults.set(u.name, [0, 0, 0, 0]);
    defaults.set(declared.time, [0, 1, 0, 0]);
    this.defaults = defaults;
    this.symbols = [...this.coordinates.flatMap((c) => [c, `${c}'`, `${c}''`]), ...[...defaults].flatMap(([name, series]) => series.map((_, k) => name + "'".repeat(k)))];
    if (this.coordinates.length === 0 || this.columns.includes(-1)) return;
    this.golden = this.trajectory(fixture.text);
    const mechanics = new Mechanics(declared);
    const energy = (q: readonly number[], v: readonly number[]): number => {
      const at = new Map<string, readonly number[]>(defaults);
      this.coordinates.forEach((c, i) => at.set(c, [q[i]!, v[i]!, 0]));
      return mechanics.energy('E', at as Instant);
    };
    if (this.golden && this.drift(energy, this.golden) < 1e-6) this.energyOf = energy;
  }

  /** Whether the tests apply at all. */
  get applies(): { readonly energy: boolean; readonly golden: boolean } {
    return { energy: this.energyOf !== undefined, golden: this.golden !== undefined };
  }

  detects(text: string): { readonly energy: boolean; readonly golden: boolean } {
    if (!this.golden) return { energy: false, golden: false };
    const path = this.trajectory(text);
    if (!path) return { energy: true, golden: true };
    const golden = path.some((y, k) => y.some((x, i) => !(Math.abs(x - this.golden![k]![i]!) <= 1e-6 * (1 + Math.abs(x)))));
    return { golden, energy: this.energyOf !== undefined && !(this.drift(this.energyOf, path) < 1e-4) };
  }

  private drift(energy: (q: readonly number[], v: readonly number[]) => number, path: readonly (readonly number[])[]): number {
    const n = this.coordinates.length;
    const values = path.filter((_, k) => k % 20 === 0).map((y) => energy(y.slice(0, n), y.slice(n)));
    return Math.max(...values.map((e) => Math.abs(e - values[0]!))) / Math.max(1, Math.abs(values[0]!));
  }

  private trajectory(text: string): number[][] | undefined {
    try {
      const constants = new Set([...this.declared.parameters.map((p) => p.name), ...this.declared.named.keys()]);
      const run = compileRun(this.fixture.file, text, this.section.run, this.declared.claims, this.symbols, constants, this.others);
      const n = this.coordinates.length;
      let y = [...this.declared.coordinates.map((c, i) => inside(0.5 + 0.3 * i, c)), ...this.coordinates.map(() => 0)];
      const path = [y];
      const h = 0.01;
      for (let k = 0; k < 200; k++) {
        const slope = (s: number[], t: number): number[] => [...s.slice(n), ...this.accelerations(run, s, t)];
        const plus = (a: number[], b: number[], f: number): number[] => a.map((x, i) => x + f * b[i]!);
        const t = k * h;
        const k1 = slope(y, t);
        const k2 = slope(plus(y, k1, h / 2), t + h / 2);
        const k3 = slope(plus(y, k2, h / 2), t + h / 2);
        const k4 = slope(plus(y, k3, h), t + h);
        y = y.map((x, i) => x + (h / 6) * (k1[i]! + 2 * k2[i]! + 2 * k3[i]! + k4[i]!));
        path.push(y);
      }
      return path.every((p) => p.every(Number.isFinite)) ? path : undefined;
    } catch {
      return undefined;
    }
  }

  private accelerations(run: Run, y: readonly number[], t: number): number[] {
    const n = this.coordinates.length;
    const given = new Map<string, number>();
    for (const [name, series] of this.defaults) series.forEach((x, k) => given.set(name + "'".repeat(k), x));
    given.set(this.declared.time, t);
    this.coordinates.forEach((c, i) => {
      given.set(c, y[i]!);
      given.set(`${c}'`, y[n + i]!);
      given.set(`${c}''`, 0);
    });
    const values = run(given);
    return this.columns.map((k) => values[k]!);
  }
}

function inside(x: number, range: { readonly low: number; readonly high: number }): number {
  return x > range.low && x < range.high ? x : (range.low + range.high) / 2;
}
