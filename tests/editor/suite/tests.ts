import assert from 'node:assert/strict';
import * as vscode from 'vscode';

const identifier = 'visviva.visviva';

/** Each stands by itself and leaves no editor open. */
export const tests: Record<string, () => Promise<void>> = {
  'the extension starts with the first file that it reads': async () => {
    await show('pendulum.js');
    await until(() => vscode.extensions.getExtension(identifier)?.isActive, 'the extension to start');
    await closeAll();
  },

  'its commands are there': async () => {
    const commands = await vscode.commands.getCommands(true);
    for (const command of ['visviva.restart', 'visviva.showOutput']) assert.ok(commands.includes(command), command);
  },

  'right code has no finding': async () => {
    const document = await show('pendulum.js');
    await shownBy(document, (hover) => hover.includes('swing-boat'));
    assert.deepEqual(messages(document), []);
    await closeAll();
  },

  'a wrong sign is found, and leads to its claim': async () => {
    const document = await show('crane.ts');
    await until(() => findings(document).length > 0, 'a finding');
    const [finding] = findings(document);
    assert.equal(finding!.severity, vscode.DiagnosticSeverity.Error);
    assert.equal(finding!.source, 'visviva');
    assert.ok(finding!.message.length > 20, finding!.message);
    assert.equal(document.lineAt(finding!.relatedInformation![0]!.location.range.start.line).text.includes('checks'), true);
    await closeAll();
  },

  'correcting the sign takes the finding away, undoing brings it back': async () => {
    const document = await show('crane.ts');
    await until(() => findings(document).length > 0, 'a finding');
    await replace(document, '(ax * cosine - p.g', '(-ax * cosine - p.g');
    await until(() => findings(document).length === 0, 'the finding to go');
    await replace(document, '(-ax * cosine - p.g', '(ax * cosine - p.g');
    await until(() => findings(document).length > 0, 'the finding to come back');
    await closeAll();
  },

  'the hover on a declaration shows the system': async () => {
    const document = await show('crane.ts');
    const hover = await shownBy(document, (text) => text.includes('quay-crane'));
    assert.match(hover, /th/);
    await closeAll();
  },

  'the outline lists the system with its parts': async () => {
    const document = await show('crane.ts');
    const symbols = await until(async () => {
      const found = await vscode.commands.executeCommand<vscode.DocumentSymbol[] | undefined>(
        'vscode.executeDocumentSymbolProvider',
        document.uri,
      );
      return found?.find((symbol) => symbol.name.includes('quay-crane'));
    }, 'the system in the outline');
    const names = symbols.children.map((child) => child.name);
    for (const name of ['x', 'th', 'M', 'F']) assert.ok(names.some((one) => one === name), `${name} in ${names.join()}`);
    await closeAll();
  },

  'closing the file clears its findings': async () => {
    const document = await show('crane.ts');
    await until(() => findings(document).length > 0, 'a finding');
    await closeAll();
    await until(() => findings(document).length === 0, 'the findings to go');
  },

  'switching off hides everything, switching on brings it back': async () => {
    const document = await show('crane.ts');
    await until(() => findings(document).length > 0, 'a finding');
    const settings = vscode.workspace.getConfiguration('visviva');
    await settings.update('enable', false, vscode.ConfigurationTarget.Workspace);
    await until(() => findings(document).length === 0, 'the findings to go');
    await settings.update('enable', undefined, vscode.ConfigurationTarget.Workspace);
    await until(() => findings(document).length > 0, 'the findings to come back');
    await closeAll();
  },

  'a document that was never saved is checked too': async () => {
    const saved = await show('crane.ts');
    const document = await vscode.workspace.openTextDocument({ language: 'typescript', content: saved.getText() });
    await vscode.window.showTextDocument(document);
    await until(() => findings(document).length > 0, 'a finding');
    await closeAll();
  },

  'the checker can be restarted': async () => {
    const document = await show('crane.ts');
    await until(() => findings(document).length > 0, 'a finding');
    await vscode.commands.executeCommand('visviva.restart');
    await until(() => findings(document).length > 0, 'the findings after the restart');
    await closeAll();
  },
};

async function show(name: string): Promise<vscode.TextDocument> {
  const folder = vscode.workspace.workspaceFolders![0]!.uri;
  const uri = vscode.Uri.joinPath(folder, name);
  // Not by openTextDocument: a document that an extension asked for stays open for minutes after its editor is closed.
  await vscode.commands.executeCommand('vscode.open', uri);
  return until(() => {
    const document = vscode.window.activeTextEditor?.document;
    return document?.uri.toString() === uri.toString() ? document : undefined;
  }, `${name} to open`);
}

async function closeAll(): Promise<void> {
  if (vscode.window.activeTextEditor?.document.isDirty) {
    await vscode.commands.executeCommand('workbench.action.revertAndCloseActiveEditor');
  }
  await vscode.commands.executeCommand('workbench.action.closeAllEditors');
}

async function replace(document: vscode.TextDocument, from: string, to: string): Promise<void> {
  const at = document.getText().indexOf(from);
  assert.ok(at >= 0, `"${from}" is not in the document`);
  const edit = new vscode.WorkspaceEdit();
  edit.replace(document.uri, new vscode.Range(document.positionAt(at), document.positionAt(at + from.length)), to);
  assert.ok(await vscode.workspace.applyEdit(edit));
}

function findings(document: vscode.TextDocument): vscode.Diagnostic[] {
  return vscode.languages.getDiagnostics(document.uri).filter((diagnostic) => diagnostic.source === 'visviva');
}

function messages(document: vscode.TextDocument): string[] {
  return findings(document).map((diagnostic) => diagnostic.message);
}

/** The hover on the declaration's first line, once it says what is wanted. */
async function shownBy(document: vscode.TextDocument, wanted: (text: string) => boolean): Promise<string> {
  const position = document.positionAt(document.getText().indexOf('@visviva') + 12);
  return until(async () => {
    const hovers = await vscode.commands.executeCommand<vscode.Hover[]>(
      'vscode.executeHoverProvider',
      document.uri,
      position,
    );
    const text = hovers
      .flatMap((hover) => hover.contents)
      .map((content) => (typeof content === 'string' ? content : content.value))
      .join('\n');
    return wanted(text) ? text : undefined;
  }, 'the hover');
}

async function until<T>(look: () => T | Promise<T>, what: string, limit = 40_000): Promise<NonNullable<T>> {
  const end = Date.now() + limit;
  for (;;) {
    const found = await look();
    if (found) return found;
    if (Date.now() > end) throw new Error(`Waited in vain for ${what}.`);
    await new Promise((next) => setTimeout(next, 25));
  }
}
