import * as vscode from 'vscode';
import type { CheckerClient } from './checker-client';

const shownFor = 6000;

/** Puts a first declaration above the function at the cursor, for the user to complete. */
export async function insertSuggestion(editor: vscode.TextEditor, checker: CheckerClient): Promise<void> {
  const { document, selection } = editor;
  const suggestion = await checker.suggest(document.uri, selection.active);
  if (!suggestion) {
    vscode.window.setStatusBarMessage('Visviva: no function without a declaration here looks like dynamics.', shownFor);
    return;
  }
  if (document.version !== suggestion.version) return;
  const line = document.lineAt(Math.min(suggestion.line, document.lineCount - 1));
  const indent = line.text.slice(0, line.firstNonWhitespaceCharacterIndex);
  const end = document.eol === vscode.EndOfLine.CRLF ? '\r\n' : '\n';
  const lines = suggestion.text.split('\n').map((text) => (text.startsWith(indent) ? text : indent + text));
  await editor.edit((edit) => edit.insert(line.range.start, lines.join(end) + end));
  editor.revealRange(new vscode.Range(line.range.start, line.range.start), vscode.TextEditorRevealType.InCenterIfOutsideViewport);
}
