/** Formulas as pictures. What does the typesetting is large, and loaded when the first one is asked for. */

export interface Picture {
  /** An SVG element without style attributes, sized in pixels, that takes the colour of the text around it. */
  readonly svg: string;
  readonly width: number;
  readonly height: number;
}

const fontSize = 15;
/** A formula that has to be made smaller than this to fit is shown as text. */
const smallest = 0.7;
const kept = new Map<string, Picture | undefined>();
const mostKept = 600;
let loaded: Promise<{ readonly convert: (tex: string) => string | undefined }> | undefined;

/** Undefined for what is no TeX. */
export async function typeset(tex: string): Promise<Picture | undefined> {
  if (kept.has(tex)) return kept.get(tex);
  loaded ??= import('./mathjax');
  const made = (await loaded).convert(tex);
  const picture = made === undefined ? undefined : sized(made);
  if (kept.size >= mostKept) kept.delete(kept.keys().next().value!);
  kept.set(tex, picture);
  return picture;
}

/** A formula within a width, broken before its terms where need be; undefined where it does not fit. */
export async function typesetWithin(tex: string, width: number): Promise<Picture | undefined> {
  const whole = await typeset(tex);
  if (!whole || whole.width <= width) return whole;
  const parts = termsOf(tex);
  const rows: string[] = [];
  for (const part of parts) {
    const longer = rows.length === 0 ? part : rows.at(-1)! + part;
    const fits = ((await typeset(longer))?.width ?? Infinity) + (rows.length > 1 ? indent : 0) <= width;
    if (rows.length === 0 || !fits) rows.push(part);
    else rows[rows.length - 1] = longer;
  }
  const broken = await typeset(`\\begin{aligned}&${rows.map((r, i) => (i > 0 ? `\\quad{}${r}` : r)).join(' \\\\ &')}\\end{aligned}`);
  if (!broken) return undefined;
  const scale = width / broken.width;
  if (scale >= 1) return broken;
  return scale < smallest ? undefined : scaled(broken, scale);
}

const indent = 20;

/** A picture as the address of a Markdown image, in one colour. */
export function dataUri({ svg }: Picture, colour: string): string {
  return `data:image/svg+xml;base64,${btoa(svg.replaceAll('currentColor', colour))}`;
}

function sized(svg: string): Picture {
  const box = /viewBox="[-\d.]+ [-\d.]+ ([\d.]+) ([\d.]+)"/.exec(svg)!;
  const width = Math.ceil((Number(box[1]) / 1000) * fontSize);
  const height = Math.ceil((Number(box[2]) / 1000) * fontSize);
  const plain = svg
    .replace(/ style="[^"]*"/g, '')
    .replace(/ width="[^"]*ex" height="[^"]*ex"/, ` width="${width}" height="${height}"`);
  return { svg: plain, width, height };
}

function scaled({ svg, width, height }: Picture, by: number): Picture {
  const [w, h] = [Math.floor(width * by), Math.floor(height * by)];
  return { svg: svg.replace(` width="${width}" height="${height}"`, ` width="${w}" height="${h}"`), width: w, height: h };
}

/** Pieces that begin with a sign or relation outside of all brackets. */
function termsOf(tex: string): string[] {
  const parts: string[] = [];
  let depth = 0;
  let start = 0;
  for (let i = 0; i < tex.length; i++) {
    const rest = tex.slice(i, i + 6);
    if (rest.startsWith('\\left')) depth++;
    else if (rest === '\\right') depth--;
    else if (tex[i] === '{' && tex[i - 1] !== '\\') depth++;
    else if (tex[i] === '}' && tex[i - 1] !== '\\') depth--;
    else if (depth === 0 && i > start && ' +-='.includes(tex[i]!) && /^ ?[-+=] /.test(tex.slice(i, i + 3))) {
      parts.push(tex.slice(start, i));
      start = i;
      i += 2;
    }
  }
  parts.push(tex.slice(start));
  return parts.filter((p) => p.trim() !== '');
}
