import { LineIndex } from '../text/line-index';
import type { Span } from '../text/span';
import { Cursor } from './cursor';
import { commentLines, missingClose, type CommentLine } from './lines';
import { endsOpen, openBrackets, shapeOf, type Shape } from './shape';
import { parseStatements } from './statements';
import { editDistance } from './suggest';
import { clip } from './tokens';
import type { Block, CommentText, NotationError, Statement } from './tree';

/** The lines of one statement. */
interface Group {
  readonly word: string;
  readonly lines: CommentLine[];
}

/**
 * The declarations of one comment, parsed. Never throws; every problem is an error of its block.
 * @param text the whole document
 * @param comment where the comment is, and which marks may open its lines; none for a `.visviva` file
 */
export function findBlocks(text: string, comment: CommentText): Block[] {
  const raw = text.slice(comment.span.start, comment.span.end);
  if (!/@vis/i.test(raw)) return [];
  const lines = commentLines(text, comment);
  const starts: number[] = [];
  lines.forEach((line, i) => {
    if (tagOf(line.text)) starts.push(i);
  });
  const unclosed = missingClose(raw);
  return starts.map((at, k) => readBlock(text, lines, at, starts[k + 1] ?? lines.length, k === starts.length - 1 ? unclosed : undefined));
}

/** The tag of a line that begins a declaration, as typed: also a near miss, so that a slip does not pass in silence. */
function tagOf(line: string): string | undefined {
  const tag = /^@[\p{L}-]+/u.exec(line)?.[0];
  if (!tag) return undefined;
  return tag.length >= 6 && editDistance(tag.toLowerCase(), '@visviva', 2) <= 2 ? tag : undefined;
}

function readBlock(text: string, lines: readonly CommentLine[], at: number, limit: number, unclosed: string | undefined): Block {
  const errors: NotationError[] = [];
  const report = (message: string, span: Span): void => void errors.push({ code: 'syntax', message, span });
  const first = lines[at]!;
  const { name, nameSpan, rest } = readName(first, report);
  const { groups, end } = gather(rest ? [rest, ...lines.slice(at + 1, limit)] : lines.slice(at + 1, limit), report);
  const statements: Statement[] = [];
  for (const group of groups) {
    const cursor = new Cursor(text, group.lines, errors);
    statements.push(...parseStatements(cursor, group.word));
  }
  const lastLine = groups.at(-1)?.lines.at(-1);
  const span = { start: first.start, end: Math.max(lastLine?.end ?? 0, nameSpan.end) };
  if (unclosed) report(`this comment is not closed: \`${unclosed}\` is missing`, nameSpan);
  reportAfterEnd(text, lines.slice(Math.min(limit, at + 1 + end - (rest ? 1 : 0)), limit), span, report);
  if (groups.length === 0 && name !== '' && errors.length === 0) {
    report(`nothing is declared here: statements such as \`coordinates x [m]\` or \`checks return = x''\` must follow on the next lines`, nameSpan);
  }
  errors.sort((a, b) => a.span.start - b.span.start || a.span.end - b.span.end);
  return { name, nameSpan, span, statements, errors };
}

