import { derivative } from '../expression/differentiate';
import type { Expr, SymbolData } from '../expression/node';
import { symbolsOf } from '../expression/reach';
import { substitute } from '../expression/substitute';
import { printFormula } from '../notation';
import type { Formula } from '../notation/tree';
import type { FormulaContext } from './formula';
import { evaluate, evaluateScalar } from './formula';
import type { Derived } from './lagrange';
import type { FormulaError } from './scope';
import { components, map, matrix, scalar, vector, type Misfit, type Quantity } from './value';

/** The right side of a claim may use what follows from the system, beside its symbols. */
export interface QuantityContext extends FormulaContext {
  /** Set when the formula names a quantity that is not derived yet: the claim is unread, the declaration is in order. */
  unsupported: string | undefined;
  /**
   * How the code's value is to be compared: by its rate of change along the motion (`constant`), or multiplied to the
   * velocities (`coriolis matrix`, which is not unique by itself).
   */
  mode: 'value' | 'constant' | 'times velocities';
  /** Expressions that must vanish for the quantity to make sense: the accelerations at an equilibrium. */
  mustVanish: Expr[];
}

export function quantityContext(derived: Derived, errors: FormulaError[]): QuantityContext {
  const { system } = derived;
  const context: QuantityContext = {
    scope: system.scope,
    indices: new Map(),
    errors,
    unsupported: undefined,
    mode: 'value',
    mustVanish: [],
    phrase: (f) => phrase(derived, f, context),
    indexed: (name, index) => indexed(derived, name, index, context),
    outside: (f) => named(derived, f),
  };
  return context;
}

/** `T`, `V`, `L`, `E`, `H`, `D`, `p`, `q`: where nothing declared has the name. */
function named(derived: Derived, f: Formula): Quantity | undefined {
  const { system } = derived;
  if (f.kind === 'prime' && f.operand.kind === 'index') return undefined;
  if (f.kind === 'binary') return f.op === '/' ? canonicalDerivative(derived, f.left, f.right) : undefined;
  if (f.kind === 'prime' && f.operand.kind === 'name' && f.operand.name === 'q' && !system.scope.has('q')) {
    if (f.order === 1) return vector(system.coordinates.map((c) => c.velocity));
    return f.order === 2 ? vector(system.coordinates.map((c) => c.acceleration)) : undefined;
  }
  if (f.kind !== 'name' || system.scope.has(f.name)) return undefined;
  switch (f.name) {
    case 'T':
      return system.T && scalar(system.T);
    case 'V':
      return system.V && scalar(system.V);
    case 'L':
      return scalar(system.L);
    case 'D':
      return scalar(system.D);
    case 'E':
      return scalar(derived.energy);
    case 'H':
      return scalar(derived.hamiltonian);
    case 'p':
      return vector(derived.momenta);
    case 'q':
      return vector(system.coordinates.map((c) => c.symbol));
    default: {
      const constraint = system.constraints.find((c) => c.multiplierName === f.name);
      return constraint && scalar(constraint.multiplier);
    }
  }
}

/**
 * `dH/dq`, `dH/dp` of Hamilton's equations, as functions of coordinates and momenta: the velocities, and dL/dq with its sign
 * turned (L. D. Landau, E. M. Lifshitz, Mechanics, section 40).
 */
function canonicalDerivative(derived: Derived, top: Formula, bottom: Formula): Quantity | undefined {
  const { system } = derived;
  const g = system.graph;
  if (top.kind === 'unary' && top.op === '-') {
    const value = canonicalDerivative(derived, top.operand, bottom);
    return value && map(value, (e) => g.negate(e));
  }
  if (top.kind !== 'name' || top.name !== 'dH' || system.scope.has('dH')) return undefined;
  const { coordinates } = system;
  const velocities = coordinates.map((c) => c.velocity);
  const slopes = derived.coordinateForces.map((e) => g.negate(e));
  const pick = (all: readonly Expr[], i: number): Quantity | undefined => (i < 0 ? undefined : scalar(all[i]!));
  const whole = (all: readonly Expr[]): Quantity => (all.length === 1 ? scalar(all[0]!) : vector(all));
  if (bottom.kind === 'index' && bottom.object.kind === 'name' && bottom.object.name === 'dp') {
    const name = bottom.indices[0] ? printFormula(bottom.indices[0]) : '';
    return pick(velocities, coordinates.findIndex((c) => c.name === name));
  }
  const name = bottom.kind === 'name' || bottom.kind === 'index' ? printFormula(bottom) : '';
  if (!name.startsWith('d') || (bottom.kind === 'name' && system.scope.has(bottom.name))) return undefined;
  const i = coordinates.findIndex((c) => c.name === name.slice(1));
  if (i >= 0) return pick(slopes, i);
  if (name === 'dp') return whole(velocities);
  return name === 'dq' ? whole(slopes) : undefined;
}

function indexed(derived: Derived, name: string, index: Formula, context: QuantityContext): Quantity | undefined {
  if (name !== 'p' && name !== 'Q') return undefined;
  const i = coordinateIndex(derived, index, context);
  if (i === undefined) return undefined;
  return scalar(name === 'p' ? derived.momenta[i]! : derived.system.Q[i]!);
}

function coordinateIndex(derived: Derived, f: Formula, context: QuantityContext): number | undefined {
  const e = evaluateScalar(f, { scope: context.scope, indices: context.indices, errors: context.errors });
  if (!e) return undefined;
  const i = derived.system.coordinates.findIndex((c) => c.symbol === e);
  if (i >= 0) return i;
  context.errors.push({ code: 'undeclared', message: 'a coordinate is needed in these brackets', span: f.span });
  return undefined;
}

