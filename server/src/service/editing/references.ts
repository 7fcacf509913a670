import type { SymbolData } from '../../expression/node';
import { canonicalName } from '../../mechanics/names';
import { nodesOf } from '../../program/scan';
import { contains, type Span } from '../../text/span';
import type { Document, PlacedBlock } from '../../workspace/documents';
import { declares } from '../../workspace/systems';
import type { BlockOutcome } from '../check';
import { namedIn, namesUsed, type Named } from './names';

/** A place where a name stands, in declarations or in code. */
export interface Occurrence {
  readonly document: Document;
  readonly span: Span;
  readonly side: 'declaration' | 'code';
  readonly isDeclaration: boolean;
}

/** What stands at a place: a declared name, or a system by its name. */
export type Target =
  | { readonly kind: 'name'; readonly system: string; readonly key: string; readonly span: Span }
  | { readonly kind: 'system'; readonly system: string; readonly span: Span };

/** What the name at an offset stands for. */
export function targetAt(document: Document, offset: number, outcomes: readonly BlockOutcome[]): Target | undefined {
  for (const { block } of document.blocks) {
    if (contains(block.nameSpan, offset)) return { kind: 'system', system: block.name, span: block.nameSpan };
    if (!contains(block.span, offset)) continue;
    const use = namesUsed(document.text, block).find((u) => contains(u.span, offset));
    if (use) return { kind: 'name', system: block.name, key: use.key, span: use.span };
  }
  for (const o of outcomes) {
    const found = codeUses(document, o).find((u) => contains(u.span, offset));
    if (found) return { kind: 'name', system: o.placed.block.name, key: found.key, span: found.span };
  }
  return undefined;
}

/**
 * Where a target is named, over some documents that speak of its system, declarations first.
 * @param outcomes of each document, for the places in code
 */
export function occurrencesOf(target: Target, documents: readonly (readonly [Document, readonly BlockOutcome[]])[]): Occurrence[] {
  const out: Occurrence[] = [];
  for (const [document, outcomes] of documents) {
    const blocks = document.blocks.filter((b) => b.block.name === target.system);
    for (const { block } of blocks) {
      if (target.kind === 'system') {
        out.push({ document, span: block.nameSpan, side: 'declaration', isDeclaration: declares(block) });
        continue;
      }
      const named = new Set(namedIn(document.text, block).filter((n) => n.key === target.key).map((n) => n.span.start));
      for (const use of namesUsed(document.text, block)) {
        if (use.key !== target.key) continue;
        out.push({ document, span: use.span, side: 'declaration', isDeclaration: named.has(use.span.start) });
      }
    }
    if (target.kind === 'system') continue;
    const seen = new Set<number>();
    for (const o of outcomes) {
      if (o.placed.block.name !== target.system) continue;
      for (const use of codeUses(document, o)) {
        if (use.key !== target.key || seen.has(use.span.start)) continue;
        seen.add(use.span.start);
        out.push({ document, span: use.span, side: 'code', isDeclaration: false });
      }
    }
  }
  return out.sort((a, b) => Number(b.isDeclaration) - Number(a.isDeclaration));
}

/** Where a name is declared: the first declaration with coordinates that has it, else any. */
export function declarationOf(system: string, key: string, documents: readonly Document[]): { readonly document: Document; readonly named: Named; readonly placed: PlacedBlock } | undefined {
  for (const wanted of [true, false]) {
    for (const document of documents) {
      for (const placed of document.blocks) {
        if (placed.block.name !== system || declares(placed.block) !== wanted) continue;
        const named = namedIn(document.text, placed.block).find((n) => n.key === key);
        if (named) return { document, named, placed };
      }
    }
  }
  return undefined;
}

export interface CodeUse {
  readonly key: string;
  readonly span: Span;
  /** As typed: `p.m`, `thdot`. */
  readonly code: string;
  readonly how: 'reads' | 'name';
}

/** The places in a declaration's code that were taken for declared symbols: each binding, wherever it is written alike. */
export function codeUses(document: Document, o: BlockOutcome): CodeUse[] {
  const { subject } = o.placed;
  const bindings = (o.result?.reading?.bindings ?? []).filter((b) => b.place.file === document.file && b.meaning.op === 'symbol');
  if (bindings.length === 0) return [];
  const { text } = document;
  const byText = new Map<string, { key: string; how: 'reads' | 'name' }>();
  const out = new Map<number, CodeUse>();
  for (const b of bindings) {
    const code = text.slice(b.place.span.start, b.place.span.end);
    const key = canonicalName(familyName((b.meaning.data as SymbolData).name));
    if (code.length > 80 || code.includes('\n')) continue;
    byText.set(code, { key, how: b.how });
    out.set(b.place.span.start, { key, span: b.place.span, code, how: b.how });
  }
  const start: unknown = subject.kind === 'file' ? document.program.body : subject.node;
  for (const node of nodesOf(start)) {
    const { kind, span } = node as { kind?: string; span?: Span };
    if (!span || !(kind === 'name' || kind === 'member' || kind === 'index' || kind === 'call')) continue;
    const code = text.slice(span.start, span.end);
    const known = byText.get(code);
    if (known && !out.has(span.start)) out.set(span.start, { ...known, span, code });
  }
  return [...out.values()].sort((a, b) => a.span.start - b.span.start);
}

/** `th[2]` is of the family `th`. */
function familyName(name: string): string {
  return /^[^[]+/.exec(name)?.[0] ?? name;
}
