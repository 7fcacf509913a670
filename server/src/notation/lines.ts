import type { CommentText } from './tree';
import type { Segment } from './tokens';

/** A line of a comment without its marks and the blanks around it. */
export interface CommentLine extends Segment {
  readonly text: string;
  /** Column of its first character in the document, tabs to the next multiple of four. */
  readonly indent: number;
}

const OPENING = /^(?:\/\*+[!<]*|<!--|#=+|[%#]\{|\(\*+|\{-|--\[=*\[|(?:[rRuUfFbB]{0,2}(?:"""|'''))|(?:\/\/+|#+|%+|!+)(?=\s*@visviva))/;
const CLOSING = /\s*(?:\*+\/|-->|=+#|[%#]\}|\*+\)|"""|''')\s*$/;

const CLOSERS: readonly (readonly [opening: RegExp, closing: RegExp, mark: string])[] = [
  [/^\/\*/, /\*\/\s*$/, '*/'],
  [/^[rRuUfFbB]{0,2}"""/, /""".*"""\s*$/s, '"""'],
  [/^[rRuUfFbB]{0,2}'''/, /'''.*'''\s*$/s, "'''"],
];

/** The closing mark that a comment lacks, if any. */
export function missingClose(raw: string): string | undefined {
  const trimmed = raw.trimStart();
  return CLOSERS.find(([opening, closing]) => opening.test(trimmed) && !(closing.test(trimmed) && trimmed.length >= 4))?.[2];
}

/** Splits a comment into lines and takes the marks off. Offsets stay those of the document. */
export function commentLines(text: string, comment: CommentText): CommentLine[] {
  const end = Math.max(0, Math.min(comment.span.end, text.length));
  const start = Math.max(0, Math.min(comment.span.start, end));
  const pieces: Segment[] = [];
  for (let at = start; at <= end; ) {
    let stop = at;
    while (stop < end && text[stop] !== '\n' && text[stop] !== '\r') stop++;
    pieces.push({ start: at, end: stop });
    at = stop + (text[stop] === '\r' && text[stop + 1] === '\n' ? 2 : 1);
  }
  const marks = comment.lineMarks.filter((mark) => mark !== '' && (mark !== '*' || mostlyStarred(text, pieces)));
  let column = columnOf(text, start);
  let final = pieces.length - 1;
  while (final > 0 && text.slice(pieces[final]!.start, pieces[final]!.end).trim() === '') final--;
  return pieces.map((piece, i) => {
    const line = strip(text, piece, i === 0, i === final, marks, column);
    column = 0;
    return line;
  });
}

/** A `*` at a line's start is a mark only where most lines have one: elsewhere it may be a product that goes on. */
function mostlyStarred(text: string, pieces: readonly Segment[]): boolean {
  let starred = 0;
  let plain = 0;
  for (const piece of pieces.slice(1)) {
    const line = text.slice(piece.start, piece.end).trim();
    if (line === '' || line === '*/') continue;
    if (line.startsWith('*')) starred++;
    else plain++;
  }
  return starred > plain;
}

function columnOf(text: string, offset: number): number {
  let at = offset;
  while (at > 0 && text[at - 1] !== '\n' && text[at - 1] !== '\r') at--;
  return advance(text, at, offset, 0);
}

function advance(text: string, from: number, to: number, column: number): number {
  for (let i = from; i < to; i++) column = text[i] === '\t' ? column + 4 - (column % 4) : column + 1;
  return column;
}

function strip(text: string, piece: Segment, first: boolean, last: boolean, marks: readonly string[], column: number): CommentLine {
  let { start, end } = piece;
  const skipBlanks = (): void => {
    while (start < end && /[\s\ufeff]/.test(text[start]!)) start++;
  };
  skipBlanks();
  if (last || first) {
    const closing = CLOSING.exec(text.slice(start, end));
    // The opening `"""` of a docstring is no closing mark.
    if (last && closing && !(first && start + closing.index === start)) end = start + closing.index;
  }
  if (first) {
    const opening = OPENING.exec(text.slice(start, end));
    if (opening) start += opening[0].length;
    skipBlanks();
  }
  const line = text.slice(start, end);
  for (const mark of first && start > piece.start && !marks.some((m) => line.startsWith(m)) ? [] : marks) {
    if (!line.startsWith(mark)) continue;
    start += mark.length;
    const repeated = mark.at(-1)!;
    // `///`, `##`, `%%`, `!!`; and the documentation marks `//!`, `!>`, `#'`, `///<`.
    if (mark !== '*') {
      while (start < end && text[start] === repeated) start++;
      while (start < end && /[!<>']/.test(text[start]!)) start++;
    } else if (text[start] === '/' && start + 1 === end) start++;
    break;
  }
  skipBlanks();
  while (end > start && /\s/.test(text[end - 1]!)) end--;
  if (start > end) start = end;
  return { start, end, text: text.slice(start, end), indent: advance(text, piece.start, start, column) };
}
