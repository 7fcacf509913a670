import type { PanelData, PanelFormula } from '@visviva/shared';
import type { Hover } from '../service/api';
import { dataUri, typeset, typesetWithin } from '../typeset/typeset';

/** Wider pictures are cut off in a hover. */
const widest = 300;

/**
 * A hover's Markdown with its formulas as pictures; a block of which some formula can't be shown so stays text.
 * @param colour of the text in the editor's theme
 */
export async function withPictures(hover: Hover, colour: string): Promise<string> {
  let { markdown } = hover;
  for (const block of hover.formulas) {
    const pictures = await Promise.all(block.lines.map(async (l) => (l.tex === '' ? undefined : typesetWithin(l.tex, widest))));
    const shown = block.lines.flatMap((l, i) => (pictures[i] ? [`![${altText(l.text)}](${dataUri(pictures[i], colour)})`] : []));
    if (shown.length < pictures.length) continue;
    markdown = markdown.replace(block.markdown, () => shown.join('\n\n'));
  }
  return markdown;
}

/** The panel's formulas, each with its picture. */
export async function withPanelPictures(data: PanelData): Promise<PanelData> {
  const drawn = async (f: PanelFormula): Promise<PanelFormula> => {
    const picture = f.tex === undefined ? undefined : await typeset(f.tex);
    return picture ? { ...f, svg: picture.svg } : f;
  };
  return {
    ...data,
    equations: await Promise.all(
      data.equations.map(async (e) => ({
        ...e,
        terms: await Promise.all(e.terms.map(async (t) => ({ ...t, formula: await drawn(t.formula) }))),
      })),
    ),
    conserved: await Promise.all(data.conserved.map(async (c) => ({ ...c, formula: await drawn(c.formula) }))),
  };
}

function altText(text: string): string {
  return text.replace(/[[\]\\]/g, (c) => `\\${c}`).replaceAll('\n', ' ');
}
