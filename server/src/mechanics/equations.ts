import type { Graph } from '../expression/graph';
import type { Expr, SymbolData } from '../expression/node';
import { collected, normalForm, simplify, toExpr } from '../expression/normal-form';
import { reachable, symbolsOf } from '../expression/reach';
import type { Rational } from '../expression/rational';
import { Tape } from '../expression/tape';
import type { Derived } from './lagrange';
import type { Coordinate } from './system';

/** One of Lagrange's equations for display: everything the energies give on the left, generalized forces on the right. */
export interface Equation {
  readonly coordinate: Coordinate;
  readonly left: Expr;
  readonly right: Expr;
}

/** Rows longer than this are shown as they were built. */
const MOST_TERMS = 120;
/** Terms that are taken together afterwards may be more. */
const MOST_COLLECTED = 400;
/** Beyond this many nodes even trying to tidy a row takes longer than a hover may. */
const MOST_NODES = 1500;

/** The equations of motion, one per coordinate: M q'' + Coriolis + gravity + damping = Q. */
export function equationsOfMotion(derived: Derived): Equation[] {
  const { system } = derived;
  const g = system.graph;
  return system.coordinates.map((coordinate, i) => {
    const force = system.Q[i]!;
    const left = g.add(derived.residuals[i]!, force);
    const ties = system.constraints.map((c) => g.multiply(c.multiplier, c.gradient[i]!));
    return { coordinate, left: tidyRow(g, left), right: tidyRow(g, g.sum([force, ...ties])) };
  });
}

/**
 * The accelerations by themselves, where that stays readable: no coupling between them, or two coupled ones.
 * Undefined otherwise.
 */
export function solvedAccelerations(derived: Derived): readonly { coordinate: Coordinate; expr: Expr }[] | undefined {
  const { coordinates, graph: g } = derived.system;
  const n = coordinates.length;
  if (derived.system.constraints.length > 0) return undefined;
  const nonzero = certainlyNonzero(derived.massMatrix);
  if (n > 2 && nonzero.some((x, k) => x && Math.floor(k / n) !== k % n)) return undefined;
  const M = derived.massMatrix.map((e) => tidy(g, e));
  const f = derived.rightSides.map((e) => tidy(g, e));
  const diagonal = coordinates.every((_, i) => coordinates.every((_, j) => i === j || M[i * n + j] === g.zero));
  if (diagonal) {
    return coordinates.map((coordinate, i) => ({ coordinate, expr: quotient(g, f[i]!, M[i * n + i]!) }));
  }
  if (n !== 2) return undefined;
  const [a, b, c, d] = M as [Expr, Expr, Expr, Expr];
  const determinant = tidy(g, g.subtract(g.multiply(a, d), g.multiply(b, c)));
  const top = [
    g.subtract(g.multiply(d, f[0]!), g.multiply(b, f[1]!)),
    g.subtract(g.multiply(a, f[1]!), g.multiply(c, f[0]!)),
  ];
  return coordinates.map((coordinate, i) => ({ coordinate, expr: quotient(g, tidy(g, top[i]!), determinant) }));
}

/** A sum of terms where that is not too long, else the shortest form found. */
export function tidy(g: Graph, e: Expr): Expr {
  const form = normalForm(g, e, MOST_TERMS);
  return form ? toExpr(g, form) : simplify(g, e, MOST_TERMS);
}

/** Terms with the same moving part taken together: (M + m)*x''. */
function tidyRow(g: Graph, e: Expr): Expr {
  if (reachable([e]).length > MOST_NODES) return e;
  const form = normalForm(g, e, MOST_COLLECTED);
  return form ? collected(g, form.terms) : simplify(g, e, MOST_TERMS);
}

/** Term by term where the divisor is a single product, so that common factors go. */
function quotient(g: Graph, top: Expr, bottom: Expr): Expr {
  const whole = g.divide(top, bottom);
  if (bottom.op !== 'sum') return tidy(g, whole);
  const common = commonFactors(g, top, bottom);
  return common ? g.divide(tidy(g, g.divide(top, common)), tidy(g, g.divide(bottom, common))) : whole;
}

