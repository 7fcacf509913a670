import { gradient, timeDerivatives } from '../expression/differentiate';
import type { Expr } from '../expression/node';
import { Rational } from '../expression/rational';
import type { Formula, Statement } from '../notation/tree';
import { addBody } from './bodies';
import { evaluate, evaluateScalar, forEachMember, type FormulaContext } from './formula';
import type { Coordinate, DeclarationProblem } from './system';
import { canonicalName } from './names';
import { components, dot, isMisfit, shapeText, vector } from './value';

/** Energies, dissipation and generalized forces that follow from points, springs, dampers, forces and torques. */
export interface Contributions {
  readonly T: Expr[];
  readonly V: Expr[];
  readonly D: Expr[];
  /** One list per coordinate. */
  readonly Q: Expr[][];
}

/** Points and bodies first: their names may be used as ends of springs and dampers. */
export function gatherGeometry(
  statements: readonly Statement[],
  coordinates: readonly Coordinate[],
  context: FormulaContext,
  problems: DeclarationProblem[],
  points: Map<string, readonly Expr[]>,
): Contributions {
  const out: Contributions = { T: [], V: [], D: [], Q: coordinates.map(() => []) };
  const gravity = statements.find((s) => s.kind === 'gravity');
  const field = gravity?.kind === 'gravity' ? position(gravity.value, context) : undefined;
  for (const s of statements) {
    if (s.kind === 'point') forEachMember(s.over ?? [], context, (c) => addPoint(s, c, field, out, problems, points));
  }
  for (const s of statements) {
    if (s.kind === 'body') forEachMember(s.over ?? [], context, (c) => addBody(s, c, field, out, points));
  }
  for (const s of statements) {
    if (s.kind === 'point' || s.kind === 'body') continue;
    forEachMember(s.over ?? [], context, (c) => addElement(s, c, coordinates, out));
  }
  return out;
}

function addPoint(
  s: Statement & { kind: 'point' },
  context: FormulaContext,
  field: readonly Expr[] | undefined,
  out: Contributions,
  problems: DeclarationProblem[],
  points: Map<string, readonly Expr[]>,
): void {
  const g = context.scope.graph;
  const mass = evaluateScalar(s.mass, context);
  const at = position(s.at, context);
  if (at && s.name) {
    const name = [...context.indices.values()].length > 0 ? `${s.name}[${[...context.indices.values()].join(',')}]` : s.name;
    points.set(name, at);
    const key = canonicalName(s.name);
    // A shorthand of the same name keeps it.
    if (!context.scope.has(s.name)) context.scope.points.set(key, vector(at));
  }
  if (!mass || !at) return;
  const velocity = timeDerivatives(g, at);
  const square = g.sum(velocity.map((x) => g.square(x)));
  out.T.push(g.multiply(g.number(Rational.HALF), mass, square));
  if (!field) return;
  if (field.length !== at.length) {
    problems.push({
      code: 'syntax',
      message: `gravity has ${countOf(field.length)}, this point ${at.length}: give both the same number, as in ${at.length === 3 ? '`gravity (0, 0, -g)`' : '`gravity (0, -g)`'}`,
      span: s.at.span,
      severity: 'error',
    });
    return;
  }
  const height = dot(g, field, at);
  if (!isMisfit(height)) out.V.push(g.negate(g.multiply(mass, height)));
}

function countOf(n: number): string {
  return n === 1 ? 'one component' : `${n} components`;
}

function addElement(s: Statement, context: FormulaContext, coordinates: readonly Coordinate[], out: Contributions): void {
  const g = context.scope.graph;
  const half = g.number(Rational.HALF);
  const all = coordinates.map((c) => c.symbol);
  switch (s.kind) {
    case 'spring': {
      const stiffness = evaluateScalar(s.stiffness, context);
      const rest = s.rest ? evaluateScalar(s.rest, context) : g.zero;
      const way = between(s.from, s.to, context);
      if (!stiffness || !rest || !way) return;
      const square = g.sum(way.map((x) => g.square(x)));
      const stretch = rest === g.zero ? square : g.square(g.subtract(length(context, way), rest));
      out.V.push(g.multiply(half, stiffness, stretch));
      return;
    }
    case 'damper': {
      const coefficient = evaluateScalar(s.coefficient, context);
      const way = between(s.from, s.to, context);
      if (!coefficient || !way) return;
      const rates = timeDerivatives(g, way);
      const moving = way.map((_, i) => i).filter((i) => way[i] !== g.zero || rates[i] !== g.zero);
      // Along one axis the rate of the length is that component's own; the general form divides zero by zero at no length.
      const speed =
        moving.length === 1
          ? g.square(rates[moving[0]!]!)
          : g.divide(
              g.square(g.sum(way.map((x, i) => g.multiply(x, rates[i]!)))),
              g.sum(way.map((x) => g.square(x))),
            );
      out.D.push(g.multiply(half, coefficient, speed));
      return;
    }
    case 'force': {
      const force = position(s.value, context);
      const at = position(s.at, context);
      if (!force || !at) return;
      if (force.length !== at.length) {
        context.errors.push({
          code: 'syntax',
          message: `the force has ${force.length} components, the point it acts at ${at.length}`,
          span: s.value.span,
        });
        return;
      }
      // Virtual work: Q_i = F . dP/dq_i.
      gradient(g, at, force, all).forEach((q, i) => q !== g.zero && out.Q[i]!.push(q));
      return;
    }
    case 'torque': {
      const torque = evaluateScalar(s.value, context);
      const angle = evaluateScalar(s.on, context);
      if (!torque || !angle) return;
      gradient(g, [angle], [torque], all).forEach((q, i) => q !== g.zero && out.Q[i]!.push(q));
      return;
    }
    case 'generalized-force': {
      const coordinate = evaluateScalar(s.coordinate, context);
      const value = evaluateScalar(s.value, context);
      if (!coordinate || !value) return;
      const i = all.indexOf(coordinate);
      if (i >= 0) out.Q[i]!.push(value);
      else {
        context.errors.push({
          code: 'undeclared',
          message: 'Q takes a coordinate in its brackets: Q[x] is the generalized force along x',
          span: s.coordinate.span,
        });
      }
    }
  }
}

/** The vector from one end to the other. */
function between(from: Formula, to: Formula, context: FormulaContext): readonly Expr[] | undefined {
  const a = position(from, context);
  const b = position(to, context);
  if (!a || !b) return undefined;
  const g = context.scope.graph;
  // `between P and 0`, `between wall and x`: a single zero is the origin.
  const origin = (v: readonly Expr[]) => v.length === 1 && v[0] === g.zero;
  if (origin(a)) return b;
  if (origin(b)) return a.map((x) => g.negate(x));
  if (a.length !== b.length) {
    context.errors.push({
      code: 'syntax',
      message: `the ends have ${a.length} and ${b.length} components: give both the same number`,
      span: { start: from.span.start, end: to.span.end },
    });
    return undefined;
  }
  return a.map((x, i) => g.subtract(b[i]!, x));
}

function length(context: FormulaContext, way: readonly Expr[]): Expr {
  const g = context.scope.graph;
  const moving = way.filter((x) => x !== g.zero);
  if (moving.length === 1) return g.apply('abs', moving);
  return g.sqrt(g.sum(way.map((x) => g.square(x))));
}

function position(f: Formula, context: FormulaContext): readonly Expr[] | undefined {
  const q = evaluate(f, context);
  if (!q) return undefined;
  const v = components(q);
  if (!v) {
    context.errors.push({ code: 'syntax', message: `a point or vector is needed here, not ${shapeText(q)}`, span: f.span });
  }
  return v;
}
