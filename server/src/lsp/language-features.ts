import {
  CompletionItemKind,
  FoldingRangeKind,
  InsertTextFormat,
  ResponseError,
  SemanticTokensBuilder,
  type CancellationToken,
  type CompletionItem,
  type Connection,
  type Location,
  type ServerCapabilities,
  type SymbolInformation,
  type TextEdit,
  type WorkspaceEdit,
} from 'vscode-languageserver';
import type { Completion, FileRange, SemanticToken, Service } from '../service/api';
import type { Budget } from '../text/budget';
import type { Addresses } from './addresses';
import type { OpenFile, OpenFiles } from './open-files';
import { fromPosition, toRange } from './ranges';
import { toFlatSymbols } from './symbols';

const tokenTypes = ['keyword', 'namespace', 'variable', 'parameter', 'event', 'property', 'function', 'number', 'type', 'enumMember'] as const;

const typeOf: Readonly<Record<SemanticToken['kind'], (typeof tokenTypes)[number]>> = {
  keyword: 'keyword',
  system: 'namespace',
  coordinate: 'variable',
  parameter: 'parameter',
  input: 'event',
  shorthand: 'property',
  function: 'function',
  number: 'number',
  unit: 'type',
  code: 'enumMember',
};

const kindOf: Readonly<Record<Completion['kind'], CompletionItemKind>> = {
  statement: CompletionItemKind.Keyword,
  symbol: CompletionItemKind.Variable,
  function: CompletionItemKind.Function,
  quantity: CompletionItemKind.Value,
  unit: CompletionItemKind.Unit,
  code: CompletionItemKind.Field,
};

/** What is offered while declarations are written and looked through. */
export const languageCapabilities = {
  completionProvider: { triggerCharacters: ['@', '[', '.', '='] },
  signatureHelpProvider: { triggerCharacters: ['(', ','] },
  definitionProvider: true,
  referencesProvider: true,
  renameProvider: { prepareProvider: true },
  documentHighlightProvider: true,
  foldingRangeProvider: true,
  workspaceSymbolProvider: true,
  semanticTokensProvider: { legend: { tokenTypes: [...tokenTypes], tokenModifiers: ['declaration'] }, full: true },
} satisfies ServerCapabilities;

interface FeatureContext {
  readonly connection: Connection;
  readonly service: Service;
  readonly addresses: Addresses;
  readonly files: OpenFiles;
  readonly enabled: () => boolean;
  readonly snippets: () => boolean;
  readonly budgetFor: (token: CancellationToken) => Budget;
  readonly guarded: <P extends unknown[], R>(what: string, fallback: R, handler: (...parameters: P) => R | Promise<R>) => (...parameters: P) => Promise<R>;
}

