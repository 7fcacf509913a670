import ts from 'typescript';
import type { Comment } from '../../program/form';
import type { Span } from '../../text/span';
import type { Context } from './context';
import { subjectAt } from './subjects';

const MARK = '@visviva';
const LINE_MARKS = ['///', '//'];
const BLOCK_MARKS = ['*'];

/**
 * The comments that contain `@visviva`, with what each stands before or in. Line comments on consecutive lines count as
 * one. Without the mark in the text the tree is not visited.
 */
export function findComments(c: Context): Comment[] {
  const comments: Comment[] = [];
  const { text } = c.source;
  let covered = 0;
  for (let at = text.indexOf(MARK); at >= 0; at = text.indexOf(MARK, at + MARK.length)) {
    if (at < covered) continue;
    const chain = chainTo(c.source, at);
    const found = commentAt(c.source, chain, at);
    if (!found) continue;
    covered = found.span.end;
    comments.push({ span: found.span, lineMarks: found.lineMarks, subject: subjectAt(c, chain, found.span) });
  }
  return comments;
}

/** The nodes around an offset from the file inwards; a node begins with the blanks and comments before it. */
function chainTo(source: ts.SourceFile, offset: number): ts.Node[] {
  const chain: ts.Node[] = [];
  for (let node: ts.Node | undefined = source; node; node = childAt(node, offset)) chain.push(node);
  return chain;
}

function childAt(node: ts.Node, offset: number): ts.Node | undefined {
  return ts.forEachChild(node, (child) => (child.pos <= offset && offset < child.end ? child : undefined));
}

function commentAt(source: ts.SourceFile, chain: readonly ts.Node[], offset: number): Omit<Comment, 'subject'> | undefined {
  const gap = gapAround(source, chain[chain.length - 1]!, offset);
  if (!gap) return undefined;
  return commentsIn(source, gap).find((m) => m.span.start <= offset && offset < m.span.end);
}

/** The stretch around the offset that holds only comments, blanks, punctuation and keywords; undefined inside a literal. */
function gapAround(source: ts.SourceFile, node: ts.Node, offset: number): Span | undefined {
  const begin = node.getStart(source);
  if (offset < begin) return { start: node.pos, end: begin };
  if (node.kind >= ts.SyntaxKind.FirstLiteralToken && node.kind <= ts.SyntaxKind.LastTemplateToken) return undefined;
  if (ts.isJsxText(node)) return undefined;
  let start = begin;
  let end = node.end;
  ts.forEachChild(node, (child) => {
    if (child.end <= offset) start = Math.max(start, child.end);
    else end = Math.min(end, child.pos);
  });
  return { start, end };
}

function commentsIn(source: ts.SourceFile, gap: Span): Omit<Comment, 'subject'>[] {
  const { text } = source;
  const scanner = ts.createScanner(ts.ScriptTarget.ESNext, false, ts.LanguageVariant.Standard, text, undefined, gap.start, gap.end - gap.start);
  const found: Omit<Comment, 'subject'>[] = [];
  for (let token = scanner.scan(); token !== ts.SyntaxKind.EndOfFileToken; token = scanner.scan()) {
    const span = { start: scanner.getTokenStart(), end: scanner.getTokenEnd() };
    if (token === ts.SyntaxKind.MultiLineCommentTrivia) found.push({ span, lineMarks: BLOCK_MARKS });
    else if (token === ts.SyntaxKind.SingleLineCommentTrivia) {
      const last = found[found.length - 1];
      if (last?.lineMarks === LINE_MARKS && /^[ \t]*(?:\r\n|\n|\r)[ \t]*$/.test(text.slice(last.span.end, span.start))) {
        found[found.length - 1] = { span: { start: last.span.start, end: span.end }, lineMarks: LINE_MARKS };
      } else found.push({ span, lineMarks: LINE_MARKS });
    }
  }
  return found;
}
