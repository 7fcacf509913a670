import type { Rational } from './rational';

/**
 * A node of the expression graph. Nodes are made only by `Graph`, which interns them: within one graph two nodes are the
 * same object exactly when they are the same expression. A node's arguments always have smaller ids than the node, so
 * ascending id order is an evaluation order and no walk over a graph needs recursion.
 */
export interface Expr {
  readonly id: number;
  readonly op: OpName;
  readonly args: readonly Expr[];
  readonly data: Data;
}

export type Data = null | number | Rational | SymbolData;

export type OpName =
  | 'number' // data: Rational
  | 'pi'
  | 'nan' // no value here: such a point does not vote
  | 'symbol' // data: SymbolData
  | 'sum'
  | 'product'
  | 'power' // args: base, exponent
  | FunctionName
  | 'less'
  | 'lessEqual'
  | 'equal'
  | 'and'
  | 'or'
  | 'not'
  | 'true'
  | 'false'
  | 'select' // args: condition, value if true, value if false
  | 'solve' // args: n*n matrix by rows, then n right-hand sides; data: n; several outputs, read by `component`
  | 'component'; // args: solve; data: which output

export type FunctionName =
  | 'sin' | 'cos' | 'tan' | 'asin' | 'acos' | 'atan' | 'atan2'
  | 'sinh' | 'cosh' | 'tanh' | 'exp' | 'log'
  | 'abs' | 'sign' | 'min' | 'max' | 'floor';

export type Role =
  | 'coordinate'
  | 'parameter'
  | 'input'
  | 'time'
  /** Force of a constraint, solved for together with the accelerations. */
  | 'multiplier'
  /** Something the code reads that no declaration gives a meaning; a claim that depends on one is unread. */
  | 'free'
  /** Internal variables of an analysis (expansion parameter, unknown of a search). */
  | 'auxiliary';

/** The interval samples of a symbol are drawn from; an open end is never drawn exactly. */
export interface Domain {
  readonly low?: number;
  readonly high?: number;
  readonly nonzero?: boolean;
}

export interface SymbolData {
  readonly name: string;
  readonly role: Role;
  /** How often differentiated by time: 0 for q, 1 for q', 2 for q''. Only coordinates and inputs have orders above 0. */
  readonly order: number;
  readonly domain?: Domain;
}

/** `th`, `th'`, `th''`. */
export function symbolText(s: SymbolData): string {
  return s.name + "'".repeat(s.order);
}
