import type { Rational } from '../expression/rational';
import type { Span } from '../text/span';

/**
 * The tree of a declaration. Every node has its place in the document (already mapped back from the stripped comment),
 * so that findings point at the source. The parser always returns a tree and errors; it never throws.
 */

export type BinaryOperator =
  | '+' | '-' | '*' | '/' | '^'
  | '=' | '!=' | '<' | '<=' | '>' | '>='
  | 'and' | 'or';

/** Derived quantities whose names are phrases; those that look like names (T, V, E, p[q]) stay names. */
export type QuantityPhrase =
  | 'mass matrix' | 'coriolis vector' | 'coriolis matrix' | 'gravity vector' | 'damping vector' | 'bias'
  | 'input matrix' | 'right side' | 'residual' | 'multiplier' | 'jacobian' | 'linearised A' | 'linearised B' | 'constant';

export type Formula =
  | { readonly kind: 'number'; readonly value: Rational; readonly text: string; readonly span: Span }
  | { readonly kind: 'string'; readonly value: string; readonly span: Span }
  /** A name in Unicode NFC; a combining dot or two on it has already become a `prime` node around it. */
  | { readonly kind: 'name'; readonly name: string; readonly span: Span }
  /** Time derivative of the operand, `order` times: `th''`, `(x + y)'`, `P[i]'`, `p[q]'`. */
  | { readonly kind: 'prime'; readonly operand: Formula; readonly order: number; readonly span: Span }
  | { readonly kind: 'unary'; readonly op: '-' | '+' | 'not'; readonly operand: Formula; readonly span: Span }
  | { readonly kind: 'binary'; readonly op: BinaryOperator; readonly left: Formula; readonly right: Formula; readonly span: Span }
  /** `sin(x)`, or in code paths any call: `p.getMass()`, `C(q, dq)`. */
  | { readonly kind: 'call'; readonly callee: Formula; readonly args: readonly Formula[]; readonly span: Span }
  | { readonly kind: 'member'; readonly object: Formula; readonly name: string; readonly span: Span }
  | { readonly kind: 'index'; readonly object: Formula; readonly indices: readonly Formula[]; readonly span: Span }
  /** Only as an index: `y[0:2]`, either end may be missing. */
  | { readonly kind: 'slice'; readonly from?: Formula; readonly to?: Formula; readonly span: Span }
  /** `(a, b)`: a vector. A bracketed single formula is that formula. */
  | { readonly kind: 'tuple'; readonly items: readonly Formula[]; readonly span: Span }
  /** `[a, b]`: a list; a list of lists is a matrix by rows. */
  | { readonly kind: 'list'; readonly items: readonly Formula[]; readonly span: Span }
  /** `sum(body over i in 1..n)`; several families nest. */
  | { readonly kind: 'sum'; readonly body: Formula; readonly over: readonly Family[]; readonly span: Span }
  /** `mass matrix`, `mass matrix[x, th]` (indices), `multiplier lam`, `jacobian of X by Y` (args). */
  | { readonly kind: 'quantity'; readonly name: QuantityPhrase; readonly args: readonly Formula[]; readonly span: Span }
  /** Stands where a formula was expected and none could be read; an error names the place. */
  | { readonly kind: 'hole'; readonly span: Span };

/** `over i in 1..n` */
export interface Family {
  readonly index: string;
  readonly from: Formula;
  readonly to: Formula;
  readonly span: Span;
}

export interface UnitText {
  readonly text: string;
  readonly span: Span;
}

/** One name of a `coordinates`, `parameters` or `inputs` statement. */
export interface SymbolItem {
  /** NFC */
  readonly name: string;
  readonly nameSpan: Span;
  /** `th[i]` in `coordinates th[i] [rad] over i in 1..3`: the index name. */
  readonly index?: string;
  /** In `M, m [kg] > 0` unit and bound belong to both names. */
  readonly unit?: UnitText;
  /** `> 0`, `>= 0`, `in [a, b]`, `!= 0`: as typed. */
  readonly bounds: readonly Bound[];
  readonly typical?: Formula;
  readonly remark?: string;
}

