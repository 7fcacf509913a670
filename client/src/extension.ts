import * as vscode from 'vscode';
import { CheckerClient } from './checker-client';
import { insertSuggestion } from './suggest';
import { StatusItem } from './status-item';

let client: CheckerClient | undefined;

export async function activate(context: vscode.ExtensionContext): Promise<void> {
  const output = vscode.window.createOutputChannel('Visviva', { log: true });
  const status = new StatusItem();
  const checker = new CheckerClient(context, output, status);
  client = checker;
  context.subscriptions.push(
    output,
    status,
    vscode.commands.registerCommand('visviva.restart', () => checker.restart()),
    vscode.commands.registerCommand('visviva.showOutput', () => output.show(true)),
    vscode.commands.registerTextEditorCommand('visviva.suggest', (editor) => void insertSuggestion(editor, checker)),
  );
  await checker.start();
}

export async function deactivate(): Promise<void> {
  await client?.stop();
  client = undefined;
}
