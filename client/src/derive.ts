import * as vscode from 'vscode';
import type { CheckerClient } from './checker-client';

const shownFor = 6000;

/** Puts the derived function below the function at the cursor, as a proposal to compare with or to take over. */
export async function insertDerived(checker: CheckerClient, uri?: vscode.Uri, at?: vscode.Position): Promise<void> {
  const editor = vscode.window.activeTextEditor;
  const document = uri ? await vscode.workspace.openTextDocument(uri) : editor?.document;
  const position = at ?? editor?.selection.active;
  const derived = document && position && (await checker.derive(document.uri, position, 'code'));
  if (!derived) {
    say(vscode.l10n.t('Visviva: there is no system here to derive a function from.'));
    return;
  }
  if (document.version !== derived.version) return;
  const end = document.eol === vscode.EndOfLine.CRLF ? '\r\n' : '\n';
  const line = document.lineAt(Math.min(derived.line, document.lineCount - 1));
  const edit = new vscode.WorkspaceEdit();
  edit.insert(document.uri, line.range.end, `${end}${end}${derived.text.trimEnd().split('\n').join(end)}`);
  if (!(await vscode.workspace.applyEdit(edit))) return;
  const shown = await vscode.window.showTextDocument(document, { viewColumn: editor?.document === document ? editor.viewColumn : undefined });
  const start = new vscode.Position(line.lineNumber + 2, 0);
  shown.selection = new vscode.Selection(start, start);
  shown.revealRange(new vscode.Range(start, start), vscode.TextEditorRevealType.InCenterIfOutsideViewport);
}

export async function copyEquations(checker: CheckerClient, as: 'text' | 'tex'): Promise<void> {
  const editor = vscode.window.activeTextEditor;
  const derived = editor && (await checker.derive(editor.document.uri, editor.selection.active, as));
  if (!derived) {
    say(vscode.l10n.t('Visviva: there is no system here whose equations could be copied.'));
    return;
  }
  await vscode.env.clipboard.writeText(derived.text);
  say(vscode.l10n.t('Visviva: the equations of {0} are copied.', derived.system));
}

function say(message: string): void {
  vscode.window.setStatusBarMessage(message, shownFor);
}