/** The largest product of symbols that divides every term of both. */
function commonFactors(g: Graph, a: Expr, b: Expr): Expr | undefined {
  const forms = [normalForm(g, a, MOST_TERMS), normalForm(g, b, MOST_TERMS)];
  if (!forms[0] || !forms[1]) return undefined;
  const terms = [...forms[0].terms, ...forms[1].terms];
  if (terms.length === 0) return undefined;
  let common: Map<Expr, Rational> | undefined;
  for (const t of terms) {
    const powers = new Map(t.factors.filter((f) => f.base.op === 'symbol').map((f) => [f.base, f.exponent]));
    if (!common) {
      common = powers;
      continue;
    }
    for (const [base, exponent] of common) {
      const here = powers.get(base);
      if (!here) common.delete(base);
      else if (here.compare(exponent) < 0) common.set(base, here);
    }
  }
  const factors = [...(common ?? [])].filter(([, e]) => e.sign > 0);
  if (factors.length === 0) return undefined;
  return g.product(factors.map(([base, e]) => g.power(base, g.number(e))));
}

/** What stays constant along every motion, as far as it can be read off the energies. */
export function conserved(derived: Derived): { readonly name: string; readonly expr: Expr; readonly why: string }[] {
  const { system } = derived;
  const g = system.graph;
  const out: { name: string; expr: Expr; why: string }[] = [];
  const free = system.coordinates.map(
    (_, i) => derived.damping[i] === g.zero && system.Q[i] === g.zero && system.constraints.every((c) => c.gradient[i] === g.zero),
  );
  // Constraints at rest do no work: they bind momenta, not the energy. One that prescribes a speed does.
  const homogeneous = system.constraints.every((c) => {
    if (c.kind === 'holonomic') return true;
    const linear = g.sum(c.gradient.map((a, i) => g.multiply(a, system.coordinates[i]!.velocity)));
    return tidy(g, g.subtract(c.expr, linear)) === g.zero;
  });
  const idle = homogeneous && system.coordinates.every((_, i) => derived.damping[i] === g.zero && system.Q[i] === g.zero);
  const scleronomic = symbolsOf(...system.constraints.map((c) => c.expr)).every((s) => !isMoving(s));
  const pushed = certainlyNonzero(derived.coordinateForces);
  system.coordinates.forEach((c, i) => {
    if (!free[i] || pushed[i] || tidy(g, derived.coordinateForces[i]!) !== g.zero) return;
    out.push({ name: `p[${c.name}]`, expr: tidy(g, derived.momenta[i]!), why: `${c.name} does not appear in the energies` });
  });
  if (idle && scleronomic && !symbolsOf(system.L).some(isMoving)) {
    // Jacobi's integral; it is T + V only where T is quadratic in the velocities and V without them.
    const plain = tidy(g, g.subtract(derived.hamiltonian, derived.energy)) === g.zero;
    const why = plain
      ? 'nothing depends on time, and no force takes energy out or puts it in'
      : "Jacobi's integral, not T + V: nothing depends on time, and no force does work";
    out.push({ name: plain ? 'E' : 'H', expr: tidy(g, plain ? derived.energy : derived.hamiltonian), why });
  }
  return out;
}

/**
 * Which expressions are not zero everywhere, by their values at two plain states: much sooner than by their form. False says
 * nothing.
 */
function certainlyNonzero(exprs: readonly Expr[]): boolean[] {
  const tape = new Tape(exprs);
  const states = 2;
  const registers = tape.run((s) => {
    const k = tape.symbols.indexOf(s) + 1;
    return { values: Float64Array.from({ length: states }, (_, i) => 0.6 + (((i + 2) * k * 0.618034) % 1)) };
  }, states);
  return exprs.map((e) =>
    [0, 1].some((s) => Math.abs(registers.value(e, s)) > 1e-9 + 100 * registers.error(e, s)),
  );
}

function isMoving(symbol: Expr): boolean {
  return ['time', 'input'].includes((symbol.data as SymbolData).role);
}
