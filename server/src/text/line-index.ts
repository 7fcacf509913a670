import type { Span } from './span';

/** A place as people count it: lines and columns from 1, columns in UTF-16 units. */
export interface Position {
  readonly line: number;
  readonly column: number;
}

export interface Range {
  readonly start: Position;
  readonly end: Position;
}

/** Turns offsets into lines and columns and back. `\r\n`, `\n` and a lone `\r` each end one line. */
export class LineIndex {
  private readonly starts: number[] = [0];

  constructor(private readonly text: string) {
    for (let i = 0; i < text.length; i++) {
      const c = text.charCodeAt(i);
      if (c === 10 || (c === 13 && text.charCodeAt(i + 1) !== 10)) this.starts.push(i + 1);
    }
  }

  get lineCount(): number {
    return this.starts.length;
  }

  position(offset: number): Position {
    const at = Math.max(0, Math.min(offset, this.text.length));
    let low = 0;
    let high = this.starts.length - 1;
    while (low < high) {
      const middle = (low + high + 1) >> 1;
      if (this.starts[middle]! <= at) low = middle;
      else high = middle - 1;
    }
    return { line: low + 1, column: at - this.starts[low]! + 1 };
  }

  range(span: Span): Range {
    return { start: this.position(span.start), end: this.position(span.end) };
  }

  /** Offset of a position; positions past a line's end are clamped to it. */
  offset(position: Position): number {
    const line = Math.max(1, Math.min(position.line, this.starts.length));
    const start = this.starts[line - 1]!;
    const next = line < this.starts.length ? this.starts[line]! : this.text.length + 1;
    return Math.max(start, Math.min(start + position.column - 1, next - 1));
  }

  /** The text of a line (from 1), without its line end. */
  line(line: number): string {
    const start = this.starts[line - 1];
    if (start === undefined) return '';
    const next = this.starts[line] ?? this.text.length;
    return this.text.slice(start, next).replace(/[\r\n]+$/, '');
  }
}
