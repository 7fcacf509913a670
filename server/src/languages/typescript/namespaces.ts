import ts from 'typescript';
import type { Expression, Field, FunctionNode, Statement } from '../../program/form';
import { type Context, hasModifier, nameOf, spanOf } from './context';

const K = ts.SyntaxKind;

/**
 * `namespace Crane { export function rates() {} }` as a constant whose value is a function called at once: the statements
 * run inside it and it returns a record of what they export. Blocks of the same name count as one, at the first's place;
 * for the others, and for namespaces of types only, undefined.
 */
export function namespaceValue(
  c: Context,
  node: ts.ModuleDeclaration,
  siblings: readonly ts.Statement[],
): Extract<Statement, { kind: 'declare' }> | undefined {
  if (!ts.isIdentifier(node.name)) return undefined;
  const name = nameOf(c, node.name);
  const same = siblings.filter((s) => declaredName(s) === node.name.text);
  const blocks = same.filter((s): s is ts.ModuleDeclaration => ts.isModuleDeclaration(s));
  const span = spanOf(c, node);
  if (blocks[0] !== node) return undefined;
  const inner = blocks.flatMap(contents);
  if (inner.every((s) => ts.isInterfaceDeclaration(s) || ts.isTypeAliasDeclaration(s))) return undefined;
  // The class, function or enum of the same name stays what the name means; the namespace's additions to it are not known.
  if (same.length > blocks.length) return undefined;
  const value = call(c, node, blocks, inner);
  return { kind: 'declare', mutable: false, scope: 'block', target: { kind: 'name', name: name.text, span: name.span }, value, span };
}

/** `namespace A.B {}` is a namespace B exported from A. */
function contents(node: ts.ModuleDeclaration): readonly ts.Statement[] {
  if (!node.body) return [];
  if (ts.isModuleBlock(node.body)) return node.body.statements;
  return ts.isModuleDeclaration(node.body) ? [node.body] : [];
}

function declaredName(node: ts.Statement): string | undefined {
  if (ts.isModuleDeclaration(node) || ts.isClassDeclaration(node) || ts.isFunctionDeclaration(node) || ts.isEnumDeclaration(node)) {
    return node.name && ts.isIdentifier(node.name) ? node.name.text : undefined;
  }
  return undefined;
}

function call(
  c: Context,
  node: ts.ModuleDeclaration,
  blocks: readonly ts.ModuleDeclaration[],
  inner: readonly ts.Statement[],
): Expression {
  const span = spanOf(c, node);
  const body = c.statements(inner).flatMap(withoutExport);
  const names = inner.flatMap((s) => (isExported(s) || ts.isModuleDeclaration(s) ? namesOf(s) : []));
  const fields = [...new Set(names)].map((name): Field => ({ kind: 'field', name, value: { kind: 'name', name, span }, span }));
  body.push({ kind: 'return', value: { kind: 'record', fields, span }, span });
  const fn: FunctionNode = {
    name: node.name.text,
    nameSpan: spanOf(c, node.name),
    parameters: [],
    body,
    inheritsSelf: true,
    span,
    bodySpan: node.body ? spanOf(c, node.body) : span,
  };
  for (const block of blocks) c.functions.set(block, fn);
  return { kind: 'call', callee: { kind: 'function', node: fn, span }, args: [], span };
}

function withoutExport(s: Statement): Statement[] {
  return s.kind === 'export' ? [] : [s];
}

function isExported(node: ts.Statement): boolean {
  return hasModifier(node, K.ExportKeyword) && !hasModifier(node, K.DeclareKeyword);
}

function namesOf(node: ts.Statement): string[] {
  if (ts.isVariableStatement(node)) {
    return node.declarationList.declarations.flatMap((d) => (ts.isIdentifier(d.name) ? [d.name.text] : []));
  }
  const name = declaredName(node);
  return name === undefined ? [] : [name];
}
