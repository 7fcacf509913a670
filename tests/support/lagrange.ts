import type { Declared } from './declaration';
import { num, vec, type Evaluate, type Scope, type Value } from './formula';

/**
 * Lagrange's equations by finite differences, with nothing but values of the energies: the tests' judge of what the
 * accelerations are. Every derivative is a central difference of order 6 (order 4 along velocities, in which energies are
 * polynomials of low degree), so that nesting two of them still leaves nine good digits (coefficients: B. Fornberg,
 * "Generation of finite difference formulas on arbitrarily spaced grids", Mathematics of Computation 51 (1988), table 1).
 */
const ORDER_4 = [2 / 3, -1 / 12];
const ORDER_6 = [3 / 4, -3 / 20, 1 / 60];

function derivative(f: (h: number) => Value, step: number, stencil: readonly number[] = ORDER_6): Value {
  let total: Value = 0;
  stencil.forEach((weight, i) => {
    const up = f((i + 1) * step);
    const down = f(-(i + 1) * step);
    if (typeof up === 'number') total = (total as number) + (weight * (up - num(down))) / step;
    else {
      const before: readonly number[] = typeof total === 'number' ? up.map(() => 0) : total;
      total = up.map((u, k) => before[k]! + (weight * (u - vec(down)[k]!)) / step);
    }
  });
  return total;
}

const IN_TIME = 0.015;
const IN_PLACE = 0.015;
const IN_VELOCITY = 0.25;

/** Values of everything at one instant: by name, the value and its time derivatives. */
export type Instant = ReadonlyMap<string, readonly number[]>;

/** The instant a little later, along the path that keeps the highest given derivative constant. */
function later(at: Instant, dt: number): Instant {
  const moved = new Map<string, readonly number[]>();
  for (const [name, series] of at) {
    moved.set(name, series.map((_, k) => series.slice(k).reduceRight((sum, d, j) => d + (sum * dt) / (j + 1), 0)));
  }
  return moved;
}

function changed(at: Instant, name: string, order: number, by: number): Instant {
  const series = [...(at.get(name) ?? [])];
  series[order] = series[order]! + by;
  return new Map(at).set(name, series);
}

export class Mechanics {
  /** @param finer divides every step: where two values of it disagree, a kink is near */
  constructor(
    private readonly system: Declared,
    private readonly finer = 1,
  ) {}

  scope(at: Instant): Scope {
    const { where } = this.system;
    const scope: Scope = {
      lookup: (name, order) => {
        const series = at.get(name);
        if (series) {
          const value = series[order];
          if (value === undefined) throw new Error(`${name}${"'".repeat(order)} has no value`);
          return value;
        }
        if (name === 'pi') return Math.PI;
        const formula = where.get(name);
        if (formula) return order === 0 ? formula(scope) : this.rate(at, (s) => s.lookup(name, order - 1));
        if (order === 0 && 'TVLDE'.includes(name)) return this.energy(name, at);
        throw new Error(`${this.system.name}: ${name} is not declared`);
      },
      rate: (of) => this.rate(at, of),
      indexed: (_, name) => this.momentum(name, at),
    };
    return scope;
  }

  private rate(at: Instant, of: Evaluate): Value {
    return derivative((h) => of(this.scope(later(at, h))), IN_TIME / this.finer);
  }

  energy(which: string, at: Instant): number {
    const typed = (name: string): number => {
      const s = this.scope(at);
      return this.system.energies.filter((e) => e.which === name).reduce((sum, e) => sum + num(e.value(s)), 0);
    };
    if (which === 'T') return typed('T') + this.kineticOfPoints(at);
    if (which === 'V') return typed('V') + this.potentialOfGeometry(at);
    if (which === 'D') return typed('D') + this.dissipationOfDampers(at);
    if (which === 'E') return this.energy('T', at) + this.energy('V', at);
    return typed('L') + this.energy('T', at) - this.energy('V', at);
  }

  private kineticOfPoints(at: Instant): number {
    const s = this.scope(at);
    return this.system.points.reduce((sum, p) => {
      const v = vec(this.rate(at, p.at));
      return sum + (num(p.mass(s)) / 2) * v.reduce((a, c) => a + c * c, 0);
    }, 0);
  }

