import type { SubjectResult } from '../comparison/subject';
import type { Derived } from '../mechanics/lagrange';
import { digestOf } from '../program/facts';
import { declaredNames } from '../program/scan';
import type { Statement } from '../program/form';
import type { Place, Span } from '../text/span';
import type { Document, PlacedBlock } from '../workspace/documents';

/** Moves places of the text a result was made from to where the same text stands now. */
export type Relocate = (span: Span) => Span;

/** A result that still holds, moved to its places of today; what was found out about it later can be kept with it. */
export interface Remembered<Extra> {
  readonly result: SubjectResult;
  /** In the places of then: `relocate` moves them. */
  readonly extra: Extra | undefined;
  readonly relocate: Relocate;
  keep(extra: Extra): void;
}

/** A piece of a file that a result depends on: where it stood, and its text. */
interface Piece {
  readonly key: string;
  readonly start: number;
  readonly text: string;
}

interface Entry<Extra> {
  readonly derived: Derived;
  readonly block: Piece;
  readonly pieces: readonly Piece[];
  readonly facts: string;
  readonly imported: readonly { readonly file: string; readonly text: string }[];
  readonly result: SubjectResult;
  extra: Extra | undefined;
}

const MOST_ENTRIES = 500;

/**
 * Results of declarations, kept until something they depend on changes: the declaration, the top-level statement their
 * function is in, the statements of the file whose names were looked up, and imported files. Anything else may change or
 * move.
 */
export class ResultCache<Extra> {
  private readonly entries = new Map<string, Entry<Extra>>();
  /** How often a function was read instead of remembered. */
  misses = 0;

  /** @param read the text of another file */
  constructor(private readonly read: (file: string) => string | undefined) {}

  find(document: Document, placed: PlacedBlock, derived: Derived): Remembered<Extra> | undefined {
    const key = keyOf(document, placed);
    const entry = key === undefined ? undefined : this.entries.get(key);
    if (!entry || entry.derived !== derived || !key) return undefined;
    const block = blockPiece(document, placed);
    if (block.text !== entry.block.text || factsOf(document) !== entry.facts) return undefined;
    if (entry.imported.some((f) => this.read(f.file) !== f.text)) return undefined;
    const now = piecesOf(document, placed, touchedOf(entry.result));
    if (!now || now.length !== entry.pieces.length) return undefined;
    for (let i = 0; i < now.length; i++) {
      if (now[i]!.key !== entry.pieces[i]!.key || now[i]!.text !== entry.pieces[i]!.text) return undefined;
    }
    const relocate = relocation([entry.block, ...entry.pieces], [block, ...now]);
    this.entries.delete(key);
    this.entries.set(key, entry);
    const result = moved(entry.result, document.file, relocate);
    return {
      result,
      extra: entry.extra,
      relocate,
      keep: (extra) => void this.entries.set(key, { ...entry, block, pieces: now, result, extra }),
    };
  }

  /** Keeps a new result; the answer takes what is found out about it later. */
  add(document: Document, placed: PlacedBlock, derived: Derived, result: SubjectResult): Remembered<Extra> {
    // Without claims nothing is read.
    if (result.reading) this.misses++;
    const same: Relocate = (span) => span;
    const none: Remembered<Extra> = { result, extra: undefined, relocate: same, keep: () => undefined };
    const key = keyOf(document, placed);
    const pieces = piecesOf(document, placed, touchedOf(result));
    if (key === undefined || !pieces || !result.reading) return none;
    const imported: { file: string; text: string }[] = [];
    for (const file of result.reading.files) {
      if (file === document.file) continue;
      const text = this.read(file);
      if (text === undefined) return none;
      imported.push({ file, text });
    }
    const entry: Entry<Extra> = {
      derived,
      block: blockPiece(document, placed),
      pieces,
      facts: factsOf(document),
      imported,
      // What led to the result is not asked for again, and is large.
      result: { ...result, reading: { ...result.reading, trace: [] } },
      extra: undefined,
    };
    this.entries.delete(key);
    this.entries.set(key, entry);
    if (this.entries.size > MOST_ENTRIES) this.entries.delete(this.entries.keys().next().value!);
    return { ...none, keep: (extra) => (entry.extra = extra) };
  }
}

/** What a result depends on beside the pieces it was made from. */
function factsOf(document: Document): string {
  return `${document.version ?? ''} ${document.program.dividesIntegers ?? false} ${digestOf(document.program)}`;
}

/** Scripts depend on everything in their file, so they are not kept. */
function keyOf(document: Document, { block, subject }: PlacedBlock): string | undefined {
  return subject.kind === 'file' ? undefined : [document.file, block.name, subject.kind, subject.path].join('\u0000');
}

function touchedOf(result: SubjectResult): ReadonlySet<string> {
  return result.reading?.touched ?? new Set();
}

function blockPiece(document: Document, { block }: PlacedBlock): Piece {
  const { start, end } = block.span;
  return { key: '', start, text: document.text.slice(start, end) };
}

/** The statement the function is in, then those of the names that were looked up. */
function piecesOf(document: Document, { subject }: PlacedBlock, touched: ReadonlySet<string>): Piece[] | undefined {
  if (subject.kind === 'file') return undefined;
  const own = document.program.body.find((s) => s.span.start <= subject.node.span.start && subject.node.span.end <= s.span.end);
  if (!own) return undefined;
  const pieces = [pieceOf(document, own, '')];
  const byName = statementsByName(document);
  for (const name of [...touched].sort()) {
    for (const s of byName.get(name) ?? []) if (s !== own) pieces.push(pieceOf(document, s, name));
    pieces.push({ key: name, start: -1, text: '' });
  }
  return pieces;
}

function pieceOf(document: Document, s: Statement, key: string): Piece {
  return { key, start: s.span.start, text: document.text.slice(s.span.start, s.span.end) };
}

const byNames = new WeakMap<Document, Map<string, Statement[]>>();

function statementsByName(document: Document): Map<string, Statement[]> {
  let known = byNames.get(document);
  if (known) return known;
  known = new Map();
  for (const s of document.program.body) {
    for (const name of declaredNames(s)) known.set(name, [...(known.get(name) ?? []), s]);
  }
  byNames.set(document, known);
  return known;
}

function relocation(before: readonly Piece[], after: readonly Piece[]): Relocate {
  return (span) => {
    for (let i = 0; i < before.length; i++) {
      const { start, text } = before[i]!;
      if (start < 0 || span.start < start || span.end > start + text.length) continue;
      const by = after[i]!.start - start;
      return { start: span.start + by, end: span.end + by };
    }
    return span;
  };
}

function moved(result: SubjectResult, file: string, relocate: Relocate): SubjectResult {
  const place = (p: Place): Place => (p.file === file ? { file, span: relocate(p.span) } : p);
  return {
    claims: result.claims.map((c) => ({
      ...c,
      span: relocate(c.span),
      place: c.place && place(c.place),
      decision:
        c.decision.verdict === 'unread' && c.decision.place ? { ...c.decision, place: place(c.decision.place) } : c.decision,
    })),
    problems: result.problems.map((p) => ({ ...p, span: relocate(p.span) })),
    ambiguities: result.ambiguities.map((a) => ({ ...a, place: place(a.place) })),
    reading: result.reading && {
      ...result.reading,
      bindings: result.reading.bindings.map((b) => ({ ...b, place: place(b.place) })),
      drops: result.reading.drops.map((d) => ({ ...d, place: place(d.place) })),
    },
  };
}
