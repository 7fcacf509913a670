import type { Expression, TypeNote } from '../../program/form';
import type { Span } from '../../text/span';
import { type Context, spanOf, textOf } from './context';
import type { Node } from './syntax';

const NAME = /^[\p{L}_][\p{L}\p{N}_]*(?:\.[\p{L}_][\p{L}\p{N}_]*)*$/u;

/** Types of a container, by the last name of their path, whose brackets name the type of each item. */
const LISTS = new Set(['list', 'List', 'Sequence', 'Iterable', 'tuple', 'Tuple']);

/** Types that wrap one and say nothing else that matters. */
const WRAPPERS = new Set(['Optional', 'Final', 'ClassVar', 'Annotated']);

/** What a type hint says: `Crane`, `"rig.Crane"`, `Optional[Crane]`, `Crane | None`, `list[Link]`. */
export function noteOf(c: Context, type: Node | undefined): TypeNote | undefined {
  return type && noteIn(textOf(c, type), spanOf(type), 0);
}

function noteIn(source: string, span: Span, depth: number): TypeNote | undefined {
  const text = source.trim().replace(/^(["'])([^]*)\1$/, '$2').trim();
  if (depth > 8) return undefined;
  if (NAME.test(text)) return { class: nameExpression(text, span) };
  const without = text.replace(/\s*\|\s*None$|^None\s*\|\s*/, '');
  if (without !== text) return noteIn(without, span, depth + 1);
  const brackets = /^((?:\w+\.)*(\w+))\s*\[([^]*)\]$/.exec(text);
  if (!brackets) return undefined;
  const [, , last, inner] = brackets as unknown as [string, string, string, string];
  const parts = splitOutside(inner);
  if (WRAPPERS.has(last)) return noteIn(parts[0]!, span, depth + 1);
  if (!LISTS.has(last)) return undefined;
  const notes = parts.filter((p) => p.trim() !== '...').map((p) => noteIn(p, span, depth + 1));
  if (notes.length === 1) return notes[0] && { item: notes[0] };
  return { member: (key) => (/^\d+$/.test(key) ? notes[Number(key)] : undefined) };
}

function nameExpression(text: string, span: Span): Expression {
  const [first, ...rest] = text.split('.');
  let e: Expression = { kind: 'name', name: first!, span };
  for (const part of rest) e = { kind: 'member', object: e, name: part, nameSpan: span, span };
  return e;
}

function splitOutside(text: string): string[] {
  const parts: string[] = [];
  let depth = 0;
  let start = 0;
  [...text].forEach((mark, k) => {
    if (mark === '[') depth++;
    else if (mark === ']') depth--;
    else if (mark === ',' && depth === 0) {
      parts.push(text.slice(start, k));
      start = k + 1;
    }
  });
  return [...parts, text.slice(start)];
}
