import ts from 'typescript';
import { Rational } from '../../expression/rational';
import type { Argument, Element, Expression } from '../../program/form';
import type { Span } from '../../text/span';
import { assignment, step } from './assignments';
import { type Context, bare, nameText, opaque, spanOf } from './context';
import { exportedName } from './exports-object';
import { literalValue } from './numbers';
import { BINARY, LOGICAL } from './operators';
import { superCall } from './prototype-classes';
import { record } from './records';
import { sketchMember } from './sketch-instance';

const K = ts.SyntaxKind;

type Link = ts.BinaryExpression | ts.PropertyAccessExpression | ts.ElementAccessExpression | ts.CallExpression;

/**
 * An expression in program form. Sums of thousands of terms and long call chains lean to the left without limit, so that
 * side is walked in a loop; every other side is at most as deep as the parser's own stack allowed.
 */
export function expression(c: Context, node: ts.Expression): Expression {
  const spine: Link[] = [];
  let at = bare(node);
  for (;;) {
    if (ts.isBinaryExpression(at) && isPlainBinary(at)) {
      spine.push(at);
      at = bare(at.left);
    } else if (
      (ts.isPropertyAccessExpression(at) && memberName(c, at) === undefined) ||
      ts.isElementAccessExpression(at) ||
      (ts.isCallExpression(at) && at.expression.kind !== K.ImportKeyword)
    ) {
      spine.push(at);
      at = bare(at.expression);
    } else break;
  }
  let value = leaf(c, at);
  for (let link = spine.pop(); link; link = spine.pop()) value = extend(c, link, value);
  return value;
}

/** A member that goes by one name: `exports.rates`, and `p.sin` of a sketch. */
function memberName(c: Context, node: ts.PropertyAccessExpression): string | undefined {
  return exportedName(c, node) ?? sketchMember(c, node);
}

function isPlainBinary(node: ts.BinaryExpression): boolean {
  return BINARY.has(node.operatorToken.kind) || LOGICAL.has(node.operatorToken.kind);
}

function extend(c: Context, node: Link, left: Expression): Expression {
  const span = spanOf(c, node);
  if (ts.isBinaryExpression(node)) {
    const right = c.expression(node.right);
    const logical = LOGICAL.get(node.operatorToken.kind);
    if (logical) return { kind: 'logical', op: logical, left, right, span };
    const op = BINARY.get(node.operatorToken.kind)!;
    return { kind: 'binary', op, left, right, opSpan: spanOf(c, node.operatorToken), span };
  }
  const made = reach(c, node, left, span);
  return node.questionDotToken && made.kind !== 'opaque' ? ({ ...made, optional: true } as Expression) : made;
}

/** A member, item or call of what stands left. */
function reach(c: Context, node: Exclude<Link, ts.BinaryExpression>, object: Expression, span: Span): Expression {
  if (ts.isPropertyAccessExpression(node)) {
    const name = nameText(node.name.text);
    if (name === '') return opaque('an unfinished expression', span);
    return { kind: 'member', object, name, nameSpan: spanOf(c, node.name), span };
  }
  if (ts.isElementAccessExpression(node)) {
    return { kind: 'index', object, indices: [c.expression(node.argumentExpression)], span };
  }
  const above = superCall(c, node);
  if (above) return { kind: 'call', callee: above.callee, args: args(c, above.args), span };
  return { kind: 'call', callee: object, args: args(c, node.arguments), span };
}

function args(c: Context, nodes: readonly ts.Expression[] | undefined): Argument[] {
  return (nodes ?? []).map((a) =>
    ts.isSpreadElement(a) ? { value: c.expression(a.expression), spread: true } : { value: c.expression(a) },
  );
}

