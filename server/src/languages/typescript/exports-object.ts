import ts from 'typescript';
import { type Context, nameText } from './context';

/** `exports.rates` or `module.exports.rates`, where the file gives that export a value: the name it is kept under. */
export function exportedName(c: Context, node: ts.Expression): string | undefined {
  if (c.exported.size === 0 || !ts.isPropertyAccessExpression(node) || !isExportsObject(node.expression)) return undefined;
  return c.exported.has(node.name.text) ? `exports.${nameText(node.name.text)}` : undefined;
}

/** `exports` or `module.exports`. */
export function isExportsObject(node: ts.Expression): boolean {
  if (ts.isIdentifier(node)) return node.text === 'exports';
  return isModuleExports(node);
}

export function isModuleExports(node: ts.Expression): boolean {
  return (
    ts.isPropertyAccessExpression(node) &&
    node.name.text === 'exports' &&
    ts.isIdentifier(node.expression) &&
    node.expression.text === 'module'
  );
}

/**
 * The statements at the top of a file; of an `if` that asks whether there is a module system (`typeof module`), the
 * branch that exports.
 */
export function topStatements(source: ts.SourceFile): readonly ts.Statement[] {
  if (!source.text.includes('exports')) return source.statements;
  return source.statements.flatMap((s) => {
    if (!ts.isIfStatement(s)) return [s];
    const test = source.text.slice(s.expression.pos, s.expression.end);
    if (!/\btypeof\s*\(?\s*(?:module|exports)\b/.test(test)) return [s];
    for (const side of [s.thenStatement, s.elseStatement]) {
      const inner = side === undefined ? [] : ts.isBlock(side) ? [...side.statements] : [side];
      if (inner.some((i) => exportPlaces(i).length > 0)) return inner;
    }
    return [s];
  });
}

/** The names under `exports.` that these statements assign. */
export function exportedNames(statements: readonly ts.Statement[]): Set<string> {
  const names = statements.flatMap(exportPlaces).flatMap((p) => (isModuleExports(p) ? [] : [p.name.text]));
  return new Set(names);
}

/** `exports.a` and `module.exports` where a statement assigns to them, in a chain or as a variable's value too. */
function exportPlaces(node: ts.Statement): ts.PropertyAccessExpression[] {
  const values = ts.isVariableStatement(node)
    ? node.declarationList.declarations.flatMap((d) => d.initializer ?? [])
    : ts.isExpressionStatement(node)
      ? [node.expression]
      : [];
  const places: ts.PropertyAccessExpression[] = [];
  for (const value of values) {
    for (let at = value; ts.isBinaryExpression(at) && at.operatorToken.kind === ts.SyntaxKind.EqualsToken; at = at.right) {
      if (!ts.isPropertyAccessExpression(at.left)) continue;
      if (isModuleExports(at.left) || isExportsObject(at.left.expression)) places.push(at.left);
    }
  }
  return places;
}
