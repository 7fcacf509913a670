import { derivative } from '../expression/differentiate';
import type { Expr, SymbolData } from '../expression/node';
import { symbolsOf } from '../expression/reach';
import { Rational } from '../expression/rational';
import { substitute } from '../expression/substitute';
import { Tape } from '../expression/tape';
import { tidy } from '../mechanics/equations';
import type { Derived } from '../mechanics/lagrange';
import { Sampler } from './sampling';

export interface Equilibrium {
  /** Values of the coordinates, in order. */
  readonly point: readonly Expr[];
  /** Of small motions about it: by the stiffness at all parameters tried; undecided where that depends on them. */
  readonly stability: 'stable' | 'unstable' | 'depends on the parameters' | 'undecided';
  /** Squared angular frequency of small oscillations, for one coordinate. */
  readonly squaredFrequency: Expr | undefined;
  /** Mass and stiffness matrix there, by rows. */
  readonly mass: readonly Expr[];
  readonly stiffness: readonly Expr[];
}

const STATES = 24;
const MOST_POINTS = 64;

/**
 * States of rest at the plain values of the coordinates (0, and for angles quarter turns) that are equilibria whatever the
 * parameters. Others, which depend on the parameters, are not looked for.
 */
export function findEquilibria(derived: Derived): Equilibrium[] {
  const { system } = derived;
  const g = system.graph;
  if (system.blocked || system.constraints.length > 0 || system.coordinates.length > 4) return [];
  if (symbolsOf(system.L).some((s) => (s.data as SymbolData).role === 'time')) return [];
  const n = system.coordinates.length;
  const quarter = (k: number) => g.multiply(g.number(Rational.of(k, 2)), g.pi);
  const choices = system.coordinates.map((c) =>
    c.unit === 'rad' ? [g.zero, quarter(1), g.pi, quarter(-1)] : [g.zero],
  );
  let points: Expr[][] = [[]];
  for (const values of choices) points = points.flatMap((p) => values.map((v) => [...p, v]));
  const out: Equilibrium[] = [];
  for (const point of points.slice(0, MOST_POINTS)) {
    const at = new Map<Expr, Expr>();
    system.coordinates.forEach((c, i) => at.set(c.symbol, point[i]!));
    const rest = (e: Expr): Expr => {
      const moving = symbolsOf(e).filter((s) => {
        const data = s.data as SymbolData;
        return data.role === 'input' || (data.role === 'coordinate' && data.order > 0);
      });
      return substitute(g, [e], new Map([...at, ...moving.map((s): [Expr, Expr] => [s, g.zero])]))[0]!;
    };
    const forces = derived.rightSides.map(rest);
    if (!vanish(derived, forces)) continue;
    const mass = derived.massMatrix.map(rest).map((e) => tidy(g, e));
    const stiffness = derived.rightSides.flatMap((f) => system.coordinates.map((c) => tidy(g, rest(g.negate(derivative(g, f, c.symbol))))));
    out.push({
      point,
      stability: judged(derived, stabilityOf(derived, mass, stiffness), rest),
      squaredFrequency: n === 1 ? tidy(g, g.divide(stiffness[0]!, mass[0]!)) : undefined,
      mass,
      stiffness,
    });
  }
  return out;
}

/**
 * Stiffness alone does not tell where forces depend on the motion in other ways than damping: gyroscopic forces can hold
 * what would fall (W. Thomson, P. G. Tait, Treatise on Natural Philosophy, section 345), and applied ones do as they like.
 */
function judged(derived: Derived, stability: Equilibrium['stability'], rest: (e: Expr) => Expr): Equilibrium['stability'] {
  const { graph: g, coordinates, Q } = derived.system;
  if (symbolsOf(...Q).some((s) => (s.data as SymbolData).role === 'coordinate')) return 'undecided';
  if (stability === 'stable' || coordinates.length < 2) return stability;
  const rates = derived.rightSides.map((f) => coordinates.map((c) => derivative(g, f, c.velocity)));
  const gyroscopic = coordinates.some((_, i) =>
    coordinates.some((_, j) => j > i && tidy(g, rest(g.subtract(rates[i]![j]!, rates[j]![i]!))) !== g.zero),
  );
  return gyroscopic ? 'undecided' : stability;
}

function vanish(derived: Derived, forces: readonly Expr[]): boolean {
  const tape = new Tape(forces);
  const registers = tape.run((s) => new Sampler(derived.system).draw([s], STATES).get(s), STATES);
  for (const f of forces) {
    for (let s = 0; s < STATES; s++) {
      const x = registers.value(f, s);
      if (!(Math.abs(x) <= 8 * registers.error(f, s) + 1e-13)) return false;
    }
  }
  return true;
}

/** Small motions about rest are stable where the stiffness is positive definite (Lagrange and Dirichlet). */
function stabilityOf(derived: Derived, mass: readonly Expr[], stiffness: readonly Expr[]): Equilibrium['stability'] {
  const n = derived.system.coordinates.length;
  const all = [...mass, ...stiffness];
  const tape = new Tape(all);
  const columns = new Sampler(derived.system).draw(tape.symbols, STATES);
  const registers = tape.run((s) => columns.get(s), STATES);
  const seen = new Set<string>();
  for (let s = 0; s < STATES; s++) {
    const K = Array.from({ length: n }, (_, i) => Array.from({ length: n }, (_, j) => registers.value(stiffness[i * n + j]!, s)));
    if (K.flat().some((x) => !Number.isFinite(x))) continue;
    seen.add(definiteness(K));
  }
  if (seen.size !== 1) return seen.size === 0 ? 'undecided' : 'depends on the parameters';
  const only = [...seen][0];
  return only === 'positive' ? 'stable' : only === 'negative' ? 'unstable' : 'undecided';
}

/** `negative` when some direction goes down, `flat` when none does but some is level. */
function definiteness(matrix: number[][]): 'positive' | 'flat' | 'negative' {
  const a = matrix.map((row) => [...row]);
  const n = a.length;
  const largest = Math.max(...a.flat().map(Math.abs), 1e-300);
  let flat = false;
  for (let k = 0; k < n; k++) {
    // Symmetric pivoting: the largest diagonal entry left.
    let p = k;
    for (let i = k + 1; i < n; i++) if (Math.abs(a[i]![i]!) > Math.abs(a[p]![p]!)) p = i;
    [a[k], a[p]] = [a[p]!, a[k]!];
    for (const row of a) [row[k], row[p]] = [row[p]!, row[k]!];
    const pivot = a[k]![k]!;
    if (pivot < -1e-10 * largest) return 'negative';
    if (pivot <= 1e-10 * largest) {
      for (let i = k; i < n; i++) for (let j = k; j < n; j++) if (Math.abs(a[i]![j]!) > 1e-10 * largest) return 'negative';
      flat = true;
      break;
    }
    for (let i = k + 1; i < n; i++) {
      const f = a[i]![k]! / pivot;
      for (let j = k; j < n; j++) a[i]![j] = a[i]![j]! - f * a[k]![j]!;
    }
  }
  return flat ? 'flat' : 'positive';
}
