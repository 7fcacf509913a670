import type { Expr } from '../expression/node';
import type { Place } from '../text/span';

/** A claim brought down to two numbers: what the code computes and what the physics gives. */
export interface Pair {
  readonly found: Expr;
  readonly expected: Expr;
}

/** A condition whose one side no voting state reached. */
export interface Unvisited {
  readonly condition: Expr;
  readonly side: boolean;
}

export interface RoundedConstant {
  /** The literal as read, and what it stands for. */
  readonly literal: Expr;
  readonly exact: Expr;
  readonly exactText: string;
}

export type Decision =
  | {
      readonly verdict: 'holds';
      readonly states: number;
      readonly worst: number;
      readonly rounded?: RoundedConstant;
      readonly proof?: Proof;
    }
  | {
      readonly verdict: 'differs';
      readonly states: number;
      readonly worst: number;
      readonly witness: WitnessState;
      readonly rounded?: RoundedConstant;
    }
  | { readonly verdict: 'unread'; readonly reason: string; readonly place?: Place | undefined };

export type Proof =
  /** Both sides are the same function, but for this chance. */
  | { readonly kind: 'identity'; readonly chance: number }
  /** What kept the exact test from deciding. */
  | { readonly kind: 'none'; readonly stopped: string };

export interface WitnessState {
  /** Every symbol that either side depends on. */
  readonly values: ReadonlyMap<Expr, number>;
  readonly expected: number;
  readonly found: number;
}
