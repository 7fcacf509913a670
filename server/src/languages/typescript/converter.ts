import ts from 'typescript';
import type { ClassNode, Expression, FunctionNode, Pattern, Statement } from '../../program/form';
import { classNode } from './classes';
import { nameText, type Context, type FunctionSyntax, type Name } from './context';
import { expression } from './expressions';
import { functionNode } from './functions';
import { binding, target } from './patterns';
import { branch, statements } from './statements';

/** Ties the converting functions together; see `Context`. */
export class Converter implements Context {
  readonly functions = new WeakMap<ts.Node, FunctionNode>();
  readonly classes = new WeakMap<ts.Node, ClassNode>();
  readonly owners = new WeakMap<ts.Node, ClassNode>();
  readonly hasPrototypes: boolean;
  readonly callsEval: boolean;
  base: string | undefined = undefined;
  sketches = new Map<string, ReadonlySet<string>>();
  private types: Map<string, ts.InterfaceDeclaration | ts.TypeAliasDeclaration> | undefined;

  constructor(
    readonly source: ts.SourceFile,
    readonly exported: Set<string>,
    readonly errorsAt: readonly number[],
  ) {
    this.callsEval = /\beval\s*\(/.test(source.text);
    this.hasPrototypes = source.text.includes('.prototype');
  }

  typesByName(): ReadonlyMap<string, ts.InterfaceDeclaration | ts.TypeAliasDeclaration> {
    if (!this.types) {
      this.types = new Map();
      for (const s of this.source.statements) {
        if (ts.isInterfaceDeclaration(s) || ts.isTypeAliasDeclaration(s)) this.types.set(nameText(s.name.text), s);
      }
    }
    return this.types;
  }

  expression(node: ts.Expression): Expression {
    return expression(this, node);
  }

  statements(nodes: readonly ts.Statement[]): Statement[] {
    return statements(this, nodes);
  }

  branch(node: ts.Statement): Statement[] {
    return branch(this, node);
  }

  binding(node: ts.BindingName): Pattern {
    return binding(this, node);
  }

  target(node: ts.Expression): Pattern {
    return target(this, node);
  }

  functionNode(node: FunctionSyntax, name?: Name): FunctionNode {
    return functionNode(this, node, name);
  }

  classNode(node: ts.ClassLikeDeclaration, name?: Name): ClassNode {
    return classNode(this, node, name);
  }
}
