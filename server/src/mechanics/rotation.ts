import { timeDerivatives } from '../expression/differentiate';
import type { Graph } from '../expression/graph';
import type { Expr } from '../expression/node';
import { Rational } from '../expression/rational';
import { components, dot, isMisfit, matrix, rowsOf, vector, type Misfit, type Quantity } from './value';

/**
 * Rotation matrices take body components to space components. The elementary ones give every sequence of Euler angles by
 * multiplication: `Rz(phi)*Rx(th)*Rz(psi)`.
 */
export const ROTATION_FUNCTIONS = ['Rx', 'Ry', 'Rz', 'Rq', 'Rv', 'bodyrates', 'spacerates'] as const;

export function rotationFunction(g: Graph, name: string, args: readonly Quantity[]): Quantity | Misfit {
  switch (name) {
    case 'Rx':
    case 'Ry':
    case 'Rz': {
      const angle = args[0]!;
      if (angle.kind !== 'scalar' || args.length !== 1) return { misfit: `\`${name}\` takes one angle` };
      return matrix(elementary(g, name, angle.expr));
    }
    case 'Rq': {
      const flat = args.length === 1 ? components(args[0]!) : components({ kind: 'list', items: args });
      if (!flat || flat.length !== 4) return { misfit: '`Rq` takes a quaternion: w, x, y, z' };
      return matrix(fromQuaternion(g, flat));
    }
    case 'Rv': {
      const flat = args.length === 1 ? components(args[0]!) : components({ kind: 'list', items: args });
      if (!flat || flat.length !== 3) return { misfit: '`Rv` takes a rotation vector: three components' };
      return matrix(fromVector(g, flat));
    }
    default: {
      const R = args.length === 1 ? rowsOf(args[0]!) : undefined;
      if (!R || R.length !== 3 || R[0]!.length !== 3) return { misfit: `\`${name}\` takes a 3 by 3 rotation matrix` };
      return vector(angularVelocity(g, R, name === 'bodyrates' ? 'body' : 'space'));
    }
  }
}

function elementary(g: Graph, name: 'Rx' | 'Ry' | 'Rz', angle: Expr): Expr[][] {
  const c = g.apply('cos', [angle]);
  const s = g.apply('sin', [angle]);
  const n = g.negate(s);
  const [o, i] = [g.zero, g.one];
  if (name === 'Rx') return [[i, o, o], [o, c, n], [o, s, c]];
  if (name === 'Ry') return [[c, o, s], [o, i, o], [n, o, c]];
  return [[c, n, o], [s, c, o], [o, o, i]];
}

/** Of a unit quaternion; declare its norm as a constraint. */
function fromQuaternion(g: Graph, [w, x, y, z]: readonly Expr[]): Expr[][] {
  const two = (a: Expr) => g.multiply(g.number(2), a);
  const p = (a: Expr | undefined, b: Expr | undefined) => g.multiply(a!, b!);
  const diagonal = (a: Expr | undefined, b: Expr | undefined) => g.subtract(g.one, two(g.add(p(a, a), p(b, b))));
  return [
    [diagonal(y, z), two(g.subtract(p(x, y), p(w, z))), two(g.add(p(x, z), p(w, y)))],
    [two(g.add(p(x, y), p(w, z))), diagonal(x, z), two(g.subtract(p(y, z), p(w, x)))],
    [two(g.subtract(p(x, z), p(w, y))), two(g.add(p(y, z), p(w, x))), diagonal(x, y)],
  ];
}

/**
 * Of a rotation vector, axis times angle (O. Rodrigues, Journal de Mathématiques Pures et Appliquées 5, 1840): cos(a) I +
 * sin(a)/a [v] + (1 - cos(a))/a^2 v v^T. It has no value at the vector zero.
 */
function fromVector(g: Graph, v: readonly Expr[]): Expr[][] {
  const square = g.sum(v.map((x) => g.square(x)));
  const angle = g.power(square, g.number(Rational.HALF));
  const c = g.apply('cos', [angle]);
  const turn = v.map((x) => g.multiply(g.divide(g.apply('sin', [angle]), angle), x));
  const along = g.divide(g.subtract(g.one, c), square);
  return [0, 1, 2].map((i) =>
    [0, 1, 2].map((j) => {
      const entry = g.multiply(along, v[i]!, v[j]!);
      if (i === j) return g.add(c, entry);
      const third = turn[3 - i - j]!;
      return (j - i + 3) % 3 === 1 ? g.subtract(entry, third) : g.add(entry, third);
    }),
  );
}

/** Components along body axes from R^T R', along space axes from R' R^T, whose off-diagonal entries they are. */
export function angularVelocity(g: Graph, R: readonly (readonly Expr[])[], axes: 'body' | 'space'): Expr[] {
  const flat = timeDerivatives(g, R.flat());
  const dR = [0, 1, 2].map((i) => flat.slice(3 * i, 3 * i + 3));
  const entry = (i: number, j: number): Expr =>
    axes === 'body'
      ? g.sum([0, 1, 2].map((k) => g.multiply(R[k]![i]!, dR[k]![j]!)))
      : g.sum([0, 1, 2].map((k) => g.multiply(dR[i]![k]!, R[j]![k]!)));
  return [entry(2, 1), entry(0, 2), entry(1, 0)];
}

/** 1/2 w . J w for an inertia given as a number, as principal moments, or as a matrix about body axes. */
export function rotationalEnergy(g: Graph, inertia: Quantity, rates: readonly Expr[]): Expr | Misfit {
  const half = g.number(Rational.HALF);
  if (inertia.kind === 'scalar') return g.multiply(half, inertia.expr, g.sum(rates.map((w) => g.square(w))));
  const principal = components(inertia);
  if (principal) {
    if (principal.length !== 3) return { misfit: 'principal moments of inertia are three' };
    return g.multiply(half, g.sum(principal.map((J, i) => g.multiply(J, g.square(rates[i]!)))));
  }
  const rows = rowsOf(inertia);
  if (!rows || rows.length !== 3 || rows[0]!.length !== 3) return { misfit: 'an inertia is a number, three principal moments, or a 3 by 3 matrix' };
  const product = dot(g, rates, rows.map((row) => g.sum(row.map((J, k) => g.multiply(J, rates[k]!)))));
  return isMisfit(product) ? product : g.multiply(half, product);
}
