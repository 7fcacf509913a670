import * as vscode from 'vscode';
import { CheckerClient } from './checker-client';
import { insertSuggestion } from './suggest';
import { copyEquations, insertDerived } from './derive';
import { PhysicsPanel } from './panel';
import { ClaimTests } from './testing';
import { StatusItem } from './status-item';

let client: CheckerClient | undefined;

export async function activate(context: vscode.ExtensionContext): Promise<void> {
  const output = vscode.window.createOutputChannel('Visviva', { log: true });
  const status = new StatusItem();
  const checker = new CheckerClient(context, output, status);
  client = checker;
  const panel = new PhysicsPanel(context.extensionUri, checker);
  const tests = new ClaimTests(checker);
  context.subscriptions.push(
    output,
    status,
    panel,
    tests,
    vscode.commands.registerCommand('visviva.restart', () => checker.restart()),
    vscode.commands.registerCommand('visviva.showOutput', () => output.show(true)),
    vscode.commands.registerCommand('visviva.show', (uri?: string, at?: Place) => panel.show(uriOf(uri), positionOf(at))),
    vscode.commands.registerCommand('visviva.derive', (uri?: string, at?: Place) => insertDerived(checker, uriOf(uri), positionOf(at))),
    vscode.commands.registerCommand('visviva.copyTex', () => copyEquations(checker, 'tex')),
    vscode.commands.registerCommand('visviva.copyText', () => copyEquations(checker, 'text')),
    vscode.commands.registerCommand('visviva.checkWorkspace', () => tests.runAll()),
    vscode.commands.registerTextEditorCommand('visviva.suggest', (editor) => void insertSuggestion(editor, checker)),
  );
  await checker.start();
}

export async function deactivate(): Promise<void> {
  await client?.stop();
  client = undefined;
}

/** As lenses carry them: an address, and a place with lines from 0. */
type Place = { readonly line: number; readonly character: number };

function uriOf(uri: unknown): vscode.Uri | undefined {
  return typeof uri === 'string' ? vscode.Uri.parse(uri) : undefined;
}

function positionOf(at: Place | undefined): vscode.Position | undefined {
  return at && typeof at.line === 'number' ? new vscode.Position(at.line, at.character) : undefined;
}
