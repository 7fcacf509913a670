/** An argument of a call: a number, a list or a record. */
export type Argument = number | readonly Argument[] | { readonly [field: string]: Argument };

/** A function called at some states, and what it must give there. */
export interface Guard {
  readonly system: string;
  readonly function: string;
  /** The way from the returned value to each output: `[2]`, `.ax`, or nothing for the value itself; and its quantity. */
  readonly outputs: readonly { readonly path: readonly (number | string)[]; readonly quantity: string }[];
  readonly cases: readonly { readonly state: string; readonly arguments: readonly Argument[]; readonly expected: readonly number[] }[];
}

export type GuardResult = Guard | { readonly system: string; readonly function: string; readonly refused: string };

/** Before the name of an entry that is reached by a key, not as a field. */
export const KEYED = '\u0000';
