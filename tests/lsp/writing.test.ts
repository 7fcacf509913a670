import { readFileSync } from 'node:fs';
import type { CompletionItem, Location, SymbolInformation, WorkspaceEdit } from 'vscode-languageserver-protocol/node';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { createService } from '../../server/src/service';
import { inProcess, type TestClient } from './support/client';

const crane = readFileSync(new URL('../editor/workspace/crane.ts', import.meta.url), 'utf8');
const uri = 'file:///yard/crane.ts';
const lines = crane.split('\n');
let client: TestClient;

beforeEach(async () => {
  client = inProcess(createService);
  await client.initialize({ textDocument: { completion: { completionItem: { snippetSupport: true } } } });
  client.open(uri, crane);
});
afterEach(() => client.stop());

/** A request at a word of a line. */
function at<T>(method: string, line: string, word: string, more: object = {}): Promise<T> {
  const number = lines.findIndex((l) => l.includes(line));
  return client.request<T>(method, { textDocument: { uri }, position: { line: number, character: lines[number]!.indexOf(word) }, ...more });
}

const lineText = (l: { range: { start: { line: number } } }): string => lines[l.range.start.line]!;

test('completion comes with snippets and replaces what is typed', async () => {
  const line = lines.findIndex((l) => l.includes('gravity (0'));
  client.change(uri, 2, ' * sp', { start: { line, character: 0 }, end: { line, character: lines[line]!.length } });
  const items = await client.request<CompletionItem[]>('textDocument/completion', { textDocument: { uri }, position: { line, character: 5 } });
  expect(items.find((i) => i.label === 'spring')).toMatchObject({
    insertTextFormat: 2,
    textEdit: { range: { start: { line, character: 3 }, end: { line, character: 5 } } },
  });
});

test('a symbol of the code leads to its declaration', async () => {
  const place = await at<Location>('textDocument/definition', 'const moving', 'p.trolley');
  expect(place.uri).toBe(uri);
  expect(lineText(place)).toContain('parameters');
});

test('references with and without the declaration', async () => {
  const all = await at<Location[]>('textDocument/references', '* gravity', 'g)', { context: { includeDeclaration: true } });
  const used = await at<Location[]>('textDocument/references', '* gravity', 'g)', { context: { includeDeclaration: false } });
  expect(all.length).toBe(used.length + 1);
  expect(all.map(lineText).join('\n')).toContain('const ath');
});

test('a renamed input changes the declaration and the parameter', async () => {
  expect(await at('textDocument/prepareRename', '* inputs', 'F')).toMatchObject({ placeholder: 'F' });
  const { changes } = await at<WorkspaceEdit>('textDocument/rename', '* inputs', 'F', { newName: 'push' });
  expect(changes![uri]!.map((e) => lineText(e).trim().split(' ').slice(0, 3).join(' '))).toEqual(
    expect.arrayContaining(['* inputs ', '* Q[x] =', 'export function rates(s:', 'const ax =']),
  );
});

test('a name that can not be is refused in words', async () => {
  await expect(at('textDocument/rename', '* inputs', 'F', { newName: 'm' })).rejects.toThrow('declared already');
});

test('folds, colours and symbols of the project', async () => {
  expect(await client.request('textDocument/foldingRange', { textDocument: { uri } })).toMatchObject([{ kind: 'comment' }]);
  const { data } = await client.request<{ data: number[] }>('textDocument/semanticTokens/full', { textDocument: { uri } });
  expect(data.length % 5).toBe(0);
  expect(data.length).toBeGreaterThan(100);
  expect(await client.request<SymbolInformation[]>('workspace/symbol', { query: 'quay' })).toEqual([]);
});
