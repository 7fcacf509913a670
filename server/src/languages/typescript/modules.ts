import ts from 'typescript';
import type { Expression, Field, Pattern, Statement } from '../../program/form';
import type { Span } from '../../text/span';
import { type Context, bare, nameText, propertyName, spanOf } from './context';
import { boundNames } from './patterns';
import { isExportsObject, isModuleExports } from './exports-object';
import { valueNamed } from './naming';

const K = ts.SyntaxKind;

type ExportStatement = Extract<Statement, { kind: 'export' }>;
type ExportName = ExportStatement['names'][number];

/*
 * Imports and exports in program form:
 *  - a default import has the imported name `default`; `import x = require('./y')` and `const x = require('./y')` stay a
 *    call of `require`, whose value is the module: its `value` where it has one, else the record of its exported names;
 *  - an export of a value without a name declares a variable that no source can spell (`default`, `exports.rates`) and
 *    exports that; only `module.exports = value` and `export = value` carry `value`: the module itself is that value;
 *  - `module.exports = { rates, energy: f }` exports the names too, one by one; a file that assigns to `exports.rates` and
 *    its like ends with a `value` that is a record of them;
 *  - imports and exports of types only leave nothing.
 */

export function importDeclaration(c: Context, node: ts.ImportDeclaration, span: Span): Statement[] {
  const from = moduleText(node.moduleSpecifier);
  const clause = node.importClause;
  if (from === undefined || clause?.phaseModifier === K.TypeKeyword) return [];
  const names: { imported: string; local: string; span: Span }[] = [];
  if (clause?.name) names.push({ imported: 'default', local: nameText(clause.name.text), span: spanOf(c, clause.name) });
  const bindings = clause?.namedBindings;
  if (bindings && ts.isNamedImports(bindings)) {
    for (const e of bindings.elements) {
      if (e.isTypeOnly) continue;
      const local = nameText(e.name.text);
      names.push({ imported: e.propertyName ? nameText(e.propertyName.text) : local, local, span: spanOf(c, e) });
    }
    if (names.length === 0 && bindings.elements.length > 0) return [];
  }
  const namespace = bindings && ts.isNamespaceImport(bindings) ? { namespace: nameText(bindings.name.text) } : {};
  return [{ kind: 'import', from, names, ...namespace, span }];
}

/** `import x = require('./y')`, `import sin = Trig.sin` */
export function importEquals(c: Context, node: ts.ImportEqualsDeclaration, span: Span): Statement[] {
  if (node.isTypeOnly) return [];
  const target: Pattern = { kind: 'name', name: nameText(node.name.text), span: spanOf(c, node.name) };
  const reference = node.moduleReference;
  const at = spanOf(c, reference);
  const value: Expression = ts.isExternalModuleReference(reference)
    ? {
        kind: 'call',
        callee: { kind: 'name', name: 'require', span: at },
        args: [{ value: c.expression(reference.expression) }],
        span: at,
      }
    : entity(c, reference);
  const declare: Statement = { kind: 'declare', mutable: false, scope: 'block', target, value, span };
  const isExported = ts.getModifiers(node)?.some((m) => m.kind === K.ExportKeyword);
  return isExported ? [declare, exportNames([{ local: target.name, exported: target.name }], span)] : [declare];
}

function entity(c: Context, node: ts.EntityName): Expression {
  const names: ts.Identifier[] = [];
  let at = node;
  for (; ts.isQualifiedName(at); at = at.left) names.push(at.right);
  let value: Expression = { kind: 'name', name: nameText(at.text), span: spanOf(c, at) };
  for (const name of names.reverse()) {
    const nameSpan = spanOf(c, name);
    value = { kind: 'member', object: value, name: nameText(name.text), nameSpan, span: { ...value.span, end: nameSpan.end } };
  }
  return value;
}

export function exportDeclaration(node: ts.ExportDeclaration, span: Span): Statement[] {
  if (node.isTypeOnly) return [];
  const from = node.moduleSpecifier ? moduleText(node.moduleSpecifier) : undefined;
  if (node.moduleSpecifier && from === undefined) return [];
  const clause = node.exportClause;
  if (!clause) return from === undefined ? [] : [{ kind: 'export', names: [], from, all: true, span }];
  if (ts.isNamespaceExport(clause)) {
    return [{ kind: 'export', names: [{ local: '*', exported: nameText(clause.name.text) }], from, all: true, span }];
  }
  const names = clause.elements
    .filter((e) => !e.isTypeOnly)
    .map((e) => ({ local: nameText((e.propertyName ?? e.name).text), exported: nameText(e.name.text) }));
  return [{ kind: 'export', names, ...(from === undefined ? {} : { from }), span }];
}

/** `export default value`, `export = value` */
export function exportAssignment(c: Context, node: ts.ExportAssignment, span: Span): Statement[] {
  if (node.isExportEquals) return moduleValue(c, node.expression, span);
  const value = bare(node.expression);
  if (ts.isIdentifier(value)) return [exportNames([{ local: nameText(value.text), exported: 'default' }], span)];
  return named(c, 'default', 'default', node.expression, span);
}

