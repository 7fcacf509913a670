import type { Place, Span } from '../text/span';
import type { ClassNode, Expression, FunctionNode, Program } from './form';
import type { Library } from './library';
import type { Value } from './values';

/** A variable: its value is in the store. */
export interface Variable {
  readonly name: string;
  readonly location: number;
  readonly scope: Scope;
  /** Gives the value at first use: constants and state of a module, imports. */
  lazy?: () => Value;
  /** True once a constant it was given stood for the symbol of its name; so will another. */
  standsForSymbol?: boolean;
  busy?: boolean;
}

/** A running function, or a module's top level. */
export interface Frame {
  readonly module: Module;
  readonly node?: FunctionNode;
  readonly self?: Value;
  readonly home?: ClassInfo;
  /** The record that holds the last value of every local by name. */
  readonly names: number;
  readonly depth: number;
  /** A function around the one that is read, entered on generic arguments; its own statements have not run. */
  readonly isAround?: boolean;
}

export class Scope {
  readonly variables = new Map<string, Variable>();

  constructor(
    readonly parent: Scope | undefined,
    readonly frame: Frame,
    /** The scope where `var` and plain assignments of most languages put their variables. */
    readonly isFunction = false,
  ) {}

  find(name: string): Variable | undefined {
    for (let s: Scope | undefined = this; s; s = s.parent) {
      const v = s.variables.get(name);
      // What a reading asks of a file's top level is what it depends on, also where there is no such name.
      if (!s.parent) s.frame.module.touched.add(name);
      if (v) return v;
    }
    return undefined;
  }

  /** The scope of the function (or module) this one is in. */
  get functionScope(): Scope {
    let s: Scope = this;
    while (!s.isFunction && s.parent) s = s.parent;
    return s;
  }
}

export interface Module {
  readonly file: string;
  readonly program: Program;
  readonly library: Library;
  /** True for what a package means, which is no file of anybody's. */
  readonly isMeaning?: boolean;
  readonly scope: Scope;
  /** Top-level names that were looked up. */
  readonly touched: Set<string>;
  /** Exported name -> how to get its value. */
  readonly exports: Map<string, () => Value>;
  /** `export * from`, and `module.exports = ...`. */
  readonly everythingOf: { readonly from: string; readonly span: Span }[];
  /** `from x import *` */
  readonly imports: { readonly from: string; readonly place: Place }[];
  whole?: Expression;
}

export interface ClassInfo {
  readonly node: ClassNode;
  readonly scope: Scope;
  /** Members the code has written to the class itself. */
  readonly statics: number;
  /** The class it extends; `unknown` where that one is not read. */
  readonly base: () => ClassInfo | 'unknown' | undefined;
}
