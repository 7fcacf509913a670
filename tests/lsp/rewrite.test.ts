import { readFileSync } from 'node:fs';
import type { CodeAction } from 'vscode-languageserver-protocol/node';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { createService } from '../../server/src/service';
import { inProcess, type TestClient } from './support/client';

const crane = readFileSync(new URL('../editor/workspace/crane.ts', import.meta.url), 'utf8');
const right = crane.replace('(ax * cosine - p.g', '(-ax * cosine - p.g');
const wrong = right.replace('- p.g * sine)', '+ p.g * sine)');
const uri = 'file:///yard/crane.ts';
let client: TestClient;
beforeEach(() => {
  client = inProcess(createService);
});
afterEach(() => client.stop());

async function actions(only?: string[]): Promise<CodeAction[]> {
  const line = wrong.slice(0, wrong.indexOf('+ p.g * sine')).split('\n').length - 1;
  const range = { start: { line, character: 6 }, end: { line, character: 6 } };
  return client.request<CodeAction[]>('textDocument/codeAction', { textDocument: { uri }, range, context: { diagnostics: [], ...(only ? { only } : {}) } });
}

test('the derived expression is offered as a rewrite, and makes the file right', async () => {
  const { capabilities } = await client.initialize();
  expect(capabilities.codeActionProvider).toEqual({ codeActionKinds: ['quickfix', 'refactor.rewrite'] });
  client.open(uri, wrong);
  await client.diagnostics(uri, 1);
  const [action] = await actions(['refactor']);
  expect(action).toMatchObject({ kind: 'refactor.rewrite', title: expect.stringContaining('with the derived expression for') });
  expect(action!.isPreferred).toBeUndefined();
  const edits = [...action!.edit!.changes![uri]!].reverse();
  let version = 1;
  for (const { range, newText } of edits) client.change(uri, ++version, newText, range);
  expect((await client.diagnostics(uri, version)).diagnostics).toEqual([]);
});

test('a client that asks for quick fixes gets no rewrite', async () => {
  await client.initialize();
  client.open(uri, wrong);
  await client.diagnostics(uri, 1);
  expect((await actions(['quickfix'])).every((a) => a.kind === 'quickfix')).toBe(true);
});
