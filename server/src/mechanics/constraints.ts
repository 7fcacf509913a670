import { gradient } from '../expression/differentiate';
import type { Expr, SymbolData } from '../expression/node';
import { symbolsOf } from '../expression/reach';
import type { Statement } from '../notation/tree';
import { evaluate, forEachMember, type FormulaContext } from './formula';
import type { Constraint, Coordinate } from './system';
import { components } from './value';

/** The constraints of a block; an equation between vectors is one constraint per component. */
export function gatherConstraints(
  statements: readonly Statement[],
  coordinates: readonly Coordinate[],
  context: FormulaContext,
): Constraint[] {
  const out: Constraint[] = [];
  for (const s of statements) {
    if (s.kind !== 'constraint') continue;
    forEachMember(s.over ?? [], context, (inner) => {
      const left = evaluate(s.left, inner);
      const right = evaluate(s.right, inner);
      const a = left && components(left);
      const b = right && components(right);
      if (!a || !b) return;
      const zero = b.length === 1 && b[0] === context.scope.graph.zero;
      if (a.length !== b.length && !zero) {
        const message = `the sides of the constraint have ${a.length} and ${b.length} components`;
        context.errors.push({ code: 'syntax', message, span: s.span });
        return;
      }
      const suffix = [...inner.indices.values()].join(',');
      a.forEach((x, k) => {
        const expr = context.scope.graph.subtract(x, zero ? b[0]! : b[k]!);
        const base = s.multiplier ?? `lambda${out.length + 1}`;
        const marks = [suffix, a.length > 1 ? String(k + 1) : ''].filter((m) => m !== '').join(',');
        const name = s.multiplier && marks !== '' ? `${base}[${marks}]` : base;
        const constraint = makeConstraint(expr, name, s.span, coordinates, context);
        if (constraint) out.push(constraint);
      });
    });
  }
  return out;
}

function makeConstraint(
  expr: Expr,
  name: string,
  span: Statement['span'],
  coordinates: readonly Coordinate[],
  context: FormulaContext,
): Constraint | undefined {
  const g = context.scope.graph;
  const order = Math.max(-1, ...symbolsOf(expr).map((s) => {
    const data = s.data as SymbolData;
    return data.role === 'coordinate' ? data.order : -1;
  }));
  const fail = (message: string): undefined => {
    context.errors.push({ code: 'syntax', message, span });
    return undefined;
  };
  if (order < 0) return fail('this constraint holds no coordinate');
  if (order > 1) return fail('a constraint may hold coordinates and velocities, no accelerations');
  const kind = order === 0 ? 'holonomic' : 'velocity';
  const by = coordinates.map((c) => (kind === 'holonomic' ? c.symbol : c.velocity));
  const slopes = gradient(g, [expr], [g.one], by);
  if (kind === 'velocity') {
    const velocities = new Set(by);
    if (symbolsOf(...slopes).some((s) => velocities.has(s))) {
      return fail('a constraint on velocities must be linear in them');
    }
  }
  const multiplier = g.symbol({ name, role: 'multiplier', order: 0 });
  return { expr, kind, gradient: slopes, multiplier, multiplierName: name, span };
}
