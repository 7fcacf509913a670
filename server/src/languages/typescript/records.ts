import ts from 'typescript';
import type { Expression, Field } from '../../program/form';
import type { Span } from '../../text/span';
import { type Context, nameText, propertyName, spanOf } from './context';
import { valueNamed } from './naming';

/** An object literal. */
export function record(c: Context, node: ts.ObjectLiteralExpression, span: Span): Expression {
  return { kind: 'record', fields: node.properties.map((p) => field(c, p)), span };
}

function field(c: Context, node: ts.ObjectLiteralElementLike): Field {
  const span = spanOf(c, node);
  if (ts.isSpreadAssignment(node)) return { kind: 'spread', value: c.expression(node.expression), span };
  if (ts.isShorthandPropertyAssignment(node)) {
    const name = nameText(node.name.text);
    return { kind: 'field', name, value: c.expression(node.name), span };
  }
  const name = propertyName(node.name);
  if (name === undefined) return computed(c, node, span);
  const label = { text: name, span: spanOf(c, node.name) };
  if (ts.isPropertyAssignment(node)) return { kind: 'field', name, value: valueNamed(c, node.initializer, label), span };
  const fn = c.functionNode(node, label);
  if (ts.isMethodDeclaration(node)) return { kind: 'field', name, value: { kind: 'function', node: fn, span }, span };
  return { kind: ts.isGetAccessorDeclaration(node) ? 'getter' : 'setter', name, node: fn, span };
}

function computed(
  c: Context,
  node: ts.PropertyAssignment | ts.MethodDeclaration | ts.AccessorDeclaration,
  span: Span,
): Field {
  const name = c.expression((node.name as ts.ComputedPropertyName).expression);
  if (ts.isPropertyAssignment(node)) return { kind: 'computed', name, value: c.expression(node.initializer), span };
  if (ts.isMethodDeclaration(node)) {
    return { kind: 'computed', name, value: { kind: 'function', node: c.functionNode(node), span }, span };
  }
  return { kind: 'computed', name, value: { kind: 'opaque', reason: 'an accessor with a computed name', span }, span };
}
