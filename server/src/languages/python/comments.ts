import type { ClassNode, Comment, Subject } from '../../program/form';
import { type Context, nameText, textOf } from './context';
import { ANONYMOUS } from './functions';
import type { Lost } from './recover';
import { child, namedChildren, nodesOf, type Node, type Syntax } from './syntax';

const MARK = '@visviva';
const LINE_MARKS = ['#'];

/** The comments and docstrings that contain `@visviva`, with what each stands before or in. `#` lines in a row count as one. */
export function findComments(c: Context, syntax: Syntax): Comment[] {
  if (!c.text.includes(MARK)) return [];
  const found: Comment[] = [];
  const places = placesIn(c, syntax.root);
  for (const span of runs(c, syntax.comments)) {
    if (!c.text.slice(span.start, span.end).includes(MARK)) continue;
    found.push({ span, lineMarks: LINE_MARKS, subject: subjectOf(c, places, span) });
  }
  for (const { text, isFirst } of places.strings) {
    const span = { start: text.start, end: text.end };
    found.push({ span, lineMarks: [], subject: isFirst ? ownerOf(c, places, span) : subjectOf(c, places, span) });
  }
  return found.sort((a, b) => a.span.start - b.span.start);
}

type Range = { readonly start: number; readonly end: number };

function runs(c: Context, comments: readonly Node[]): Range[] {
  const found: { start: number; end: number; isWhole: boolean }[] = [];
  for (const n of comments) {
    const last = found[found.length - 1];
    const isWhole = /^[ \t\f]*$/.test(c.text.slice(lineStart(c.text, n.start), n.start));
    if (last?.isWhole && isWhole && /^[ \t]*(?:\r\n|\n|\r)[ \t]*$/.test(c.text.slice(last.end, n.start))) last.end = n.end;
    else found.push({ start: n.start, end: n.end, isWhole });
  }
  return found;
}

function lineStart(text: string, offset: number): number {
  let at = offset;
  while (at > 0 && text[at - 1] !== '\n' && text[at - 1] !== '\r') at--;
  return at;
}

function columnOf(text: string, offset: number): number {
  return offset - lineStart(text, offset);
}

const DEFINITIONS = new Set(['function_definition', 'class_definition', 'lambda']);

/** What of the tree matters for comments, found in one pass. */
interface Places {
  readonly definitions: readonly Node[];
  /** Statements in order of their places, those of one body after each other or nested. */
  readonly statements: readonly Node[];
  /** Strings that stand alone with a declaration in them; the first statement of a body is its docstring. */
  readonly strings: readonly { readonly text: Node; readonly isFirst: boolean }[];
}

function placesIn(c: Context, root: Node): Places {
  const definitions: Node[] = [];
  const statements: Node[] = [];
  const strings: { text: Node; isFirst: boolean }[] = [];
  for (const n of nodesOf(root)) {
    if (DEFINITIONS.has(n.type)) definitions.push(n);
    // A comment may stand between a decorator and what it decorates.
    const inner = n.type === 'decorated_definition' ? child(n, 'definition') : undefined;
    if (inner) statements.push(inner);
    if (n.type !== 'block' && n.type !== 'module') continue;
    let isFirst = true;
    for (const s of n.children) {
      if (!s.isNamed) continue;
      statements.push(s);
      const text = s.type === 'expression_statement' ? namedChildren(s)[0] : undefined;
      if (text && /string$/.test(text.type) && textOf(c, text).includes(MARK)) strings.push({ text, isFirst });
      isFirst = false;
    }
  }
  return { definitions, statements, strings };
}

/** What follows directly, where that is a function or class; else what is around. */
function subjectOf(c: Context, places: Places, span: Range): Subject {
  const lost = lostAt(c, span);
  if (lost) return lostFunction(lost);
  const next = nextDefinition(c, places, span);
  return next ? named(c, places, next) : ownerOf(c, places, span);
}

/** A function that could not be parsed at all, in which the comment stands or which follows it. */
function lostAt(c: Context, span: Range): Lost | undefined {
  return c.lost.find(
    (l) => (l.start <= span.start && span.end <= l.end) || (span.end <= l.start && isBlank(c.text.slice(span.end, l.start))),
  );
}

function isBlank(text: string): boolean {
  return text.split('\n').every((l) => /^\s*(?:#|$)/.test(l));
}

function lostFunction(lost: Lost): Subject {
  const span = { start: lost.start, end: lost.end };
  const name = lost.name ?? ANONYMOUS;
  const opaque = 'not finished: it has a syntax error';
  return { kind: 'function', path: name, node: { name, nameSpan: span, parameters: [], body: [], opaque, inheritsSelf: false, span, bodySpan: span } };
}

function nextDefinition(c: Context, places: Places, span: Range): Node | undefined {
  let next: Node | undefined;
  for (const n of places.statements) if (n.start >= span.end && (!next || n.start < next.start)) next = n;
  if (!next || columnOf(c.text, next.start) < columnOf(c.text, span.start)) return undefined;
  return definitionIn(next);
}

function definitionIn(statement: Node): Node | undefined {
  let at: Node | undefined = statement;
  if (at.type === 'decorated_definition') at = child(at, 'definition');
  if (at?.type === 'expression_statement' || at?.type === 'return_statement') at = namedChildren(at)[0];
  if (at?.type === 'assignment') at = child(at, 'right');
  return at && DEFINITIONS.has(at.type) ? at : undefined;
}

function ownerOf(c: Context, places: Places, span: Range): Subject {
  const around = chainTo(places, (n) => holds(c, n, span)).filter((n) => n.type !== 'lambda');
  const last = around[around.length - 1];
  return last ? named(c, places, last) : { kind: 'file' };
}

/** A comment indented deeper than a definition that just ended is still in it. */
function holds(c: Context, n: Node, span: Range): boolean {
  if (n.start > span.start) return false;
  if (span.end <= n.end) return true;
  const between = c.text.slice(n.end, span.start);
  return /^(?:[ \t\f]*(?:#.*)?(?:\r\n|\n|\r))*[ \t\f]*(?:#.*)?$/.test(between) && columnOf(c.text, span.start) > columnOf(c.text, n.start);
}

function chainTo(places: Places, wanted: (node: Node) => boolean): Node[] {
  return places.definitions.filter(wanted);
}

function named(c: Context, places: Places, node: Node): Subject {
  const around = chainTo(places, (n) => n.start <= node.start && node.end <= n.end && n !== node);
  const path = [...around, node].flatMap((n) => nameOf(c, n) ?? (n === node ? [ANONYMOUS] : [])).join('.');
  if (node.type === 'class_definition') return { kind: 'class', path, node: classOf(c, node) };
  const owner = ownerClass(c, around);
  return { kind: 'function', path, node: c.functions.get(node) ?? c.functionNode(node), ...(owner ? { owner } : {}) };
}

function nameOf(c: Context, node: Node): string | undefined {
  if (node.type === 'lambda') {
    const made = c.functions.get(node)?.name;
    return made === ANONYMOUS ? undefined : made;
  }
  const name = child(node, 'name');
  return name && nameText(c, name);
}

function classOf(c: Context, node: Node): ClassNode {
  return c.classes.get(node) ?? c.classNode(node);
}

/** The class whose instance the first parameter of a method, or of the method around a function, is. */
function ownerClass(c: Context, around: readonly Node[]): ClassNode | undefined {
  const nearest = [...around].reverse().find((n) => n.type === 'class_definition');
  return nearest && classOf(c, nearest);
}
