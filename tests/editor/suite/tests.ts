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
    for (const command of ['restart', 'showOutput', 'suggest', 'show', 'derive', 'copyTex', 'copyText', 'checkWorkspace'].map((c) => `visviva.${c}`)) assert.ok(commands.includes(command), command);
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

  'the lens says the verdict and leads to the panel': async () => {
    const document = await show('crane.ts');
    const lenses = await until(async () => {
      const found = await vscode.commands.executeCommand<vscode.CodeLens[]>('vscode.executeCodeLensProvider', document.uri, 10);
      return found.some((l) => l.command?.title.includes('differs')) ? found : undefined;
    }, 'the lenses');
    assert.deepEqual(lenses.map((l) => l.command!.title), ["1 of 4 claims differs: th''", 'show', 'derive']);
    await vscode.commands.executeCommand(lenses[1]!.command!.command, ...lenses[1]!.command!.arguments!);
    const title = await until(
      () => vscode.window.tabGroups.all.flatMap((g) => g.tabs).find((t) => t.input instanceof vscode.TabInputWebview && t.label === 'rates')?.label,
      'the panel with the name of the function',
    );
    assert.equal(title, 'rates');
    await closeAll();
  },

  'the hover shows the equations as pictures': async () => {
    const document = await show('crane.ts');
    await shownBy(document, (hover) => hover.includes('data:image/svg+xml;base64,'));
    await closeAll();
  },

  'a parameter is renamed in the declaration and stays bound in the code': async () => {
    const document = await show('pendulum.js');
    await shownBy(document, (hover) => hover.includes('swing-boat'));
    const at = document.positionAt(document.getText().indexOf('l*sin('));
    const edit = await vscode.commands.executeCommand<vscode.WorkspaceEdit>('vscode.executeDocumentRenameProvider', document.uri, at, 'rope');
    assert.ok(await vscode.workspace.applyEdit(edit));
    assert.match(document.getText(), /rope\*sin/);
    await shownBy(document, (hover) => hover.includes('rope') && hover.includes('holds'));
    assert.deepEqual(messages(document), []);
    await closeAll();
  },

  'a symbol of the code leads to its declaration': async () => {
    const document = await show('crane.ts');
    const at = document.positionAt(document.getText().indexOf('p.trolley +') + 3);
    const found = await until(async () => {
      const places = await vscode.commands.executeCommand<(vscode.Location | vscode.LocationLink)[]>('vscode.executeDefinitionProvider', document.uri, at);
      const own = places.map((p) => ('range' in p ? p.range : p.targetRange)).find((r) => document.lineAt(r.start.line).text.includes('parameters'));
      return own;
    }, 'the definition');
    assert.equal(document.getText(found), 'M');
    await closeAll();
  },

  'completion offers statement words': async () => {
    const document = await show('crane.ts');
    await replace(document, ' * gravity', ' * spr\n * gravity');
    const at = document.positionAt(document.getText().indexOf('* spr') + 5);
    const list = await until(async () => {
      const found = await vscode.commands.executeCommand<vscode.CompletionList>('vscode.executeCompletionItemProvider', document.uri, at);
      return found.items.some((i) => i.label === 'spring') ? found : undefined;
    }, 'the completion');
    assert.ok(list.items.find((i) => i.label === 'spring')!.insertText instanceof vscode.SnippetString);
    await closeAll();
  },

  'the derived function is put below the one that is wrong': async () => {
    const document = await show('crane.ts');
    const at = document.positionAt(document.getText().indexOf('const ax'));
    vscode.window.activeTextEditor!.selection = new vscode.Selection(at, at);
    const before = document.getText().length;
    await vscode.commands.executeCommand('visviva.derive');
    await until(() => document.getText().length > before, 'the derived function');
    assert.ok(document.getText().indexOf('function', before - 20) > document.getText().indexOf('return [s[2]'));
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
