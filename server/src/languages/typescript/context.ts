import ts from 'typescript';
import type { ClassNode, Expression, FunctionNode, Pattern, Statement } from '../../program/form';
import type { Span } from '../../text/span';

/**
 * What the converting functions share. Each file of this folder turns one kind of syntax into program form and reaches the
 * others through this object, so that the files do not import each other in circles.
 */
export interface Context {
  readonly source: ts.SourceFile;
  /** The form made of each function-like node, for whoever starts from the syntax (comments). */
  readonly functions: WeakMap<ts.Node, FunctionNode>;
  readonly classes: WeakMap<ts.Node, ClassNode>;
  /** The class that a function outside a `class` body is a method of (`F.prototype.step = function ...`). */
  readonly owners: WeakMap<ts.Node, ClassNode>;
  /** False where the text has no `.prototype`, which spares a search. */
  readonly hasPrototypes: boolean;
  /** False where the text has no `eval(`, which spares a search. */
  readonly callsEval: boolean;
  /** The base of the class written with prototypes whose functions are being converted. */
  base: string | undefined;
  /** Parameters that are sketches of a drawing library where the conversion stands, with the members that are set on each. */
  sketches: Map<string, ReadonlySet<string>>;
  /** Where the syntax errors are, in ascending order. */
  readonly errorsAt: readonly number[];
  /** Names under `exports.` or `module.exports.` that the file assigns at its top. */
  readonly exported: Set<string>;

  /** Interfaces and type aliases of the file's top level. */
  typesByName(): ReadonlyMap<string, ts.InterfaceDeclaration | ts.TypeAliasDeclaration>;
  expression(node: ts.Expression): Expression;
  statements(nodes: readonly ts.Statement[]): Statement[];
  /** A single statement as a list: blocks are opened, declarations of several names become several statements. */
  branch(node: ts.Statement): Statement[];
  binding(node: ts.BindingName): Pattern;
  target(node: ts.Expression): Pattern;
  functionNode(node: FunctionSyntax, name?: Name): FunctionNode;
  classNode(node: ts.ClassLikeDeclaration, name?: Name): ClassNode;
}

/** A function's or class's name where its own syntax has none: `const f = () => 1`. */
export interface Name {
  readonly text: string;
  readonly span: Span;
}

export type FunctionSyntax =
  | ts.FunctionDeclaration
  | ts.FunctionExpression
  | ts.ArrowFunction
  | ts.MethodDeclaration
  | ts.ConstructorDeclaration
  | ts.GetAccessorDeclaration
  | ts.SetAccessorDeclaration;

/** The node's text without the comments and blanks before it. */
export function spanOf(c: Context, node: ts.Node): Span {
  return { start: node.getStart(c.source), end: node.end };
}

/** Identifiers are compared in Unicode NFC, so they are kept in it. */
export function nameText(text: string): string {
  return /^[\x20-\x7e]*$/.test(text) ? text : text.normalize('NFC');
}

export function nameOf(c: Context, node: ts.Node & { readonly text: string }): Name {
  return { text: nameText(node.text), span: spanOf(c, node) };
}

/** The name of a property as written with a plain, quoted, numeric or private name; undefined where it is computed. */
export function propertyName(node: ts.PropertyName): string | undefined {
  if (ts.isComputedPropertyName(node)) {
    const inner = node.expression;
    return ts.isStringLiteralLike(inner) || ts.isNumericLiteral(inner) ? inner.text : undefined;
  }
  return nameText(node.text);
}

export function isFunctionSyntax(node: ts.Node): node is FunctionSyntax {
  switch (node.kind) {
    case ts.SyntaxKind.FunctionDeclaration:
    case ts.SyntaxKind.FunctionExpression:
    case ts.SyntaxKind.ArrowFunction:
    case ts.SyntaxKind.MethodDeclaration:
    case ts.SyntaxKind.Constructor:
    case ts.SyntaxKind.GetAccessor:
    case ts.SyntaxKind.SetAccessor:
      return true;
    default:
      return false;
  }
}

export function hasModifier(node: ts.Node, kind: ts.ModifierSyntaxKind): boolean {
  return ts.canHaveModifiers(node) && (ts.getModifiers(node)?.some((m) => m.kind === kind) ?? false);
}

/** Brackets, type assertions, `satisfies`, `!` and type arguments mean nothing to the value. */
export function bare(node: ts.Expression): ts.Expression {
  for (;;) {
    switch (node.kind) {
      case ts.SyntaxKind.ParenthesizedExpression:
      case ts.SyntaxKind.AsExpression:
      case ts.SyntaxKind.SatisfiesExpression:
      case ts.SyntaxKind.NonNullExpression:
      case ts.SyntaxKind.TypeAssertionExpression:
      case ts.SyntaxKind.ExpressionWithTypeArguments:
        node = (node as ts.ParenthesizedExpression).expression;
        continue;
      default:
        return node;
    }
  }
}

/** What no reading may look into; the reason completes "can't read ...". */
export function opaque(reason: string, span: Span): Expression {
  return { kind: 'opaque', reason, span };
}