function readName(
  line: CommentLine,
  report: (message: string, span: Span) => void,
): { name: string; nameSpan: Span; rest?: CommentLine } {
  const tag = tagOf(line.text)!;
  const tagSpan = { start: line.start, end: line.start + tag.length };
  if (tag !== '@visviva') report(`\`${tag}\`: the tag is spelt \`@visviva\``, tagSpan);
  const after = line.text.slice(tag.length);
  const blanks = /^\s*/.exec(after)![0].length;
  const typed = blanks || after === '' ? /^\S*/.exec(after.slice(blanks))![0] : after.split(/\s/)[0]!;
  const nameStart = tagSpan.end + blanks;
  const colon = typed.endsWith(':') && typed.length > 1;
  const name = (colon ? typed.slice(0, -1) : typed).normalize('NFC');
  const nameSpan = typed === '' ? tagSpan : { start: nameStart, end: nameStart + typed.length - (colon ? 1 : 0) };
  if (typed === '') report('the name of the system is missing: `@visviva harbour-crane`', tagSpan);
  else if (!/^[\p{L}\p{Nd}_][\p{L}\p{M}\p{Nd}_.-]*$/u.test(name)) {
    report(`\`${clip(typed)}\` is no name for a system: letters, digits, \`-\`, \`_\` and \`.\` may be used`, nameSpan);
  }
  const tail = after.slice(blanks + typed.length);
  const gap = /^\s*/.exec(tail)![0];
  const body = tail.slice(gap.length);
  if (body === '') return { name, nameSpan };
  const start = nameStart + typed.length + gap.length;
  const shape = shapeOf(body);
  if (shape.kind === 'statement' || shape.kind === 'misspelt') {
    return { name, nameSpan, rest: { start, end: line.end, text: body, indent: line.indent } };
  }
  if (gap.length < 2 && !gap.includes('\t') && !/^[-—(#/]/.test(body)) {
    report('the name of a system is one word; statements begin on the next line, a remark after two spaces', { start, end: line.end });
  }
  return { name, nameSpan };
}

/** Gathers the lines of each statement; `end` is how many lines belong to the declaration. */
function gather(lines: readonly CommentLine[], report: (message: string, span: Span) => void): { groups: Group[]; end: number } {
  const groups: Group[] = [];
  let current: Group | undefined;
  let depth = 0;
  let previous = '';
  let end = 0;
  // Lines that go on from one that was no statement are passed over with it.
  let skipping: number | undefined;
  for (const [i, line] of lines.entries()) {
    const shape = shapeOf(line.text);
    if (shape.kind === 'blank') continue;
    if (shape.kind === 'tag') break;
    const base = current?.lines[0]!.indent ?? skipping;
    const open = base !== undefined && (depth > 0 || endsOpen(previous));
    const deeper = base !== undefined && line.indent > base;
    if ((open || deeper) && continues(shape, current, open, deeper)) {
      current?.lines.push(line);
    } else if (shape.kind === 'statement' || shape.kind === 'misspelt') {
      if (shape.kind === 'misspelt') {
        report(`unknown statement \`${shape.typed}\`: did you mean \`${shape.word}\`?`, { start: line.start, end: line.start + shape.typed.length });
      }
      current = { word: shape.word, lines: [line] };
      groups.push(current);
      depth = 0;
    } else if (shape.kind === 'unknown') {
      report(unknownStatement(shape.typed, line.text), { start: line.start, end: line.start + shape.typed.length });
      current = undefined;
      skipping = line.indent;
      depth = 0;
    } else break;
    depth = Math.max(0, depth + openBrackets(line.text));
    previous = line.text;
    end = i + 1;
  }
  return { groups, end };
}

/** Whether a line that stands deeper, or after an open end, belongs to the statement before it. */
function continues(shape: Shape, current: Group | undefined, open: boolean, deeper: boolean): boolean {
  if (shape.kind !== 'statement') return true;
  const short = shape.word.length === 1;
  // In a list of equations `T = T` may be one of them: code may name its variables so.
  const list = current !== undefined && ['where', 'reads', 'checks'].includes(current.word);
  return short && list && deeper && (open || current.lines.length >= 1);
}

function unknownStatement(head: string, line: string): string {
  const q = /^Q_?(\w+)\s*=/.exec(line);
  if (q) return `unknown statement \`${head}\`: a generalized force is written \`Q[${q[1]}] = ...\``;
  return `unknown statement \`${head}\`: energies are T, V, L or D; for a shorthand write \`where ${head} = ...\``;
}

/** Statements that stand below the end of a declaration would otherwise be lost in silence. */
function reportAfterEnd(text: string, lines: readonly CommentLine[], block: Span, report: (message: string, span: Span) => void): void {
  let index: LineIndex | undefined;
  for (const line of lines) {
    const shape = shapeOf(line.text);
    if (shape.kind === 'tag') return;
    if (shape.kind !== 'statement' || !isClear(shape.word, line.text)) continue;
    index ??= new LineIndex(text);
    report(
      `the declaration ended at line ${index.position(block.end).line}; this line is not part of it: move it up, or take out the text between`,
      { start: line.start, end: line.end },
    );
  }
}

/** A statement that is no sentence by accident. */
function isClear(word: string, line: string): boolean {
  const rest = line.slice(word.length);
  if (['coordinates', 'parameters', 'inputs'].includes(word)) return /^\s+[\p{L}_][\p{L}\p{M}\p{N}_]*\s*(?:[,[<>]|$)/u.test(rest);
  if (['point', 'body', 'spring', 'damper', 'force', 'torque', 'ranges', 'gravity'].includes(word)) return /[([:]|\b(?:between|in)\b/.test(rest) && !/\.$/.test(rest);
  if (['time', 'assume', 'defines'].includes(word)) return /^\s+[\w.]+$/.test(rest);
  return /=/.test(rest);
}
