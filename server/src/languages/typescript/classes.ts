import ts from 'typescript';
import type { ClassNode, Expression, FunctionNode, Member } from '../../program/form';
import { type Context, type Name, hasModifier, nameOf, propertyName, spanOf } from './context';
import { ANONYMOUS } from './functions';
import { valueNamed } from './naming';
import { typeNote } from './types';

const K = ts.SyntaxKind;

/** A class; overload signatures, abstract members and `declare` fields leave nothing at run time and are left out. */
export function classNode(c: Context, node: ts.ClassLikeDeclaration, name?: Name): ClassNode {
  const span = spanOf(c, node);
  const label = (node.name && nameOf(c, node.name)) ?? name;
  const base = node.heritageClauses?.find((h) => h.token === K.ExtendsKeyword)?.types[0];
  const made: ClassNode = {
    name: label?.text ?? ANONYMOUS,
    nameSpan: label?.span ?? { start: span.start, end: span.start + 'class'.length },
    ...(base ? { base: c.expression(base.expression) } : {}),
    members: node.members.flatMap((m) => member(c, m) ?? []),
    span,
  };
  c.classes.set(node, made);
  return made;
}

function member(c: Context, node: ts.ClassElement): Member | undefined {
  const span = spanOf(c, node);
  const isStatic = hasModifier(node, K.StaticKeyword);
  if (ts.isClassStaticBlockDeclaration(node)) return staticBlock(c, node);
  if (ts.isConstructorDeclaration(node)) {
    if (!node.body) return undefined;
    return { kind: 'constructor', name: 'constructor', isStatic: false, node: c.functionNode(node), span };
  }
  if (ts.isPropertyDeclaration(node)) {
    if (hasModifier(node, K.AbstractKeyword) || hasModifier(node, K.DeclareKeyword)) return undefined;
    const label = { text: memberName(c, node.name), span: spanOf(c, node.name) };
    const value = node.initializer ? { value: valueNamed(c, node.initializer, label) } : {};
    const constant = hasModifier(node, K.ReadonlyKeyword) ? { isConstant: true } : {};
    const note = typeNote(c, node.type);
    return { kind: 'field', name: label.text, isStatic, ...constant, ...value, ...(note ? { note } : {}), span };
  }
  if (ts.isMethodDeclaration(node) || ts.isGetAccessorDeclaration(node) || ts.isSetAccessorDeclaration(node)) {
    if (!node.body) return undefined;
    const kind = ts.isMethodDeclaration(node) ? 'method' : ts.isGetAccessorDeclaration(node) ? 'getter' : 'setter';
    return { kind, name: memberName(c, node.name), isStatic, node: c.functionNode(node), span };
  }
  return undefined;
}

/** Computed names are kept as written, in their brackets: no other name can be spelled like that. */
function memberName(c: Context, node: ts.PropertyName): string {
  return propertyName(node) ?? c.source.text.slice(node.getStart(c.source), node.end);
}

/** `static { this.g = 2; }` runs among the static fields with the class as `this`: a nameless field, valued by a call. */
function staticBlock(c: Context, node: ts.ClassStaticBlockDeclaration): Member {
  const span = spanOf(c, node);
  const fn: FunctionNode = {
    name: ANONYMOUS,
    nameSpan: { start: span.start, end: span.start + 'static'.length },
    parameters: [],
    body: c.statements(node.body.statements),
    inheritsSelf: true,
    span,
    bodySpan: spanOf(c, node.body),
  };
  const value: Expression = { kind: 'call', callee: { kind: 'function', node: fn, span }, args: [], span };
  return { kind: 'field', name: '', isStatic: true, value, span };
}
