import ts from 'typescript';
import type { ClassNode, Expression, Member, Statement } from '../../program/form';
import type { Span } from '../../text/span';
import { type Context, bare, nameOf, propertyName, spanOf } from './context';
import { valueNamed } from './naming';

const K = ts.SyntaxKind;

type Constructor = ts.FunctionDeclaration | ts.FunctionExpression;

/** A constructor function and what the statements beside it hang on it. */
interface Gathered {
  readonly name: ts.Identifier;
  readonly node: Constructor;
  readonly home: ts.Statement;
  readonly parts: Part[];
  base?: ts.Identifier;
}

interface Part {
  readonly name: ts.PropertyName | ts.StringLiteralLike | ts.MemberName;
  readonly value: ts.Expression | ts.MethodDeclaration | ts.AccessorDeclaration;
  readonly kind: 'member' | 'static' | 'getter' | 'setter';
  readonly span: Span;
}

/**
 * Classes as they were written before there was `class`: a function with `F.prototype.step = function ...`,
 * `F.prototype = { ... }`, `Object.assign(F.prototype, ...)` and the usual ways to inherit, all in one list of statements.
 * The answer has a class for the statement that holds the function, and nothing for those that were gathered into it.
 * A function that is also called without `new` is left alone.
 */
export function prototypeClasses(c: Context, nodes: readonly ts.Statement[]): ReadonlyMap<ts.Statement, Statement[]> {
  const made = new Map<ts.Statement, Statement[]>();
  if (!c.hasPrototypes) return made;
  const candidates = constructors(nodes);
  if (candidates.size === 0) return made;
  const taken = new Map<ts.Statement, Gathered>();
  for (const node of nodes) {
    const owner = ts.isExpressionStatement(node) ? gather(c, bare(node.expression), candidates, spanOf(c, node)) : undefined;
    if (owner) taken.set(node, owner);
  }
  for (const owner of new Set(taken.values())) {
    if (!owner.parts.some((p) => p.kind !== 'static') && !owner.base) continue;
    if (isCalledPlainly(c.source.text, owner.name.text)) continue;
    made.set(owner.home, [{ kind: 'class', node: classOf(c, owner), span: spanOf(c, owner.home) }]);
    for (const [node, o] of taken) if (o === owner) made.set(node, []);
  }
  return made;
}

function constructors(nodes: readonly ts.Statement[]): Map<string, Gathered> {
  const found = new Map<string, Gathered>();
  for (const home of nodes) {
    let name: ts.Identifier | undefined;
    let node: ts.Node | undefined;
    if (ts.isFunctionDeclaration(home) && home.body) [name, node] = [home.name, home];
    else if (ts.isVariableStatement(home) && home.declarationList.declarations.length === 1) {
      const [d] = home.declarationList.declarations;
      if (d && ts.isIdentifier(d.name) && d.initializer) [name, node] = [d.name, bare(d.initializer)];
    }
    if (!name || !node || !(ts.isFunctionDeclaration(node) || ts.isFunctionExpression(node))) continue;
    if (ts.canHaveModifiers(home) && ts.getModifiers(home)?.length) continue;
    found.set(name.text, { name, node, home, parts: [] });
  }
  return found;
}

/** `F(...)` without `new`, other than at its own declaration. */
function isCalledPlainly(text: string, name: string): boolean {
  if (!/^[\w$]+$/.test(name)) return true;
  const calls = new RegExp(`(new\\s+|function\\s+|[.\\w$])?\\b${name.replace(/\$/g, '\\$')}\\s*\\(`, 'g');
  return [...text.matchAll(calls)].some((m) => m[1] === undefined);
}