/** Answers what editors ask about the text of declarations. */
export function registerLanguageFeatures(context: FeatureContext): void {
  const { connection, service, addresses, files, guarded, budgetFor } = context;
  /** The time that loading a parser takes is not the budget's. */
  const openOf = async (uri: string): Promise<OpenFile | undefined> => {
    const open = files.get(uri);
    if (!open || !context.enabled() || !service.handles(open.file)) return undefined;
    await service.prepare(open.file);
    return open;
  };
  const location = (place: FileRange): Location => ({ uri: addresses.uriOf(place.file), range: toRange(place.range) });

  connection.onCompletion(
    guarded('completions', null, async ({ textDocument, position }) => {
      const open = await openOf(textDocument.uri);
      if (!open) return null;
      const items = await service.complete(open.file, fromPosition(position));
      return items.map((item, i) => completionItem(item, i, context.snippets()));
    }),
  );

  connection.onSignatureHelp(
    guarded('signature help', null, async ({ textDocument, position }) => {
      const open = await openOf(textDocument.uri);
      const signature = open && (await service.signature(open.file, fromPosition(position)));
      if (!signature) return null;
      const { label, description, parameters, active } = signature;
      return {
        signatures: [{ label, documentation: description, parameters: parameters.map((p) => ({ label: p })) }],
        activeSignature: 0,
        activeParameter: active,
      };
    }),
  );

  connection.onDefinition(
    guarded('the definition', null, async ({ textDocument, position }, token: CancellationToken) => {
      const open = await openOf(textDocument.uri);
      const place = open && (await service.definition(open.file, fromPosition(position), budgetFor(token)));
      return place ? location(place) : null;
    }),
  );

  connection.onReferences(
    guarded('references', null, async ({ textDocument, position, context: { includeDeclaration } }, token: CancellationToken) => {
      const open = await openOf(textDocument.uri);
      const found = open && (await service.references(open.file, fromPosition(position), budgetFor(token)));
      return found ? found.places.filter((p) => includeDeclaration || !p.isDeclaration).map(location) : null;
    }),
  );

  connection.onDocumentHighlight(
    guarded('highlights', null, async ({ textDocument, position }, token: CancellationToken) => {
      const open = await openOf(textDocument.uri);
      const found = open && (await service.references(open.file, fromPosition(position), budgetFor(token)));
      return found ? found.places.filter((p) => p.file === open.file).map((p) => ({ range: toRange(p.range) })) : null;
    }),
  );

  connection.onPrepareRename(
    guarded('renaming', null, async ({ textDocument, position }, token: CancellationToken) => {
      const open = await openOf(textDocument.uri);
      const found = open && (await service.references(open.file, fromPosition(position), budgetFor(token)));
      if (!found) return null;
      // In code the whole path is one use: what is renamed is the declared name.
      const declared = found.places.find((p) => p.isDeclaration);
      const at = declared && files.all().find((o) => o.file === declared.file)?.document.getText(toRange(declared.range));
      return { range: toRange(found.range), placeholder: at ?? found.name };
    }),
  );

  connection.onRenameRequest(async ({ textDocument, position, newName }, token) => {
    const open = await openOf(textDocument.uri);
    if (!open) return null;
    const result = await service.rename(open.file, fromPosition(position), newName, budgetFor(token));
    // A failure is for the user to read: editors show the message of the response.
    if ('failure' in result) return new ResponseError(-32803, result.failure);
    const changes: Record<string, TextEdit[]> = {};
    for (const { file, range, text } of result.edits) (changes[addresses.uriOf(file)] ??= []).push({ range: toRange(range), newText: text });
    return { changes } satisfies WorkspaceEdit;
  });

  connection.onFoldingRanges(
    guarded('folding ranges', null, async ({ textDocument }) => {
      const open = await openOf(textDocument.uri);
      if (!open) return null;
      const folds = await service.folds(open.file);
      return folds.map((f) => ({ startLine: f.startLine - 1, endLine: f.endLine - 1, kind: FoldingRangeKind.Comment }));
    }),
  );

  connection.onWorkspaceSymbol(
    guarded('workspace symbols', null, async ({ query }): Promise<SymbolInformation[] | null> => {
      if (!context.enabled()) return null;
      const found = await service.workspaceSymbols(query);
      return found.flatMap(({ file, symbol, system }) =>
        toFlatSymbols([{ ...symbol, children: [] }], addresses.uriOf(file), symbol.kind === 'system' ? undefined : system),
      );
    }),
  );

  connection.languages.semanticTokens.on(
    guarded('semantic tokens', { data: [] as number[] }, async ({ textDocument }) => {
      const open = await openOf(textDocument.uri);
      const builder = new SemanticTokensBuilder();
      for (const { range, kind, isDeclaration } of open ? await service.tokens(open.file) : []) {
        const { start, end } = toRange(range);
        builder.push(start.line, start.character, end.character - start.character, tokenTypes.indexOf(typeOf[kind]), isDeclaration ? 1 : 0);
      }
      return { data: builder.build().data };
    }),
  );
}

function completionItem(item: Completion, index: number, snippets: boolean): CompletionItem {
  const plain = (item.snippet ?? item.label).replace(/\$\{\d+:?([^}]*)\}/g, '$1');
  return {
    label: item.label,
    kind: kindOf[item.kind],
    detail: item.detail,
    sortText: String(index).padStart(4, '0'),
    filterText: item.label,
    insertTextFormat: snippets && item.snippet ? InsertTextFormat.Snippet : InsertTextFormat.PlainText,
    textEdit: { range: toRange(item.range), newText: snippets && item.snippet ? item.snippet : plain },
  };
}
