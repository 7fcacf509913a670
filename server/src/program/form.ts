import type { Expr } from '../expression/node';
import type { Rational } from '../expression/rational';
import type { Span } from '../text/span';

/**
 * The common program form: what every language folder turns its syntax into, and all that the executor knows of code.
 * It holds what dynamics code needs and says `opaque`, with the reason in plain words, for everything else. A language
 * folder resolves its own peculiarities on the way in: `4/3` between integers in C becomes `integer-divide`, MATLAB's
 * `y(1)` an index, Python's `a @ b` the operator `matmul`. Spans are offsets into the document.
 */

/** A parsed document. */
export interface Program {
  readonly language: string;
  /** Index of the first array element: 0 or 1. */
  readonly indexBase: 0 | 1;
  /** Operators between lists work element by element (MATLAB, Julia); else only those of numeric vectors do. */
  readonly elementwise?: boolean;
  /** `+` joins plain lists and `*` repeats them (Python). */
  readonly listConcat?: boolean;
  /** Integers are numbers of a kind of their own: arrays of them stay such, whatever is written to them. */
  readonly integers?: boolean;
  /** `/` between integers drops the rest (Python 2). */
  readonly dividesIntegers?: boolean;
  /** Functions see the last value of the variables of a loop or comprehension; defaults are worked out once (Python). */
  readonly lateBinding?: boolean;
  /** Fields of a class body belong to the class, and are there before any constructor runs (Python). */
  readonly classFields?: boolean;
  /** What the source calls `this`, for messages. */
  readonly selfWord?: string;
  /** Every top-level name can be imported, listed as an export or not. */
  readonly exportsAll?: boolean;
  /** Negative indices count from the end (Python). */
  readonly negativeIndex?: boolean;
  /** `*` and `/` between lists are the matrix operations (MATLAB, Julia). */
  readonly matrixProduct?: boolean;
  readonly body: readonly Statement[];
  /** What its types say, where the language has them. */
  readonly types?: TypeTable;
  /** Every comment and docstring, with what it stands before or in. */
  readonly comments: readonly Comment[];
  /** Syntax errors of the source itself; functions that contain one are not to be trusted. */
  readonly errors: readonly { readonly message: string; readonly span: Span }[];
}

export interface Comment {
  readonly span: Span;
  /** Marks that may open a line inside it: `//`, `*`, `#` ... */
  readonly lineMarks: readonly string[];
  /** What follows it (or, for a docstring, owns it). */
  readonly subject: Subject;
}

/** `function`: a function or method; `class`; `file`: the top-level statements, run in order as a script. */
export type Subject =
  | { readonly kind: 'function'; readonly path: string; readonly node: FunctionNode; readonly owner?: ClassNode }
  | { readonly kind: 'class'; readonly path: string; readonly node: ClassNode }
  | { readonly kind: 'file' };

export type BinaryOperator =
  | '+' | '-' | '*' | '/' | '%' | '**'
  | 'integer-divide' | 'floor-divide' | 'remainder-floor'
  | 'matmul' | 'elementwise-multiply' | 'elementwise-divide' | 'elementwise-power' | 'left-divide'
  | '<' | '<=' | '>' | '>=' | '==' | '!='
  | 'in' | 'instanceof' | 'bit' | 'bit-and' | 'bit-or';

