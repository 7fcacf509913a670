import { conditionOf } from './conditions';
import type { Expression } from './form';
import type { Machine } from './machine';
import { pathOf, shapeOf } from './paths';
import type { Scope } from './scope';
import { isUnread, type Value } from './values';

/** `assume`: flags and kinds by path, comparisons by what they say. */
export function assume(m: Machine, scope: Scope, e: Expression): void {
  take(m, scope, e, true);
}

function take(m: Machine, scope: Scope, e: Expression, holds: boolean): void {
  m.assumedShapes.set(shapeOf(e), holds);
  if (e.kind === 'unary' && e.op === 'not') {
    take(m, scope, e.operand, !holds);
    return;
  }
  if (e.kind === 'logical' && e.op === (holds ? 'and' : 'or')) {
    take(m, scope, e.left, holds);
    take(m, scope, e.right, holds);
    return;
  }
  const truth: Value = { kind: 'condition', expr: holds ? m.graph.true : m.graph.false };
  const path = pathOf(e);
  if (path !== undefined) {
    m.given.set(path, truth);
    return;
  }
  if (e.kind === 'binary' && (e.op === '==' || e.op === '!=') && takeKind(m, scope, e, (e.op === '==') === holds)) return;
  const c = conditionOf(m, scope, e);
  // The shape just noted must not answer for the condition itself.
  void c;
  m.assumedShapes.delete(shapeOf(e));
  const said = conditionOf(m, scope, e);
  m.assumedShapes.set(shapeOf(e), holds);
  if (isUnread(said)) return;
  const expr = holds ? said : m.graph.not(said);
  if (expr !== m.graph.true && expr !== m.graph.false) m.assumed.push(expr);
}

/** `Mode.Driven` */
function evaluateQuietly(m: Machine, scope: Scope, e: Expression): Value {
  m.quiet++;
  const value = m.evaluate(scope, e);
  m.quiet--;
  return value;
}

function takeKind(m: Machine, scope: Scope, e: Expression & { kind: 'binary' }, equal: boolean): boolean {
  for (const [place, value] of [
    [e.left, e.right],
    [e.right, e.left],
  ] as const) {
    const path = pathOf(place);
    if (path === undefined) continue;
    const named = value.kind === 'member' && equal ? evaluateQuietly(m, scope, value) : undefined;
    if (named?.kind === 'string') {
      m.given.set(path, named);
      return true;
    }
    if (value.kind === 'string' && equal) {
      m.given.set(path, { kind: 'string', value: value.value });
      return true;
    }
    if (value.kind === 'boolean') {
      m.given.set(path, { kind: 'condition', expr: value.value === equal ? m.graph.true : m.graph.false });
      return true;
    }
  }
  return false;
}
