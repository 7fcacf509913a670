import type { FindingCode } from '@visviva/shared';
import { contains, type Span } from '../../../text/span';
import type { Program } from '../../../program/form';
import type { Edit } from '../edits';
import type { Model } from '../model';
import type { Site } from '../sites';
import type { Evaluation } from '../tagged';
import type { Expression } from '../../../program/form';

/** An edit that might be the repair. */
export interface Candidate {
  readonly site: Site;
  readonly edits: readonly Edit[];
  readonly code: FindingCode;
  /** The part of the site to point at, where not all of it is meant. */
  readonly place?: Span;
  /** Smaller is tried, and offered, first: the size of the edit and how often people make the fault. */
  readonly cost: number;
  /** The site's new value, by evaluation; undefined where only reading the edited text can tell. */
  readonly values?: readonly Float64Array[];
  /** Other places that change along, with their values. */
  readonly also?: readonly { readonly site: Site; readonly values: readonly Float64Array[] }[];
  /** The same for the same change at another place with the same text. */
  readonly label: string;
  /** Words for the message: what stands there, and what should. */
  readonly old: string;
  readonly new: string;
}

/** Something short the code already has a text for, with its value. */
export interface Atom {
  readonly text: string;
  /** By evaluation; a single one holds for every evaluation of a place. */
  readonly values: readonly Float64Array[];
  /** Position from which on it may be used. */
  readonly from: number;
  /** The function it belongs to; it may be used in functions inside that one too. */
  readonly owner: Site['owner'];
  /** More than a name or an entry: good as a factor or a term, not in place of a name. */
  readonly compound?: boolean;
}

/** Whether what an atom's text means is there at a place. */
export function isVisible(atom: Atom, site: Site): boolean {
  return atom.from <= site.span.start && (!atom.owner || atom.owner === site.owner || contains(atom.owner.span, site.span.start));
}

/** What the makers of candidates see. */
export interface Scene {
  readonly model: Model;
  readonly program: Program;
  readonly source: string;
  /** The source with its comments blank: what shows that a name is there to be used. */
  readonly code: string;
  readonly atoms: readonly Atom[];
  /** Sites of the same owner, by node. */
  siteOf(e: Expression): Site | undefined;
  /** What the target of an assignment was given before it. */
  assignedBefore(site: Site, evaluations: readonly Evaluation[]): readonly Float64Array[] | undefined;
  /** Values of a place by evaluation, as many as `evaluations` has. */
  valuesOf(e: Expression, evaluations: readonly Evaluation[]): readonly Float64Array[] | undefined;
}

/** A place to make candidates for. */
export interface Spot {
  readonly site: Site;
  readonly evaluations: readonly Evaluation[];
  readonly values: readonly Float64Array[];
  readonly text: string;
  /** What the place needs, where that is known. */
  readonly need: Float64Array | undefined;
}

export type Maker = (scene: Scene, spot: Spot, give: (candidate: Candidate) => void) => void;

/** An atom's values as a place sees them, evaluation by evaluation. */
export function seenAt(atom: Atom, evaluations: number): readonly Float64Array[] | undefined {
  if (atom.values.length === evaluations) return atom.values;
  return atom.values.length === 1 ? Array.from({ length: evaluations }, () => atom.values[0]!) : undefined;
}

export function map1(a: readonly Float64Array[], f: (x: number) => number): Float64Array[] {
  return a.map((column) => column.map(f));
}

export function map2(a: readonly Float64Array[], b: readonly Float64Array[], f: (x: number, y: number) => number): Float64Array[] {
  return a.map((column, k) => column.map((x, s) => f(x, b[k]![s]!)));
}

/** Whether a column has the values needed, up to the rounding of a solved value; where any will do, `b` is NaN. */
export function agree(a: Float64Array, b: Float64Array, tolerance = 1e-6): boolean {
  for (let s = 0; s < a.length; s++) {
    if (Number.isNaN(b[s]!)) continue;
    if (!(Math.abs(a[s]! - b[s]!) <= tolerance * (Math.abs(a[s]!) + Math.abs(b[s]!)) + 1e-12)) return false;
  }
  return true;
}
