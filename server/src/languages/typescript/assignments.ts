import ts from 'typescript';
import { Rational } from '../../expression/rational';
import type { Expression } from '../../program/form';
import type { Span } from '../../text/span';
import { type Context, bare, nameOf, opaque } from './context';
import { valueNamed } from './naming';
import { COMPOUND, LOGICAL_ASSIGNMENT } from './operators';

const K = ts.SyntaxKind;

/** `a = v`, `a += v`, `a ??= v`. */
export function assignment(c: Context, node: ts.BinaryExpression, span: Span): Expression {
  const token = node.operatorToken.kind;
  if (token === K.EqualsToken) {
    return { kind: 'assign', target: c.target(node.left), value: named(c, node), yields: 'new', span };
  }
  const op = COMPOUND.get(token);
  if (op) return { kind: 'assign', target: c.target(node.left), op, value: c.expression(node.right), yields: 'new', span };
  const logical = LOGICAL_ASSIGNMENT.get(token);
  if (!logical) return opaque('an operator of this kind', span);
  const value: Expression = isStill(node.left)
    ? { kind: 'logical', op: logical, left: c.expression(node.left), right: c.expression(node.right), span }
    : opaque('a logical assignment whose place is computed with a side effect', span);
  return { kind: 'assign', target: c.target(node.left), value, yields: 'new', span };
}

/** The right side; a function or class without a name takes the name it is assigned to. */
function named(c: Context, node: ts.BinaryExpression): Expression {
  const left = bare(node.left);
  const name = ts.isIdentifier(left) ? left : ts.isPropertyAccessExpression(left) ? left.name : undefined;
  return valueNamed(c, node.right, name && nameOf(c, name));
}

/** `i++`, `--i`: a one is added to or taken from the place; its value is the `old` one or the `new`. */
export function step(
  c: Context,
  node: ts.PrefixUnaryExpression | ts.PostfixUnaryExpression,
  yields: 'new' | 'old',
  span: Span,
): Expression {
  const op = node.operator === K.PlusPlusToken ? '+' : '-';
  const token = yields === 'new' ? { start: span.start, end: span.start + 2 } : { start: span.end - 2, end: span.end };
  const one: Expression = { kind: 'number', value: Rational.ONE, text: '1', integer: false, span: token };
  return { kind: 'assign', target: c.target(node.operand), op, value: one, yields, span };
}

/** True where evaluating the place twice is the same as once. */
function isStill(node: ts.Expression): boolean {
  for (let at = bare(node); ; ) {
    if (ts.isIdentifier(at) || at.kind === K.ThisKeyword || at.kind === K.SuperKeyword) return true;
    if (ts.isElementAccessExpression(at)) {
      const index = bare(at.argumentExpression);
      if (!ts.isIdentifier(index) && !ts.isNumericLiteral(index) && !ts.isStringLiteralLike(index)) return false;
    } else if (!ts.isPropertyAccessExpression(at)) return false;
    at = bare((at as ts.PropertyAccessExpression | ts.ElementAccessExpression).expression);
  }
}
