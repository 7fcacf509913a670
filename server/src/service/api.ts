import type { PanelData, Problem, ProjectSettings, ReportClaim, ReportPosition, ReportRange } from '@visviva/shared';
import type { GuardResult } from './guard/result';
import type { Budget } from '../text/budget';

/**
 * The façade that the language server and the command share: plain functions of documents, no protocol and no input or
 * output of their own. Whatever the editor shows and the command prints comes through here, so the two cannot disagree.
 */
export interface Service {
  /** Sets the text of an open document, replacing what `files` would give. */
  update(file: string, text: string): void;
  /** Forgets an open document; its file on disk counts again. */
  close(file: string): void;
  /** Drops what was read from a file that changed on disk. */
  invalidate(file: string): void;
  /** True for files whose language is read here, by name. */
  handles(file: string): boolean;
  /** Loads the parsers that a file needs; `check` and the others call it themselves. */
  prepare(file: string): Promise<void>;
  /**
   * Checks every declaration of a file. What did not change since the last time is remembered.
   * @param depth `verdicts` leaves out the search for faults and repairs that are not known already
   */
  check(file: string, budget: Budget, depth?: 'verdicts' | 'repairs'): Promise<FileResult>;
  /** How many functions were read so far, remembered results not counted. */
  readonly readings: number;
  /**
   * Whole outputs written anew as the declaration has them, for differing claims that a range touches. Each was read again
   * from text: it makes its claim hold and no other claim of the file worse.
   */
  rewrites(file: string, range: ReportRange, budget: Budget): Promise<readonly OutputRewrite[]>;
  hover(file: string, position: ReportPosition, budget: Budget): Promise<Hover | undefined>;
  /** All that `hover` tells about a file, most particular first. */
  hovers(file: string, budget: Budget): Promise<readonly HoverItem[]>;
  symbols(file: string): Promise<readonly DocumentSymbol[]>;
  /** What to say above each function that has claims. */
  lenses(file: string, budget: Budget): Promise<readonly Lens[]>;
  /** The derived expression of each claim that has a short one, for the end of the claim's line. */
  inlays(file: string, budget: Budget): Promise<readonly { readonly position: ReportPosition; readonly text: string }[]>;
  /** What the panel shows of the declaration or function at a place; formulas come as TeX. */
  panel(file: string, position: ReportPosition, budget: Budget): Promise<Omit<PanelData, 'uri' | 'version'> | undefined>;
  /** Symbols of all files that declare something, whose name has the letters of the query in their order. */
  workspaceSymbols(query: string): Promise<readonly { readonly file: string; readonly symbol: DocumentSymbol; readonly system: string }[]>;
  /** What may be typed at a place of a declaration. */
  complete(file: string, position: ReportPosition): Promise<readonly Completion[]>;
  signature(file: string, position: ReportPosition): Promise<Signature | undefined>;
  folds(file: string): Promise<readonly { readonly startLine: number; readonly endLine: number }[]>;
  /** The words of declarations and what they are, in order; each within a line. */
  tokens(file: string): Promise<readonly SemanticToken[]>;
  /** Where the name at a place is declared; for the code side of a claim, where the code makes the output. */
  definition(file: string, position: ReportPosition, budget: Budget): Promise<FileRange | undefined>;
  /** Every place of a name in declarations and in the code that was taken for it, declarations first. */
  references(file: string, position: ReportPosition, budget: Budget): Promise<References | undefined>;
  /**
   * The edits that rename what stands at a place, everywhere. What agreed by name in the code is renamed too, or bound by
   * `reads`, so that every verdict stays; a failure says why there is no such edit.
   */
  rename(file: string, position: ReportPosition, name: string, budget: Budget): Promise<{ readonly edits: readonly FileEdit[] } | { readonly failure: string }>;
  /** The derived equations of every system a file declares. */
  derive(file: string, as: DeriveForm, budget: Budget): Promise<readonly DerivedSystem[]>;
  /** Calls of a file's functions at some states, and what they must give there, to double precision. */
  guards(file: string, budget: Budget): Promise<readonly GuardResult[]>;
  /** What stands behind the claims of a file: equations, terms and curves, for reports that show them. */
  details(file: string, budget: Budget): Promise<FileDetails>;
  /** First declarations for functions that look like dynamics and have none, to be completed by a person. */
  suggest(file: string, budget: Budget): Promise<readonly SuggestedDeclaration[]>;
  /**
   * Compares declarations as mechanics. Those of `file` are paired with those of `other`: by name, or the only ones.
   * With `name` instead of a file, the other declarations of the same file are compared with the one of that name.
   * @param system only this one of `file`
   */
  compare(file: string, against: { readonly file: string } | { readonly name: string }, system: string | undefined, budget: Budget): Promise<ComparisonResult>;
}

export interface HoverItem {
  readonly markdown: string;
  readonly formulas: Hover['formulas'];
  /** Where it is told, and the text that stands there. */
  readonly range: ReportRange;
  readonly text: string;
  /** What the editor marks as meant. */
  readonly shown: ReportRange;
}

export interface FileRange {
  readonly file: string;
  readonly range: ReportRange;
}

export interface FileEdit extends FileRange {
  readonly text: string;
}

export interface References {
  /** The name under the cursor. */
  readonly range: ReportRange;
  readonly name: string;
  readonly places: readonly (FileRange & { readonly side: 'declaration' | 'code'; readonly isDeclaration: boolean })[];
}

