import type { ClassNode, Expression, FunctionNode, Pattern, Statement } from '../../program/form';
import type { Span } from '../../text/span';
import { Bindings } from './bindings';
import { classNode } from './classes';
import type { Context, FunctionOptions } from './context';
import { expression } from './expressions';
import { functionNode } from './functions';
import type { Lost } from './recover';
import { block, statements } from './statements';
import type { Node } from './syntax';
import { target } from './targets';

/** Ties the converting functions together; see `Context`. */
export class Converter implements Context {
  readonly functions = new Map<Node, FunctionNode>();
  readonly classes = new Map<Node, ClassNode>();
  readonly innerImports: Statement[] = [];
  readonly errors: { readonly message: string; readonly span: Span }[] = [];
  bindings: Bindings;
  depth = 0;

  constructor(
    readonly text: string,
    readonly broken: ReadonlySet<number>,
    readonly lost: readonly Lost[],
    changing: ReadonlySet<string>,
  ) {
    this.bindings = new Bindings(undefined, [], new Set(), undefined, changing);
  }

  expression(node: Node): Expression {
    return expression(this, node);
  }

  target(node: Node): Pattern {
    return target(this, node);
  }

  statements(nodes: readonly Node[]): Statement[] {
    return statements(this, nodes);
  }

  block(node: Node | undefined): Statement[] {
    return block(this, node);
  }

  functionNode(node: Node, options?: FunctionOptions): FunctionNode {
    return functionNode(this, node, options);
  }

  classNode(node: Node, decorators?: readonly Node[]): ClassNode {
    return classNode(this, node, decorators);
  }
}
