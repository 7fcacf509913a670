import type { ClassNode, Comment, Subject } from '../../program/form';
import { type Context, nameText, textOf } from './context';
import { ANONYMOUS } from './functions';
import { child, namedChildren, nodesOf, type Node, type Syntax } from './syntax';

const MARK = '@visviva';
const LINE_MARKS = ['#'];

/** The comments and docstrings that contain `@visviva`, with what each stands before or in. `#` lines in a row count as one. */
export function findComments(c: Context, syntax: Syntax): Comment[] {
  if (!c.text.includes(MARK)) return [];
  const found: Comment[] = [];
  for (const span of runs(c, syntax.comments)) {
    if (!c.text.slice(span.start, span.end).includes(MARK)) continue;
    found.push({ span, lineMarks: LINE_MARKS, subject: subjectOf(c, syntax.root, span) });
  }
  for (const node of nodesOf(syntax.root)) {
    if (node.type !== 'expression_statement') continue;
    const [text] = namedChildren(node);
    if (!text || !/string$/.test(text.type) || !textOf(c, text).includes(MARK)) continue;
    const span = { start: text.start, end: text.end };
    found.push({ span, lineMarks: [], subject: isDocstring(syntax.root, node) ? ownerOf(c, syntax.root, span) : subjectOf(c, syntax.root, span) });
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

/** The first statement of a body is its docstring. */
function isDocstring(root: Node, statement: Node): boolean {
  for (const n of nodesOf(root)) {
    if (n.start > statement.start) return false;
    if ((n.type === 'block' || n.type === 'module') && n.children.find((x) => x.isNamed) === statement) return true;
  }
  return false;
}

/** What follows directly, where that is a function or class; else what is around. */
function subjectOf(c: Context, root: Node, span: Range): Subject {
  const next = nextDefinition(c, root, span);
  return next ? named(c, root, next) : ownerOf(c, root, span);
}

function nextDefinition(c: Context, root: Node, span: Range): Node | undefined {
  let next: Node | undefined;
  for (const n of nodesOf(root)) {
    if (n.type !== 'block' && n.type !== 'module') continue;
    const first = n.children.find((x) => x.isNamed && x.start >= span.end);
    if (first && (!next || first.start < next.start)) next = first;
  }
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

function ownerOf(c: Context, root: Node, span: Range): Subject {
  const around = chainTo(root, (n) => holds(c, n, span)).filter((n) => n.type !== 'lambda');
  const last = around[around.length - 1];
  return last ? named(c, root, last) : { kind: 'file' };
}

/** A comment indented deeper than a definition that just ended is still in it. */
function holds(c: Context, n: Node, span: Range): boolean {
  if (n.start > span.start) return false;
  if (span.end <= n.end) return true;
  const between = c.text.slice(n.end, span.start);
  return /^(?:[ \t\f]*(?:#.*)?(?:\r\n|\n|\r))*[ \t\f]*(?:#.*)?$/.test(between) && columnOf(c.text, span.start) > columnOf(c.text, n.start);
}

function chainTo(root: Node, wanted: (node: Node) => boolean): Node[] {
  const found: Node[] = [];
  for (const n of nodesOf(root)) if (DEFINITIONS.has(n.type) && wanted(n)) found.push(n);
  return found;
}

function named(c: Context, root: Node, node: Node): Subject {
  const around = chainTo(root, (n) => n.start <= node.start && node.end <= n.end && n !== node);
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
