import type { Finding } from '@visviva/shared';
import type { Mutation } from './mutations';

/**
 * When a fault counts as placed.
 *
 * On the right *line*: a finding of at most four lines covers the line that was changed. On the right *expression*: a
 * finding, or an edit of its repair, meets the changed text and is not much longer than it.
 *
 * Some faults can't be told from another one elsewhere: a sign lost in a term or in the variable that holds it. A repair
 * that makes the function compute the right values (which the tests find out for themselves) by changing no more of the
 * text than taking the fault back would, is as good an answer, and counts. `strict` is without this.
 *
 * Of several claims that differ, what is said about the first one counts: a reader does not go through them all. With
 * two faults that can show in different claims, all count.
 */
export interface Placement {
  readonly line: boolean;
  readonly expression: boolean;
  readonly strict: { readonly line: boolean; readonly expression: boolean };
}

interface Place {
  readonly line: number;
  readonly start: number;
  readonly end: number;
}

interface Position {
  readonly line: number;
  readonly column: number;
}

interface Range {
  readonly start: Position;
  readonly end: Position;
}

export interface TextEdit {
  readonly range: Range;
  readonly text: string;
}

const MOST_LINES = 4;

/** @param right the text with the repair computes the right values */
export function placed(original: string, text: string, mutations: readonly Mutation[], findings: readonly Finding[], right: boolean): Placement {
  const places = placesOf(text, mutations);
  const line = places.every((p) =>
    findings.some(({ range: { start, end } }) => start.line <= p.line && p.line <= end.line && end.line - start.line < MOST_LINES),
  );
  const expression = places.every((p) => findings.some((f) => [f.range, ...(f.repair?.edits ?? []).map((e) => e.range)].some((r) => meets(text, r, p))));
  const repair = findings.find((f) => f.repair)?.repair;
  const undo = mutations.map((m) => ({ old: m.text, new: original.slice(m.start, m.end) }));
  const made = (repair?.edits ?? []).map((e) => ({ old: text.slice(offset(text, e.range.start), offset(text, e.range.end)), new: e.text }));
  const isAsGood = right && repair !== undefined && size(made) <= size(undo);
  return { line: line || isAsGood, expression: expression || isAsGood, strict: { line, expression } };
}

/** Words, numbers and marks taken away and put in. */
function size(changes: readonly { readonly old: string; readonly new: string }[]): number {
  return changes.reduce((sum, c) => {
    const [a, b] = [tokens(c.old), tokens(c.new)];
    while (a.length > 0 && b.length > 0 && a[0] === b[0]) {
      a.shift();
      b.shift();
    }
    while (a.length > 0 && b.length > 0 && a.at(-1) === b.at(-1)) {
      a.pop();
      b.pop();
    }
    return sum + a.length + b.length;
  }, 0);
}

function tokens(code: string): string[] {
  return code.match(/[\p{L}\p{N}_$.#]+|[^\s\p{L}\p{N}_$.#]/gu) ?? [];
}

function placesOf(text: string, mutations: readonly Mutation[]): Place[] {
  let shift = 0;
  return [...mutations]
    .sort((a, b) => a.start - b.start)
    .map((m) => {
      const start = m.start + shift;
      shift += m.text.length - (m.end - m.start);
      return { line: text.slice(0, start).split('\n').length, start, end: start + m.text.length };
    });
}

export function offset(text: string, p: Position): number {
  let at = 0;
  for (let line = 1; line < p.line; line++) at = text.indexOf('\n', at) + 1;
  return at + p.column - 1;
}

/** Inside, around by not much, or touching. */
function meets(text: string, range: Range, place: Place): boolean {
  const start = offset(text, range.start);
  const end = offset(text, range.end);
  return start <= place.end && place.start <= end && end - start <= 40 + 3 * (place.end - place.start);
}

export function withEdits(text: string, edits: readonly TextEdit[]): string {
  return [...edits]
    .map((e) => ({ start: offset(text, e.range.start), end: offset(text, e.range.end), text: e.text }))
    .sort((a, b) => b.start - a.start)
    .reduce((t, e) => t.slice(0, e.start) + e.text + t.slice(e.end), text);
}
