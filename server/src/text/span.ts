/** A half-open piece of a document, in UTF-16 code units from its start. */
export interface Span {
  readonly start: number;
  readonly end: number;
}

/** A span in a named document. */
export interface Place {
  readonly file: string;
  readonly span: Span;
}

export function span(start: number, end: number): Span {
  return { start, end };
}

/** The smallest span that covers both. */
export function cover(a: Span, b: Span): Span {
  return { start: Math.min(a.start, b.start), end: Math.max(a.end, b.end) };
}

export function contains(outer: Span, offset: number): boolean {
  return outer.start <= offset && offset <= outer.end;
}
