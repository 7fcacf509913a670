import type { ReportRange, Verdict } from './report';

/** Asks for everything that the panel shows of the function or declaration at a place; null where there is none. */
export const panelRequest = 'visviva/panel';

export interface PanelParams {
  readonly textDocument: { readonly uri: string };
  /** Lines and characters from 0. */
  readonly position: { readonly line: number; readonly character: number };
}

/** What the panel shows. Formulas are pictures that take the colour of the text around them, with a text beside. */
export interface PanelData {
  readonly uri: string;
  readonly version: number;
  readonly system: string;
  readonly function: string;
  /** Line (from 1) of the function, or of the declaration where there is none. */
  readonly line: number;
  /** Last line of the function, or of the declaration. */
  readonly endLine: number;
  /** Why nothing could be derived, in words; the rest is empty then. */
  readonly blocked?: string;
  readonly conventions: readonly string[];
  readonly claims: readonly PanelClaim[];
  readonly equations: readonly PanelEquation[];
  readonly conserved: readonly { readonly formula: PanelFormula; readonly why: string }[];
  readonly symbols: readonly PanelSymbol[];
  readonly drawing: PanelDrawing;
  readonly motion: PanelMotion | undefined;
  /** What the drawing and the motion compute, as data. */
  readonly tape: PanelTape;
}

export interface PanelFormula {
  readonly text: string;
  readonly tex?: string;
  /** An SVG element; absent where the formula is shown as text. */
  readonly svg?: string;
}

export interface PanelClaim {
  readonly output: string;
  readonly quantity: string;
  readonly verdict: Verdict;
  /** What was found, in a sentence. */
  readonly message: string;
  readonly range: ReportRange;
}

/** An equation of motion, term by term. */
export interface PanelEquation {
  readonly coordinate: string;
  readonly terms: readonly PanelTerm[];
  /** Set where the terms could not be told apart in the code. */
  readonly note?: string;
}

export interface PanelTerm {
  readonly sign: '+' | '-';
  readonly formula: PanelFormula;
  /** What the code has, as a multiple of the term: 1 where they agree, 0 where it is missing; undefined if unknown. */
  readonly factor?: number;
  readonly state: 'same' | 'differs' | 'unknown';
}

export interface PanelSymbol {
  readonly name: string;
  readonly kind: 'coordinate' | 'velocity' | 'parameter' | 'input' | 'time';
  readonly unit?: string;
  readonly remark?: string;
  /** At the start: of the witness where there is one, else a typical value. */
  readonly value: number;
  /** Ends of its slider. */
  readonly low: number;
  readonly high: number;
}

/** Places are components, as positions in the tape's list of nodes. */
export type PanelPlace = readonly number[];

export interface PanelDrawing {
  readonly points: readonly { readonly name: string; readonly at: PanelPlace; readonly isBody: boolean; readonly angle?: number }[];
  readonly springs: readonly { readonly from: PanelPlace; readonly to: PanelPlace; readonly kind: 'spring' | 'damper' }[];
  /** Pairs whose distance never changes: the origin is -1. */
  readonly rods: readonly (readonly [number, number])[];
  readonly gravity?: PanelPlace;
}

export interface PanelMotion {
  readonly coordinates: readonly string[];
  /** Accelerations of the derived motion, one per coordinate. */
  readonly derived: readonly number[];
  /** Those that the code computes; absent where no claim gives them. A coordinate without a claim moves as derived. */
  readonly code?: readonly number[];
  readonly energy: number;
}

/**
 * Expressions as instructions, arguments before users: the panel evaluates these and nothing else. `symbol` refers to
 * `PanelData.symbols`; a symbol that has no value there is -1.
 */
export interface PanelTape {
  readonly nodes: readonly PanelNode[];
}

export interface PanelNode {
  readonly op: string;
  readonly args: readonly number[];
  /** Of a number its value, of a symbol its place, of `solve` and `component` their count or which. */
  readonly value?: number;
}
