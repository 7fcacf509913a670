import type { Expression, Statement } from '../../program/form';
import { type Context, identifierOf, opaque, spanOf, textOf } from './context';
import { child, children, namedChildren, type Node } from './syntax';
import { assign } from './assignments';

/**
 * `match` on literals, dotted names, alternatives of these, and a last case that takes everything. Patterns that look into
 * a value are not read.
 */
export function matches(c: Context, node: Node): Statement[] {
  const span = spanOf(node);
  const subjects = children(node, 'subject');
  const body = child(node, 'body');
  if (subjects.length !== 1 || !body) return [{ kind: 'opaque', reason: 'a match over several values', span }];
  const value = c.expression(subjects[0]!);
  const clauses = namedChildren(body).filter((n) => n.type === 'case_clause');
  let otherwise: Statement[] = [];
  const arms = clauses.map((clause) => {
    const pattern = namedChildren(clause).find((n) => n.type === 'case_pattern');
    const bound = pattern && capture(c, pattern);
    const test = pattern ? testOf(c, value, pattern) : opaque('an unfinished case', spanOf(clause));
    const guardNode = child(clause, 'guard');
    const guardInner = guardNode && namedChildren(guardNode)[0];
    const start = bound ? assign(c, bound, value, spanOf(clause)) : [];
    const guard = guardInner && c.expression(guardInner);
    return { clause, test, guard, start, body: c.block(child(clause, 'consequence')) };
  });
  for (const arm of arms.reverse()) {
    const at = { start: arm.clause.start, end: node.end };
    const whenTrue: Statement[] = [...arm.start, ...arm.body];
    const condition: Expression | undefined =
      arm.test && arm.guard ? { kind: 'logical', op: 'and', left: arm.test, right: arm.guard, span: at } : (arm.test ?? arm.guard);
    if (!condition) otherwise = whenTrue;
    else if (arm.guard && arm.start.length > 0) {
      otherwise = [...arm.start, { kind: 'if', condition, whenTrue: arm.body, whenFalse: otherwise, span: at }];
    } else otherwise = [{ kind: 'if', condition, whenTrue, whenFalse: otherwise, span: at }];
  }
  return otherwise;
}

/** `case y:` gives the value a name; `case _:` does not. */
function capture(c: Context, pattern: Node): ReturnType<Context['target']> | undefined {
  const inner = namedChildren(pattern)[0];
  if (inner?.type !== 'dotted_name' || namedChildren(inner).length !== 1) return undefined;
  return c.target(namedChildren(inner)[0]!);
}

/** The condition under which a pattern takes the value; undefined where it takes everything. */
function testOf(c: Context, value: Expression, pattern: Node): Expression | undefined {
  const span = spanOf(pattern);
  const parts = namedChildren(pattern);
  const equal = (right: Expression): Expression => ({ kind: 'binary', op: '==', left: value, right, opSpan: span, span });
  if (parts.length === 0) {
    const text = textOf(c, pattern).trim();
    return text === '_' ? undefined : opaque('a case of this kind', span);
  }
  const [inner] = parts;
  if (parts.length > 1 || !inner) return opaque('a case of this kind', span);
  switch (inner.type) {
    case 'union_pattern': {
      const tests = namedChildren(inner).map((n) => literal(c, n, span));
      return tests.map(equal).reduce((left, right) => ({ kind: 'logical', op: 'or', left, right, span }));
    }
    case 'dotted_name':
      return namedChildren(inner).length === 1 ? undefined : equal(identifierOf(c, inner));
    default:
      return equal(literal(c, inner, span, textOf(c, pattern)));
  }
}

function literal(c: Context, node: Node, span: Expression['span'], whole = ''): Expression {
  const at = node.type === 'case_pattern' ? (namedChildren(node)[0] ?? node) : node;
  if (at.type === 'dotted_name') return identifierOf(c, at);
  if (!/^(?:integer|float|string|concatenated_string|true|false|none)$/.test(at.type)) return opaque('a case of this kind', span);
  const value = c.expression(at);
  return whole.trim().startsWith('-') ? { kind: 'unary', op: '-', operand: value, span } : value;
}
