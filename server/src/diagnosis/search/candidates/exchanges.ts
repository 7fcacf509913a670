import type { Siblings } from '../sites';
import type { Candidate, Scene } from './candidate';
import type { Evaluation } from '../tagged';
import type { Site } from '../sites';

/** Two items of a list, or the values of two statements, the other way round. */
export function exchanges(scene: Scene, siblings: readonly Siblings[], evaluationsOf: (site: Site) => readonly Evaluation[], give: (c: Candidate) => void): void {
  const { source, model } = scene;
  for (const { sites } of siblings) {
    const live = sites.filter((s) => evaluationsOf(s).length > 0).slice(0, 8);
    for (let i = 0; i < live.length; i++) {
      for (let j = i + 1; j < live.length; j++) {
        const [a, b] = [live[i]!, live[j]!];
        const texts = [a, b].map((s) => source.slice(s.span.start, s.span.end));
        if (texts[0] === texts[1] || a.span.end > b.span.start) continue;
        const read = (s: Site) => evaluationsOf(s).map((e) => model.value(e.read));
        const [va, vb] = [read(a), read(b)];
        if (va.length !== vb.length || va.includes(undefined) || vb.includes(undefined)) continue;
        give({
          site: a,
          edits: [
            { span: a.span, text: texts[1]! },
            { span: b.span, text: texts[0]! },
          ],
          code: 'swapped-rows',
          cost: 1.7,
          values: vb as Float64Array[],
          also: [{ site: b, values: va as Float64Array[] }],
          label: 'exchange',
          old: texts[0]!,
          new: texts[1]!,
        });
      }
    }
  }
}