export type Bound =
  | { readonly op: '<' | '<=' | '>' | '>=' | '!='; readonly value: Formula; readonly span: Span }
  | { readonly op: 'in'; readonly low: Formula; readonly high: Formula; readonly span: Span };

interface StatementBase {
  readonly span: Span;
  readonly wordSpan: Span;
  /** Words after two spaces. */
  readonly remark?: string;
  readonly over?: readonly Family[];
}

export type Statement = StatementBase &
  (
    | { readonly kind: 'coordinates' | 'parameters' | 'inputs'; readonly items: readonly SymbolItem[] }
    | { readonly kind: 'time'; readonly name: string; readonly nameSpan: Span }
    /** Targets are `a`, `P`, `r[i]`, `r[0]`. */
    | { readonly kind: 'where'; readonly items: readonly Equation[] }
    | { readonly kind: 'energy'; readonly which: 'T' | 'V' | 'L' | 'D'; readonly value: Formula }
    | { readonly kind: 'generalized-force'; readonly coordinate: Formula; readonly value: Formula }
    | { readonly kind: 'force'; readonly value: Formula; readonly at: Formula }
    | { readonly kind: 'torque'; readonly value: Formula; readonly on: Formula }
    | { readonly kind: 'constraint'; readonly left: Formula; readonly right: Formula; readonly multiplier?: string }
    | { readonly kind: 'point'; readonly name: string; readonly mass: Formula; readonly at: Formula }
    | {
        readonly kind: 'body';
        readonly name: string;
        readonly mass?: Formula;
        readonly inertia?: Formula;
        readonly centre?: Formula;
        readonly angle?: Formula;
        readonly rotation?: Formula;
      }
    | { readonly kind: 'gravity'; readonly value: Formula }
    | { readonly kind: 'spring'; readonly stiffness: Formula; readonly rest?: Formula; readonly from: Formula; readonly to: Formula }
    | { readonly kind: 'damper'; readonly coefficient: Formula; readonly from: Formula; readonly to: Formula }
    | { readonly kind: 'ranges'; readonly items: readonly { readonly target: Formula; readonly low: Formula; readonly high: Formula; readonly span: Span }[] }
    | { readonly kind: 'near'; readonly items: readonly Equation[]; readonly order: number }
    /** `condition` is in the code's own terms; absent for `within limits`. */
    | { readonly kind: 'assume'; readonly condition?: Formula; readonly withinLimits: boolean }
    /** Left: a code path, or a list of them bound slot by slot. Right: physics. */
    | { readonly kind: 'reads'; readonly items: readonly Equation[] }
    /** Left: a code output or a formula of outputs. `+=` claims the increment over the function. */
    | { readonly kind: 'checks'; readonly items: readonly Claim[] }
    /** `T`, `V`, `L`, `D`, `Q[q]`. */
    | { readonly kind: 'defines'; readonly what: Formula }
  );

export interface Equation {
  readonly left: Formula;
  readonly right: Formula;
  readonly span: Span;
}

export interface Claim extends Equation {
  readonly op: '=' | '+=' | '-=';
}

export interface NotationError {
  readonly code: 'syntax';
  readonly message: string;
  readonly span: Span;
}

/** One `@visviva NAME` declaration. */
export interface Block {
  readonly name: string;
  readonly nameSpan: Span;
  /** From `@` to the end of the last statement. */
  readonly span: Span;
  readonly statements: readonly Statement[];
  readonly errors: readonly NotationError[];
}

/** A comment (or docstring, or whole `.visviva` file): its text in the document and what was already stripped by nobody. */
export interface CommentText {
  /** Raw text with its marks, as in the document. Adjacent line comments arrive as one. */
  readonly span: Span;
  /** Marks that may open a line inside it, in the order to try: `//`, `*`, `#`, `%`, `!`. */
  readonly lineMarks: readonly string[];
}
