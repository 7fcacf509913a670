import type { Span } from '../../text/span';
import { nodesOf, type Node, type Syntax } from './syntax';

/** A syntax tree in which half-typed functions no longer disturb the others. */
export interface Recovered {
  readonly syntax: Syntax;
  /** The text the tree is of: as long as the document, with what could not be parsed blanked. */
  readonly text: string;
  /** Where functions begin that could not be parsed. */
  readonly broken: ReadonlySet<number>;
  /** Functions of which not even the name fitted into the mended text. */
  readonly lost: readonly Lost[];
  readonly errors: readonly { readonly message: string; readonly span: Span }[];
}

export interface Lost extends Span {
  readonly name: string | undefined;
}

export type Parse = (text: string) => Syntax;

/** More pieces than this are not looked at one by one. */
const MOST_PIECES = 400;

/**
 * An unclosed bracket makes a parser take the functions that follow for a part of it. So in a text with an error, each
 * function is parsed by itself; those that fail are blanked, with their comments and docstring kept, and the rest is
 * parsed again.
 */
export function recover(text: string, parse: Parse): Recovered {
  const syntax = parse(text);
  const dots = danglingDots(text, syntax.root);
  if (!syntax.root.isBroken && dots.length === 0) return { syntax, text, broken: new Set(), lost: [], errors: [] };
  const errors: { message: string; span: Span }[] = [];
  const broken = new Set<number>();
  const lost: Lost[] = [];
  let mended = text;
  for (const piece of pieces(text)) {
    if (!isWrong(piece, text, dots, parse)) continue;
    const made = blank(piece, text);
    mended = mended.slice(0, piece.start) + made.text + mended.slice(piece.end);
    if (piece.kind === 'function') {
      if (made.isNamed) broken.add(piece.head);
      else lost.push({ start: piece.start, end: piece.end, name: piece.name });
    }
    const what = piece.name === undefined ? 'This' : `\`${piece.name}\``;
    errors.push({ message: `${what} has a syntax error; it is not read until that is mended.`, span: made.span });
  }
  const again = mended === text ? syntax : parse(mended);
  if (errors.length === 0) errors.push(...leftovers(again.root));
  return { syntax: again, text: mended, broken, lost, errors };
}

interface Piece {
  readonly kind: 'function' | 'class' | 'lines';
  readonly start: number;
  readonly end: number;
  /** Where `def` stands. */
  readonly head: number;
  readonly indent: number;
  readonly name: string | undefined;
}

/** Functions with their decorators, and the lines between them; classes are only brackets around these. */
function pieces(text: string): Piece[] {
  const found: Piece[] = [];
  let open: { -readonly [K in keyof Piece]: Piece[K] } | undefined;
  let decorated: number | undefined;
  const close = (end: number): void => {
    if (open) found.push({ ...open, end });
    open = undefined;
  };
  const lines = /[^\n]*(?:\n|$)/g;
  for (let match = lines.exec(text); match && match[0] !== ''; match = lines.exec(text)) {
    const start = match.index;
    const line = match[0];
    const indent = /^[ \t\f]*/.exec(line)![0].length;
    const rest = line.slice(indent);
    if (/^(?:\r?\n|#|$)/.test(rest)) continue;
    if (open?.kind === 'function' && (indent > open.indent || /^[)\]}]/.test(rest))) continue;
    const def = /^(?:async[ \t]+)?def\b[ \t]*([\p{L}_][\p{L}\p{N}_]*)?/u.exec(rest);
    const isDecorator = rest.startsWith('@');
    const isClass = /^class\b/.test(rest);
    if (def || isDecorator || isClass || open?.kind === 'function') close(start);
    if (def) {
      const head = start + indent;
      open = { kind: 'function', start: decorated ?? start, end: start, head, indent, name: def[1] };
      decorated = undefined;
    } else if (isDecorator) decorated ??= start;
    else if (isClass) {
      decorated = undefined;
      found.push({ kind: 'class', start, end: start + line.length, head: start + indent, indent, name: /^class[ \t]+([\p{L}_][\p{L}\p{N}_]*)/u.exec(rest)?.[1] });
    }
    else open ??= { kind: 'lines', start: decorated ?? start, end: start, head: start + indent, indent, name: undefined };
  }
  close(text.length);
  return found.slice(0, MOST_PIECES);
}

