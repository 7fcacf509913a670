import { fork, spawn } from 'node:child_process';
import { cpSync, mkdtempSync, readFileSync, realpathSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import {
  createMessageConnection,
  IPCMessageReader,
  IPCMessageWriter,
  type CodeAction,
  type DocumentSymbol,
  type Hover,
} from 'vscode-languageserver-protocol/node';
import { suggestRequest, type Suggestion } from '@visviva/shared';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { built, builtServer, TestClient } from './support/client';

const workspace = new URL('../editor/workspace/', import.meta.url);
const crane = readFileSync(new URL('crane.ts', workspace), 'utf8');
const right = crane.replace('(ax * cosine - p.g', '(-ax * cosine - p.g');
const uri = 'file:///yard/crane.ts';
const rich = {
  textDocument: {
    publishDiagnostics: { versionSupport: true, relatedInformation: true },
    documentSymbol: { hierarchicalDocumentSymbolSupport: true },
    hover: { contentFormat: ['markdown'] },
  },
};

describe('the built server, over standard input and output', () => {
  let client: TestClient;
  beforeEach(() => {
    client = built();
  });
  afterEach(() => client.stop());

  test('says what it can', async () => {
    const { capabilities } = await client.initialize(rich);
    expect(capabilities).toMatchObject({ textDocumentSync: { change: 2 }, hoverProvider: true, documentSymbolProvider: true });
  });

  test('finds a wrong sign at its place, and nothing in right code', async () => {
    await client.initialize(rich);
    client.open(uri, crane);
    const { diagnostics } = await client.diagnostics(uri, 1);
    expect(diagnostics.length).toBeGreaterThan(0);
    for (const diagnostic of diagnostics) {
      expect(diagnostic).toMatchObject({ severity: 1, source: 'visviva' });
      expect(lineOf(crane, diagnostic.relatedInformation![0]!.location.range.start.line)).toContain('checks');
    }
    client.change(uri, 2, right);
    expect((await client.diagnostics(uri, 2)).diagnostics).toEqual([]);
    expect((await client.status(uri, 2)).counts).toEqual({ systems: 1, holds: 4, differs: 0, unread: 0, problems: 0 });
  });

  test('follows single keystrokes', async () => {
    await client.initialize(rich);
    client.open(uri, right);
    expect((await client.diagnostics(uri, 1)).diagnostics).toEqual([]);
    const line = right.slice(0, right.indexOf('(-ax * cosine')).split('\n').length - 1;
    const character = lineOf(right, line).indexOf('-ax');
    client.change(uri, 2, '', { start: { line, character }, end: { line, character: character + 1 } });
    expect((await client.diagnostics(uri, 2)).diagnostics.length).toBeGreaterThan(0);
    client.change(uri, 3, '-', { start: { line, character }, end: { line, character } });
    expect((await client.diagnostics(uri, 3)).diagnostics).toEqual([]);
  });

  test('the repair of a wrong sign makes the file right', async () => {
    await client.initialize(rich);
    const wrong = right.replace('- p.g * sine)', '+ p.g * sine)');
    client.open(uri, wrong);
    // The verdict comes first, the place of the fault and its repair after a pause.
    let action: CodeAction | undefined;
    for (let k = 0; k < 100 && !action; k++) {
      await new Promise((next) => setTimeout(next, 50));
      const { diagnostics } = await client.diagnostics(uri, 1);
      const context = { diagnostics };
      const range = diagnostics[0]!.range;
      const actions = await client.request<CodeAction[]>('textDocument/codeAction', { textDocument: { uri }, range, context });
      action = actions.find((a) => a.kind === 'quickfix');
    }
    expect(action).toMatchObject({ kind: 'quickfix', diagnostics: [{ source: 'visviva' }] });
    for (const { range, newText } of action!.edit!.changes![uri]!) client.change(uri, 2, newText, range);
    expect((await client.diagnostics(uri, 2)).diagnostics).toEqual([]);
  });

  test('counts columns in UTF-16 units, with emoji, Greek and tabs before the place, and CRLF line ends', async () => {
    const odd = crane
      .replace('const ath =', "\t/* 🎡🎢 θ̈ */ const ath =")
      .replaceAll('\n', '\r\n');
    await client.initialize(rich);
    client.open(uri, crane);
    const plain = (await client.diagnostics(uri, 1)).diagnostics[0]!.range;
    client.open('file:///yard/odd.ts', odd);
    const shifted = (await client.diagnostics('file:///yard/odd.ts', 1)).diagnostics[0]!.range;
    const shift = plain.start.line === lineWith(crane, 'const ath') ? "\t/* 🎡🎢 θ̈ */ ".length : 0;
    expect(shifted.start).toEqual({ line: plain.start.line, character: plain.start.character + shift });
  });

  test('hover on the declaration names the system and gives its equations', async () => {
    await client.initialize(rich);
    client.open(uri, crane);
    const line = lineWith(crane, '@visviva');
    const hover = await client.request<Hover>('textDocument/hover', {
      textDocument: { uri },
      position: { line, character: lineOf(crane, line).indexOf('quay') + 1 },
    });
    expect(hover.contents).toMatchObject({ kind: 'markdown', value: expect.stringContaining('quay-crane') });
    expect((hover.contents as { value: string }).value).toContain("th''");
  });

  test('no hover where there is nothing to say', async () => {
    await client.initialize(rich);
    client.open(uri, crane);
    const hover = await client.request('textDocument/hover', { textDocument: { uri }, position: { line: 0, character: 2 } });
    expect(hover).toBeNull();
  });

  test('symbols: the system with its coordinates, parameters and inputs', async () => {
    await client.initialize(rich);
    client.open(uri, crane);
    const symbols = await client.request<DocumentSymbol[]>('textDocument/documentSymbol', { textDocument: { uri } });
    const system = symbols.find((symbol) => symbol.name.includes('quay-crane'))!;
    const names = system.children!.map((child) => child.name);
    expect(names).toEqual(expect.arrayContaining(['x', 'th', 'M', 'm', 'l', 'g', 'F']));
    for (const { range, selectionRange } of [system, ...system.children!]) {
      expect(selectionRange.start.line).toBeGreaterThanOrEqual(range.start.line);
      expect(selectionRange.end.line).toBeLessThanOrEqual(range.end.line);
    }
  });

  test('a first declaration for the function at the cursor', async () => {
    await client.initialize(rich);
    const code = 'export function swing(th, thDot, m, l, g) {\n  return [thDot, -g / l * Math.sin(th)];\n}\n';
    client.open(uri, `const a = 1;\n${code}`);
    const suggestion = await client.request<Suggestion>(suggestRequest, { textDocument: { uri }, position: { line: 2, character: 4 } });
    expect(suggestion).toMatchObject({ function: 'swing', version: 1, line: 1 });
    expect(suggestion.text).toMatch(/@visviva[^]*coordinates\s+th/);
    const none = await client.request(suggestRequest, { textDocument: { uri: 'file:///yard/none.ts' }, position: { line: 0, character: 0 } });
    expect(none).toBeNull();
  });

  test('closing clears', async () => {
    await client.initialize(rich);
    client.open(uri, crane);
    await client.diagnostics(uri, 1);
    client.close(uri);
    await client.until(() => (client.shown(uri)!.diagnostics.length === 0 ? true : undefined), 'the clearing');
  });

  test('half-typed code at every point of the file does no harm', async () => {
    await client.initialize(rich);
    client.open(uri, '');
    let version = 1;
    for (let end = 1; end <= crane.length; end += 7) client.change(uri, ++version, crane.slice(0, end));
    client.change(uri, ++version, right);
    expect((await client.diagnostics(uri, version)).diagnostics).toEqual([]);
    expect(client.logged).toEqual([]);
  });

  test.each([
    ['an unclosed block', '/** @visviva x\n * coordinates q'],
    ['500 brackets', `/** @visviva x\n * coordinates q\n * T = ${'('.repeat(500)}q'${')'.repeat(500)}\n */`],
    ['names of every object', '/** @visviva __proto__\n * coordinates constructor, __proto__\n * T = 1/2*toString*constructor\'^2\n */'],
    ['division by zero', "/** @visviva x\n * coordinates q\n * T = q'^2/0\n * checks return = q''\n */\nfunction f(q) { return 0 / 0; }"],
    ['no code at all', '\0\u0001\uffff\ud800'],
    ['a long line', `// @visviva ${'x'.repeat(200_000)}`],
  ])('survives %s', async (_, text) => {
    await client.initialize(rich);
    client.open(uri, text);
    await client.diagnostics(uri, 1);
    client.change(uri, 2, right);
    expect((await client.diagnostics(uri, 2)).diagnostics).toEqual([]);
  });

  test('a change of an imported file on disk is seen', async () => {
    const folder = realpathSync(mkdtempSync(join(tmpdir(), 'visviva-server-')));
    cpSync(workspace, folder, { recursive: true });
    const helper = join(folder, 'helper.ts');
    writeFileSync(helper, 'export const pull = (ax: number, c: number): number => ax * c;\n');
    const text = `import { pull } from './helper';\n${crane.replace('(ax * cosine - p.g', '(-pull(ax, cosine) - p.g')}`;
    const user = pathToFileURL(join(folder, 'user.ts')).href;
    await client.initialize(rich, { workspaceFolders: [{ uri: pathToFileURL(folder).href, name: 'yard' }] });
    client.open(user, text);
    expect((await client.diagnostics(user, 1)).diagnostics).toEqual([]);
    writeFileSync(helper, 'export const pull = (ax: number, c: number): number => -ax * c;\n');
    client.notify('workspace/didChangeWatchedFiles', { changes: [{ uri: pathToFileURL(helper).href, type: 2 }] });
    await client.until(() => (client.shown(user)!.diagnostics.length > 0 ? true : undefined), 'the finding');
    rmSync(folder, { recursive: true, force: true });
  });
});

test('the built server, over the channel between processes that the extension uses', async () => {
  const child = fork(builtServer, ['--node-ipc'], { stdio: 'inherit' });
  const client = new TestClient(createMessageConnection(new IPCMessageReader(child), new IPCMessageWriter(child)), child);
  await client.initialize(rich);
  client.open(uri, crane);
  expect((await client.diagnostics(uri, 1)).diagnostics.length).toBeGreaterThan(0);
  await client.stop();
  expect(child.exitCode).toBe(0);
});

test('bytes that are no message end the server with a failure, not a hang', async () => {
  const child = spawn(process.execPath, [builtServer, '--stdio'], { stdio: ['pipe', 'pipe', 'pipe'] });
  child.stdin.end('this is no message\r\n\r\n');
  const code = await new Promise((done) => child.once('exit', done));
  expect(code).not.toBe(0);
});

function lineOf(text: string, line: number): string {
  return text.split('\n')[line]!;
}

function lineWith(text: string, part: string): number {
  return text.split('\n').findIndex((line) => line.includes(part));
}
