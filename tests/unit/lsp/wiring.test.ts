import { mkdtempSync, realpathSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { inProcess, type TestClient } from '../../lsp/support/client';
import { ScriptedService } from './scripted-service';

const uri = 'file:///yard/crane.ts';
let client: TestClient;
let service: ScriptedService;

beforeEach(() => {
  client = inProcess((files) => (service = new ScriptedService(files)));
});
afterEach(() => client.stop());

/** Opens a document that declares something: others are not checked. */
function open(address: string, text: string, languageId?: string): void {
  client.open(address, `${text}\n@visviva`, languageId);
}

function change(address: string, version: number, text: string, range?: object): void {
  client.change(address, version, range ? text : `${text}\n@visviva`, range);
}

test('a finding becomes a diagnostic that leads to its claim', async () => {
  await client.initialize();
  open(uri, '  // @visviva crane\n  a = sign;');
  const { diagnostics, version } = await client.diagnostics(uri);
  expect(version).toBe(1);
  expect(diagnostics).toEqual([
    {
      range: { start: { line: 1, character: 6 }, end: { line: 1, character: 10 } },
      severity: 1,
      code: 'sign',
      source: 'visviva',
      message: 'scripted sign',
      relatedInformation: [
        {
          location: { uri, range: { start: { line: 0, character: 5 }, end: { line: 0, character: 19 } } },
          message: "claimed here: return[3] = th'' (crane)",
        },
      ],
    },
  ]);
});

test('unread is information', async () => {
  await client.initialize();
  open(uri, 'unread');
  expect((await client.diagnostics(uri)).diagnostics[0]!.severity).toBe(3);
});

test('edits are applied one by one, in ranges', async () => {
  await client.initialize();
  open(uri, 'a = si;\nb = 1;');
  const at = (line: number, from: number, to = from): object => ({
    start: { line, character: from },
    end: { line, character: to },
  });
  change(uri, 2, 'gn', at(0, 6));
  expect((await client.diagnostics(uri, 2)).diagnostics).toHaveLength(1);
  change(uri, 3, '', at(0, 4, 8));
  expect((await client.diagnostics(uri, 3)).diagnostics).toEqual([]);
  expect(service.texts.get('/yard/crane.ts')).toBe('a = ;\nb = 1;\n@visviva');
});

test('what did not change is not published again', async () => {
  await client.initialize();
  open(uri, 'sign');
  await client.status(uri, 1);
  change(uri, 2, 'sign ');
  await client.status(uri, 2);
  expect(client.published).toHaveLength(1);
});

test('an editor that tracks versions hears of each one', async () => {
  await client.initialize({ textDocument: { publishDiagnostics: { versionSupport: true } } });
  open(uri, 'sign');
  await client.status(uri, 1);
  change(uri, 2, 'sign ');
  await client.status(uri, 2);
  expect(client.published.map((p) => p.version)).toEqual([1, 2]);
});

test('closing clears, also while a check is running', async () => {
  await client.initialize();
  open(uri, 'sign');
  await client.status(uri, 1);
  change(uri, 2, 'sign slow');
  await client.until(() => service.checked.includes('sign slow') || undefined, 'the slow check');
  client.close(uri);
  await client.until(() => (client.shown(uri)?.diagnostics.length === 0 ? true : undefined), 'the clearing');
  await new Promise((done) => setTimeout(done, 100));
  expect(client.shown(uri)!.diagnostics).toEqual([]);
  expect(client.statuses.at(-1)).toEqual({ uri });
});

test('a result that an edit overtook is dropped, and its check stopped', async () => {
  await client.initialize();
  open(uri, 'slow sign sign');
  await client.until(() => service.checked.length > 0 || undefined, 'the first check');
  change(uri, 2, 'sign');
  expect((await client.diagnostics(uri, 2)).diagnostics).toHaveLength(1);
  expect(client.published.map((p) => p.version)).toEqual([2]);
  expect(service.stopped).toEqual(['slow sign sign']);
});

test('keystrokes of a slow file are gathered, those of a quick one are not', async () => {
  await client.initialize();
  open(uri, 'slow');
  await client.status(uri, 1);
  for (let version = 2; version <= 6; version++) change(uri, version, `slow ${version}`);
  await client.status(uri, 6);
  expect(service.checked).toEqual(['slow', 'slow 6']);
});

test('a check that ran out of time is repeated once, with more of it', async () => {
  await client.initialize({}, { initializationOptions: { timeLimit: 50 } });
  open(uri, 'heavy');
  expect((await client.diagnostics(uri)).diagnostics).toMatchObject([{ code: 'unread' }]);
  await client.until(() => (client.shown(uri)?.diagnostics.length === 0 ? true : undefined), 'the second check');
  expect(service.checked).toEqual(['heavy', 'heavy']);
});

test('a change in one file checks the open files that need it', async () => {
  const part = 'file:///yard/part.ts';
  await client.initialize();
  open(part, 'fine');
  open(uri, 'needs:/yard/part.ts');
  await client.status(uri, 1);
  change(part, 2, 'sign');
  await client.until(() => (client.shown(uri)?.diagnostics.length === 1 ? true : undefined), 'the dependent');
  client.close(part);
  await client.until(() => (client.shown(uri)?.diagnostics.length === 0 ? true : undefined), 'the dependent again');
});

test('a change on disk checks the open files that need it', async () => {
  const folder = realpathSync(mkdtempSync(join(tmpdir(), 'visviva-wiring-')));
  const part = join(folder, 'part.ts');
  writeFileSync(part, 'fine');
  await client.initialize({ workspace: { didChangeWatchedFiles: { dynamicRegistration: true } } });
  await client.until(() => client.registered[0], 'the registration');
  expect(client.registered).toEqual(['workspace/didChangeWatchedFiles']);
  open(uri, `needs:${part}`);
  await client.status(uri, 1);
  writeFileSync(part, 'sign');
  client.notify('workspace/didChangeWatchedFiles', { changes: [{ uri: pathToFileURL(part).href, type: 2 }] });
  await client.until(() => (client.shown(uri)?.diagnostics.length === 1 ? true : undefined), 'the dependent');
  rmSync(folder, { recursive: true });
});

test('a check that fails is logged and shown, and the next one works', async () => {
  await client.initialize();
  open(uri, 'throw');
  const { diagnostics } = await client.diagnostics(uri);
  expect(diagnostics).toMatchObject([{ severity: 3, code: 'unread', message: /could not be checked/ }]);
  expect(client.logged.join()).toMatch(/scripted failure/);
  change(uri, 2, 'sign');
  expect((await client.diagnostics(uri, 2)).diagnostics).toMatchObject([{ code: 'sign' }]);
});

test('a request that fails is logged and answered', async () => {
  await client.initialize();
  open(uri, 'throw');
  const answer = await client.request('textDocument/hover', {
    textDocument: { uri },
    position: { line: 0, character: 0 },
  });
  expect(answer).toBeNull();
  await client.until(() => client.logged.find((line) => line.includes('hover')), 'the log');
});

test('hover in markdown or plain text, as the editor can', async () => {
  await client.initialize({ textDocument: { hover: { contentFormat: ['plaintext'] } } });
  open(uri, 'abc');
  const hover = await client.request('textDocument/hover', { textDocument: { uri }, position: { line: 0, character: 0 } });
  expect(hover).toEqual({
    contents: { kind: 'plaintext', value: "crane has th''" },
    range: { start: { line: 0, character: 0 }, end: { line: 0, character: 3 } },
  });
});

test('symbols nested or flat, as the editor can', async () => {
  await client.initialize();
  open(uri, 'abc');
  const flat = await client.request('textDocument/documentSymbol', { textDocument: { uri } });
  expect(flat).toMatchObject([{ name: 'crane' }, { name: 'th', containerName: 'crane' }]);
});

test('settings: switched off means nothing is shown', async () => {
  client.settings = { enable: false };
  await client.initialize({ workspace: { configuration: true } });
  open(uri, 'sign');
  await client.until(() => client.statuses.find((s) => s.reason?.includes('switched off')), 'the reason');
  await client.until(() => (client.shown(uri)?.diagnostics.length === 0 ? true : undefined), 'the clearing');
  client.settings = { enable: true };
  client.notify('workspace/didChangeConfiguration', { settings: {} });
  await client.until(() => (client.shown(uri)?.diagnostics.length === 1 ? true : undefined), 'the finding');
});

test('a document without a file is known by its language', async () => {
  await client.initialize();
  open('untitled:Untitled-1', 'sign', 'javascript');
  expect((await client.diagnostics('untitled:Untitled-1')).diagnostics).toHaveLength(1);
});

test('a document that declares nothing is not even read', async () => {
  await client.initialize();
  client.open(uri, 'sign');
  expect((await client.status(uri, 1)).counts).toMatchObject({ differs: 0 });
  expect(service.checked).toEqual([]);
  change(uri, 2, 'sign');
  expect((await client.diagnostics(uri, 2)).diagnostics).toHaveLength(1);
});

test('a document that is not read says so in its status', async () => {
  await client.initialize();
  open('file:///yard/notes.txt', 'sign', 'plaintext');
  expect(await client.status('file:///yard/notes.txt', 1)).toMatchObject({ reason: 'Files of this kind are not read.' });
});

test.each([
  ['textDocument/hover', {}],
  ['textDocument/hover', null],
  ['textDocument/hover', { textDocument: { uri: 'no address' }, position: { line: -5, character: 1e9 } }],
  ['textDocument/documentSymbol', { textDocument: { uri: 7 } }],
  ['textDocument/didOpen', { textDocument: null }],
  ['textDocument/didChange', { textDocument: { uri }, contentChanges: 'all' }],
  ['textDocument/didClose', {}],
  ['workspace/didChangeWatchedFiles', { changes: [{ uri: 'file://%%', type: 99 }, { uri: 4 }] }],
  ['workspace/didChangeConfiguration', 12],
  ['visviva/none', {}],
])('nonsense does no harm: %s %j', async (method, params) => {
  await client.initialize();
  client.notify(method, params);
  await client.request(method, params).catch(() => undefined);
  open(uri, 'sign');
  expect((await client.diagnostics(uri)).diagnostics).toHaveLength(1);
});
