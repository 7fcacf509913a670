import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import type { Report } from '@visviva/shared';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { Folder, rope, WRONG } from '../cli/support/command';
import { built, type TestClient } from './support/client';

const accepted = rope(WRONG, 'accepted').replace('  return [', '  // visviva: accept sign because the winch turns the other way\n  return [');
const folder = new Folder({
  'visviva.json': JSON.stringify({ exclude: ['old/'], severity: { sign: 'note' } }),
  'old/out.ts': rope(WRONG, 'out'),
  'noted.ts': rope(WRONG, 'noted'),
  'accepted.ts': accepted,
});
const files = ['old/out.ts', 'noted.ts', 'accepted.ts'];

let client: TestClient;
beforeAll(async () => {
  client = built();
  await client.initialize(
    { textDocument: { publishDiagnostics: { versionSupport: true } } },
    { workspaceFolders: [{ uri: pathToFileURL(folder.path).href, name: 'quay' }] },
  );
});
afterAll(async () => {
  await client.stop();
  folder[Symbol.dispose]();
});

const SEVERITY = { error: 1, warning: 2, note: 3 };

/** What the command counts in each file, and how much. */
function fromCommand(): Record<string, string[]> {
  const { claims } = JSON.parse(folder.run('check', '--format', 'json').out) as Report;
  const of = (file: string) =>
    claims.filter((c) => c.file === file).flatMap((c) => c.findings).filter((f) => !f.accepted).map((f) => `${f.code} ${SEVERITY[f.severity ?? 'error']}`);
  return Object.fromEntries(files.map((file) => [file, of(file)]));
}

async function shows(wanted: Record<string, string[]>): Promise<void> {
  for (const file of files) {
    const uri = pathToFileURL(join(folder.path, file)).href;
    await client.until(() => {
      const now = client.shown(uri)?.diagnostics.map((d) => `${String(d.code)} ${d.severity}`);
      return JSON.stringify(now) === JSON.stringify(wanted[file]) ? now : undefined;
    }, `${file} to show ${JSON.stringify(wanted[file])}; it shows ${JSON.stringify(client.shown(uri)?.diagnostics)}`);
  }
}

test('editor and command read the same settings, and follow when they change', async () => {
  for (const file of files) client.open(pathToFileURL(join(folder.path, file)).href, folder.read(file), 'typescript');
  const before = fromCommand();
  expect(before).toEqual({ 'old/out.ts': [], 'noted.ts': ['sign 3'], 'accepted.ts': [] });
  await shows(before);

  writeFileSync(join(folder.path, 'visviva.json'), JSON.stringify({ severity: { sign: 'warning' } }));
  client.notify('workspace/didChangeWatchedFiles', { changes: [{ uri: pathToFileURL(join(folder.path, 'visviva.json')).href, type: 2 }] });
  const after = fromCommand();
  expect(after).toEqual({ 'old/out.ts': ['sign 2'], 'noted.ts': ['sign 2'], 'accepted.ts': [] });
  await shows(after);
});
