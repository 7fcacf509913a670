import { STATEMENT_WORDS } from '../../notation';
import { commentLines, type CommentLine } from '../../notation/lines';
import type { Comment } from '../../program/form';
import { contains } from '../../text/span';
import type { Document, PlacedBlock } from '../../workspace/documents';
import { blockAt } from './names';

/** Where a cursor stands in a declaration, by the text before it: what is half-typed has no tree yet. */
export interface WritingPlace {
  readonly comment: Comment;
  /** Undefined above the first declaration of the comment. */
  readonly placed: PlacedBlock | undefined;
  /** The line's text up to the cursor, comment marks left out. */
  readonly before: string;
  /** First word of the statement that the line belongs to, and the statement's text up to the cursor. */
  readonly word: string | undefined;
  readonly statement: string;
}

const WORDS: ReadonlySet<string> = new Set(STATEMENT_WORDS.map((w) => w.word));

export function writingPlace(document: Document, offset: number): WritingPlace | undefined {
  const comment = document.program.comments.find((c) => contains(c.span, offset));
  if (!comment) return undefined;
  const lines = commentLines(document.text, comment);
  const at = lines.findLastIndex((l) => lineStart(document, l) <= offset);
  if (at < 0) return undefined;
  const before = offset <= lines[at]!.start ? '' : document.text.slice(lines[at]!.start, offset);
  const placed = blockAt(document.blocks.filter((b) => contains(comment.span, b.block.span.start)), offset);
  const parts = [before];
  let word = headOf(before);
  for (let k = at - 1; word === undefined && k >= 0 && lines[k]!.start > (placed?.block.nameSpan.end ?? Infinity); k--) {
    parts.unshift(lines[k]!.text);
    word = headOf(lines[k]!.text);
  }
  // A line that stands no deeper than its statement is a new one, unless that one is open at its end.
  const statement = parts.join(' ');
  if (word !== undefined && parts.length > 1 && !isDeeper(lines, at, parts.length - 1, offset, document) && !/[,([=+*/-]\s*$/.test(parts.at(-2)!)) {
    return { comment, placed, before, word: undefined, statement: before };
  }
  return { comment, placed, before, word, statement };
}

function isDeeper(lines: readonly CommentLine[], at: number, back: number, offset: number, document: Document): boolean {
  const column = (k: number, end: number): number => end - lineStart(document, lines[k]!);
  const own = column(at, Math.min(lines[at]!.start, offset) + (lines[at]!.text === '' ? offset - lines[at]!.start : 0));
  return own > column(at - back, lines[at - back]!.start);
}

function lineStart(document: Document, line: CommentLine): number {
  return document.text.lastIndexOf('\n', line.start - 1) + 1;
}

function headOf(line: string): string | undefined {
  const head = /^([\p{L}]+)(?=[\s[=:]|$)/u.exec(line)?.[1];
  return head !== undefined && WORDS.has(head) && line.length > head.length ? head : undefined;
}
