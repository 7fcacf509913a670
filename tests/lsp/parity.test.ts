import { readFileSync } from 'node:fs';
import { fileURLToPath, pathToFileURL } from 'node:url';
import { join } from 'node:path';
import type { Report } from '@visviva/shared';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { visviva } from '../cli/support/command';
import { built, type TestClient } from './support/client';

const folder = fileURLToPath(new URL('../../sample-workspace', import.meta.url));

interface Shown {
  line: number;
  column: number;
  code: string;
  message: string;
}

/** What the command says about a file, each finding once. */
function fromReport(report: Report, file: string): Shown[] {
  const all = [
    ...report.claims.filter((c) => c.file === file).flatMap((c) => c.findings),
    ...report.problems.filter((p) => p.file === file),
  ].map((f) => ({ line: f.range.start.line, column: f.range.start.column, code: f.code, message: f.message }));
  return distinct(all);
}

function distinct(all: Shown[]): Shown[] {
  const order = (s: Shown) => JSON.stringify([s.line, s.column, s.code, s.message]);
  return [...new Map(all.map((s) => [order(s), s])).values()].sort((a, b) => order(a).localeCompare(order(b)));
}

let client: TestClient;
beforeAll(async () => {
  client = built();
  await client.initialize(
    { textDocument: { publishDiagnostics: { versionSupport: true } } },
    { workspaceFolders: [{ uri: pathToFileURL(folder).href, name: 'sample' }] },
  );
});
afterAll(() => client.stop());

test('the command and the editor say the same of every file of the sample workspace', async () => {
  const report = JSON.parse(visviva(folder, 'check', '.', '--format', 'json').out) as Report;
  const files = [...new Set(report.claims.map((c) => c.file))];
  expect(files.length).toBeGreaterThan(7);
  let compared = 0;
  for (const file of files) {
    const uri = pathToFileURL(join(folder, file)).href;
    client.open(uri, readFileSync(join(folder, file), 'utf8'), file.endsWith('.js') ? 'javascript' : 'typescript');
    const wanted = fromReport(report, file);
    // Verdicts come first, the place of the fault and its repair after a pause.
    const shown = await client.until(() => {
      const last = client.shown(uri);
      if (!last) return undefined;
      const now = distinct(
        last.diagnostics.map((d) => ({
          line: d.range.start.line + 1,
          column: d.range.start.character + 1,
          code: String(d.code),
          message: typeof d.message === 'string' ? d.message : d.message.value,
        })),
      );
      return JSON.stringify(now) === JSON.stringify(wanted) ? now : undefined;
    }, `${file} to show ${JSON.stringify(wanted)}; it shows ${JSON.stringify(client.shown(uri)?.diagnostics)}`);
    expect(shown).toEqual(wanted);
    compared += shown.length;
  }
  expect(compared).toBeGreaterThan(3);
});