function leaf(c: Context, node: ts.Expression): Expression {
  const span = spanOf(c, node);
  if (ts.isIdentifier(node)) return identifier(node, span);
  if (ts.isNumericLiteral(node)) return number(c, span);
  if (ts.isStringLiteral(node) || ts.isNoSubstitutionTemplateLiteral(node)) {
    return { kind: 'string', value: node.text, span };
  }
  if (ts.isPropertyAccessExpression(node)) return { kind: 'name', name: memberName(c, node)!, span };
  if (ts.isBinaryExpression(node)) {
    if (node.operatorToken.kind === K.CommaToken) return sequence(c, node, span);
    return assignment(c, node, span);
  }
  if (ts.isPrefixUnaryExpression(node)) return prefix(c, node, span);
  if (ts.isPostfixUnaryExpression(node)) return step(c, node, 'old', span);
  if (ts.isConditionalExpression(node)) {
    const [condition, whenTrue, whenFalse] = [node.condition, node.whenTrue, node.whenFalse].map((n) => c.expression(n));
    return { kind: 'conditional', condition: condition!, whenTrue: whenTrue!, whenFalse: whenFalse!, span };
  }
  if (ts.isArrayLiteralExpression(node)) return { kind: 'list', items: node.elements.map((e) => element(c, e)), span };
  if (ts.isObjectLiteralExpression(node)) return record(c, node, span);
  if (ts.isFunctionExpression(node) || ts.isArrowFunction(node)) {
    return { kind: 'function', node: c.functionNode(node), span };
  }
  if (ts.isClassExpression(node)) return { kind: 'class', node: c.classNode(node), span };
  if (ts.isNewExpression(node)) {
    return { kind: 'call', callee: c.expression(node.expression), args: args(c, node.arguments), isNew: true, span };
  }
  if (ts.isTypeOfExpression(node)) return { kind: 'unary', op: 'typeof', operand: c.expression(node.expression), span };
  if (ts.isTemplateExpression(node)) return template(c, node, span);
  if (ts.isAwaitExpression(node) || ts.isYieldExpression(node)) return waiting(c, node, span);
  if (ts.isTaggedTemplateExpression(node)) return tagged(c, node, span);
  if (ts.isDeleteExpression(node)) return deletion(c, node, span);
  if (ts.isVoidExpression(node)) return voided(c, node, span);
  return simple(node, span);
}

function simple(node: ts.Expression, span: Span): Expression {
  switch (node.kind) {
    case K.TrueKeyword:
    case K.FalseKeyword:
      return { kind: 'boolean', value: node.kind === K.TrueKeyword, span };
    case K.NullKeyword:
      return { kind: 'nothing', isNull: true, span };
    case K.OmittedExpression:
      return { kind: 'nothing', span };
    case K.ThisKeyword:
      return { kind: 'self', span };
    case K.SuperKeyword:
      return { kind: 'super', span };
    case K.PrivateIdentifier:
      return { kind: 'string', value: (node as ts.PrivateIdentifier).text, span };
    default:
      return opaque(OPAQUE.get(node.kind) ?? 'syntax of this kind', span);
  }
}

const OPAQUE = new Map<ts.SyntaxKind, string>([
  [K.BigIntLiteral, 'a big integer (its division drops the remainder)'],
  [K.RegularExpressionLiteral, 'a regular expression'],
  [K.MetaProperty, 'a property of the running program'],
  [K.JsxElement, 'JSX markup'],
  [K.JsxSelfClosingElement, 'JSX markup'],
  [K.JsxFragment, 'JSX markup'],
  [K.CallExpression, 'an import while the program runs'],
  [K.ImportKeyword, 'an import while the program runs'],
  [K.SpreadElement, 'a spread in this place'],
]);

function identifier(node: ts.Identifier, span: Span): Expression {
  if (node.text === '') return opaque('an unfinished expression', span);
  if (node.text === 'undefined') return { kind: 'nothing', span };
  return { kind: 'name', name: nameText(node.text), span };
}

/** JavaScript's numbers are doubles, so no literal is an integer in the sense of integer division. */
function number(c: Context, span: Span): Expression {
  const text = c.source.text.slice(span.start, span.end);
  const value = literalValue(text);
  if (!value) return opaque('a number too large for a double', span);
  return { kind: 'number', value, text, integer: false, span };
}

