import ts from 'typescript';
import type { ClassNode, Subject } from '../../program/form';
import type { Span } from '../../text/span';
import { type Context, type FunctionSyntax, bare, isFunctionSyntax } from './context';
import { pathOf } from './subject-path';

const K = ts.SyntaxKind;

/** Methods whose function argument is a step of a computation, not a thing somebody declares. */
const LIST_METHODS = new Set(
  'map forEach reduce reduceRight filter some every find findIndex findLast flatMap sort toSorted from then catch replace'.split(' '),
);

/**
 * What a comment stands before: the function or class that follows directly; else the function or class it stands in;
 * else the file.
 */
export function subjectAt(c: Context, chain: readonly ts.Node[], comment: Span): Subject {
  const around = chain.filter((n) => n.getStart(c.source) < comment.end || n.kind === K.SourceFile);
  const next = chain[around.length] ?? childAfter(around[around.length - 1]!, comment.end);
  if (next) {
    const inner = functionChain(implementation(next, around[around.length - 1]!));
    if (inner) return named(c, [...around, ...inner], true);
  }
  for (let depth = around.length; depth > 0; depth--) {
    const node = around[depth - 1]!;
    if (isSubject(node) || (ts.isModuleDeclaration(node) && c.functions.has(node))) return named(c, around.slice(0, depth));
  }
  return { kind: 'file' };
}

function childAfter(node: ts.Node, offset: number): ts.Node | undefined {
  return ts.forEachChild(node, (child) => (child.pos >= offset ? child : undefined));
}

type SubjectSyntax = FunctionSyntax | ts.ClassLikeDeclaration;

function isSubject(node: ts.Node): node is SubjectSyntax {
  return ts.isClassLike(node) || (isFunctionSyntax(node) && node.body !== undefined);
}

/** Overload signatures stand for the function or method that follows with a body. */
function implementation(node: ts.Node, parent: ts.Node): ts.Node {
  if (!isFunctionSyntax(node) || node.body) return node;
  let found: ts.Node | undefined;
  ts.forEachChild(parent, (sibling) => {
    if (!found && sibling.pos > node.pos && sibling.kind === node.kind && isSubject(sibling) && sameName(sibling, node)) {
      found = sibling;
    }
  });
  return found ?? node;
}

function sameName(a: SubjectSyntax, b: SubjectSyntax): boolean {
  const text = (n: SubjectSyntax) => (n.name && 'text' in n.name ? n.name.text : undefined);
  return text(a) === text(b);
}

/** The nodes from a statement, member, property or expression down to the function or class it gives a name or value. */
function functionChain(node: ts.Node): ts.Node[] | undefined {
  const chain: ts.Node[] = [];
  for (let at: ts.Node | undefined = node; at; at = step(at)) {
    chain.push(at);
    if (isSubject(at)) return chain;
    if (ts.isCallExpression(at) || ts.isNewExpression(at)) {
      const inner = calledWith(at);
      return inner && [...chain, ...inner];
    }
  }
  return undefined;
}

function step(node: ts.Node): ts.Node | undefined {
  if (ts.isVariableStatement(node)) return node.declarationList;
  if (ts.isVariableDeclarationList(node)) return node.declarations[0];
  if (ts.isVariableDeclaration(node) || ts.isPropertyAssignment(node) || ts.isPropertyDeclaration(node)) return node.initializer;
  if (ts.isExpressionStatement(node) || ts.isExportAssignment(node) || ts.isReturnStatement(node)) return node.expression;
  if (ts.isBinaryExpression(node)) return isAssignment(node.operatorToken.kind) ? node.right : undefined;
  const inside = ts.isExpression(node) ? bare(node) : node;
  return inside === node ? undefined : inside;
}

function isAssignment(token: ts.SyntaxKind): boolean {
  return token === K.EqualsToken || token === K.BarBarEqualsToken || token === K.QuestionQuestionEqualsToken;
}

/** A function called at once, or the first function among the arguments: `useCallback((s) => ...)`. */
function calledWith(node: ts.CallExpression | ts.NewExpression): ts.Node[] | undefined {
  const callee = bare(node.expression);
  if (isSubject(callee)) return [callee];
  if (ts.isPropertyAccessExpression(callee)) {
    if (LIST_METHODS.has(callee.name.text)) return undefined;
    const object = bare(callee.expression);
    if (isSubject(object)) return [object];
  }
  for (const argument of node.arguments ?? []) {
    const inner = functionChain(argument);
    if (inner) return inner;
  }
  return undefined;
}

/** `before`: the comment stands before it, so that a constructor function means its class. */
function named(c: Context, chain: readonly ts.Node[], before = false): Subject {
  const node = chain[chain.length - 1]!;
  const path = pathOf(chain);
  const known = before || ts.isClassLike(node) ? c.classes.get(node) : undefined;
  if (known || ts.isClassLike(node)) return { kind: 'class', path, node: known ?? c.classNode(node as ts.ClassLikeDeclaration) };
  const made = c.functions.get(node) ?? c.functionNode(node as FunctionSyntax);
  const owner = ownerOf(c, chain);
  return { kind: 'function', path, node: made, ...(owner ? { owner } : {}) };
}

/** The class whose instance is `this` in the function. */
function ownerOf(c: Context, chain: readonly ts.Node[]): ClassNode | undefined {
  const node = chain[chain.length - 1]!;
  const own = c.owners.get(node);
  if (own) return own;
  let lexical = ts.isArrowFunction(node);
  for (let i = chain.length - 2; i >= 0; i--) {
    const at = chain[i]!;
    const known = c.owners.get(at);
    if (known && lexical) return known;
    if (ts.isClassLike(at)) return c.classes.get(at) ?? c.classNode(at);
    if (isFunctionSyntax(at) && !ts.isArrowFunction(at) && !lexical) return undefined;
    if (ts.isBinaryExpression(at) && isThisMember(at.left)) lexical = true;
    if (ts.isObjectLiteralExpression(at) && !lexical) return undefined;
  }
  return undefined;
}

/** `this.step = function () {}`: the function will be called on the instance. */
function isThisMember(node: ts.Expression): boolean {
  return ts.isPropertyAccessExpression(node) && node.expression.kind === K.ThisKeyword;
}
