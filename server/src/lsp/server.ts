import {
  defaultSettings,
  readSettings,
  suggestRequest,
  themeNotification,
  version,
  visibleNotification,
  type ClientOptions,
  type Settings,
  type SuggestParams,
  type Suggestion,
  type Theme,
  type VisibleParams,
} from '@visviva/shared';
import {
  CodeActionKind,
  CodeLensRefreshRequest,
  DidChangeConfigurationNotification,
  DidChangeWatchedFilesNotification,
  FileChangeType,
  TextDocuments,
  TextDocumentSyncKind,
  type CancellationToken,
  type ClientCapabilities,
  type Connection,
  type DidChangeWatchedFilesParams,
  type InitializeParams,
  type InitializeResult,
} from 'vscode-languageserver';
import { TextDocument } from 'vscode-languageserver-textdocument';
import { clock } from '../host/clock';
import { isExcluded } from '../host/exclude';
import { createDiskFiles } from '../host/files';
import { pathOf } from '../host/paths';
import { isSettingsFile } from '../host/settings-files';
import type { Files, Service } from '../service/api';
import { Budget } from '../text/budget';
import { Addresses } from './addresses';
import { Checker, describe } from './checker';
import { registerCommandFeatures } from './command-features';
import { toCodeActions, toRewriteActions } from './code-actions';
import { plainText } from './hover';
import { languageCapabilities, registerLanguageFeatures } from './language-features';
import { OpenFiles } from './open-files';
import { fromPosition, fromRange, toRange } from './ranges';
import { withPictures } from './pictures';
import { nearestSuggestion } from './suggest';
import { toFlatSymbols, toSymbols } from './symbols';
import { registerVisualFeatures, visualCapabilities } from './visual-features';

/** Kinds of files whose change on disk can change a result. */
export const watchedFiles = '**/*.{ts,tsx,mts,cts,js,jsx,mjs,cjs,htm,html,json,toml,py,visviva}';
/** A file that only depends on the one being typed in may wait for a pause. */
const dependentDelay = 100;

/**
 * Wires the service to the language server protocol. Nothing is analysed here: each request becomes a call of the
 * service and its answer is translated. A request that fails is logged and answered with nothing.
 */