export interface Completion {
  readonly label: string;
  readonly kind: 'statement' | 'symbol' | 'function' | 'quantity' | 'unit' | 'code';
  readonly detail: string;
  /** With `$1`, `${2:x}` as places to fill in; the label where absent. */
  readonly snippet?: string;
  /** What it replaces. */
  readonly range: ReportRange;
}

export interface Signature {
  readonly label: string;
  readonly description: string;
  readonly parameters: readonly string[];
  readonly active: number;
}

export interface SemanticToken {
  readonly range: ReportRange;
  readonly kind: 'keyword' | 'system' | 'coordinate' | 'parameter' | 'input' | 'shorthand' | 'function' | 'number' | 'unit' | 'code';
  readonly isDeclaration: boolean;
}

export interface OutputRewrite {
  readonly title: string;
  readonly edits: readonly { readonly range: ReportRange; readonly text: string }[];
}

export interface SuggestedDeclaration {
  readonly function: string;
  /** Where it belongs: an empty range before the function. */
  readonly range: ReportRange;
  /** The declaration as a comment of the file's language, without a line end. */
  readonly text: string;
}

export type ComparisonResult =
  | { readonly comparisons: readonly Comparison[] }
  /** Why nothing could be compared, in words. */
  | { readonly failure: string };

/** How two declarations compare, and that in words. */
export interface Comparison {
  /** `same`: the same equations of motion. `same motion`: other equations with the same accelerations. */
  readonly kind: 'same' | 'same motion' | 'differ' | 'undecided';
  readonly first: string;
  readonly second: string;
  readonly text: string;
}

/** What derived equations are written in. */
export type DeriveForm = 'text' | 'tex' | 'typescript' | 'javascript' | 'python';

/** Where documents that are not open come from; given by the rim. Paths are whatever the rim uses, `/` between folders. */
export interface Files {
  /** Undefined where there is no readable text file. Never throws. */
  read(file: string): string | undefined;
  /** Files that may hold declarations other files refer to by name. */
  declarations(): readonly string[];
  /** What the project says about a file; nothing where it is absent. */
  settings?(file: string): ProjectSettings;
  /** True for files that the project takes out of checking. */
  isLeftOut?(file: string): boolean;
}

export interface FileResult {
  readonly file: string;
  readonly language: string;
  readonly systems: readonly { readonly name: string; readonly range: ReportRange }[];
  readonly claims: readonly ReportClaim[];
  readonly problems: readonly Problem[];
  /** Other files that were read for it: a change there makes the result stale. */
  readonly dependsOn: readonly string[];
  /** Functions with claims that could not be read because they are being typed. */
  readonly unfinished: readonly string[];
}

export interface FileDetails {
  /** Those that the file declares or names. */
  readonly systems: readonly SystemDetails[];
  /** For claims that differ. */
  readonly claims: readonly ClaimDetails[];
}

export interface Written {
  readonly text: string;
  readonly tex: string;
}

/** A declared system as a reader of a report needs it. */
export interface SystemDetails {
  readonly name: string;
  /** `x [m]`, with the convention where one is stated. */
  readonly coordinates: readonly { readonly name: string; readonly unit?: string; readonly remark?: string }[];
  /** T, V, L, D where they are declared, and the generalized forces. */
  readonly energies: readonly (Written & { readonly name: string })[];
  readonly equations: readonly (Written & { readonly coordinate: string })[];
  readonly accelerations: readonly (Written & { readonly coordinate: string })[];
  /** Why there are no equations. */
  readonly blocked?: string;
}

/** A claim that differs, looked at closely. */
export interface ClaimDetails {
  readonly line: number;
  readonly system: string;
  readonly output: string;
  readonly quantity: string;
  /** The witness with the values of all symbols that either side depends on. */
  readonly state: readonly { readonly name: string; readonly value: number }[];
  readonly terms?: TermTable;
  readonly curve?: Curve;
}

/** The terms of what the claim must equal, at the witness. */
export interface TermTable {
  /** What the terms are of: an equation whose terms add up to zero, or the quantity itself. */
  readonly of: Written;
  readonly isEquation: boolean;
  readonly rows: readonly (Written & {
    /** With the declared energies' own values. */
    readonly declared: number;
    /** With the accelerations that the code gives; of an equation only. */
    readonly code?: number;
  })[];
}

/** Both sides of a claim while one symbol of the witness runs and the rest of it stays. */
export interface Curve {
  readonly symbol: string;
  readonly unit?: string;
  readonly at: readonly number[];
  readonly expected: readonly number[];
  readonly found: readonly number[];
  readonly witness: number;
}

export interface Lens {
  /** The function's name, or the declaration's where it stands above no function. */
  readonly range: ReportRange;
  readonly system: string;
  readonly function: string;
  /** `4 claims hold`, `1 of 4 claims differs: th''` */
  readonly verdict: string;
}

export interface Hover {
  readonly markdown: string;
  /** Pieces of the Markdown that can be shown as pictures instead, in order. */
  readonly formulas: readonly { readonly markdown: string; readonly lines: readonly { readonly text: string; readonly tex: string }[] }[];
  readonly range: ReportRange;
}

export interface DocumentSymbol {
  readonly name: string;
  readonly detail: string;
  readonly kind: 'system' | 'coordinate' | 'parameter' | 'input' | 'claim' | 'function';
  readonly range: ReportRange;
  readonly nameRange: ReportRange;
  readonly children: readonly DocumentSymbol[];
}

export interface DerivedSystem {
  readonly system: string;
  readonly range: ReportRange;
  readonly text: string;
}
