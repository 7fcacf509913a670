import {
  checkFileRequest,
  deriveRequest,
  filesRequest,
  panelRequest,
  statusNotification,
  suggestRequest,
  themeNotification,
  version,
  visibleNotification,
  type CheckedFile,
  type ClientOptions,
  type DerivedText,
  type DeriveParams,
  type FileStatus,
  type PanelData,
  type PanelParams,
  type Suggestion,
  type SuggestParams,
  type VisibleParams,
} from '@visviva/shared';
import * as vscode from 'vscode';
import {
  CloseAction,
  ErrorAction,
  LanguageClient,
  State,
  TransportKind,
  type LanguageClientOptions,
  type ServerOptions,
} from 'vscode-languageclient/node';
import { details, type StatusItem } from './status-item';
import { currentTheme } from './theme';

const languages = ['typescript', 'javascript', 'typescriptreact', 'javascriptreact', 'html', 'python', 'visviva'];

/** A server that stops this often within the time below is not started again by itself. */
const stopLimit = 4;
const stopWindow = 3 * 60_000;

/** Starts the language server, keeps it running and passes on what it tells. */
export class CheckerClient {
  private readonly client: LanguageClient;
  private stops: number[] = [];
  /** What the output says last of each file. */
  private readonly logged = new Map<string, string>();

  private readonly checked = new vscode.EventEmitter<string>();
  /** An open file has been checked: its address. */
  readonly onChecked = this.checked.event;

  constructor(
    context: vscode.ExtensionContext,
    private readonly output: vscode.LogOutputChannel,
    private readonly status: StatusItem,
  ) {
    const module = context.asAbsolutePath('dist/server.mjs');
    const server: ServerOptions = {
      run: { module, transport: TransportKind.ipc },
      debug: { module, transport: TransportKind.ipc, options: { execArgv: ['--nolazy', '--inspect=6059'] } },
    };
    const options: LanguageClientOptions = {
      documentSelector: languages.flatMap((language) => [
        { scheme: 'file', language },
        { scheme: 'untitled', language },
      ]),
      outputChannel: output,
      initializationOptions: { ...vscode.workspace.getConfiguration('visviva'), ...({ panel: true, theme: currentTheme() } satisfies ClientOptions) },
      errorHandler: {
        error: () => ({ action: ErrorAction.Continue }),
        closed: () => this.closed(),
      },
    };
    this.client = new LanguageClient('visviva', 'Visviva', server, options);
    context.subscriptions.push(
      this.client.onNotification(statusNotification, (told: FileStatus) => this.told(told)),
      this.client.onDidChangeState(({ newState }) => {
        if (newState === State.Starting) status.starting();
        if (newState !== State.Running) return;
        status.running();
        this.tellVisible(vscode.window.visibleTextEditors);
      }),
      vscode.window.onDidChangeActiveColorTheme(() => {
        if (this.client.isRunning()) void this.client.sendNotification(themeNotification, currentTheme());
      }),
      this.checked,
      vscode.window.onDidChangeVisibleTextEditors((editors) => this.tellVisible(editors)),
    );
  }

  /** A first declaration for the function at a place; undefined where there is nothing to suggest. */
  async suggest(uri: vscode.Uri, position: vscode.Position): Promise<Suggestion | undefined> {
    const params: SuggestParams = { textDocument: { uri: uri.toString() }, position: { line: position.line, character: position.character } };
    return (await this.client.sendRequest<Suggestion | null>(suggestRequest, params)) ?? undefined;
  }

  /** What the panel shows of a place; undefined where nothing is declared. */
  async panel(uri: vscode.Uri, position: vscode.Position, token: vscode.CancellationToken): Promise<PanelData | undefined> {
    const params: PanelParams = { textDocument: { uri: uri.toString() }, position: { line: position.line, character: position.character } };
    return (await this.client.sendRequest<PanelData | null>(panelRequest, params, token)) ?? undefined;
  }

  /** Derived equations or code of the system at a place; undefined where there is none. */
  async derive(uri: vscode.Uri, position: vscode.Position, as: DeriveParams['as']): Promise<DerivedText | undefined> {
    const params: DeriveParams = { textDocument: { uri: uri.toString() }, position: { line: position.line, character: position.character }, as };
    return (await this.client.sendRequest<DerivedText | null>(deriveRequest, params)) ?? undefined;
  }

  /** All files of the workspace that declare something. */
  async files(): Promise<vscode.Uri[]> {
    const found = await this.client.sendRequest<readonly string[] | null>(filesRequest, {});
    return (found ?? []).map((uri) => vscode.Uri.parse(uri));
  }

  async checkFile(uri: vscode.Uri, token: vscode.CancellationToken): Promise<CheckedFile | undefined> {
    return (await this.client.sendRequest<CheckedFile | null>(checkFileRequest, { uri: uri.toString() }, token)) ?? undefined;
  }

  private tellVisible(editors: readonly vscode.TextEditor[]): void {
    if (!this.client.isRunning()) return;
    const params: VisibleParams = { uris: editors.map((editor) => this.client.code2ProtocolConverter.asUri(editor.document.uri)) };
    void this.client.sendNotification(visibleNotification, params);
  }

  async start(): Promise<void> {
    try {
      await this.client.start();
      this.output.info(`Visviva ${version} is ready.`);
    } catch (error) {
      this.output.error(`The checker did not start: ${String(error)}`);
      this.status.stopped('The checker did not start. Click for the output, or restart it.');
    }
  }

  async restart(): Promise<void> {
    this.stops = [];
    this.status.starting();
    try {
      if (this.client.isRunning()) await this.client.restart();
      else await this.client.start();
    } catch (error) {
      this.output.error(`The checker did not restart: ${String(error)}`);
      this.status.stopped('The checker did not restart. Click for the output.');
    }
  }

  async stop(): Promise<void> {
    await this.client.dispose();
  }

  private told(status: FileStatus): void {
    this.status.update(status);
    if (status.counts) this.checked.fire(vscode.Uri.parse(status.uri).toString());
    const { counts, reason, uri } = status;
    const line = reason ?? (counts && counts.systems + counts.problems > 0 ? details(counts) : undefined);
    if (line === this.logged.get(uri)) return;
    if (line === undefined) this.logged.delete(uri);
    else this.logged.set(uri, line);
    if (line !== undefined) this.output.info(`${vscode.workspace.asRelativePath(vscode.Uri.parse(uri))}: ${line}`);
  }

  private closed(): { action: CloseAction; message?: string; handled: true } {
    const now = Date.now();
    this.stops = [...this.stops.filter((time) => now - time < stopWindow), now];
    if (this.stops.length < stopLimit) {
      this.output.warn('The checker stopped and is started again.');
      return { action: CloseAction.Restart, handled: true };
    }
    this.output.error(`The checker stopped ${stopLimit} times within ${stopWindow / 60_000} minutes.`);
    this.status.stopped('The checker stopped several times. Click for the output, or run "Visviva: Restart the Checker".');
    return { action: CloseAction.DoNotRestart, handled: true };
  }
}