export type Expression =
  | { readonly kind: 'number'; readonly value: Rational; readonly text: string; readonly integer: boolean; readonly span: Span }
  | { readonly kind: 'string'; readonly value: string; readonly span: Span }
  | { readonly kind: 'boolean'; readonly value: boolean; readonly span: Span }
  /** null, None, undefined, nil. `isNull`: passed as an argument it is that, and no default stands in for it. */
  | { readonly kind: 'nothing'; readonly isNull?: boolean; readonly span: Span }
  | { readonly kind: 'name'; readonly name: string; readonly span: Span }
  /** `this`, `self` */
  | { readonly kind: 'self'; readonly span: Span }
  | { readonly kind: 'super'; readonly span: Span }
  | { readonly kind: 'member'; readonly object: Expression; readonly name: string; readonly nameSpan: Span; readonly optional?: boolean; readonly span: Span }
  | { readonly kind: 'index'; readonly object: Expression; readonly indices: readonly Expression[]; readonly optional?: boolean; readonly span: Span }
  /** Only as an index. `rest`: as many whole ranges as the other indices leave (Python's `...`). */
  | { readonly kind: 'slice'; readonly from?: Expression; readonly to?: Expression; readonly step?: Expression; readonly rest?: boolean; readonly span: Span }
  | { readonly kind: 'call'; readonly callee: Expression; readonly args: readonly Argument[]; readonly isNew?: boolean; readonly optional?: boolean; readonly span: Span }
  | { readonly kind: 'unary'; readonly op: '-' | '+' | 'not' | 'bit' | 'bit-not' | 'transpose' | 'typeof'; readonly operand: Expression; readonly span: Span }
  | { readonly kind: 'binary'; readonly op: BinaryOperator; readonly left: Expression; readonly right: Expression; readonly opSpan: Span; readonly span: Span }
  | { readonly kind: 'logical'; readonly op: 'and' | 'or' | 'coalesce'; readonly left: Expression; readonly right: Expression; readonly span: Span }
  | { readonly kind: 'conditional'; readonly condition: Expression; readonly whenTrue: Expression; readonly whenFalse: Expression; readonly span: Span }
  /** `a = v`, `a += v`; its value is the assigned one (`old`: the value before, as of `i++`). */
  | { readonly kind: 'assign'; readonly target: Pattern; readonly op?: BinaryOperator; readonly value: Expression; readonly yields: 'new' | 'old'; readonly span: Span }
  | { readonly kind: 'function'; readonly node: FunctionNode; readonly span: Span }
  | { readonly kind: 'class'; readonly node: ClassNode; readonly span: Span }
  /** A list, tuple or array literal. `rows` marks a matrix literal, whose items are lists. */
  | { readonly kind: 'list'; readonly items: readonly Element[]; readonly rows?: boolean; readonly span: Span }
  | { readonly kind: 'record'; readonly fields: readonly Field[]; readonly span: Span }
  /** `[f(x) for x in xs if c]` */
  | { readonly kind: 'comprehension'; readonly body: Expression; readonly loops: readonly ComprehensionLoop[]; readonly span: Span }
  | { readonly kind: 'sequence'; readonly items: readonly Expression[]; readonly span: Span }
  /** A value that a caller puts into an output: `x''` in `M11*x'' + h1`. No language makes one. */
  | { readonly kind: 'symbolic'; readonly expr: Expr; readonly span: Span }
  /** What the executor must not read: the reason, in words that complete "can't read ...". */
  | { readonly kind: 'opaque'; readonly reason: string; readonly span: Span };

export interface ComprehensionLoop {
  readonly target: Pattern;
  readonly over: Expression;
  readonly conditions: readonly Expression[];
}

export interface Argument {
  readonly value: Expression;
  /** `**` with `spread`: its entries are given by their names. */
  readonly name?: string;
  readonly spread?: boolean;
}

export interface Element {
  readonly value: Expression;
  readonly spread?: boolean;
}

export type Field =
  | { readonly kind: 'field'; readonly name: string; readonly value: Expression; readonly span: Span }
  | { readonly kind: 'computed'; readonly name: Expression; readonly value: Expression; readonly span: Span }
  | { readonly kind: 'spread'; readonly value: Expression; readonly span: Span }
  | { readonly kind: 'getter' | 'setter'; readonly name: string; readonly node: FunctionNode; readonly span: Span };

/** What may stand left of an assignment or as a parameter. */
export type Pattern =
  | { readonly kind: 'name'; readonly name: string; readonly span: Span }
  /** A member or index expression that is written to. */
  | { readonly kind: 'place'; readonly target: Expression; readonly span: Span }
  | { readonly kind: 'list'; readonly items: readonly (PatternItem | undefined)[]; readonly span: Span }
  | { readonly kind: 'record'; readonly fields: readonly { readonly name: string; readonly item: PatternItem }[]; readonly rest?: Pattern; readonly span: Span }
  | { readonly kind: 'opaque'; readonly reason: string; readonly span: Span };

export interface PatternItem {
  readonly pattern: Pattern;
  readonly initial?: Expression;
  readonly rest?: boolean;
}

export interface Parameter extends PatternItem {
  /** Keyword-only or TypeScript parameter property: `constructor(private m: number)` also sets the field. */
  readonly field?: boolean;
  readonly keywordOnly?: boolean;
  /** Python's `**kw`. */
  readonly restNamed?: boolean;
  /** The class its type names, where the source says one. */
  readonly type?: Expression;
  readonly note?: TypeNote;
}

/** What a type in the source says of a value, as far as classes of the project are in it. */
export interface TypeNote {
  /** The class it names. */
  readonly class?: Expression;
  /** Of each item of a list. */
  readonly item?: TypeNote;
  readonly member?: (name: string) => TypeNote | undefined;
}

/** The types of a file by name. */
export interface TypeTable {
  /** What a type says that the file declares. */
  declared(name: string): TypeNote | undefined;
  /** Where a name comes from that the file imports, as a type or as a value. */
  imported(name: string): TypeOrigin | undefined;
  /** What stands behind a name that other files import; undefined where it is the file's own of that name. */
  exported(name: string): TypeOrigin | { readonly local: string } | undefined;
  /** Files whose exports are all passed on. */
  readonly passedOn: readonly string[];
}

export interface TypeOrigin {
  readonly from: string;
  readonly name: string;
}

