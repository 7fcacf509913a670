import type { ReportRange } from '@visviva/shared';
import type { LineIndex } from '../../text/line-index';
import { cells, type Cell } from './width';

export interface Excerpt {
  readonly line: string;
  /** Blanks up to the place, then a rule below it. */
  readonly blanks: string;
  readonly rule: string;
}

/** Longer lines are cut down to what surrounds the place. */
const MOST_COLUMNS = 110;
const RULE = '‾';

/** Of longer lines (code made by programs) only what surrounds the place is looked at. */
const MOST_UNITS = 2000;

/** The source line of a range, as a terminal shows it, and a rule for the line below it. */
export function excerpt(lines: LineIndex, range: ReportRange): Excerpt | undefined {
  const source = lines.line(range.start.line);
  if (source.trim() === '') return undefined;
  const from = range.start.column - 1;
  const to = range.end.line > range.start.line ? source.trimEnd().length : range.end.column - 1;
  const near = Math.max(0, from - MOST_UNITS / 4);
  const all = source.length <= MOST_UNITS ? cells(source) : shifted(cells(source.slice(near, near + MOST_UNITS)), near);
  const first = all.findIndex((c) => c.text.trim() !== '');
  const window = cut(all.slice(Math.max(0, first)), from, to);
  let blanks = 0;
  let length = 0;
  for (const c of window) {
    if (c.offset < from) blanks += c.width;
    else if (c.offset < to) length += c.width;
  }
  return { line: window.map((c) => c.text).join(''), blanks: ' '.repeat(blanks), rule: RULE.repeat(Math.max(1, length)) };
}

function shifted(line: readonly Cell[], by: number): Cell[] {
  return line.map((c) => ({ ...c, offset: c.offset + by }));
}

function cut(line: readonly Cell[], from: number, to: number): Cell[] {
  let total = 0;
  for (const c of line) total += c.width;
  if (total <= MOST_COLUMNS) return [...line];
  const start = Math.max(0, line.findIndex((c) => c.offset >= from));
  const room = Math.max(10, Math.floor((MOST_COLUMNS - Math.min(to - from, MOST_COLUMNS)) / 2));
  const low = Math.max(0, start - room);
  const out: Cell[] = [];
  if (low > 0) out.push({ text: '…', width: 1, offset: -1 });
  let width = 0;
  let i = low;
  for (; i < line.length && width < MOST_COLUMNS; i++) {
    out.push(line[i]!);
    width += line[i]!.width;
  }
  if (i < line.length) out.push({ text: '…', width: 1, offset: Number.MAX_SAFE_INTEGER });
  return out;
}
