/** How many columns of a terminal text takes. Source: Unicode Standard Annex 11, East Asian Width; emoji are wide. */

const segmenter = new Intl.Segmenter('en', { granularity: 'grapheme' });

const WIDE =
  /^[\u1100-\u115f\u2e80-\u303e\u3041-\ua4cf\ua960-\ua97c\uac00-\ud7a3\uf900-\ufaff\ufe30-\ufe6f\uff01-\uff60\uffe0-\uffe6\u{16fe0}-\u{18aff}\u{1b000}-\u{1b2ff}\u{1f200}-\u{1f2ff}\u{20000}-\u{3fffd}]/u;
const EMOJI = /^\p{Emoji_Presentation}|\ufe0f|^\p{Regional_Indicator}{2}/u;
const INVISIBLE = /^[\p{Mark}\p{Default_Ignorable_Code_Point}]+$/u;

const TAB = 4;

export interface Cell {
  /** What to print for it. */
  readonly text: string;
  readonly width: number;
  /** Offset in the line, in UTF-16 units. */
  readonly offset: number;
}

/** A source line as cells of a terminal: tabs become spaces, control characters a dot. */
export function cells(line: string): Cell[] {
  const out: Cell[] = [];
  let column = 0;
  for (const { segment, index } of segmenter.segment(line)) {
    let text = segment;
    let width = widthOf(segment);
    if (segment === '\t') {
      width = TAB - (column % TAB);
      text = ' '.repeat(width);
    } else if (/^[\p{Cc}\u2028\u2029\u202a-\u202e\u2066-\u2069]/u.test(segment)) {
      // Control and direction characters of a file must not steer the terminal.
      text = '·';
      width = 1;
    }
    out.push({ text, width, offset: index });
    column += width;
  }
  return out;
}

export function textWidth(text: string): number {
  return cells(text).reduce((n, c) => n + c.width, 0);
}

function widthOf(segment: string): number {
  if (INVISIBLE.test(segment)) return 0;
  return EMOJI.test(segment) || WIDE.test(segment) ? 2 : 1;
}

/** Other people's text with nothing in it that steers a terminal; line ends stay. */
export function harmless(text: string): string {
  return text.replace(/[\p{Cc}\u202a-\u202e\u2066-\u2069]/gu, (c) => (c === '\n' ? c : c === '\t' ? ' ' : '·'));
}
