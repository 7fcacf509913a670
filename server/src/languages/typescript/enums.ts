import ts from 'typescript';
import { Rational } from '../../expression/rational';
import type { Expression, Statement } from '../../program/form';
import type { Span } from '../../text/span';
import { type Context, bare, nameText, propertyName, spanOf } from './context';

const K = ts.SyntaxKind;

/** An enum: every member gets its value, counted on from the member before where none is written. */
export function enumeration(c: Context, node: ts.EnumDeclaration): Statement {
  const known = new Map<string, number | string>();
  let next: number | undefined = 0;
  const members = node.members.map((m) => {
    const name = propertyName(m.name) ?? c.source.text.slice(m.name.getStart(c.source), m.name.end);
    const span = spanOf(c, m);
    const folded: number | string | undefined = m.initializer ? constant(m.initializer, known) : next;
    if (folded !== undefined) known.set(name, folded);
    next = typeof folded === 'number' ? folded + 1 : undefined;
    return { name, value: memberValue(c, m, folded, span), span };
  });
  return { kind: 'enum', name: nameText(node.name.text), members, span: spanOf(c, node) };
}

function memberValue(c: Context, node: ts.EnumMember, folded: number | string | undefined, span: Span): Expression {
  const at = node.initializer ? spanOf(c, node.initializer) : span;
  if (typeof folded === 'string') return { kind: 'string', value: folded, span: at };
  const value = folded === undefined ? undefined : Rational.fromDouble(folded);
  if (value) return { kind: 'number', value, text: String(folded), integer: false, span: at };
  if (node.initializer) return c.expression(node.initializer);
  return { kind: 'opaque', reason: 'an enum member counted on from a value that is not known', span: at };
}

/** The value of a constant initializer; earlier members may be named with or without their enum. */
function constant(node: ts.Expression, known: ReadonlyMap<string, number | string>): number | string | undefined {
  const at = bare(node);
  if (ts.isNumericLiteral(at)) return Number(at.text);
  if (ts.isStringLiteralLike(at)) return at.text;
  if (ts.isIdentifier(at)) return known.get(at.text);
  if (ts.isPropertyAccessExpression(at)) return ts.isIdentifier(at.expression) ? known.get(at.name.text) : undefined;
  if (ts.isPrefixUnaryExpression(at)) return signed(at.operator, constant(at.operand, known));
  if (!ts.isBinaryExpression(at)) return undefined;
  const left = constant(at.left, known);
  const right = constant(at.right, known);
  return typeof left === 'number' && typeof right === 'number' ? combined(at.operatorToken.kind, left, right) : undefined;
}

function signed(operator: ts.PrefixUnaryOperator, value: number | string | undefined): number | undefined {
  if (typeof value !== 'number') return undefined;
  if (operator === K.MinusToken) return -value;
  if (operator === K.PlusToken) return value;
  return operator === K.TildeToken ? ~value : undefined;
}

function combined(operator: ts.BinaryOperator, a: number, b: number): number | undefined {
  switch (operator) {
    case K.PlusToken:
      return a + b;
    case K.MinusToken:
      return a - b;
    case K.AsteriskToken:
      return a * b;
    case K.PercentToken:
      return a % b;
    case K.LessThanLessThanToken:
      return a << b;
    case K.GreaterThanGreaterThanToken:
      return a >> b;
    case K.GreaterThanGreaterThanGreaterThanToken:
      return a >>> b;
    case K.BarToken:
      return a | b;
    case K.AmpersandToken:
      return a & b;
    case K.CaretToken:
      return a ^ b;
    default:
      return undefined;
  }
}
