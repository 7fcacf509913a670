import type { Expression } from '../../program/form';
import type { Span } from '../../text/span';
import type { Site } from './sites';

/** A change of a text; spans are of the text before. */
export interface Edit {
  readonly span: Span;
  readonly text: string;
}

/** How tightly the outermost operator of a source expression binds. */
export enum Binding {
  loose,
  sum,
  product,
  sign,
  power,
  atom,
}

export function bindingOf(e: Expression): Binding {
  switch (e.kind) {
    case 'binary':
      if (e.op === '+' || e.op === '-') return Binding.sum;
      if (e.op.endsWith('**') || e.op === 'elementwise-power') return Binding.power;
      return e.op.includes('/') || e.op.includes('*') || /multiply|divide|matmul|%/.test(e.op) ? Binding.product : Binding.loose;
    case 'unary':
      return Binding.sign;
    case 'conditional':
    case 'logical':
    case 'assign':
    case 'function':
    case 'sequence':
    case 'comprehension':
      return Binding.loose;
    default:
      return Binding.atom;
  }
}

/** What may stand at a place without brackets. */
export function roomAt(site: Site, source: string): Binding {
  if (isBracketed(site.span, source)) return Binding.loose;
  const parent = site.parent?.node;
  if (!parent) return Binding.loose;
  switch (parent.kind) {
    case 'binary': {
      const own = bindingOf(parent);
      if (own === Binding.power) return Binding.atom;
      if (site.role === 'left') return own;
      if (parent.op === '+') return Binding.sum;
      if (parent.op === '*') return Binding.product;
      return (own + 1) as Binding;
    }
    case 'unary':
      return Binding.product;
    case 'call':
      return site.role === 'argument' ? Binding.loose : Binding.atom;
    case 'list':
    case 'record':
    case 'assign':
    case 'comprehension':
      return Binding.loose;
    case 'conditional':
      return Binding.sum;
    default:
      return site.role === 'object' ? Binding.atom : Binding.sum;
  }
}

/** In brackets of its own, or the only argument of a call. */
export function isBracketed(span: Span, source: string): boolean {
  let i = span.start - 1;
  while (i >= 0 && /\s/.test(source[i]!)) i--;
  let j = span.end;
  while (j < source.length && /\s/.test(source[j]!)) j++;
  return source[i] === '(' && source[j] === ')';
}

/** The expression's text, in brackets where it binds less tightly than asked. */
export function sourceOf(e: Expression, source: string, least: Binding): string {
  const text = source.slice(e.span.start, e.span.end);
  return bindingOf(e) < least ? bracket(text) : text;
}

export function bracket(text: string): string {
  return `(${text})`;
}

/** The edit that puts a text in a place, in brackets if it needs them there. */
export function replaceSite(site: Site, source: string, text: string, binding: Binding): Edit {
  return { span: site.span, text: binding < roomAt(site, source) ? bracket(text) : text };
}

export function applyEdits(text: string, edits: readonly Edit[]): string {
  let out = text;
  for (const e of [...edits].sort((a, b) => b.span.start - a.span.start || b.span.end - a.span.end)) {
    out = out.slice(0, e.span.start) + e.text + out.slice(e.span.end);
  }
  return out;
}

/**
 * Edits made one after the other, as edits of the text before both; those that meet become one.
 * @param second edits of the text that the first ones give
 */
export function composed(source: string, first: readonly Edit[], second: readonly Edit[]): Edit[] {
  const middle = applyEdits(source, first);
  let shift = 0;
  const made = [...first]
    .sort((a, b) => a.span.start - b.span.start)
    .map((e) => {
      const start = e.span.start + shift;
      const by = e.text.length - (e.span.end - e.span.start);
      shift += by;
      return { start, end: start + e.text.length, by };
    });
  const clusters: { start: number; end: number }[] = [];
  for (const span of [...made, ...second.map((e) => e.span)].sort((a, b) => a.start - b.start || a.end - b.end)) {
    const last = clusters.at(-1);
    if (last && span.start <= last.end) last.end = Math.max(last.end, span.end);
    else clusters.push({ start: span.start, end: span.end });
  }
  return clusters.map(({ start, end }) => {
    const before = made.filter((m) => m.end < start).reduce((t, m) => t + m.by, 0);
    const until = made.filter((m) => m.start <= end).reduce((t, m) => t + m.by, 0);
    const inside = second.filter((e) => start <= e.span.start && e.span.end <= end).map((e) => ({ text: e.text, span: { start: e.span.start - start, end: e.span.end - start } }));
    return { span: { start: start - before, end: end - until }, text: applyEdits(middle.slice(start, end), inside) };
  });
}

export function overlap(a: readonly Edit[], b: readonly Edit[]): boolean {
  return a.some((x) => b.some((y) => x.span.start < y.span.end && y.span.start < x.span.end));
}

/** The smallest edit with the same effect: what both texts begin or end with is left out, whole words kept. */
export function trimmed(edit: Edit, source: string): Edit {
  const old = source.slice(edit.span.start, edit.span.end);
  let start = 0;
  while (start < old.length && start < edit.text.length && old[start] === edit.text[start]) start++;
  while (start > 0 && isWord(old[start - 1]) && (isWord(old[start]) || isWord(edit.text[start]))) start--;
  let end = 0;
  const most = Math.min(old.length, edit.text.length) - start;
  while (end < most && old[old.length - 1 - end] === edit.text[edit.text.length - 1 - end]) end++;
  while (end > 0 && isWord(old[old.length - end]) && (isWord(old[old.length - end - 1]) || isWord(edit.text[edit.text.length - end - 1]))) end--;
  return {
    span: { start: edit.span.start + start, end: edit.span.end - end },
    text: edit.text.slice(start, edit.text.length - end),
  };
}

function isWord(c: string | undefined): boolean {
  return c !== undefined && /[\w$.]/.test(c);
}
