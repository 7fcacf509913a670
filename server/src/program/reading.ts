import type { Expr } from '../expression/node';
import type { Graph } from '../expression/graph';
import type { Budget } from '../text/budget';
import type { Place, Span } from '../text/span';
import type { ClassNode, Expression, FunctionNode, Program } from './form';
import type { Library } from './library';

/**
 * What the executor is asked and what it answers. It knows symbols only as expressions that some names mean; which
 * physics they stand for is the caller's business.
 */

/** A value that `reads` gives to a place in the code. */
export type Meaning =
  | { readonly kind: 'scalar'; readonly expr: Expr }
  | { readonly kind: 'list'; readonly items: readonly Meaning[] };

/** `reads CODE = FORMULA`, the left side in program form. */
export interface ReadsBinding {
  readonly target: Expression;
  readonly meaning: Meaning;
  /** As typed, for messages. */
  readonly text: string;
  readonly span: Span;
}

export interface Meanings {
  readonly reads: readonly ReadsBinding[];
  /**
   * The symbols that a bare name in the code (`m`, `thdot`, `m_`, `get_m`'s `m`) could mean by agreement of names: none,
   * one, or several, which is `ambiguous`. A formula's name is told as such: only things from outside mean it.
   */
  byName(name: string): readonly { readonly expr: Expr; readonly text: string; readonly isFormula?: boolean }[];
  /** The family that an array of this name could mean (`m` for m[1..3]), its items in order. */
  familyByName(name: string): readonly Meaning[] | undefined;
  /** True for the symbols of the declaration: an expression that contains one is "built of declared symbols". */
  isDeclared(symbol: Expr): boolean;
}

export interface ReadRequest {
  readonly graph: Graph;
  readonly file: string;
  readonly program: Program;
  readonly library: Library;
  readonly subject:
    | { readonly kind: 'function'; readonly node: FunctionNode; readonly owner?: ClassNode }
    /** Nothing is run: outputs call methods (`H(q)`, `rates.return[1]`) on a generic instance. */
    | { readonly kind: 'class'; readonly node: ClassNode }
    | { readonly kind: 'file' };
  readonly meanings: Meanings;
  /** Conditions of `assume`, in program form, each to be taken as true. */
  readonly assumptions: readonly Expression[];
  /** `assume within limits`: every clip passes its argument through. */
  readonly withinLimits: boolean;
  /** Places whose meaning is not to be believed, by path, and why. */
  readonly contradicted?: ReadonlyMap<string, { readonly reason: string; readonly place: Place }>;
  /** What the claims ask for at the function's exit. */
  readonly outputs: readonly OutputRequest[];
  /** Another file of the project, by the import's text; undefined where there is none. */
  importFile(from: string, importer: string): { readonly file: string; readonly program: Program; readonly library: Library } | undefined;
  readonly budget: Budget;
  /** Replaces the value of one source sub-expression wherever it is evaluated: used to ask what value there would be right. */
  readonly override?: { readonly file: string; readonly span: Span; readonly value: (read: Expr) => Expr };
  /** Asked at every number that is noted in the trace: what goes on in its stead. For a search over all places at once. */
  readonly tag?: (place: Place, source: Expression, read: Expr) => Expr;
  /** Places where a thing from outside is used as a number, and is tagged as one. */
  readonly isNumber?: (source: Expression) => boolean;
}

/**
 * An output: an expression in program form, evaluated after the function has ended, in which the name `return` means the
 * returned value, a name a parameter or the last value of a local variable (in any block of the function), and
 * `NAME.return` or a call `H(q)` the result of another function or method of the file run from the same generic state.
 */
export interface OutputRequest {
  readonly expression: Expression;
  /** For claims about an increment: the value less the value it had when the function was entered. */
  readonly increment?: boolean;
}

export type OutputValue =
  | { readonly kind: 'scalar'; readonly expr: Expr; readonly place: Place | undefined }
  | { readonly kind: 'list'; readonly items: readonly OutputValue[]; readonly place: Place | undefined }
  | { readonly kind: 'unread'; readonly reason: string; readonly place: Place | undefined };

export interface BindingMade {
  /** The code's words: `p.m`, `thdot`. */
  readonly code: string;
  readonly meaning: Expr;
  readonly how: 'reads' | 'name';
  readonly place: Place;
}

/** A name or path in the code that more than one symbol, or one symbol that more than one path, could mean. */
export interface Ambiguity {
  readonly message: string;
  readonly place: Place;
}

/**
 * A place whose meaning `reads` or its name gives, though the code itself says what it is, in symbols of the declaration.
 * The reading goes by the meaning; the two have to be the same.
 */
export interface AssignedValue {
  readonly path: string;
  /** The code's words: `this.totalMass`. */
  readonly code: string;
  readonly how: 'reads' | 'name';
  readonly meaning: Expr;
  readonly value: Expr;
  /** Where the code gives it. */
  readonly place: Place;
  /** True where the meaning is one symbol, and that symbol is something else where the value is given. */
  readonly isTaken: boolean;
}

export interface TraceEntry {
  readonly place: Place;
  readonly expr: Expr;
}

/** A place at which integers lose what is behind the point. */
export interface Drop {
  readonly kind: 'division' | 'element';
  readonly place: Place;
  /** The value with its fraction. */
  readonly exact: Expr;
}

export interface Reading {
  readonly outputs: readonly OutputValue[];
  readonly bindings: readonly BindingMade[];
  readonly ambiguities: readonly Ambiguity[];
  /**
   * For a free symbol (role `free`) that an output contains: the code it stands for, its place, and what to do about it.
   */
  readonly free: ReadonlyMap<Expr, { readonly code: string; readonly reason: string; readonly place: Place }>;
  /** Every condition that was decided by branching, with its place. */
  readonly conditions: readonly { readonly expr: Expr; readonly place: Place }[];
  /** Places whose meaning was taken as said, beside what the code gives them. */
  readonly assigned: readonly AssignedValue[];
  /** Conditions that `assume` says are true; samples must satisfy them. */
  readonly assumed: readonly Expr[];
  /** Every scalar sub-expression read, in order of evaluation. */
  readonly trace: readonly TraceEntry[];
  /** Where integers lose what is behind the point, in order of evaluation. */
  readonly drops: readonly Drop[];
  /** Names of the subject's own file, at its top level, that were looked up. */
  readonly touched: ReadonlySet<string>;
  /** Files whose text this reading depends on, beyond the subject's own. */
  readonly files: readonly string[];
}