function element(c: Context, node: ts.Expression): Element {
  return ts.isSpreadElement(node) ? { value: c.expression(node.expression), spread: true } : { value: c.expression(node) };
}

/** `a, b, c`, walked down its left side. */
function sequence(c: Context, node: ts.BinaryExpression, span: Span): Expression {
  const nodes: ts.Expression[] = [];
  let at: ts.Expression = node;
  while (ts.isBinaryExpression(at) && at.operatorToken.kind === K.CommaToken) {
    nodes.push(at.right);
    at = bare(at.left);
  }
  nodes.push(at);
  return { kind: 'sequence', items: nodes.reverse().map((n) => c.expression(n)), span };
}

function prefix(c: Context, node: ts.PrefixUnaryExpression, span: Span): Expression {
  switch (node.operator) {
    case K.PlusPlusToken:
    case K.MinusMinusToken:
      return step(c, node, 'new', span);
    case K.PlusToken:
      return { kind: 'unary', op: '+', operand: c.expression(node.operand), span };
    case K.MinusToken:
      return { kind: 'unary', op: '-', operand: c.expression(node.operand), span };
    case K.ExclamationToken:
      return { kind: 'unary', op: 'not', operand: c.expression(node.operand), span };
    default:
      return tilde(c, node, span);
  }
}

/** `~~x` is `x | 0`: both cut the fraction off. */
function tilde(c: Context, node: ts.PrefixUnaryExpression, span: Span): Expression {
  const inner = bare(node.operand);
  if (!ts.isPrefixUnaryExpression(inner) || inner.operator !== K.TildeToken) {
    return { kind: 'unary', op: 'bit', operand: c.expression(node.operand), span };
  }
  const opSpan = { start: span.start, end: span.start + 1 };
  const zero: Expression = { kind: 'number', value: Rational.ZERO, text: '0', integer: false, span: opSpan };
  return { kind: 'binary', op: 'bit', left: c.expression(inner.operand), right: zero, opSpan, span };
}

/** `a${b}c` is `'a' + b + 'c'`: names of fields are put together like that. */
function template(c: Context, node: ts.TemplateExpression, span: Span): Expression {
  let value: Expression = { kind: 'string', value: node.head.text, span: spanOf(c, node.head) };
  const join = (right: Expression): void => {
    value = { kind: 'binary', op: '+', left: value, right, opSpan: { start: right.span.start, end: right.span.start }, span };
  };
  for (const part of node.templateSpans) {
    join(c.expression(part.expression));
    if (part.literal.text !== '') join({ kind: 'string', value: part.literal.text, span: spanOf(c, part.literal) });
  }
  return value;
}

/** What is awaited or yielded is evaluated, and may change things; what comes back is not known. */
function waiting(c: Context, node: ts.AwaitExpression | ts.YieldExpression, span: Span): Expression {
  const result = opaque(ts.isAwaitExpression(node) ? 'a value that is awaited' : 'a yield', span);
  return node.expression ? { kind: 'sequence', items: [c.expression(node.expression), result], span } : result;
}

/** A call of the tag; what it makes of the text is not known. */
function tagged(c: Context, node: ts.TaggedTemplateExpression, span: Span): Expression {
  const parts = ts.isTemplateExpression(node.template) ? node.template.templateSpans : [];
  const call: Expression = {
    kind: 'call',
    callee: c.expression(node.tag),
    args: parts.map((p) => ({ value: c.expression(p.expression) })),
    span,
  };
  return { kind: 'sequence', items: [call, opaque('a tagged template string', span)], span };
}

/** The place holds nothing that may be read after. */
function deletion(c: Context, node: ts.DeleteExpression, span: Span): Expression {
  const value = opaque('a property that was deleted', span);
  return { kind: 'assign', target: c.target(node.expression), value, yields: 'new', span };
}

function voided(c: Context, node: ts.VoidExpression, span: Span): Expression {
  const inner = bare(node.expression);
  if (ts.isNumericLiteral(inner)) return { kind: 'nothing', span };
  return { kind: 'sequence', items: [c.expression(inner), { kind: 'nothing', span }], span };
}
