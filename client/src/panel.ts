import type { FromPage, PanelData, ToPage } from '@visviva/shared';
import * as vscode from 'vscode';
import type { CheckerClient } from './checker-client';

/** After the last key or move of the cursor; the answer itself takes a few milliseconds more. */
const followDelay = 30;

/** The one panel: the physics of the function at the cursor, beside the code. */
export class PhysicsPanel implements vscode.Disposable {
  private view: vscode.WebviewPanel | undefined;
  private timer: NodeJS.Timeout | undefined;
  private pending: vscode.CancellationTokenSource | undefined;
  private readonly subscriptions: vscode.Disposable[];
  private ready = false;
  private last: ToPage | undefined;

  constructor(
    private readonly folder: vscode.Uri,
    private readonly checker: CheckerClient,
  ) {
    this.subscriptions = [
      vscode.window.onDidChangeTextEditorSelection(({ textEditor }) => this.follow(textEditor)),
      vscode.window.onDidChangeActiveTextEditor((editor) => editor && this.follow(editor)),
      vscode.workspace.onDidChangeTextDocument(({ document }) => {
        const editor = vscode.window.activeTextEditor;
        if (editor?.document === document) this.follow(editor);
      }),
      checker.onChecked((uri) => {
        const editor = vscode.window.activeTextEditor;
        if (editor?.document.uri.toString() === uri) this.follow(editor);
      }),
    ];
  }

  /** Opens the panel, or brings it back into view. */
  show(uri?: vscode.Uri, position?: vscode.Position): void {
    if (this.view) this.view.reveal(undefined, true);
    else this.open();
    const editor = vscode.window.activeTextEditor;
    const at = uri ?? editor?.document.uri;
    if (at) void this.update(at, position ?? editor?.selection.active ?? new vscode.Position(0, 0));
    else this.tell(nothing);
  }

  dispose(): void {
    this.view?.dispose();
    for (const s of this.subscriptions) s.dispose();
  }

  private open(): void {
    const dist = vscode.Uri.joinPath(this.folder, 'dist');
    const view = vscode.window.createWebviewPanel(
      'visviva.panel',
      'Visviva',
      { viewColumn: vscode.ViewColumn.Beside, preserveFocus: true },
      { enableScripts: true, localResourceRoots: [dist], retainContextWhenHidden: true },
    );
    this.view = view;
    this.ready = false;
    view.iconPath = vscode.Uri.joinPath(this.folder, 'media', 'icon.png');
    view.onDidDispose(() => (this.view = undefined));
    view.webview.onDidReceiveMessage((message: FromPage) => void this.asked(message));
    view.webview.html = page(view.webview, dist);
  }

  private follow(editor: vscode.TextEditor): void {
    if (!this.view?.visible || editor.document.uri.scheme === 'output') return;
    clearTimeout(this.timer);
    this.timer = setTimeout(() => void this.update(editor.document.uri, editor.selection.active), followDelay);
  }

  private async update(uri: vscode.Uri, position: vscode.Position): Promise<void> {
    this.pending?.cancel();
    const pending = new vscode.CancellationTokenSource();
    this.pending = pending;
    let data: PanelData | undefined;
    try {
      data = await this.checker.panel(uri, position, pending.token);
    } catch {
      // Overtaken by the next one, or the checker is gone: its status item tells that.
      return;
    }
    if (pending.token.isCancellationRequested) return;
    this.tell(data ? { kind: 'data', data } : nothing);
    if (this.view) this.view.title = data ? data.function || data.system : 'Visviva';
  }

  private tell(message: ToPage): void {
    this.last = message;
    if (this.ready) void this.view?.webview.postMessage(message);
  }

  private async asked(message: FromPage): Promise<void> {
    switch (message.kind) {
      case 'ready':
        this.ready = true;
        if (this.last) this.tell(this.last);
        return;
      case 'command':
        await vscode.commands.executeCommand('workbench.action.focusFirstEditorGroup');
        await vscode.commands.executeCommand(message.command);
        return;
      case 'reveal': {
        const at = new vscode.Position(message.line - 1, message.column - 1);
        await vscode.window.showTextDocument(vscode.Uri.parse(message.uri), { viewColumn: vscode.ViewColumn.One, selection: new vscode.Range(at, at) });
        return;
      }
      case 'save': {
        const folder = vscode.workspace.workspaceFolders?.[0]?.uri;
        const name = `${message.name}.${message.type}`;
        const target = await vscode.window.showSaveDialog({
          filters: { [message.type.toUpperCase()]: [message.type] },
          ...(folder ? { defaultUri: vscode.Uri.joinPath(folder, name) } : {}),
        });
        if (target) await vscode.workspace.fs.writeFile(target, Uint8Array.from(atob(message.base64), (c) => c.charCodeAt(0)));
      }
    }
  }
}

const nothing: ToPage = {
  kind: 'empty',
  title: vscode.l10n.t('No declaration here'),
  hint: vscode.l10n.t('Put the cursor into a function with a declaration above it, or let one be proposed for the function at the cursor.'),
  action: { label: vscode.l10n.t('Propose a declaration'), command: 'visviva.suggest' },
};

function page(webview: vscode.Webview, dist: vscode.Uri): string {
  const address = (file: string): string => webview.asWebviewUri(vscode.Uri.joinPath(dist, file)).toString();
  const nonce = globalThis.crypto.randomUUID().replaceAll('-', '');
  const policy = `default-src 'none'; img-src data:; style-src ${webview.cspSource}; script-src 'nonce-${nonce}'`;
  return `<!DOCTYPE html>
<html lang="${vscode.env.language}">
<head>
<meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="${policy}">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>Visviva</title>
<link rel="stylesheet" href="${address('panel.css')}">
</head>
<body>
<main id="panel"></main>
<script nonce="${nonce}" src="${address('panel.js')}"></script>
</body>
</html>`;
}
