import type { ClassNode, Expression, FunctionNode, Pattern, Statement } from '../../program/form';
import type { Span } from '../../text/span';
import type { Bindings } from './bindings';
import type { Lost } from './recover';
import type { Node } from './syntax';

/**
 * What the converting functions share. Each file of this folder turns one kind of syntax into program form and reaches the
 * others through this object, so that the files do not import each other in circles.
 */
export interface Context {
  readonly text: string;
  /** The form made of each function and class, for whoever starts from the syntax (comments). */
  readonly functions: Map<Node, FunctionNode>;
  readonly classes: Map<Node, ClassNode>;
  /** Names bound so far in the function, or the module, that is being converted. */
  bindings: Bindings;
  /** How deep expressions and blocks nest here. */
  depth: number;
  /** Imports found inside functions: they are made known to the whole file. */
  readonly innerImports: Statement[];
  /** Offsets at which functions begin that the parser could not make sense of. */
  readonly broken: ReadonlySet<number>;
  /** Those of which not even the name is in the tree. */
  readonly lost: readonly Lost[];
  readonly errors: { readonly message: string; readonly span: Span }[];

  expression(node: Node): Expression;
  target(node: Node): Pattern;
  statements(nodes: readonly Node[]): Statement[];
  block(node: Node | undefined): Statement[];
  functionNode(node: Node, options?: FunctionOptions): FunctionNode;
  classNode(node: Node, decorators?: readonly Node[]): ClassNode;
}

export interface FunctionOptions {
  /** Its first parameter is the receiver. */
  readonly isMethod?: boolean;
  readonly decorators?: readonly Node[];
}

/** Nested deeper than this nothing is converted, so that no input exhausts the stack. */
export const DEEPEST = 300;

export function textOf(c: Context, node: Node): string {
  return c.text.slice(node.start, node.end);
}

/** Identifiers are compared in Unicode NFC, so they are kept in it. */
export function nameText(c: Context, node: Node): string {
  const text = textOf(c, node);
  return /^[\x20-\x7e]*$/.test(text) ? text : text.normalize('NFC');
}

export function spanOf(node: Node): Span {
  return { start: node.start, end: node.end };
}

/** What no reading may look into; the reason completes "can't read ...". */
export function opaque(reason: string, span: Span): Expression {
  return { kind: 'opaque', reason, span };
}

export function name(text: string, span: Span): Expression {
  return { kind: 'name', name: text, span };
}

export function namePattern(text: string, span: Span): Pattern {
  return { kind: 'name', name: text, span };
}

/** Brackets around an expression mean nothing to its value. */
export function bare(node: Node): Node {
  let at = node;
  while (at.type === 'parenthesized_expression') {
    const inner = at.children.find((x) => x.isNamed);
    if (!inner) return at;
    at = inner;
  }
  return at;
}

/** `rig.Mode.FREE` as written in an import, a decorator or a case. */
export function identifierOf(c: Context, dotted: Node): Expression {
  const names = dotted.children.filter((n) => n.isNamed);
  const [first, ...rest] = names;
  if (!first) return opaque('an unfinished name', spanOf(dotted));
  let value: Expression = c.expression(first);
  for (const n of rest) {
    value = { kind: 'member', object: value, name: nameText(c, n), nameSpan: spanOf(n), span: { start: dotted.start, end: n.end } };
  }
  return value;
}
