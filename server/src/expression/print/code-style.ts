import type { FunctionName } from '../node';
import type { Rational } from '../rational';
import type { Part, Written } from './layout';

/** What a programming language needs to say about itself for expressions to be written in it. */
export interface CodeStyle {
  readonly language: string;
  readonly pi: string;
  readonly nan: string;
  readonly true: string;
  readonly false: string;
  readonly and: string;
  readonly or: string;
  readonly equal: string;
  /** A number that is not negative: how it must look to be a floating-point value, `1 / 2` or `1.0 / 2.0`. */
  number(value: Rational): Written;
  /** The coefficient and factors of a product, divided by those of `bottom`. */
  product(coefficient: Rational, top: readonly Part[], bottom: readonly Part[]): Written;
  /** `exponent` is positive and not 1. */
  power(base: Part, exponent: Rational): Written;
  generalPower(base: Written, exponent: Written): Written;
  call(name: FunctionName, args: readonly string[]): Written;
  /** A text with a minus sign before it, where that is more than putting it there. */
  minus?(text: string): string;
  not(a: string): Written;
  select(condition: Written, yes: Written, no: Written): Written;
  /** The call that solves a linear system, and one of its results. */
  solve(rows: readonly (readonly string[])[], right: readonly string[]): Written;
  component(solution: string, index: number): Written;
  /** The statement that gives a name to a value. */
  define(name: string, value: string): string;
  /** Source of the function `solve` calls. */
  readonly solver: string;
  /** A whole function from a state and constants to values. */
  function(f: WrittenFunction): string;
  /** A name made fit for the language: `th'` to `thDot`, keywords avoided. */
  identifier(name: string, order: number): string;
}

export interface WrittenFunction {
  /** Of several words, in lower case or as the declaration has them: `harbour crane accelerations`. */
  readonly name: string;
  readonly remark: string;
  /** Names of the entries of the state, and of the constants. */
  readonly state: readonly string[];
  readonly constants: readonly string[];
  readonly statements: readonly string[];
  readonly values: readonly string[];
  readonly helpers: readonly string[];
}
