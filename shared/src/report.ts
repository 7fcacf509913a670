/** The report of a check, as `visviva check --format json` prints it. Public and stable: fields are only ever added. */

export interface Report {
  readonly schema: 1;
  readonly tool: { readonly name: 'visviva'; readonly version: string };
  readonly summary: Summary;
  readonly claims: readonly ReportClaim[];
  readonly problems: readonly Problem[];
  /** Files left out, and why: not an error. */
  readonly skipped: readonly { readonly file: string; readonly reason: string }[];
  /** Findings that a baseline accepts and that are there no more. */
  readonly gone?: readonly KnownFinding[];
  /** Which part of a run in several parts this is. */
  readonly shard?: { readonly index: number; readonly count: number };
}

/** A finding as a baseline file lists it: enough to find it again, and for a person to see what it is. */
export interface KnownFinding {
  readonly fingerprint: string;
  readonly file: string;
  readonly code: string;
  readonly system?: string;
  readonly function?: string;
  readonly output?: string;
  readonly message: string;
}

export type Severity = 'error' | 'warning' | 'note';

/** Why a finding does not count: a comment in the code says so, with its reason, or it was there when a baseline was written. */
export interface Acceptance {
  readonly by: 'comment' | 'baseline';
  readonly reason?: string;
}

export interface Summary {
  readonly files: number;
  readonly systems: number;
  readonly claims: number;
  readonly holds: number;
  readonly differs: number;
  readonly unread: number;
  readonly problems: number;
  /** Findings that are told and do not count; absent where there are none. */
  readonly accepted?: number;
}

/** Lines and columns start at 1; columns count UTF-16 units. */
export interface ReportPosition {
  readonly line: number;
  readonly column: number;
}

export interface ReportRange {
  readonly start: ReportPosition;
  readonly end: ReportPosition;
}

export type Verdict = 'holds' | 'differs' | 'unread';

export interface ReportClaim {
  readonly file: string;
  readonly language: string;
  readonly system: string;
  readonly function: string;
  readonly output: string;
  readonly quantity: string;
  /** Line of the claim in its declaration. */
  readonly line: number;
  readonly verdict: Verdict;
  readonly evidence?: Evidence;
  readonly witness?: Witness;
  readonly findings: readonly Finding[];
}

export interface Evidence {
  /** `identity`: proved by exact arithmetic at random points; `numeric`: equal at the states, within rounding. */
  readonly kind: 'numeric' | 'identity';
  /** States that voted. */
  readonly states: number;
  /** Largest relative difference over the voting states. */
  readonly worst: number;
  /** Of an identity: the chance that different formulas would have passed. */
  readonly chance?: number;
  /** Of a numeric one that holds: what kept the exact test from deciding. */
  readonly inexact?: string;
}

export interface Witness {
  /** Only the symbols that matter, by name: coordinates, velocities, inputs, parameters. */
  readonly state: Readonly<Record<string, number>>;
  readonly expected: number;
  readonly found: number;
}

export type FindingCode =
  | 'sign' | 'factor' | 'missing-term' | 'extra-term' | 'swapped-symbol' | 'swapped-rows' | 'wrong-function'
  | 'wrong-power' | 'wrong-operator' | 'grouping' | 'rounded-constant' | 'differs' | 'unread';

/** Findings beside the claims: about declarations, and `wrong-operator` where a division of integers loses its fraction. */
export type ProblemCode =
  | 'wrong-operator'
  | 'syntax' | 'undeclared' | 'unused' | 'ambiguous' | 'dimension' | 'not-quadratic' | 'singular' | 'inconsistent';

export interface Finding {
  readonly code: FindingCode;
  readonly message: string;
  readonly range: ReportRange;
  /** The file of the range, where it is not the claim's own. */
  readonly file?: string;
  readonly repair?: Repair;
  /** The same for the same finding in any later run, wherever its lines have moved. */
  readonly fingerprint?: string;
  /** Set where the configuration says so; else it follows from the verdict. */
  readonly severity?: Severity;
  readonly accepted?: Acceptance;
}

export interface Repair {
  readonly title: string;
  readonly edits: readonly { readonly range: ReportRange; readonly text: string }[];
  readonly verified: boolean;
}

/** A finding about a declaration. */
export interface Problem {
  readonly file: string;
  readonly code: ProblemCode;
  readonly message: string;
  readonly range: ReportRange;
  /** Problems that do not keep a claim from being decided are notes. */
  readonly severity: Severity;
  readonly fingerprint?: string;
  readonly accepted?: Acceptance;
}
