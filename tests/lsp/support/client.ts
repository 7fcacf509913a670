import { spawn, type ChildProcess } from 'node:child_process';
import { PassThrough } from 'node:stream';
import { fileURLToPath } from 'node:url';
import { createConnection, ProposedFeatures } from 'vscode-languageserver/node';
import {
  createMessageConnection,
  StreamMessageReader,
  StreamMessageWriter,
  type MessageConnection,
  type PublishDiagnosticsParams,
} from 'vscode-languageserver-protocol/node';
import { statusNotification, type FileStatus } from '@visviva/shared';
import { serve } from '../../../server/src/lsp/server';
import type { Files, Service } from '../../../server/src/service/api';

/** Where the built server lies; the suites of this folder are run after a build. */
export const builtServer = fileURLToPath(new URL('../../../dist/server.mjs', import.meta.url));

/** An editor's side of the protocol, reduced to what a test wants to do and see. */
export class TestClient {
  readonly published: PublishDiagnosticsParams[] = [];
  readonly statuses: FileStatus[] = [];
  readonly logged: string[] = [];
  readonly registered: string[] = [];
  settings: unknown = {};
  private wake: () => void = () => undefined;

  constructor(
    readonly connection: MessageConnection,
    readonly process?: ChildProcess,
  ) {
    const note = <T>(list: T[]) => {
      return (value: T): void => {
        list.push(value);
        this.wake();
      };
    };
    connection.onNotification('textDocument/publishDiagnostics', note(this.published));
    connection.onNotification(statusNotification, note(this.statuses));
    connection.onNotification('window/logMessage', (params: { message: string }) => note(this.logged)(params.message));
    connection.onRequest('client/registerCapability', (params: { registrations: { method: string }[] }) => {
      this.registered.push(...params.registrations.map((registration) => registration.method));
      return null;
    });
    connection.onRequest('workspace/configuration', () => [this.settings]);
    connection.listen();
  }

  async initialize(capabilities: object = {}, options: object = {}): Promise<{ capabilities: Record<string, unknown> }> {
    const result = await this.connection.sendRequest<{ capabilities: Record<string, unknown> }>('initialize', {
      processId: process.pid,
      rootUri: null,
      capabilities,
      ...options,
    });
    await this.connection.sendNotification('initialized', {});
    return result;
  }

  open(uri: string, text: string, languageId = 'typescript', version = 1): void {
    this.notify('textDocument/didOpen', { textDocument: { uri, languageId, version, text } });
  }

  /** Replaces the whole text, or a range of it. */
  change(uri: string, version: number, text: string, range?: object): void {
    this.notify('textDocument/didChange', {
      textDocument: { uri, version },
      contentChanges: [range ? { range, text } : { text }],
    });
  }

  close(uri: string): void {
    this.notify('textDocument/didClose', { textDocument: { uri } });
  }

  notify(method: string, params: unknown): void {
    void this.connection.sendNotification(method, params as object);
  }

  request<T>(method: string, params: unknown): Promise<T> {
    return this.connection.sendRequest<T>(method, params as object);
  }

  /** Waits until `find` finds something. */
  async until<T>(find: () => T | undefined, what: string, milliseconds = 10_000): Promise<T> {
    const end = performance.now() + milliseconds;
    for (;;) {
      const found = find();
      if (found !== undefined) return found;
      if (performance.now() > end) throw new Error(`Waited in vain for ${what}. Log:\n${this.logged.join('\n')}`);
      await new Promise((next) => {
        const timer = setTimeout(next, 5);
        this.wake = () => {
          clearTimeout(timer);
          next(undefined);
        };
      });
    }
  }

  diagnostics(uri: string, version?: number): Promise<PublishDiagnosticsParams> {
    const wanted = (p: PublishDiagnosticsParams): boolean =>
      p.uri === uri && (version === undefined || p.version === version);
    return this.until(() => this.published.findLast(wanted), `diagnostics of ${uri}, version ${version ?? 'any'}`);
  }

  status(uri: string, version: number): Promise<FileStatus> {
    return this.until(
      () => this.statuses.findLast((s) => s.uri === uri && s.version === version),
      `the status of ${uri}, version ${version}`,
    );
  }

  /** The last diagnostics that an editor would show now. */
  shown(uri: string): PublishDiagnosticsParams | undefined {
    return this.published.findLast((p) => p.uri === uri);
  }

  async stop(): Promise<void> {
    if (this.process?.exitCode === null) {
      const ended = new Promise((done) => this.process!.once('exit', done));
      await this.request('shutdown', undefined);
      this.notify('exit', undefined);
      await ended;
    }
    this.connection.dispose();
  }
}

/** The wiring in this process, around a service of the test's own. */
export function inProcess(createService: (files: Files) => Service): TestClient {
  const toServer = new PassThrough();
  const toClient = new PassThrough();
  serve(
    createConnection(ProposedFeatures.all, new StreamMessageReader(toServer), new StreamMessageWriter(toClient)),
    createService,
  );
  return new TestClient(
    createMessageConnection(new StreamMessageReader(toClient), new StreamMessageWriter(toServer)),
  );
}

/** The built server as its own process, over standard input and output. */
export function built(): TestClient {
  const child = spawn(process.execPath, [builtServer, '--stdio'], { stdio: ['pipe', 'pipe', 'inherit'] });
  return new TestClient(
    createMessageConnection(new StreamMessageReader(child.stdout), new StreamMessageWriter(child.stdin)),
    child,
  );
}
