import type { Document } from '../workspace/documents';
import { languageOf } from '../languages';
import type { SuggestedDeclaration } from './api';
import { suggestDeclarations } from './suggest';

/** Suggested declarations as comments, indented like the functions they stand above. */
export function suggestedComments(document: Document): SuggestedDeclaration[] {
  const { program, lines, text, file } = document;
  if (!program) return [];
  const marks = languageOf(file)?.lineMarks ?? [];
  return suggestDeclarations(program).map((s) => {
    const start = text.lastIndexOf('\n', s.offset - 1) + 1;
    const indent = /^[ \t]*/.exec(text.slice(start))![0];
    return {
      function: s.function,
      range: lines.range({ start, end: start }),
      text: comment(s.lines, marks, indent),
    };
  });
}

function comment(lines: readonly string[], marks: readonly string[], indent: string): string {
  if (marks.includes('//')) return [`${indent}/**`, ...lines.map((l) => `${indent} * ${l}`), `${indent} */`].join('\n');
  const mark = marks[0] ?? '';
  return lines.map((l) => `${indent}${mark} ${l}`).join('\n');
}