export function serve(connection: Connection, createService: (files: Files, folders: () => readonly string[]) => Service): void {
  let capabilities: ClientCapabilities = {};
  let settings: Settings = defaultSettings;
  let folders: string[] = [];
  let options: ClientOptions = {};
  let theme: Theme | undefined;

  const disk = createDiskFiles(
    () => folders,
    (file) => service.handles(file),
  );
  const service: Service = createService(disk, () => folders);
  const addresses = new Addresses();
  const files = new OpenFiles();
  const documents = new TextDocuments(TextDocument);
  const checker = new Checker({
    connection,
    service,
    addresses,
    files,
    clock,
    settings: (file) => ({ ...settings, timeLimit: disk.settings(file).timeLimit ?? settings.timeLimit }),
    isExcluded: (file) => isExcluded(file, folders, settings.exclude),
    tracksVersions: () => capabilities.textDocument?.publishDiagnostics?.versionSupport === true,
  });

  connection.onInitialize((params: InitializeParams): InitializeResult => {
    capabilities = params.capabilities ?? {};
    settings = readSettings(params.initializationOptions);
    options = (params.initializationOptions ?? {}) as ClientOptions;
    theme = options.theme;
    folders = foldersOf(params);
    return {
      serverInfo: { name: 'visviva', version },
      capabilities: {
        textDocumentSync: { openClose: true, change: TextDocumentSyncKind.Incremental, save: true },
        hoverProvider: true,
        documentSymbolProvider: true,
        ...languageCapabilities,
        ...visualCapabilities,
        codeActionProvider: { codeActionKinds: [CodeActionKind.QuickFix, CodeActionKind.RefactorRewrite] },
        workspace: { workspaceFolders: { supported: true, changeNotifications: true } },
      },
    };
  });

  connection.onInitialized(
    guarded('initialized', undefined, async () => {
      const workspace = capabilities.workspace;
      if (workspace?.didChangeWatchedFiles?.dynamicRegistration) {
        await connection.client.register(DidChangeWatchedFilesNotification.type, {
          watchers: [{ globPattern: watchedFiles }],
        });
      }
      if (workspace?.didChangeConfiguration?.dynamicRegistration) {
        await connection.client.register(DidChangeConfigurationNotification.type, { section: 'visviva' });
      }
      if (workspace?.workspaceFolders) {
        connection.workspace.onDidChangeWorkspaceFolders(({ added, removed }) => {
          const gone = new Set(removed.map((folder) => pathOf(folder.uri)));
          folders = [...folders.filter((folder) => !gone.has(folder)), ...pathsOf(added)];
          disk.reset();
          checker.requestAll();
        });
      }
      await pullSettings();
    }),
  );

  const pullSettings = async (pushed?: unknown): Promise<void> => {
    const given = capabilities.workspace?.configuration
      ? ((await connection.workspace.getConfiguration('visviva')) as unknown)
      : pushed;
    if (given === undefined) return;
    const before = settings;
    settings = readSettings(given);
    if (JSON.stringify(settings) === JSON.stringify(before)) return;
    checker.requestAll();
    const { codeLens, inlayHint } = capabilities.workspace ?? {};
    if (codeLens?.refreshSupport) void connection.sendRequest(CodeLensRefreshRequest.type);
    if (inlayHint?.refreshSupport) void connection.languages.inlayHint.refresh();
  };

  connection.onDidChangeConfiguration(
    guarded('configuration', undefined, async ({ settings: pushed }) => {
      await pullSettings((pushed as { visviva?: unknown } | null)?.visviva);
    }),
  );

  documents.onDidOpen(({ document }) => {
    const file = addresses.fileOf(document.uri, document.languageId);
    addresses.open(file, document.uri);
    files.set(file, document);
  });

  // Comes after the opening of a document too.
  documents.onDidChangeContent(({ document }) => {
    const open = files.get(document.uri);
    if (!open) return;
    service.update(open.file, document.getText());
    const isNew = open.published === undefined;
    if (settings.checkOn === 'save' && !isNew) return;
    checker.request(open);
    for (const dependent of files.dependents(open.file)) checker.request(dependent, dependentDelay);
  });

  documents.onDidSave(({ document }) => {
    const open = files.get(document.uri);
    if (!open || settings.checkOn !== 'save') return;
    checker.request(open);
    for (const dependent of files.dependents(open.file)) checker.request(dependent, dependentDelay);
  });

  documents.onDidClose(({ document }) => {
    const open = files.get(document.uri);
    if (!open) return;
    files.delete(document.uri);
    addresses.close(open.file);
    service.close(open.file);
    checker.close(open);
    for (const dependent of files.dependents(open.file)) checker.request(dependent, dependentDelay);
  });

  connection.onNotification(visibleNotification, ({ uris }: VisibleParams) => checker.setVisible(uris));

  connection.onDidChangeWatchedFiles(
    guarded('watched files', undefined, ({ changes }: DidChangeWatchedFilesParams) => {
      const again = new Set<string>();
      for (const { uri, type } of changes) {
        const file = pathOf(uri);
        if (file === undefined) continue;
        service.invalidate(file);
        disk.changed(file);
        // A new file may be the one that an import or a name was looking for.
        const affected = type === FileChangeType.Changed && !isSettingsFile(file) ? files.dependents(file) : files.all();
        for (const open of affected) again.add(open.document.uri);
      }
      for (const uri of again) checker.request(files.get(uri)!);
    }),
  );

  const budgetFor = (token: CancellationToken): Budget =>
    new Budget({ milliseconds: settings.timeLimit }, clock, () => token.isCancellationRequested);

  registerLanguageFeatures({
    connection,
    service,
    addresses,
    files,
    guarded,
    budgetFor,
    enabled: () => settings.enable,
    snippets: () => capabilities.textDocument?.completion?.completionItem?.snippetSupport === true,
  });

  registerVisualFeatures({
    connection,
    service,
    files,
    guarded,
    budgetFor,
    settings: () => settings,
    hasPanel: () => options.panel === true,
  });
  registerCommandFeatures({ connection, service, addresses, files, clock, guarded, budgetFor, declaring: () => disk.declarations() });
  connection.onNotification(themeNotification, (told: Theme) => void (theme = told));

  connection.onHover(
    guarded('hover', null, async ({ textDocument, position }, token) => {
      const open = files.get(textDocument.uri);
      if (!open || !settings.enable || !service.handles(open.file)) return null;
      await service.prepare(open.file);
      const hover = await service.hover(open.file, fromPosition(position), budgetFor(token));
      if (!hover) return null;
      const formats = capabilities.textDocument?.hover?.contentFormat;
      const markdown = !formats || formats.includes('markdown');
      return {
        contents: markdown
          ? { kind: 'markdown', value: theme ? await withPictures(hover, theme.text) : hover.markdown }
          : { kind: 'plaintext', value: plainText(hover.markdown) },
        range: toRange(hover.range),
      };
    }),
  );

  connection.onDocumentSymbol(
    guarded('document symbols', null, async ({ textDocument }) => {
      const open = files.get(textDocument.uri);
      if (!open || !settings.enable || !service.handles(open.file)) return null;
      const symbols = await service.symbols(open.file);
      return capabilities.textDocument?.documentSymbol?.hierarchicalDocumentSymbolSupport
        ? toSymbols(symbols)
        : toFlatSymbols(symbols, textDocument.uri);
    }),
  );

  connection.onRequest(
    suggestRequest,
    guarded('suggestion', null, async ({ textDocument, position }: SuggestParams, token: CancellationToken): Promise<Suggestion | null> => {
      const open = files.get(textDocument.uri);
      if (!open || !service.handles(open.file)) return null;
      const version = open.document.version;
      await service.prepare(open.file);
      const all = await service.suggest(open.file, budgetFor(token));
      const best = nearestSuggestion(all, position.line + 1);
      return best ? { function: best.function, version, line: best.range.start.line - 1, text: best.text } : null;
    }),
  );

  connection.onCodeAction(
    guarded('code actions', null, async ({ textDocument, range, context }, token) => {
      const open = files.get(textDocument.uri);
      // Edits of an older text would land in the wrong place.
      const isCurrent = (): boolean => open?.result?.version === open?.document.version;
      if (!open?.result || !isCurrent() || !settings.enable) return null;
      const { result } = open.result;
      const wants = (offered: string): boolean => !context.only || context.only.some((kind) => `${offered}.`.startsWith(`${kind}.`));
      const uriOf = (file: string): string => addresses.uriOf(file);
      const actions = wants(CodeActionKind.QuickFix) ? toCodeActions(result, range, context.diagnostics, uriOf) : [];
      if (wants(CodeActionKind.RefactorRewrite) && result.claims.some((claim) => claim.verdict === 'differs')) {
        const rewrites = await service.rewrites(open.file, fromRange(range), budgetFor(token));
        if (isCurrent()) actions.push(...toRewriteActions(rewrites, uriOf(open.file)));
        else return null;
      }
      return actions;
    }),
  );

  /** A handler whose failure is logged and answered with `fallback`. */
  function guarded<P extends unknown[], R>(
    what: string,
    fallback: R,
    handler: (...parameters: P) => R | Promise<R>,
  ): (...parameters: P) => Promise<R> {
    return async (...parameters) => {
      try {
        return await handler(...parameters);
      } catch (error) {
        connection.console.error(`The request for ${what} failed: ${describe(error)}`);
        return fallback;
      }
    };
  }

  documents.listen(connection);
  connection.listen();
}

function foldersOf({ workspaceFolders, rootUri }: InitializeParams): string[] {
  if (workspaceFolders) return pathsOf(workspaceFolders);
  return rootUri ? pathsOf([{ uri: rootUri }]) : [];
}

function pathsOf(folders: readonly { readonly uri: string }[]): string[] {
  return folders.map((folder) => pathOf(folder.uri)).filter((path) => path !== undefined);
}