/** Adds what the expression hangs on one of the constructors, and says on which. */
function gather(c: Context, node: ts.Expression, all: ReadonlyMap<string, Gathered>, span: Span): Gathered | undefined {
  if (ts.isCallExpression(node)) return gatherCall(c, node, all, span);
  if (!ts.isBinaryExpression(node) || node.operatorToken.kind !== K.EqualsToken) return undefined;
  const left = bare(node.left);
  if (!ts.isPropertyAccessExpression(left)) return undefined;
  const value = bare(node.right);
  // `F.prototype.a = F.prototype.b = ...` stays what it is, and the function with it.
  if (ts.isBinaryExpression(value) && value.operatorToken.kind === K.EqualsToken) return undefined;
  const onPrototype = prototypeOwner(left.expression, all);
  if (onPrototype) {
    if (left.name.text === 'constructor') return onPrototype;
    if (ts.isArrowFunction(value)) return undefined;
    onPrototype.parts.push({ name: left.name, value, kind: 'member', span });
    return onPrototype;
  }
  const whole = prototypeOwner(left, all);
  if (whole) return gatherPrototype(c, whole, value) ? whole : undefined;
  const owner = ts.isIdentifier(left.expression) ? all.get(left.expression.text) : undefined;
  owner?.parts.push({ name: left.name, value, kind: 'static', span });
  return owner;
}

/** The constructor F of `F.prototype`. */
function prototypeOwner(node: ts.Expression, all: ReadonlyMap<string, Gathered>): Gathered | undefined {
  const at = bare(node);
  if (!ts.isPropertyAccessExpression(at) || at.name.text !== 'prototype' || !ts.isIdentifier(at.expression)) return undefined;
  return all.get(at.expression.text);
}

/** `F.prototype = { ... }`, `= Object.create(B.prototype)`, `= new B()`. */
function gatherPrototype(c: Context, owner: Gathered, value: ts.Expression): boolean {
  if (ts.isObjectLiteralExpression(value)) return gatherFields(c, owner, value);
  const base =
    ts.isCallExpression(value) && isObjectMethod(value, 'create')
      ? baseOf(value.arguments[0])
      : ts.isNewExpression(value) && ts.isIdentifier(value.expression) && !value.arguments?.length
        ? value.expression
        : undefined;
  if (base) owner.base = base;
  return base !== undefined;
}

function gatherFields(c: Context, owner: Gathered, value: ts.ObjectLiteralExpression): boolean {
  const parts: Part[] = [];
  for (const p of value.properties) {
    if (ts.isSpreadAssignment(p) || propertyName(p.name) === undefined) return false;
    if (propertyName(p.name) === 'constructor') continue;
    const span = spanOf(c, p);
    const part = ts.isPropertyAssignment(p) ? bare(p.initializer) : ts.isShorthandPropertyAssignment(p) ? p.name : p;
    if (ts.isArrowFunction(part)) return false;
    const kind = ts.isGetAccessorDeclaration(p) ? 'getter' : ts.isSetAccessorDeclaration(p) ? 'setter' : 'member';
    parts.push({ name: p.name, value: part, kind, span });
  }
  owner.parts.push(...parts);
  return true;
}

/** The ways to add to a prototype, or to inherit, by a call. */
function gatherCall(c: Context, node: ts.CallExpression, all: ReadonlyMap<string, Gathered>, span: Span): Gathered | undefined {
  const [first, second, third] = node.arguments;
  if (!first || !second) return undefined;
  const owner = prototypeOwner(first, all);
  if (owner && isObjectMethod(node, 'assign')) {
    const literal = bare(second);
    return !third && ts.isObjectLiteralExpression(literal) && gatherFields(c, owner, literal) ? owner : undefined;
  }
  if (owner && isObjectMethod(node, 'setPrototypeOf')) {
    owner.base = baseOf(second);
    return owner.base && owner;
  }
  if (owner && third && isObjectMethod(node, 'defineProperty')) return gatherAccessors(owner, bare(second), bare(third), span);
  const callee = bare(node.expression);
  const word = ts.isPropertyAccessExpression(callee) ? callee.name.text : ts.isIdentifier(callee) ? callee.text : '';
  const derived = ts.isIdentifier(first) ? all.get(first.text) : undefined;
  if (!derived || !/^_?inherits?$|^__extends$/.test(word) || !ts.isIdentifier(second)) return undefined;
  derived.base = second;
  return derived;
}

