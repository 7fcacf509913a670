import type { FindingCode } from '@visviva/shared';
import type { SubjectRequest, SubjectResult } from '../comparison/subject';
import type { Span } from '../text/span';
import type { Candidate } from './search/candidates/candidate';
import { composed, trimmed, type Edit } from './search/edits';
import { Search } from './search/search';
import { findDeclarationChange, findShift } from './declaration';
import { unreadCandidates } from './search/unread';
import { isNoWorse, isProgress, isRepair, type Recheck } from './verify';

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
const MOST_HALVES = 5;

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
  if (single) return repaired([single], source, findShift(request.derived, result.claims));
  // Where one edit of the code does not do, one of the declaration may.
  const declaration = findDeclarationChange(request.derived, result.claims);
  const steps = await inSteps(request, distinct(search.partial()).slice(0, MOST_FIRST_STEPS), isProgress, result, source, recheck);
  if (steps) return { ...steps, declaration };
  for (const { first, second } of search.pairs().slice(0, MOST_TRIES)) {
    if (!request.budget.look()) break;
    if (await verify([...first.edits, ...second.edits])) return repaired([first, second], source, declaration);
  }
  const halves = await inSteps(request, search.halves().slice(0, MOST_HALVES), isNoWorse, result, source, recheck);
  if (halves) return { ...halves, declaration };
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

type IsWorth = (before: SubjectResult, after: SubjectResult) => boolean;

/** Two faults: one is mended first, then the other is searched for in what that gives. */
async function inSteps(request: SubjectRequest, firsts: readonly Candidate[], isWorth: IsWorth, result: SubjectResult, source: string, recheck: Recheck): Promise<Diagnosis | undefined> {
  for (const first of firsts) {
    if (!request.budget.look()) return undefined;
    const half = await recheck(first.edits);
    if (!half || !isWorth(result, half.result)) continue;
    const next = Search.start(half.request, half.result, half.source);
    if (!next) continue;
    const second = await firstOf(request, [...distinct(next.known()).slice(0, MOST_TRIES), ...distinct(next.open()).slice(0, MOST_TRIES)], (edits) =>
      isRepair(result, composed(source, first.edits, edits), recheck),
    );
    if (second) return together(first, second, source);
  }
  return undefined;
}

/** Two edits made one after the other: told as two faults, offered as edits of the text as it is. */
function together(first: Candidate, second: Candidate, source: string): Diagnosis {
  const edits = composed(source, first.edits, second.edits);
  const back = (span: Span): Span => {
    // Where the second fault lies in the text before the first edit: shifted, or all of what both edits change.
    const marked = composed(source, first.edits, [{ span, text: '' }]);
    return marked.find((e) => !first.edits.some((f) => f.span.start === e.span.start && f.span.end === e.span.end))?.span ?? first.site.span;
  };
  const fault = (c: Candidate, span: Span): Fault => ({ code: c.code, span, old: c.old, new: c.new });
  return {
    faults: [fault(first, first.place ?? first.site.span), fault(second, back(second.place ?? second.site.span))],
    edits: edits.map((e) => trimmed(e, source)),
    place: undefined,
    declaration: undefined,
  };
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
