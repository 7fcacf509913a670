import type { Graph } from '../expression/graph';
import type { Domain, Expr } from '../expression/node';
import type { Block } from '../notation/tree';
import type { ProblemCode } from '@visviva/shared';
import type { Span } from '../text/span';
import type { Scope } from './scope';

/** A finding about a declaration, before it is put into lines and columns. */
export interface DeclarationProblem {
  readonly code: ProblemCode;
  readonly message: string;
  readonly span: Span;
  readonly severity: 'error' | 'warning';
}

/** A declared symbol: coordinate, parameter or input. */
export interface Declared {
  readonly name: string;
  readonly kind: 'coordinate' | 'parameter' | 'input';
  readonly symbol: Expr;
  readonly unit?: string;
  readonly remark?: string;
  /** A typical value, for readable witnesses only. */
  readonly typical?: number;
  readonly span: Span;
  /** Members of a family `th[i]` know its name and their index. */
  readonly family?: { readonly name: string; readonly index: number };
}

export interface Coordinate extends Declared {
  readonly velocity: Expr;
  readonly acceleration: Expr;
}

/**
 * A constraint a = 0, of coordinates and time, or linear in the velocities. Its force enters Lagrange's equations as
 * multiplier times da/dq (da/dq' for one of velocities).
 */
export interface Constraint {
  readonly expr: Expr;
  readonly kind: 'holonomic' | 'velocity';
  /** da/dq or da/dq', one entry per coordinate. */
  readonly gradient: readonly Expr[];
  readonly multiplier: Expr;
  readonly multiplierName: string;
  readonly span: Span;
}

/**
 * A declaration, resolved: symbols, energies and forces as expressions. Immutable once built; all expressions are nodes of
 * `graph`, into which code is read too.
 */
export interface System {
  readonly name: string;
  readonly block: Block;
  readonly graph: Graph;
  readonly scope: Scope;
  readonly coordinates: readonly Coordinate[];
  readonly parameters: readonly Declared[];
  readonly inputs: readonly Declared[];
  readonly time: Expr;
  /** Kinetic and potential energy, typed and from geometry together; undefined where only `L` was declared. */
  readonly T: Expr | undefined;
  readonly V: Expr | undefined;
  readonly L: Expr;
  /** Rayleigh dissipation function. */
  readonly D: Expr;
  /** Generalized forces beyond V and D, one per coordinate. */
  readonly Q: readonly Expr[];
  readonly constraints: readonly Constraint[];
  readonly domains: ReadonlyMap<Expr, Domain>;
  /** `near q = q0, order n`: the expansion point of each coordinate named. */
  readonly near: { readonly point: ReadonlyMap<Expr, Expr>; readonly order: number } | undefined;
  readonly withinLimits: boolean;
  /** What keeps every claim of the system from being decided: errors, or statements not supported. */
  readonly blocked: { readonly reason: string; readonly span: Span } | undefined;
  readonly problems: readonly DeclarationProblem[];
  /** Energies typed beside geometry that gives such an energy too, less what the geometry gives. */
  readonly doubled?: readonly {
    readonly which: 'T' | 'V' | 'D';
    readonly difference: Expr;
    readonly value: Expr;
    readonly span: Span;
  }[];
  /** Names positions of `point` statements go by. */
  readonly points: ReadonlyMap<string, readonly Expr[]>;
}
