import { gradient, timeDerivatives } from '../expression/differentiate';
import type { Expr, SymbolData } from '../expression/node';
import { substitute } from '../expression/substitute';
import { buildSystem } from '../mechanics/build';
import { evaluateScalar } from '../mechanics/formula';
import { Derived } from '../mechanics/lagrange';
import type { System } from '../mechanics/system';
import type { Block } from '../notation/tree';
import { Budget } from '../text/budget';
import { decide } from './decide';
import type { Decision } from './pair';

export type Equivalence =
  /** The Lagrangians are the same function. */
  | { readonly kind: 'same' }
  /** They differ by a constant, or by a function of parameters and inputs alone. */
  | { readonly kind: 'constant' }
  /** They differ by the total time derivative of a function of coordinates and time: the equations are the same. */
  | { readonly kind: 'gauge' }
  /** The equations differ, by a factor or a combination, but give the same accelerations. */
  | { readonly kind: 'same motion' }
  | { readonly kind: 'differ'; readonly quantity: string; readonly decision: Decision & { readonly verdict: 'differs' }; readonly system: System }
  | { readonly kind: 'undecided'; readonly reason: string };

/**
 * Compares two declarations as mechanics. Symbols of the same name are the same; a coordinate of the first that is no
 * coordinate of the second must be given by a `where` of the second, as a function of its coordinates.
 */
export function compareDeclarations(first: System, second: Block, budget = new Budget()): Equivalence {
  const g = first.graph;
  const other = buildSystem(second, g);
  for (const s of [first, other]) {
    if (s.blocked) return { kind: 'undecided', reason: `${s.name}: ${s.blocked.reason}` };
  }
  // Both declarations say where their symbols lie: a radius of the second is one in the first, too.
  const moved = inCoordinatesOf({ ...first, domains: new Map([...first.domains, ...other.domains]) }, other);
  if ('reason' in moved) return { kind: 'undecided', reason: moved.reason };
  const a = new Derived(moved.system);
  const b = new Derived(other);

  const equal = (pairs: readonly { found: Expr; expected: Expr }[], derived = a): readonly Decision[] =>
    decide({ derived, pairs, assumed: [], budget, placeOf: () => undefined });
  const holds = (ds: readonly Decision[]) => ds.every((d) => d.verdict === 'holds');

  const forces = b.system.Q.map((q, i) => ({ found: g.subtract(q, b.damping[i]!), expected: g.subtract(a.system.Q[i]!, a.damping[i]!) }));
  const sameForces = holds(equal(forces));
  if (moved.system.constraints.length > 0 || other.constraints.length > 0) {
    const bound = compareConstraints(a, b, (pairs, derived) => equal(pairs, derived));
    if (bound) return bound;
  }
  // Constraints on velocities leave forces across them to the energies: there L counts off the constraints too.
  const nonholonomic = a.system.constraints.some((c) => c.kind === 'velocity');
  const wide = nonholonomic ? new Derived({ ...a.system, constraints: [] }) : a;
  if (sameForces && holds(equal([{ found: b.system.L, expected: a.system.L }], wide))) return { kind: 'same' };
  const difference = g.subtract(b.system.L, a.system.L);
  const by = b.system.coordinates.flatMap((c) => [c.symbol, c.velocity]);
  const slopes = gradient(g, [difference], [g.one], by).map((found) => ({ found, expected: g.zero }));
  if (sameForces && holds(equal(slopes, wide))) return { kind: 'constant' };

  // With accelerations as free as velocities, equal residuals mean equal equations.
  const free = new Map(b.system.coordinates.map((c): [Expr, Expr] => [
    c.acceleration,
    g.symbol({ name: `${(c.acceleration.data as SymbolData).name}''`, role: 'auxiliary', order: 0 }),
  ]));
  const left = substitute(g, b.residuals, free);
  const right = substitute(g, a.residuals, free);
  if (holds(equal(left.map((found, i) => ({ found, expected: right[i]! }))))) return { kind: 'gauge' };

  const motion = b.system.coordinates.map((c, i) => ({ found: b.accelerations[i]!, expected: c.acceleration }));
  const decisions = equal(motion);
  if (holds(decisions)) return { kind: 'same motion' };
  for (let i = 0; i < decisions.length; i++) {
    const decision = decisions[i]!;
    if (decision.verdict === 'differs') {
      return { kind: 'differ', quantity: `${b.system.coordinates[i]!.name}''`, decision, system: moved.system };
    }
  }
  const open = decisions.find((d) => d.verdict === 'unread');
  return { kind: 'undecided', reason: open?.verdict === 'unread' ? open.reason : 'no state decided it' };
}

