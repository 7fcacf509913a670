import { diagnose, type Diagnosis } from '../diagnosis/diagnose';
import { applyEdits, type Edit } from '../diagnosis/search/edits';
import type { Rechecked } from '../diagnosis/verify';
import { findBlocks } from '../notation';
import { LineIndex } from '../text/line-index';
import { BudgetSpent, type Budget } from '../text/budget';
import type { Document } from '../workspace/documents';
import { checkBlock, subjectRequest, type BlockOutcome, type Project } from './check';
import type { Relocate } from './result-cache';

/** Adds to every declaration that differs what is wrong with its code. */
export async function diagnoseOutcomes(
  project: Project,
  document: Document,
  outcomes: readonly BlockOutcome[],
  budget: Budget,
  depth: 'verdicts' | 'repairs' = 'repairs',
): Promise<BlockOutcome[]> {
  const out: BlockOutcome[] = [];
  for (const [i, o] of outcomes.entries()) {
    if (!o.entry || !o.result || o.result.claims.every((c) => c.decision.verdict === 'holds')) {
      out.push(o);
      continue;
    }
    const known = o.remembered?.extra;
    if (known) {
      out.push({ ...o, diagnosis: movedDiagnosis(known, o.remembered!.relocate) });
      continue;
    }
    if (depth === 'verdicts') {
      out.push(o);
      continue;
    }
    const request = subjectRequest(project, document, o.placed, o.entry, budget);
    const recheck = (edits: readonly Edit[]) => recheckWith(project, document, outcomes, i, edits, budget);
    const diagnosis = await found(() => diagnose(request, o.result!, document.text, recheck));
    if (diagnosis && !budget.why) o.remembered?.keep(diagnosis);
    out.push(diagnosis ? { ...o, diagnosis } : o);
  }
  return out;
}

/** Nothing, where the time ran out on the way. */
async function found<T>(search: () => Promise<T>): Promise<T | undefined> {
  try {
    return await search();
  } catch (error) {
    if (!(error instanceof BudgetSpent)) throw error;
    return undefined;
  }
}

function movedDiagnosis(d: Diagnosis, relocate: Relocate): Diagnosis {
  return {
    ...d,
    faults: d.faults.map((f) => ({ ...f, span: relocate(f.span) })),
    edits: d.edits?.map((e) => ({ ...e, span: relocate(e.span) })),
    place: d.place && relocate(d.place),
    declaration: d.declaration,
  };
}

/** Reads a document's declaration again with some edits made. */
export async function recheckWith(
  project: Project,
  document: Document,
  outcomes: readonly BlockOutcome[],
  index: number,
  edits: readonly Edit[],
  budget: Budget,
): Promise<Rechecked | undefined> {
  const edited = editedDocument(document, edits);
  if (!edited || edited.blocks.length !== document.blocks.length) return undefined;
  const own = await checkBlock(project, edited, edited.blocks[index]!, budget);
  if (!own.result) return undefined;
  return {
    result: own.result,
    request: subjectRequest(project, edited, edited.blocks[index]!, own.entry!, budget),
    source: edited.text,
    others: async () => {
      const before = outcomes.filter((o, k) => k !== index && o.result);
      const after = [];
      for (const o of before) {
        const again = await checkBlock(project, edited, edited.blocks[outcomes.indexOf(o)]!, budget);
        if (again.result) after.push(again.result);
      }
      return { before: before.map((o) => o.result!), after };
    },
  };
}

/** The document with a text of its own; the project's documents stay as they are. */
function editedDocument(document: Document, edits: readonly Edit[]): Document | undefined {
  const text = applyEdits(document.text, edits);
  const program = document.core.parse(document.file, text, document.version);
  if (program.errors.length > document.program.errors.length) return undefined;
  const blocks = program.comments.flatMap((c) => findBlocks(text, c).map((block) => ({ block, subject: c.subject })));
  return { ...document, text, program, lines: new LineIndex(text), blocks };
}
