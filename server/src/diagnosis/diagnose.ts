import type { FindingCode } from '@visviva/shared';
import type { SubjectRequest, SubjectResult } from '../comparison/subject';
import type { Span } from '../text/span';
import type { Candidate } from './search/candidates/candidate';
import { trimmed, type Edit } from './search/edits';
import { Search } from './search/search';
import { findDeclarationChange } from './declaration';
import { unreadCandidates } from './search/unread';
import { isProgress, isRepair, type Recheck } from './verify';

/** One thing that is wrong with the code of a function. */
export interface Fault {
  readonly code: FindingCode;
  readonly span: Span;
  /** What stands there, and what should. */
  readonly old: string;
  readonly new: string;
}

export interface Diagnosis {
  readonly faults: readonly Fault[];
  /** Makes every claim of the function hold; read again and confirmed. */
  readonly edits: readonly Edit[] | undefined;
  /** Where no repair was found: the smallest place at which some value would make every claim right. */
  readonly place: Span | undefined;
  /** A change of the declaration with which the code would be right. */
  readonly declaration: string | undefined;
}

const MOST_TRIES = 8;
const MOST_UNTRIED = 8;
const MOST_FIRST_STEPS = 3;

/** Looks for what is wrong with a function whose claims differ, and for an edit that makes them right. */
export async function diagnose(request: SubjectRequest, result: SubjectResult, source: string, recheck: Recheck): Promise<Diagnosis | undefined> {
  const has = (verdict: 'differs' | 'unread') => result.claims.some((c) => c.decision.verdict === verdict);
  if (!has('differs') && !has('unread')) return undefined;
  const verify = (edits: readonly Edit[]) => isRepair(result, edits, recheck);
  if (has('unread')) {
    const readable = await firstOf(request, unreadCandidates(request, result, source), verify);
    if (readable) return repaired([readable], source, undefined);
  }
  const search = has('differs') ? Search.start(request, result, source) : undefined;
  if (!search) return undefined;
  const single = await firstOf(request, oneEdit(search), verify);
  if (single) return repaired([single], source, undefined);
  // Where one edit of the code does not do, one of the declaration may.
  const declaration = findDeclarationChange(request.derived, result.claims);
  const steps = await inSteps(request, search, result, recheck);
  if (steps) return repaired(steps, source, declaration);
  for (const { first, second } of search.pairs().slice(0, MOST_TRIES)) {
    if (!request.budget.look()) break;
    if (await verify([...first.edits, ...second.edits])) return repaired([first, second], source, declaration);
  }
  return { faults: [], edits: undefined, place: search.places[0]?.span, declaration };
}

function* oneEdit(search: Search): Generator<Candidate> {
  yield* distinct(search.known()).slice(0, MOST_TRIES);
  yield* distinct(search.open()).slice(0, MOST_TRIES);
  yield* distinct(search.untried).slice(0, MOST_UNTRIED);
}

async function firstOf(
  request: SubjectRequest,
  candidates: Iterable<Candidate>,
  verify: (edits: readonly Edit[]) => Promise<boolean>,
): Promise<Candidate | undefined> {
  for (const c of candidates) {
    if (!request.budget.look()) return undefined;
    if (await verify(c.edits)) return c;
  }
  return undefined;
}

/** Two faults that different claims show: one is mended first, then the other is searched for in what that gives. */
async function inSteps(request: SubjectRequest, search: Search, result: SubjectResult, recheck: Recheck): Promise<Candidate[] | undefined> {
  for (const first of distinct(search.partial()).slice(0, MOST_FIRST_STEPS)) {
    if (!request.budget.look()) return undefined;
    const half = await recheck(first.edits);
    if (!half || !isProgress(result, half.result)) continue;
    const next = Search.start(half.request, half.result, half.source);
    if (!next) continue;
    // The second edit is made in the text before the first one, so that both can be told together.
    const both = (c: Candidate): Candidate | undefined => moved(c, first.edits);
    const shifted = [...distinct(next.known()).slice(0, MOST_TRIES), ...distinct(next.open()).slice(0, MOST_TRIES)].flatMap((c) => both(c) ?? []);
    const second = await firstOf(request, shifted, (edits) => isRepair(result, [...first.edits, ...edits], recheck));
    if (second) return [first, second];
  }
  return undefined;
}

/** A candidate found in an edited text, with its places in the text before; undefined where the edits meet. */
function moved(c: Candidate, before: readonly Edit[]): Candidate | undefined {
  const back = (span: Span): Span | undefined => {
    let shift = 0;
    let grown = 0;
    for (const e of [...before].sort((a, b) => a.span.start - b.span.start)) {
      const by = e.text.length - (e.span.end - e.span.start);
      const start = e.span.start + shift;
      const end = start + e.text.length;
      if (span.end <= start && span.start < start) break;
      if (span.start >= end) shift += by;
      else if (span.start <= start && span.end >= end && !(span.start === start && span.end === end)) grown += by;
      else return undefined;
    }
    return { start: span.start - shift, end: span.end - shift - grown };
  };
  const edits = c.edits.map((e) => ({ text: e.text, span: back(e.span) }));
  const span = back(c.place ?? c.site.span) ?? back(c.site.span);
  // An edit around the first one would bring back what that one took away.
  const safe = c.edits.every((e, i) => edits[i]!.span && e.span.end - e.span.start === edits[i]!.span!.end - edits[i]!.span!.start);
  return span && safe ? { ...c, place: span, edits: edits.map((e) => ({ text: e.text, span: e.span! })) } : undefined;
}

function repaired(candidates: readonly Candidate[], source: string, declaration: string | undefined): Diagnosis {
  return {
    faults: candidates.map((c) => ({ code: c.code, span: c.place ?? c.site.span, old: c.old, new: c.new })),
    edits: candidates.flatMap((c) => c.edits.map((e) => trimmed(e, source))),
    place: undefined,
    declaration,
  };
}

function distinct(candidates: readonly Candidate[]): Candidate[] {
  const seen = new Set<string>();
  return candidates.filter((c) => {
    const key = JSON.stringify(c.edits);
    if (seen.has(key)) return false;
    seen.add(key);
    return true;
  });
}
