import ts from 'typescript';
import type { Expression } from '../../program/form';
import { type Context, type Name, bare, spanOf } from './context';

/** A value in program form; a function or class that has no name of its own takes this one. */
export function valueNamed(c: Context, node: ts.Expression, name: Name | undefined): Expression {
  const value = bare(node);
  if (name && (ts.isFunctionExpression(value) || ts.isArrowFunction(value))) {
    return { kind: 'function', node: c.functionNode(value, name), span: spanOf(c, value) };
  }
  if (name && ts.isClassExpression(value)) {
    return { kind: 'class', node: c.classNode(value, name), span: spanOf(c, value) };
  }
  return c.expression(value);
}
