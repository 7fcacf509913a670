import { text } from '../expression/print';
import type { Derived } from '../mechanics/lagrange';
import type { ReadRequest, Reading } from '../program/reading';
import type { Budget } from '../text/budget';
import { decide } from './decide';

/**
 * Places that are said to mean one thing (by `reads`, or by their name) while the code gives them another: the two differ
 * at generic states. Which of them is right nobody can tell, so neither counts.
 */
export function contradictions(derived: Derived, reading: Reading, budget: Budget): NonNullable<ReadRequest['contradicted']> {
  const out = new Map<string, { reason: string; place: Reading['assigned'][number]['place'] }>();
  const { assigned } = reading;
  if (assigned.length === 0) return out;
  const pairs = assigned.map((a) => ({ found: a.value, expected: a.meaning }));
  const decisions = decide({ derived, pairs, assumed: [], budget, placeOf: () => undefined, withoutProof: true });
  decisions.forEach((d, i) => {
    if (d.verdict !== 'differs') return;
    const { path, code, how, meaning, value, place } = assigned[i]!;
    const said = how === 'reads' ? 'by its `reads`' : 'by its name';
    const mend =
      how === 'reads'
        ? 'correct the one that is wrong, or say with `reads` what the names in that value mean'
        : `say with \`reads\` what \`${code}\` and the names in that value mean`;
    out.set(path, { reason: `\`${code}\` is ${text(meaning)} ${said}, but the code gives it ${text(value)}: ${mend}`, place });
  });
  return out;
}
