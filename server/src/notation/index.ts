import { CLAIMED, CODE, Cursor, type Mode } from './cursor';
import { hole } from './building';
import { parseExpression } from './formula';
import { findBlocks } from './scan';
import type { Block, CommentText, Formula, NotationError } from './tree';

export { findBlocks } from './scan';
export { printFormula, printFamilies } from './print';
export { Dimension, DIMENSIONS, parseUnit, UNIT_NAMES } from './units';
export { STATEMENT_WORDS, type StatementWord } from './words';

/** The declarations of all comments of a document, in order. */
export function parseBlocks(text: string, comments: readonly CommentText[]): Block[] {
  return comments.flatMap((comment) => findBlocks(text, comment));
}

/** The one comment that a `.visviva` file is. */
export function wholeFile(text: string): CommentText {
  return { span: { start: 0, end: text.length }, lineMarks: [] };
}

/**
 * Reads one formula; spans start at `offset`.
 * @param side `code` for the left of `reads` and `checks`
 */
export function parseFormula(text: string, offset = 0, side: 'physics' | 'code' = 'physics'): { formula: Formula; errors: NotationError[] } {
  const errors: NotationError[] = [];
  const segments = lineSegments(text);
  const mode: Mode = { ...(side === 'code' ? CODE : CLAIMED), logic: 'always', stops: new Set() };
  const cursor = new Cursor(text, segments, errors);
  cursor.mode = mode;
  let formula = cursor.atEnd ? hole(cursor, 'a formula is expected here') : parseExpression(cursor);
  cursor.skipRemark();
  if (!cursor.atEnd) {
    const token = cursor.peek();
    cursor.error(token.problem ?? `unexpected ${cursor.describeNext()} after the end of the formula`, token.span);
  }
  if (offset !== 0) formula = shift(formula, offset);
  return { formula, errors: errors.map((e) => ({ ...e, span: { start: e.span.start + offset, end: e.span.end + offset } })) };
}

function lineSegments(text: string): { start: number; end: number }[] {
  const segments: { start: number; end: number }[] = [];
  let start = 0;
  for (const m of text.matchAll(/\r\n|\n|\r/g)) {
    segments.push({ start, end: m.index });
    start = m.index + m[0].length;
  }
  segments.push({ start, end: text.length });
  return segments;
}

/** Moves every span of a tree; nodes are plain data, so any object with a `span` is moved. */
function shift<T>(value: T, by: number): T {
  if (Array.isArray(value)) return value.map((v: unknown) => shift(v, by)) as T;
  if (value === null || typeof value !== 'object') return value;
  if (!('span' in value)) return value;
  const moved: Record<string, unknown> = {};
  for (const [key, part] of Object.entries(value)) {
    moved[key] =
      key === 'span' || key.endsWith('Span')
        ? { start: (part as { start: number }).start + by, end: (part as { end: number }).end + by }
        : key === 'value' && (value as { kind?: string }).kind === 'number'
          ? part
          : shift(part, by);
  }
  return moved as T;
}