function isWrong(piece: Piece, text: string, dots: readonly number[], parse: Parse): boolean {
  if (dots.some((d) => piece.start <= d && d < piece.end)) return true;
  const source = text.slice(piece.start, piece.end);
  if (piece.kind === 'class') return isOpenHead(source);
  const { root } = parse(piece.indent > 0 ? `if 1:\n${source}` : source);
  return root.isBroken;
}

/** A class's first line that neither ends in a colon nor goes on in brackets over the next lines. */
function isOpenHead(line: string): boolean {
  const code = line.replace(/#.*/, '').trim();
  if (/:$|:\s*\S/.test(code)) return false;
  return !/[(,]$/.test(code);
}

/** As many characters and lines, of which only comments and the docstring are left, after a head without a body. */
function blank(piece: Piece, text: string): { text: string; span: Span; isNamed: boolean } {
  const source = text.slice(piece.start, piece.end);
  const at = piece.head - piece.start;
  const lineEnd = source.indexOf('\n', at) < 0 ? source.length : source.indexOf('\n', at);
  const out = source.replace(/[^\n]*/g, (l) => (/^\s*#/.test(l) ? l : ' '.repeat(l.length)));
  const docstring = piece.kind === 'function' ? docstringIn(source, at) : undefined;
  const heads =
    piece.kind === 'class'
      ? // What it is built on is not known any more.
        [`class ${piece.name ?? '_'}(_):`, `class ${piece.name ?? '_'}:`, 'if 1:']
      : [...(piece.kind === 'function' && piece.name !== undefined ? [`def ${piece.name}():${docstring ? '' : '0'}`] : []), 'pass'];
  const head = heads.find((h) => h.length <= lineEnd - at) ?? '';
  let made = out.slice(0, at) + head + out.slice(at + head.length);
  if (docstring && head.startsWith('def')) {
    made = made.slice(0, docstring.start) + source.slice(docstring.start, docstring.end) + made.slice(docstring.end);
  }
  return { text: made, span: { start: piece.head, end: piece.start + lineEnd }, isNamed: head.startsWith('def') };
}

function docstringIn(source: string, from: number): Span | undefined {
  const opening = /:[ \t]*(?:#[^\n]*)?\r?\n\s*([rRuU]?("""|'''))/g;
  opening.lastIndex = from;
  const match = opening.exec(source);
  if (!match) return undefined;
  const start = match.index + match[0].length - match[1]!.length;
  const end = source.indexOf(match[2]!, match.index + match[0].length);
  return end < 0 ? undefined : { start, end: end + 3 };
}

const BRACKETS = /^(?:parenthesized_expression|argument_list|parameters|list|tuple|set|dictionary|subscript|.*comprehension|generator_expression)$/;

/** `f = np.` at a line's end: the grammar takes the next line for the name. Inside brackets that is allowed. */
function danglingDots(text: string, root: Node): number[] {
  if (!/\.[ \t]*(?:#[^\n]*)?\r?\n/.test(text)) return [];
  const found: number[] = [];
  const stack: { node: Node; bracketed: boolean }[] = [{ node: root, bracketed: false }];
  for (let top = stack.pop(); top; top = stack.pop()) {
    const { node } = top;
    const bracketed = top.bracketed ? !/^(?:block|module)$/.test(node.type) : BRACKETS.test(node.type);
    if (node.type === 'attribute' && !bracketed) {
      const dot = node.children.find((n) => n.type === '.');
      const name = node.children.find((n) => n.field === 'attribute');
      if (dot && name && /\n/.test(text.slice(dot.end, name.start).replace(/\\\r?\n/g, ''))) found.push(dot.start);
    }
    for (const n of node.children) stack.push({ node: n, bracketed });
  }
  return found;
}

function leftovers(root: Node): { message: string; span: Span }[] {
  for (const n of nodesOf(root, (x) => x.isBroken)) {
    if (n.type === 'ERROR' || (n.isBroken && n.children.length === 0)) {
      return [{ message: 'This line has a syntax error.', span: { start: n.start, end: Math.max(n.end, n.start) } }];
    }
  }
  return [];
}