/** `export const a = 1, { b } = c`: all names that the patterns bind. */
export function exportList(nodes: readonly ts.BindingName[], span: Span): Statement {
  return exportNames(boundNames(nodes).map(({ text }) => ({ local: nameText(text), exported: nameText(text) })), span);
}

/**
 * `module.exports = v`, `exports.a = v`, `exports.a = exports.b = v` as exports; undefined for other expressions. The last
 * statement's value is what the whole assignment is worth.
 */
export function exportedValue(
  c: Context,
  node: ts.Expression,
  span: Span,
): (Statement[] & { value?: Expression }) | undefined {
  const places: ts.Expression[] = [];
  let at = bare(node);
  while (ts.isBinaryExpression(at) && at.operatorToken.kind === K.EqualsToken) {
    places.push(bare(at.left));
    at = bare(at.right);
  }
  const own = places.filter((p) => isModuleExports(p) || exportPlace(c, p) !== undefined || isExportsName(p));
  if (own.length === 0 || own.length < places.length) return undefined;
  const whole = own.some((p) => !ts.isPropertyAccessExpression(p) || isModuleExports(p));
  const keys = own.flatMap((p) => exportPlace(c, p) ?? []);
  const made: Statement[] & { value?: Expression } = [];
  if (keys.length > 0) {
    const first = keys[0]!;
    const local = `exports.${first.text}`;
    made.push(...named(c, local, first.text, at, span, first.span));
    for (const key of keys.slice(1)) made.push(...alias(local, key.text, span));
    made.value = { kind: 'name', name: local, span: first.span };
    if (whole) made.push({ kind: 'export', names: [], value: made.value, span });
  } else if (whole) {
    made.push(...moduleValue(c, at, span));
    const last = made[made.length - 1];
    made.value = last?.kind === 'export' ? last.value : undefined;
  }
  return made;
}

function exportPlace(c: Context, node: ts.Expression): { text: string; span: Span } | undefined {
  if (!ts.isPropertyAccessExpression(node) || isModuleExports(node) || !isExportsObject(node.expression)) return undefined;
  if (!c.exported.has(node.name.text)) return undefined;
  return { text: nameText(node.name.text), span: spanOf(c, node.name) };
}

function isExportsName(node: ts.Expression): boolean {
  return ts.isIdentifier(node) && node.text === 'exports';
}

function named(
  c: Context,
  local: string,
  exported: string,
  node: ts.Expression,
  span: Span,
  nameSpan = { start: span.start, end: span.start },
): Statement[] {
  const target: Pattern = { kind: 'name', name: local, span: nameSpan };
  const value = valueNamed(c, node, { text: exported, span: nameSpan });
  return [
    { kind: 'declare', mutable: true, scope: 'function', target, value, span },
    exportNames([{ local, exported }], span),
  ];
}

/** A second export of what the first already holds, with a variable of its own so that `exports.b` can be read. */
function alias(local: string, exported: string, span: Span): Statement[] {
  const target: Pattern = { kind: 'name', name: `exports.${exported}`, span };
  const value: Expression = { kind: 'name', name: local, span };
  return [
    { kind: 'declare', mutable: true, scope: 'function', target, value, span },
    exportNames([{ local: target.name, exported }], span),
  ];
}

/** `module.exports = v`: the value itself, and where it is a record also those of its fields that are variables. */
function moduleValue(c: Context, node: ts.Expression, span: Span): Statement[] {
  const value = bare(node);
  const whole: Statement = { kind: 'export', names: [], value: c.expression(value), span };
  const names = ts.isObjectLiteralExpression(value) ? value.properties.flatMap((p) => variableField(p) ?? []) : [];
  return names.length > 0 ? [exportNames(names, span), whole] : [whole];
}

function variableField(node: ts.ObjectLiteralElementLike): ExportName | undefined {
  if (ts.isShorthandPropertyAssignment(node)) return { local: nameText(node.name.text), exported: nameText(node.name.text) };
  if (!ts.isPropertyAssignment(node)) return undefined;
  const value = bare(node.initializer);
  const exported = propertyName(node.name);
  return ts.isIdentifier(value) && exported !== undefined ? { local: nameText(value.text), exported } : undefined;
}

/** `import rig from './rig'` of a file that assigns to `exports.rates` and its like: the module's value is all of them. */
export function exportsRecord(c: Context, body: readonly Statement[]): Statement[] {
  if (c.exported.size === 0 || body.some((s) => s.kind === 'export' && s.value)) return [];
  const span = { start: c.source.end, end: c.source.end };
  const fields = [...c.exported].map((name): Field => {
    const value: Expression = { kind: 'name', name: `exports.${nameText(name)}`, span };
    return { kind: 'field', name: nameText(name), value, span };
  });
  return [{ kind: 'export', names: [], value: { kind: 'record', fields, span }, span }];
}

function exportNames(names: readonly ExportName[], span: Span): ExportStatement {
  return { kind: 'export', names, span };
}

function moduleText(node: ts.Expression): string | undefined {
  return ts.isStringLiteralLike(node) ? node.text : undefined;
}
