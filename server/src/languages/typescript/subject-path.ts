import ts from 'typescript';
import { bare, isFunctionSyntax, nameText, propertyName } from './context';
import { ANONYMOUS } from './functions';

/** What a module's own value is called. */
const DEFAULT = 'default';

/** Objects whose members are globals or the instance itself; they say nothing in a path. */
const SILENT = new Set(['exports', 'window', 'globalThis', 'global', 'self', 'prototype']);

/**
 * A readable dotted name for the last node of the chain: `rates`, `Crane.step`, `makeCrane.rates`, `default`. Functions
 * without a name leave no trace, except the last, which is `<anonymous>`.
 */
export function pathOf(chain: readonly ts.Node[]): string {
  const path: string[] = [];
  let pending: string | undefined;
  chain.forEach((node, i) => {
    const given = givenName(node);
    if (given !== undefined) pending = given;
    else if (ts.isObjectLiteralExpression(node)) {
      if (pending !== undefined && i < chain.length - 1) path.push(pending);
      pending = undefined;
    } else if (isFunctionSyntax(node) || ts.isClassLike(node) || ts.isModuleDeclaration(node)) {
      const own = ownName(node);
      const name = pending === undefined || pending === DEFAULT ? (own ?? pending) : pending;
      if (name !== undefined) path.push(name);
      else if (i === chain.length - 1) path.push(ANONYMOUS);
      pending = undefined;
    }
  });
  return path.join('.');
}

function givenName(node: ts.Node): string | undefined {
  if (ts.isVariableDeclaration(node)) return ts.isIdentifier(node.name) ? nameText(node.name.text) : undefined;
  if (ts.isPropertyAssignment(node) || ts.isPropertyDeclaration(node)) return propertyName(node.name);
  if (ts.isExportAssignment(node)) return DEFAULT;
  if (ts.isBinaryExpression(node) && node.operatorToken.kind === ts.SyntaxKind.EqualsToken) return placeName(node.left);
  return undefined;
}

/** `Crane.prototype.step` is `Crane.step`; `module.exports` is `default`; `exports.f`, `this.f` and `window.f` are `f`. */
function placeName(node: ts.Expression): string | undefined {
  const names: string[] = [];
  let at = bare(node);
  for (; ts.isPropertyAccessExpression(at); at = bare(at.expression)) names.unshift(nameText(at.name.text));
  if (ts.isIdentifier(at)) names.unshift(nameText(at.text));
  if (names.length === 2 && names[0] === 'module' && names[1] === 'exports') return DEFAULT;
  const loud = names.filter((n) => !SILENT.has(n) && n !== 'module');
  return loud.length > 0 ? loud.join('.') : undefined;
}

function ownName(node: ts.Node): string | undefined {
  if (ts.isConstructorDeclaration(node)) return 'constructor';
  const name = (node as ts.NamedDeclaration).name;
  if (name && ts.isPropertyName(name)) return propertyName(name);
  const isDefault = ts.canHaveModifiers(node) && ts.getModifiers(node)?.some((m) => m.kind === ts.SyntaxKind.DefaultKeyword);
  return isDefault ? DEFAULT : undefined;
}