function phrase(
  derived: Derived,
  f: Formula & { kind: 'quantity' },
  context: QuantityContext,
): Quantity | Misfit {
  const { system } = derived;
  const n = system.coordinates.length;
  if (f.name === 'multiplier') {
    const name = f.args[0] ? printFormula(f.args[0]) : undefined;
    const found = system.constraints.filter((c) => name === undefined || c.multiplierName === name);
    if (found.length === 1) return scalar(found[0]!.multiplier);
    const known = system.constraints.map((c) => c.multiplierName).join(', ') || 'none';
    return { misfit: `there is no multiplier \`${name ?? ''}\`: the constraints have ${known}` };
  }
  if (f.name === 'jacobian') return jacobian(derived, f.args, context);
  if (f.name === 'linearised A' || f.name === 'linearised B') {
    return linearised(derived, f.name === 'linearised A' ? 'state' : 'input', context);
  }
  if (f.name === 'constant') {
    context.mode = 'constant';
    return scalar(system.graph.zero);
  }
  if (f.name === 'coriolis matrix') {
    context.mode = 'times velocities';
    return derived.coriolis ? vector(derived.coriolis) : { misfit: '`coriolis matrix` needs T declared apart from L' };
  }
  const at = f.args.map((a) => coordinateIndex(derived, a, context));
  if (at.includes(undefined)) return { misfit: `\`${f.name}\` takes coordinates in its brackets` };
  const i = at[0];
  const pick = (v: readonly Expr[] | undefined, without: string): Quantity | Misfit => {
    if (!v) return { misfit: `\`${f.name}\` needs ${without} declared apart from L` };
    return i === undefined ? vector(v) : scalar(v[i]!);
  };
  const byRows = (entries: readonly Expr[], width: number): Quantity => {
    if (at.length === 2) return scalar(entries[at[0]! * width + at[1]!]!);
    const rows = Array.from({ length: n }, (_, r) => entries.slice(r * width, (r + 1) * width));
    return i === undefined ? matrix(rows) : vector(rows[i]!);
  };
  switch (f.name) {
    case 'mass matrix':
      return byRows(derived.massMatrix, n);
    case 'right side':
      return pick(derived.rightSides, '');
    case 'residual':
      return pick(derived.residuals, '');
    case 'bias':
      return pick(derived.bias, '');
    case 'damping vector':
      return pick(derived.damping, '');
    case 'gravity vector':
      return pick(derived.gravity, 'V');
    case 'coriolis vector':
      return pick(derived.coriolis, 'T');
    case 'input matrix': {
      const g = system.graph;
      const entries = system.Q.flatMap((q) => system.inputs.map((u) => derivative(g, q, u.symbol)));
      if (at.length > 0) return { misfit: '`input matrix` is claimed as a whole' };
      return byRows(entries, system.inputs.length);
    }
    default:
      context.unsupported = f.name;
      return { misfit: `\`${f.name}\` is not supported yet` };
  }
}

/** Partial derivatives of quantities by symbols; accelerations stand for what the energies give them. */
function jacobian(derived: Derived, args: readonly Formula[], context: QuantityContext): Quantity | Misfit {
  const g = derived.system.graph;
  const [of, by] = args.map((a) => evaluate(a, context));
  const top = of && components(of);
  const bottom = by && components(by);
  if (!top || !bottom) return { misfit: '`jacobian of X by Y` takes a number or list, and a list of symbols' };
  if (bottom.some((s) => s.op !== 'symbol')) return { misfit: 'a jacobian is taken by coordinates, velocities, inputs or parameters' };
  const solved = substitute(g, top, solutionMap(derived));
  const rows = solved.map((e) => bottom.map((s) => derivative(g, e, s)));
  if (of.kind === 'scalar') return by.kind === 'scalar' ? scalar(rows[0]![0]!) : vector(rows[0]!);
  return by.kind === 'scalar' ? vector(rows.map((r) => r[0]!)) : matrix(rows);
}

/**
 * State matrix and input matrix of the first-order system with the coordinates, then the velocities, as state. With `near`
 * they are taken at that point, at rest and without input, which must then be an equilibrium.
 */
function linearised(derived: Derived, by: 'state' | 'input', context: QuantityContext): Quantity {
  const { graph: g, coordinates, inputs, near } = derived.system;
  const q = coordinates.map((c) => c.symbol);
  const v = coordinates.map((c) => c.velocity);
  const columns = by === 'state' ? [...q, ...v] : inputs.map((u) => u.symbol);
  const rates = [...v, ...derived.accelerations];
  let rows = rates.map((e) => columns.map((s) => derivative(g, e, s)));
  if (near) {
    const point = new Map<Expr, Expr>(near.point);
    for (const s of symbolsOf(...rates)) {
      const data = s.data as SymbolData;
      if (data.role === 'input' || (data.role === 'coordinate' && data.order > 0)) point.set(s, g.zero);
    }
    context.mustVanish.push(...substitute(g, derived.accelerations, point));
    rows = rows.map((row) => substitute(g, row, point));
  }
  return matrix(rows);
}

/** Accelerations and multipliers as solved from the equations. */
export function solutionMap(derived: Derived): Map<Expr, Expr> {
  return new Map(derived.unknowns.map((u, i) => [u, derived.solution[i]!]));
}
