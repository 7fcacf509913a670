import type { Expr } from '../expression/node';
import type { Graph } from '../expression/graph';
import type { Program } from './form';

/** A package that is read by what it means: code in program form that says so, of which nothing is shown or mended. */
export interface Meaning {
  readonly name: string;
  readonly program: Program;
}

/**
 * A language's numeric library, as a table of meanings. A language folder fills one in; the executor looks names up in it
 * after the names of the program itself.
 */
export interface Library {
  /** Scalar functions by dotted path: `Math.sin`. Arguments are scalars already. */
  readonly scalars: ReadonlyMap<string, ScalarFunction>;
  /** Constants by dotted path: `Math.PI`. */
  readonly constants: ReadonlyMap<string, (graph: Graph) => Expr>;
  /** Functions and methods with richer arguments, by the name of a shared intrinsic of `program/intrinsics`: `Array.from` -> `list-from`. */
  readonly intrinsics: ReadonlyMap<string, string>;
  /** Methods by the receiver's kind: `list.map` -> `list-map`. */
  readonly methods: ReadonlyMap<string, string>;
  /** Members that are values, not methods, by the receiver's kind: `list.T` -> `transpose`. */
  readonly properties?: ReadonlyMap<string, string>;
  /** Modules whose import gives the names of this table: `import { sin } from 'math'` -> prefix `Math.` */
  readonly modules: ReadonlyMap<string, string>;
  /**
   * Names that stand without a prefix where the program has none of its own by that name: `sin` of a drawing library's
   * global style -> `Math.sin`, or the reason why it is not known what it gives.
   */
  bare?(name: string, program: Program): string | { readonly unread: string } | undefined;
  /** What an imported package means, where that is said in program form. */
  packageMeaning?(from: string): Meaning | undefined;
  /** The same of a name that a page knows without an import; `exported` is the export it is, else it is the whole. */
  globalMeaning?(name: string): { readonly of: Meaning; readonly exported?: string } | undefined;
  /** Calls that can be left out when their value is not used: `console.log`. */
  readonly ignorable: ReadonlySet<string>;
}

export type ScalarFunction = (graph: Graph, args: readonly Expr[]) => Expr | { readonly unread: string };
