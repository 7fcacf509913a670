import type { ReportPosition, ReportRange } from '@visviva/shared';
import type { Position, Range } from 'vscode-languageserver';

/** The report counts lines and columns from 1, the protocol from 0; both count UTF-16 units. */
export function toRange(range: ReportRange): Range {
  return { start: toPosition(range.start), end: toPosition(range.end) };
}

export function toPosition(position: ReportPosition): Position {
  return { line: Math.max(0, position.line - 1), character: Math.max(0, position.column - 1) };
}

export function fromPosition(position: Position): ReportPosition {
  return { line: position.line + 1, column: position.character + 1 };
}

export function fromRange(range: Range): ReportRange {
  return { start: fromPosition(range.start), end: fromPosition(range.end) };
}
