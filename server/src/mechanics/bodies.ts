import { timeDerivatives } from '../expression/differentiate';
import type { Expr } from '../expression/node';
import { Rational } from '../expression/rational';
import type { Statement } from '../notation/tree';
import { evaluate, evaluateScalar, type FormulaContext } from './formula';
import { canonicalName } from './names';
import { angularVelocity, rotationalEnergy } from './rotation';
import { components, dot, isMisfit, rowsOf, vector } from './value';

/**
 * Kinetic energy of a rigid body by Koenig's theorem: that of its mass at the centre and that of its rotation about the
 * centre; potential energy in the field.
 */
export function addBody(
  s: Statement & { kind: 'body' },
  context: FormulaContext,
  field: readonly Expr[] | undefined,
  out: { readonly T: Expr[]; readonly V: Expr[] },
  points: Map<string, readonly Expr[]>,
): void {
  const g = context.scope.graph;
  const fail = (message: string, span = s.span): void => void context.errors.push({ code: 'syntax', message, span });
  const mass = s.mass && evaluateScalar(s.mass, context);
  const centre = s.centre && evaluate(s.centre, context);
  const at = centre && components(centre);
  if (centre && !at) return fail('the centre of a body is a point', s.centre!.span);
  if (at && s.name) {
    points.set(s.name, at);
    if (!context.scope.has(s.name)) context.scope.points.set(canonicalName(s.name), vector(at));
  }
  if (s.mass && !at) fail(`body \`${s.name}\` has a mass but no centre: add \`centre (..)\``);
  if (mass && at) {
    out.T.push(g.multiply(g.number(Rational.HALF), mass, g.sum(timeDerivatives(g, at).map((v) => g.square(v)))));
    if (field && field.length !== at.length) {
      fail(`gravity has ${field.length} components, this centre ${at.length}: give both the same number`, s.centre!.span);
    } else if (field) {
      const height = dot(g, field, at);
      if (!isMisfit(height)) out.V.push(g.negate(g.multiply(mass, height)));
    }
  }
  if (!s.inertia) return;
  const inertia = evaluate(s.inertia, context);
  if (!inertia) return;
  if (s.angle) {
    const angle = evaluateScalar(s.angle, context);
    if (!angle) return;
    if (inertia.kind !== 'scalar') return fail('with an angle the inertia is one number, about the centre', s.inertia.span);
    out.T.push(g.multiply(g.number(Rational.HALF), inertia.expr, g.square(timeDerivatives(g, [angle])[0]!)));
    return;
  }
  if (!s.rotation) return fail(`body \`${s.name}\` has an inertia but does not turn: add \`angle a\` or \`rotation R\``);
  const rotation = evaluate(s.rotation, context);
  const R = rotation && rowsOf(rotation);
  if (!R || R.length !== 3 || R[0]!.length !== 3) {
    return fail('a rotation is a 3 by 3 matrix, such as Rz(phi)*Rx(th)*Rz(psi)', s.rotation.span);
  }
  const energy = rotationalEnergy(g, inertia, angularVelocity(g, R, 'body'));
  if (isMisfit(energy)) return fail(energy.misfit, s.inertia.span);
  out.T.push(energy);
}