/** `Object.defineProperty(F.prototype, 'e', { get: function () {} })` */
function gatherAccessors(owner: Gathered, name: ts.Expression, value: ts.Expression, span: Span): Gathered | undefined {
  if (!ts.isStringLiteralLike(name) || !ts.isObjectLiteralExpression(value)) return undefined;
  const parts: Part[] = [];
  for (const p of value.properties) {
    const word = p.name && propertyName(p.name);
    const fn = ts.isMethodDeclaration(p) ? p : ts.isPropertyAssignment(p) ? bare(p.initializer) : undefined;
    if (word === 'enumerable' || word === 'configurable') continue;
    if ((word !== 'get' && word !== 'set') || !fn || !(ts.isMethodDeclaration(fn) || ts.isFunctionExpression(fn))) return undefined;
    parts.push({ name, value: fn, kind: word === 'get' ? 'getter' : 'setter', span });
  }
  owner.parts.push(...parts);
  return owner;
}

function isObjectMethod(node: ts.CallExpression, name: string): boolean {
  const callee = bare(node.expression);
  return (
    ts.isPropertyAccessExpression(callee) &&
    callee.name.text === name &&
    ts.isIdentifier(callee.expression) &&
    callee.expression.text === 'Object'
  );
}

/** B of `B.prototype`. */
function baseOf(node: ts.Expression | undefined): ts.Identifier | undefined {
  const at = node && bare(node);
  if (!at || !ts.isPropertyAccessExpression(at) || at.name.text !== 'prototype') return undefined;
  return ts.isIdentifier(at.expression) ? at.expression : undefined;
}

function classOf(c: Context, owner: Gathered): ClassNode {
  const before = c.base;
  c.base = owner.base?.text;
  const name = nameOf(c, owner.name);
  const constructor = c.functionNode(owner.node, name);
  const members: Member[] = owner.parts.map((p) => memberOf(c, p));
  members.unshift({ kind: 'constructor', name: 'constructor', isStatic: false, node: constructor, span: constructor.span });
  c.base = before;
  const made: ClassNode = {
    name: name.text,
    nameSpan: name.span,
    ...(owner.base ? { base: c.expression(owner.base) } : {}),
    members,
    span: spanOf(c, owner.home),
  };
  c.classes.set(owner.node, made);
  c.owners.set(owner.node, made);
  for (const p of owner.parts) c.owners.set(p.value, made);
  return made;
}

function memberOf(c: Context, part: Part): Member {
  const name = { text: 'text' in part.name ? part.name.text : (propertyName(part.name) ?? ''), span: spanOf(c, part.name) };
  const isStatic = part.kind === 'static';
  const value = part.value;
  if (ts.isMethodDeclaration(value) || ts.isAccessor(value) || ts.isFunctionExpression(value)) {
    const kind = part.kind === 'getter' || part.kind === 'setter' ? part.kind : 'method';
    return { kind, name: name.text, isStatic, node: c.functionNode(value, name), span: part.span };
  }
  return { kind: 'field', name: name.text, isStatic, value: valueNamed(c, value, name), span: part.span };
}

/** `B.call(this, m)` and `B.prototype.step.call(this, dt)`, where B is the base of the class: what `super` does. */
export function superCall(c: Context, node: ts.CallExpression): { callee: Expression; args: readonly ts.Expression[] } | undefined {
  if (c.base === undefined) return undefined;
  const callee = bare(node.expression);
  const [self, ...args] = node.arguments;
  if (!ts.isPropertyAccessExpression(callee) || callee.name.text !== 'call' || self?.kind !== K.ThisKeyword) return undefined;
  const target = bare(callee.expression);
  const span = spanOf(c, target);
  if (ts.isIdentifier(target)) return target.text === c.base ? { callee: { kind: 'super', span }, args } : undefined;
  if (!ts.isPropertyAccessExpression(target) || baseOf(target.expression)?.text !== c.base) return undefined;
  const object: Expression = { kind: 'super', span: spanOf(c, target.expression) };
  return { callee: { kind: 'member', object, name: target.name.text, nameSpan: spanOf(c, target.name), span }, args };
}
