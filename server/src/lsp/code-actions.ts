import { CodeActionKind, type CodeAction, type Diagnostic, type Range, type TextEdit } from 'vscode-languageserver';
import type { FileResult, OutputRewrite } from '../service/api';
import { toRange } from './ranges';

/** The verified repairs of findings that touch a range, as quick fixes; one edit is offered once. */
export function toCodeActions(
  result: FileResult,
  range: Range,
  diagnostics: readonly Diagnostic[],
  uriOf: (file: string) => string,
): CodeAction[] {
  const actions = new Map<string, CodeAction>();
  for (const { findings } of result.claims) {
    for (const finding of findings) {
      const { repair } = finding;
      if (!repair?.verified || (finding.file ?? result.file) !== result.file) continue;
      const place = toRange(finding.range);
      if (!touches(place, range)) continue;
      const edits: TextEdit[] = repair.edits.map((edit) => ({ range: toRange(edit.range), newText: edit.text }));
      const solved = diagnostics.filter((d) => d.source === 'visviva' && d.code === finding.code && touches(d.range, place));
      actions.set(JSON.stringify(edits), {
        title: repair.title,
        kind: CodeActionKind.QuickFix,
        isPreferred: true,
        diagnostics: solved,
        edit: { changes: { [uriOf(result.file)]: edits } },
      });
    }
  }
  // Several repairs are alternatives: none of them is the one to take unseen.
  const offered = [...actions.values()];
  return offered.length > 1 ? offered.map((action) => ({ ...action, isPreferred: false })) : offered;
}

/** Outputs written anew: a way out that is offered beside the repairs, never before them. */
export function toRewriteActions(rewrites: readonly OutputRewrite[], uri: string): CodeAction[] {
  return rewrites.map(({ title, edits }) => ({
    title,
    kind: CodeActionKind.RefactorRewrite,
    edit: { changes: { [uri]: edits.map((edit) => ({ range: toRange(edit.range), newText: edit.text })) } },
  }));
}

function touches(a: Range, b: Range): boolean {
  return !before(a.end, b.start) && !before(b.end, a.start);
}

function before(a: Range['start'], b: Range['start']): boolean {
  return a.line < b.line || (a.line === b.line && a.character < b.character);
}