  private potentialOfGeometry(at: Instant): number {
    const s = this.scope(at);
    let sum = 0;
    if (this.system.gravity) {
      const g = vec(this.system.gravity(s));
      for (const p of this.system.points) {
        const place = vec(p.at(s));
        sum -= num(p.mass(s)) * g.reduce((a, c, i) => a + c * place[i]!, 0);
      }
    }
    for (const spring of this.system.springs) {
      sum += (num(spring.k(s)) / 2) * (distance(spring.from(s), spring.to(s)) - num(spring.rest(s))) ** 2;
    }
    return sum;
  }

  private dissipationOfDampers(at: Instant): number {
    return this.system.dampers.reduce((sum, d) => {
      const speed = num(this.rate(at, (s) => distance(d.from(s), d.to(s))));
      return sum + (num(d.c(this.scope(at))) / 2) * speed ** 2;
    }, 0);
  }

  momentum(name: string, at: Instant): number {
    return num(derivative((h) => this.energy('L', changed(at, name, 1, h)), IN_VELOCITY / this.finer, ORDER_4));
  }

  /** d/dt(dL/dq') - dL/dq + dD/dq' - Q, for one coordinate. */
  residual(name: string, at: Instant): number {
    const inertia = num(derivative((h) => this.momentum(name, later(at, h)), IN_TIME / this.finer));
    const slope = num(derivative((h) => this.energy('L', changed(at, name, 0, h)), IN_PLACE / this.finer));
    const drag = num(derivative((h) => this.energy('D', changed(at, name, 1, h)), IN_VELOCITY / this.finer, ORDER_4));
    return inertia - slope + drag - this.applied(name, at);
  }

  private applied(name: string, at: Instant): number {
    const s = this.scope(at);
    let sum = 0;
    for (const q of this.system.along) if (q.coordinate === name) sum += num(q.value(s));
    const along = (of: Evaluate): Value => derivative((h) => of(this.scope(changed(at, name, 0, h))), IN_PLACE / this.finer);
    for (const f of this.system.forces) {
      const lever = vec(along(f.at));
      sum += vec(f.value(s)).reduce((a, c, i) => a + c * lever[i]!, 0);
    }
    for (const t of this.system.torques) sum += num(t.value(s)) * num(along(t.on));
    return sum;
  }

  /** The instant with the accelerations that make every residual zero. */
  solve(at: Instant): Instant {
    const names = this.system.coordinates.map((c) => c.name);
    const set = (values: readonly number[]): Instant => {
      const out = new Map(at);
      names.forEach((n, i) => out.set(n, [...at.get(n)!.slice(0, 2), values[i]!]));
      return out;
    };
    const rest = set(names.map(() => 0));
    const rows = names.map((n) => [
      ...names.map((m) => num(derivative((h) => this.momentum(n, changed(rest, m, 1, h)), IN_VELOCITY / this.finer, ORDER_4))),
      -this.residual(n, rest),
    ]);
    return set(eliminate(rows));
  }
}

function distance(a: Value, b: Value): number {
  if (typeof a === 'number') return a - num(b);
  return Math.sqrt(a.reduce((s, x, i) => s + (x - vec(b)[i]!) ** 2, 0));
}

/** Gaussian elimination with row pivoting on n rows of n + 1 numbers. */
function eliminate(rows: number[][]): number[] {
  const n = rows.length;
  for (let c = 0; c < n; c++) {
    let best = c;
    for (let r = c + 1; r < n; r++) if (Math.abs(rows[r]![c]!) > Math.abs(rows[best]![c]!)) best = r;
    [rows[c], rows[best]] = [rows[best]!, rows[c]!];
    for (let r = 0; r < n; r++) {
      if (r === c) continue;
      const factor = rows[r]![c]! / rows[c]![c]!;
      for (let k = c; k <= n; k++) rows[r]![k]! -= factor * rows[c]![k]!;
    }
  }
  return rows.map((row, i) => row[n]! / row[i]!);
}
