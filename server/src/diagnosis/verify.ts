import type { SubjectRequest, SubjectResult } from '../comparison/subject';
import type { Edit } from './search/edits';

/** Reads the file again with some edits made; undefined where that can't be done. */
export type Recheck = (edits: readonly Edit[]) => Promise<Rechecked | undefined>;

export interface Rechecked {
  /** The function in question. */
  readonly result: SubjectResult;
  readonly request: SubjectRequest;
  readonly source: string;
  /** The other declarations of the file, now and after; asked for only when the function itself is right. */
  others(): Promise<{ readonly before: readonly SubjectResult[]; readonly after: readonly SubjectResult[] }>;
}

/** Whether with these edits more claims hold, and none is worse off. */
export function isProgress(before: SubjectResult, after: SubjectResult): boolean {
  const holding = (r: SubjectResult) => r.claims.filter((c) => c.decision.verdict === 'holds').length;
  return isNoWorse(before, after) && holding(after) > holding(before);
}

/** Whether with these edits every claim of the function holds, and nothing else in the file got worse. */
export async function isRepair(before: SubjectResult, edits: readonly Edit[], recheck: Recheck): Promise<boolean> {
  const after = await recheck(edits);
  if (!after || !isNoWorse(before, after.result)) return false;
  if (!after.result.claims.every((c) => c.decision.verdict === 'holds')) return false;
  const others = await after.others();
  return others.before.length === others.after.length && others.before.every((b, i) => isNoWorse(b, others.after[i]!));
}

/** Whether with these edits no claim is worse off. */
export function isNoWorse(before: SubjectResult, after: SubjectResult): boolean {
  if (before.claims.length !== after.claims.length) return false;
  if (after.ambiguities.length > before.ambiguities.length) return false;
  return before.claims.every((c, i) => {
    const a = after.claims[i]!;
    const is = a.decision.verdict;
    return a.output === c.output && a.quantity === c.quantity && (is === 'holds' || is === c.decision.verdict);
  });
}
