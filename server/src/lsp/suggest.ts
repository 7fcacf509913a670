import type { SuggestedDeclaration } from '../service/api';

/** The suggestion for the function that a line (from 1) is in: the last one that begins above it, else the first below. */
export function nearestSuggestion(all: readonly SuggestedDeclaration[], line: number): SuggestedDeclaration | undefined {
  const above = all.filter((s) => s.range.start.line <= line);
  return above.length > 0 ? above.reduce((a, b) => (b.range.start.line >= a.range.start.line ? b : a)) : all[0];
}
