import ts from 'typescript';
import type { Pattern, PatternItem } from '../../program/form';
import { type Context, bare, nameText, propertyName, spanOf } from './context';
import { exportedName } from './exports-object';
import { valueNamed } from './naming';

const K = ts.SyntaxKind;

type RecordPattern = Extract<Pattern, { kind: 'record' }>;

/** What a declaration or parameter binds: a name, or a pattern that takes a value apart. */
export function binding(c: Context, node: ts.BindingName): Pattern {
  const span = spanOf(c, node);
  if (ts.isIdentifier(node)) {
    if (node.text === '') return { kind: 'opaque', reason: 'an unfinished declaration', span };
    return { kind: 'name', name: nameText(node.text), span };
  }
  if (ts.isArrayBindingPattern(node)) {
    return { kind: 'list', items: node.elements.map((e) => (ts.isOmittedExpression(e) ? undefined : bound(c, e))), span };
  }
  const fields: RecordPattern['fields'][number][] = [];
  let rest: Pattern | undefined;
  for (const e of node.elements) {
    if (e.dotDotDotToken) rest = binding(c, e.name);
    else {
      const name = e.propertyName ? propertyName(e.propertyName) : ts.isIdentifier(e.name) ? e.name.text : undefined;
      if (name === undefined) return { kind: 'opaque', reason: 'a pattern with a computed name', span };
      fields.push({ name: nameText(name), item: bound(c, e) });
    }
  }
  return { kind: 'record', fields, ...(rest ? { rest } : {}), span };
}

function bound(c: Context, node: ts.BindingElement): PatternItem {
  const pattern = binding(c, node.name);
  return {
    pattern,
    ...(node.initializer ? { initial: valueNamed(c, node.initializer, labelOf(pattern)) } : {}),
    ...(node.dotDotDotToken ? { rest: true } : {}),
  };
}

function labelOf(pattern: Pattern): { text: string; span: Pattern['span'] } | undefined {
  return pattern.kind === 'name' ? { text: pattern.name, span: pattern.span } : undefined;
}

/** All names that the patterns bind, in order. */
export function boundNames(nodes: readonly ts.BindingName[]): ts.Identifier[] {
  const names: ts.Identifier[] = [];
  const queue = [...nodes];
  for (let node = queue.shift(); node; node = queue.shift()) {
    if (ts.isIdentifier(node)) names.push(node);
    else queue.unshift(...node.elements.flatMap((e) => (ts.isOmittedExpression(e) ? [] : [e.name])));
  }
  return names;
}

/** What stands left of an assignment: a name, a place, or a literal that takes a value apart. */
export function target(c: Context, node: ts.Expression): Pattern {
  const at = bare(node);
  const span = spanOf(c, at);
  if (ts.isIdentifier(at)) return binding(c, at);
  const exported = exportedName(c, at);
  if (exported !== undefined) return { kind: 'name', name: exported, span };
  if (ts.isPropertyAccessExpression(at) || ts.isElementAccessExpression(at)) {
    return { kind: 'place', target: c.expression(at), span };
  }
  if (ts.isArrayLiteralExpression(at)) {
    return { kind: 'list', items: at.elements.map((e) => (ts.isOmittedExpression(e) ? undefined : item(c, e))), span };
  }
  if (ts.isObjectLiteralExpression(at)) return recordTarget(c, at);
  return { kind: 'opaque', reason: 'an assignment to what is no variable', span };
}

function recordTarget(c: Context, node: ts.ObjectLiteralExpression): Pattern {
  const span = spanOf(c, node);
  const fields: RecordPattern['fields'][number][] = [];
  let rest: Pattern | undefined;
  for (const p of node.properties) {
    if (ts.isSpreadAssignment(p)) rest = target(c, p.expression);
    else if (ts.isShorthandPropertyAssignment(p)) {
      const initial = p.objectAssignmentInitializer;
      const pattern = binding(c, p.name);
      const value = initial ? { initial: valueNamed(c, initial, labelOf(pattern)) } : {};
      fields.push({ name: nameText(p.name.text), item: { pattern, ...value } });
    } else {
      const name = propertyName(p.name);
      if (name === undefined) return { kind: 'opaque', reason: 'a pattern with a computed name', span };
      if (!ts.isPropertyAssignment(p)) return { kind: 'opaque', reason: 'an assignment to what is no variable', span };
      fields.push({ name, item: item(c, p.initializer) });
    }
  }
  return { kind: 'record', fields, ...(rest ? { rest } : {}), span };
}

function item(c: Context, node: ts.Expression): PatternItem {
  if (ts.isSpreadElement(node)) return { pattern: target(c, node.expression), rest: true };
  if (ts.isBinaryExpression(node) && node.operatorToken.kind === K.EqualsToken) {
    const pattern = target(c, node.left);
    return { pattern, initial: valueNamed(c, node.right, labelOf(pattern)) };
  }
  return { pattern: target(c, node) };
}