/**
 * Whether two systems in the same coordinates are bound to the same motions: each one's constraints hold wherever the
 * other's do. Undefined where they are, and the energies decide.
 */
function compareConstraints(
  a: Derived,
  b: Derived,
  equal: (pairs: readonly { found: Expr; expected: Expr }[], derived: Derived) => readonly Decision[],
): Equivalence | undefined {
  const counts = [a, b].map((d) => d.system.constraints.length);
  if (counts[0] !== counts[1]) {
    return { kind: 'undecided', reason: `one has ${counts[0]} constraints on these coordinates, the other ${counts[1]}` };
  }
  const g = a.system.graph;
  for (const [bound, free] of [[a, b], [b, a]] as const) {
    const conditions = [...free.system.constraints.map((c) => c.expr), ...free.velocityConstraints];
    const met = equal(conditions.map((found) => ({ found, expected: g.zero })), bound);
    if (met.every((d) => d.verdict === 'holds')) continue;
    const open = met.find((d) => d.verdict === 'unread');
    if (open?.verdict === 'unread') return { kind: 'undecided', reason: open.reason };
    return { kind: 'undecided', reason: 'they are constrained to different motions, which are not compared any further' };
  }
  return undefined;
}

/** The first system rewritten in the coordinates of the second. */
function inCoordinatesOf(first: System, other: System): { readonly system: System } | { readonly reason: string } {
  const g = first.graph;
  const own = new Set(other.coordinates.map((c) => c.symbol));
  const replaced = new Map<Expr, Expr>();
  for (const c of first.coordinates) {
    if (own.has(c.symbol)) continue;
    const errors: Parameters<typeof evaluateScalar>[1]['errors'] = [];
    const formula = { kind: 'name' as const, name: c.name, span: c.span };
    const value = other.scope.has(c.name) ? evaluateScalar(formula, { scope: other.scope, indices: new Map(), errors }) : undefined;
    if (!value) return { reason: `\`${other.name}\` has no coordinate \`${c.name}\`: give it there by \`where ${c.name} = ...\`` };
    replaced.set(c.symbol, value);
  }
  if (replaced.size === 0 && first.coordinates.length !== other.coordinates.length) {
    return { reason: `${first.name} has ${first.coordinates.length} coordinates, ${other.name} ${other.coordinates.length}` };
  }
  if (replaced.size === 0) {
    // The same coordinates, perhaps in another order.
    const order = other.coordinates.map((c) => first.coordinates.findIndex((d) => d.symbol === c.symbol));
    if (order.includes(-1)) return { reason: `the coordinates of ${first.name} and ${other.name} have different names` };
    const constraints = first.constraints.map((c) => ({ ...c, gradient: order.map((i) => c.gradient[i]!) }));
    return { system: { ...first, coordinates: other.coordinates, Q: order.map((i) => first.Q[i]!), constraints } };
  }
  for (const c of first.coordinates) {
    const value = replaced.get(c.symbol);
    if (value) replaced.set(c.velocity, timeDerivatives(g, [value])[0]!);
  }
  const [L, D, ...Q] = substitute(g, [first.L, first.D, ...first.Q], replaced) as [Expr, Expr, ...Expr[]];
  // Virtual work is the same in any coordinates.
  const positions = first.coordinates.map((c) => replaced.get(c.symbol) ?? c.symbol);
  const forces = gradient(g, positions, Q, other.coordinates.map((c) => c.symbol));
  const system: System = { ...first, L, D, T: undefined, V: undefined, Q: forces, coordinates: other.coordinates, constraints: [] };
  if (first.constraints.length === 0) return { system };
  return withoutMet(first, other, system, replaced);
}

/**
 * Coordinates that meet the constraints by themselves need none: a holonomic constraint does no work in them
 * (L. D. Landau, E. M. Lifshitz, Mechanics, section 38).
 */
function withoutMet(
  first: System,
  other: System,
  system: System,
  replaced: ReadonlyMap<Expr, Expr>,
): { readonly system: System } | { readonly reason: string } {
  const g = first.graph;
  const moved = substitute(g, first.constraints.map((c) => c.expr), replaced);
  const pairs = moved.map((found) => ({ found, expected: g.zero }));
  const free = new Derived({ ...system, constraints: [] });
  const met = decide({ derived: free, pairs, assumed: [], budget: new Budget(), placeOf: () => undefined });
  const left = met.filter((d) => d.verdict !== 'holds').length;
  if (left > 0) return { reason: `the coordinates of ${other.name} do not meet the constraints of ${first.name} by themselves` };
  const n = first.coordinates.length - first.constraints.length;
  if (n !== other.coordinates.length) {
    return { reason: `${first.name} has ${n} degrees of freedom, ${other.name} ${other.coordinates.length} coordinates` };
  }
  return { system };
}
