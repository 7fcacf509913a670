import ts from 'typescript';
import type { FunctionNode, Parameter, Statement } from '../../program/form';
import { type Context, type FunctionSyntax, type Name, hasModifier, nameOf, propertyName, spanOf } from './context';
import { valueNamed } from './naming';
import { insideOf } from './sketch-instance';
import { typeNote } from './types';

const K = ts.SyntaxKind;

export const ANONYMOUS = '<anonymous>';

/** A function, method or accessor; `name` is used where its syntax has none of its own. */
export function functionNode(c: Context, node: FunctionSyntax, name?: Name): FunctionNode {
  const label = ownName(c, node) ?? name ?? anonymous(c, node);
  const opaque = whyOpaque(node) ?? brokenBy(c, node);
  const made: FunctionNode = {
    name: label.text,
    nameSpan: label.span,
    parameters: node.parameters.filter((p) => !isThisParameter(p)).map((p) => parameter(c, p)),
    body: insideOf(c, node, () => body(c, node)),
    ...(opaque ? { opaque } : {}),
    inheritsSelf: ts.isArrowFunction(node),
    ...(seesArguments(c, node) ? { allArguments: 'arguments' } : {}),
    span: spanOf(c, node),
    bodySpan: node.body ? spanOf(c, node.body) : { start: node.end, end: node.end },
  };
  c.functions.set(node, made);
  return made;
}

function ownName(c: Context, node: FunctionSyntax): Name | undefined {
  if (ts.isConstructorDeclaration(node)) {
    const start = c.source.text.indexOf('constructor', node.modifiers?.end ?? node.getStart(c.source));
    return { text: 'constructor', span: { start, end: start + 'constructor'.length } };
  }
  if (!node.name) return undefined;
  if (ts.isIdentifier(node.name)) return node.name.text === '' ? undefined : nameOf(c, node.name);
  const span = spanOf(c, node.name);
  return { text: propertyName(node.name) ?? c.source.text.slice(span.start, span.end), span };
}

/** The arrow, or the first word of the function, where there is no name to point at. */
function anonymous(c: Context, node: FunctionSyntax): Name {
  if (ts.isArrowFunction(node)) return { text: ANONYMOUS, span: spanOf(c, node.equalsGreaterThanToken) };
  const start = node.getStart(c.source);
  return { text: ANONYMOUS, span: { start, end: start + 'function'.length } };
}

function whyOpaque(node: FunctionSyntax): string | undefined {
  const isAsync = hasModifier(node, K.AsyncKeyword);
  const isGenerator = 'asteriskToken' in node && node.asteriskToken !== undefined;
  if (isAsync) return isGenerator ? 'an async generator function' : 'an async function';
  return isGenerator ? 'a generator function' : undefined;
}

/** Where there are named parameters too, writing to one of them may change the other. */
function seesArguments(c: Context, node: FunctionSyntax): boolean {
  if (ts.isArrowFunction(node) || !node.body || node.parameters.length > 0) return false;
  return /\barguments\b/.test(c.source.text.slice(node.body.pos, node.body.end));
}

/** What the parser made of wrong syntax is a guess, and a guess must not be read. */
function brokenBy(c: Context, node: FunctionSyntax): string | undefined {
  const at = c.errorsAt.find((e) => e >= node.pos);
  return at !== undefined && at <= node.end ? 'a function with a syntax error in it' : undefined;
}

function body(c: Context, node: FunctionSyntax): readonly Statement[] {
  if (!node.body) return [];
  if (ts.isBlock(node.body)) return c.statements(node.body.statements);
  const value = c.expression(node.body);
  return [{ kind: 'return', value, span: spanOf(c, node.body) }];
}

/** TypeScript's `this: Crane`, which is no parameter. */
function isThisParameter(node: ts.ParameterDeclaration): boolean {
  return ts.isIdentifier(node.name) && node.name.text === 'this';
}

function parameter(c: Context, node: ts.ParameterDeclaration): Parameter {
  const pattern = c.binding(node.name);
  const label = pattern.kind === 'name' ? { text: pattern.name, span: pattern.span } : undefined;
  const note = typeNote(c, node.type);
  return {
    pattern,
    ...(note ? { note } : {}),
    ...(node.initializer ? { initial: valueNamed(c, node.initializer, label) } : {}),
    ...(node.dotDotDotToken ? { rest: true } : {}),
    ...(isFieldParameter(node) ? { field: true } : {}),
  };
}

/** `constructor(private m: number)` */
function isFieldParameter(node: ts.ParameterDeclaration): boolean {
  return (ts.getModifiers(node) ?? []).some((m) =>
    [K.PublicKeyword, K.PrivateKeyword, K.ProtectedKeyword, K.ReadonlyKeyword, K.OverrideKeyword].includes(m.kind),
  );
}