export interface FunctionNode {
  /** `rates`, `<anonymous>` */
  readonly name: string;
  readonly nameSpan: Span;
  readonly parameters: readonly Parameter[];
  readonly body: readonly Statement[];
  /** What keeps a call from being read: `an async function`, `a generator`. */
  readonly opaque?: string;
  /** What makes calls by its name something else than the body says: a decorator that is not known. */
  readonly wrapped?: string;
  /** Arrow functions and nested functions of most languages see the `this` around them. */
  readonly inheritsSelf: boolean;
  /** The first parameter is the receiver (Python methods, Rust `&self`). */
  readonly selfParameter?: boolean;
  /** The name under which the body sees all its arguments as a list, where it uses it: JavaScript's `arguments`. */
  readonly allArguments?: string;
  /** MATLAB and Fortran: the variables that are the result. */
  readonly results?: readonly { readonly name: string; readonly span: Span }[];
  readonly span: Span;
  readonly bodySpan: Span;
}

export interface ClassNode {
  readonly name: string;
  readonly nameSpan: Span;
  readonly base?: Expression;
  readonly members: readonly Member[];
  readonly span: Span;
}

export interface Member {
  readonly kind: 'field' | 'method' | 'getter' | 'setter' | 'constructor';
  /** Private names keep their mark: `#m`. */
  readonly name: string;
  readonly isStatic: boolean;
  /** A getter that works its value out once and keeps it. */
  readonly isCached?: boolean;
  /** `readonly`, `final`, `const`: nothing changes it after construction. */
  readonly isConstant?: boolean;
  readonly value?: Expression;
  readonly note?: TypeNote;
  readonly node?: FunctionNode;
  readonly span: Span;
}

/** `catches` tells whether it takes what is thrown, by its class: undefined where that is not known. Without it, it takes all. */
export interface Handler {
  readonly parameter?: Pattern;
  readonly body: readonly Statement[];
  readonly catches?: (thrown: string | undefined) => boolean | undefined;
}

export type Statement =
  | { readonly kind: 'declare'; readonly mutable: boolean; readonly scope: 'block' | 'function'; readonly target: Pattern; readonly value?: Expression; readonly note?: TypeNote; readonly span: Span }
  | { readonly kind: 'expression'; readonly value: Expression; readonly span: Span }
  | { readonly kind: 'function'; readonly node: FunctionNode; readonly span: Span }
  | { readonly kind: 'class'; readonly node: ClassNode; readonly span: Span }
  /** Named constants in a row of their own: `enum Slot { X, TH }`. */
  | { readonly kind: 'enum'; readonly name: string; readonly members: readonly { readonly name: string; readonly value?: Expression; readonly span: Span }[]; readonly span: Span }
  | { readonly kind: 'return'; readonly value?: Expression; readonly span: Span }
  | { readonly kind: 'if'; readonly condition: Expression; readonly whenTrue: readonly Statement[]; readonly whenFalse: readonly Statement[]; readonly span: Span }
  /** C-style and while loops; `before: false` tests after the body (do-while). */
  | { readonly kind: 'loop'; readonly initial: readonly Statement[]; readonly condition?: Expression; readonly testFirst: boolean; readonly update: readonly Statement[]; readonly body: readonly Statement[]; readonly span: Span }
  /** `for x of xs`; `keys` for JavaScript's `for in`. */
  | { readonly kind: 'for-each'; readonly target: Pattern; readonly declares: boolean; readonly over: Expression; readonly keys?: boolean; readonly body: readonly Statement[]; readonly span: Span }
  | { readonly kind: 'switch'; readonly value: Expression; readonly cases: readonly { readonly test?: Expression; readonly body: readonly Statement[]; readonly span: Span }[]; readonly fallsThrough: boolean; readonly span: Span }
  | { readonly kind: 'break' | 'continue'; readonly label?: string; readonly span: Span }
  | { readonly kind: 'labelled'; readonly label: string; readonly body: Statement; readonly span: Span }
  /** `type`: the class of what is thrown, where the source names it. */
  | { readonly kind: 'throw'; readonly value?: Expression; readonly type?: string; readonly span: Span }
  | { readonly kind: 'try'; readonly body: readonly Statement[]; readonly handlers?: readonly Handler[]; readonly finalizer: readonly Statement[]; readonly span: Span }
  | { readonly kind: 'block'; readonly body: readonly Statement[]; readonly span: Span }
  /** `orModules`: a name may also be a file below `from` (Python packages); `all`: every name that `from` exports. */
  | { readonly kind: 'import'; readonly from: string; readonly names: readonly { readonly imported: string; readonly local: string; readonly span: Span }[]; readonly namespace?: string; readonly orModules?: boolean; readonly all?: boolean; readonly span: Span }
  /** `export { a as b }`, `export * from './x'`, `module.exports = ...`; declarations that are exported are listed here by name too. */
  | { readonly kind: 'export'; readonly names: readonly { readonly local: string; readonly exported: string }[]; readonly from?: string; readonly all?: boolean; readonly value?: Expression; readonly span: Span }
  | { readonly kind: 'opaque'; readonly reason: string; readonly span: Span }
  | { readonly kind: 'empty'; readonly span: Span };
