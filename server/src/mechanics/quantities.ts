import { derivative, timeDerivatives } from '../expression/differentiate';
import type { Expr } from '../expression/node';
import { printFormula } from '../notation';
import type { Formula } from '../notation/tree';
import type { FormulaContext } from './formula';
import { evaluateScalar } from './formula';
import type { Derived } from './lagrange';
import type { FormulaError } from './scope';
import { matrix, scalar, vector, type Misfit, type Quantity } from './value';

/** The right side of a claim may use what follows from the system, beside its symbols. */
export interface QuantityContext extends FormulaContext {
  /** Set when the formula names a quantity that is not derived yet: the claim is unread, the declaration is in order. */
  unsupported: string | undefined;
}

export function quantityContext(derived: Derived, errors: FormulaError[]): QuantityContext {
  const { system } = derived;
  const context: QuantityContext = {
    scope: system.scope,
    indices: new Map(),
    errors,
    unsupported: undefined,
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

/** Time derivative of an expression along any motion: accelerations appear as symbols. */
export function alongMotion(derived: Derived, e: Expr): Expr {
  return timeDerivatives(derived.system.graph, [e])[0]!;
}
