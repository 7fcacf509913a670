import type { Expression } from '../../program/form';
import { type Context, opaque, spanOf, textOf } from './context';
import { child, namedChildren, type Node } from './syntax';

/** A string, strings side by side, or an f-string: `f"m{i}"` is `"m" + i`, so that names of keys can be put together. */
export function text(c: Context, node: Node): Expression {
  const pieces: Expression[] = [];
  for (const s of node.type === 'concatenated_string' ? namedChildren(node) : [node]) {
    for (const part of namedChildren(s)) {
      if (part.type === 'string_content') pieces.push({ kind: 'string', value: contentOf(c, s, part), span: spanOf(part) });
      else if (part.type === 'interpolation') {
        const value = child(part, 'expression');
        if (!value || child(part, 'format_specifier')) return opaque('a text that is put together from values', spanOf(node));
        pieces.push(c.expression(value));
      }
    }
  }
  const span = spanOf(node);
  if (pieces.every((p) => p.kind === 'string')) {
    return { kind: 'string', value: pieces.map((p) => (p.kind === 'string' ? p.value : '')).join(''), span };
  }
  let value: Expression = { kind: 'string', value: '', span: { start: span.start, end: span.start } };
  for (const right of pieces) {
    value = { kind: 'binary', op: '+', left: value, right, opSpan: { start: right.span.start, end: right.span.start }, span };
  }
  return value;
}

const ESCAPES: Readonly<Record<string, string>> = { n: '\n', t: '\t', r: '\r', '\\': '\\', "'": "'", '"': '"' };

function contentOf(c: Context, string: Node, part: Node): string {
  const raw = textOf(c, part);
  const opening = string.children[0] ? textOf(c, string.children[0]) : '';
  if (!raw.includes('\\') || /^[a-zA-Z]*[rR]/.test(opening)) return raw;
  return raw.replace(/\\(\r?\n|[^])/g, (whole, mark: string) => (/^\r?\n$/.test(mark) ? '' : (ESCAPES[mark] ?? whole)));
}
