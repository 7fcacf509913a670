import type { FindingCode } from '@visviva/shared';
import type { SubjectRequest, SubjectResult } from '../comparison/subject';
import type { Span } from '../text/span';
import type { Candidate } from './search/candidates/candidate';
import { trimmed, type Edit } from './search/edits';
import { Search } from './search/search';
import { isRepair, type Recheck } from './verify';

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
}

const MOST_TRIES = 8;
const MOST_UNTRIED = 6;

/** Looks for what is wrong with a function whose claims differ, and for an edit that makes them right. */
export async function diagnose(request: SubjectRequest, result: SubjectResult, source: string, recheck: Recheck): Promise<Diagnosis | undefined> {
  if (!result.claims.some((c) => c.decision.verdict === 'differs')) return undefined;
  const found = Search.start(request, result, source);
  if (!found) return undefined;
  for (const stage of [() => found.known(), () => found.open(), () => found.untried.slice(0, MOST_UNTRIED)]) {
    for (const c of distinct(stage()).slice(0, MOST_TRIES)) {
      if (!request.budget.look()) break;
      if (await isRepair(result, c.edits, recheck)) return repaired([c], source);
    }
  }
  for (const { first, second } of found.pairs().slice(0, MOST_TRIES)) {
    if (!request.budget.look()) break;
    if (await isRepair(result, [...first.edits, ...second.edits], recheck)) return repaired([first, second], source);
  }
  return { faults: [], edits: undefined, place: found.places[0]?.span };
}

function repaired(candidates: readonly Candidate[], source: string): Diagnosis {
  return {
    faults: candidates.map((c) => ({ code: c.code, span: c.place ?? c.site.span, old: c.old, new: c.new })),
    edits: candidates.flatMap((c) => c.edits.map((e) => trimmed(e, source))),
    place: undefined,
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
