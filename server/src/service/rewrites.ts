import type { ReportRange } from '@visviva/shared';
import { rewriteOutput } from '../diagnosis/rewrite';
import type { Edit } from '../diagnosis/search/edits';
import type { Budget } from '../text/budget';
import type { Span } from '../text/span';
import type { Document } from '../workspace/documents';
import type { OutputRewrite } from './api';
import { subjectRequest, type BlockOutcome, type Project } from './check';
import { recheckWith } from './diagnose';

/** The differing outputs that a range touches, by their claim, their place or their fault, each written anew. */
export async function rewritesAt(
  project: Project,
  document: Document,
  outcomes: readonly BlockOutcome[],
  range: ReportRange,
  budget: Budget,
): Promise<OutputRewrite[]> {
  const { lines, file } = document;
  // Whole lines: the cursor is rarely on the expression itself.
  const touches = (span: Span): boolean => {
    const r = lines.range(span);
    return r.start.line <= range.end.line && range.start.line <= r.end.line;
  };
  const out = new Map<string, OutputRewrite>();
  for (const [i, o] of outcomes.entries()) {
    if (!o.entry || !o.result?.claims.some((c) => c.decision.verdict === 'differs')) continue;
    const request = subjectRequest(project, document, o.placed, o.entry, budget);
    const recheck = (edits: readonly Edit[]) => recheckWith(project, document, outcomes, i, edits, budget);
    const faulty = [...(o.diagnosis?.faults.map((f) => f.span) ?? []), ...(o.diagnosis?.place ? [o.diagnosis.place] : [])].some(touches);
    for (const [k, claim] of o.result.claims.entries()) {
      if (claim.decision.verdict !== 'differs' || claim.place?.file !== file) continue;
      const made = await rewriteOutput(request, o.result, k, document.text, faulty ? () => true : touches, recheck);
      if (!made) continue;
      const edits = made.edits.map((e) => ({ range: lines.range(e.span), text: e.text }));
      const title = `Replace ${claim.output} with the derived expression for ${claim.quantity}`;
      if (!out.has(JSON.stringify(edits))) out.set(JSON.stringify(edits), { title, edits });
    }
  }
  return [...out.values()];
}
