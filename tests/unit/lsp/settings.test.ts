import { afterEach, beforeEach, expect, test } from 'vitest';
import { isExcluded } from '../../../server/src/host/exclude';
import { inProcess, type TestClient } from '../../lsp/support/client';
import { ScriptedService } from './scripted-service';

const uri = 'file:///yard/crane.ts';
let client: TestClient;
beforeEach(() => {
  client = inProcess((files) => new ScriptedService(files));
});
afterEach(() => client.stop());

const shown = async (settings: object): Promise<(number | undefined)[]> => {
  await client.initialize({}, { initializationOptions: settings });
  client.open(uri, 'sign unread\n@visviva');
  await client.status(uri, 1);
  return (client.shown(uri)?.diagnostics ?? []).map((d) => d.severity);
};

test('findings are shown as the settings say', async () => {
  expect(await shown({ severity: { differs: 'warning', unread: 'hint' } })).toEqual([2, 4]);
});

test('what is set to none is not shown; what makes no sense counts as not set', async () => {
  expect(await shown({ severity: { differs: 'loud', unread: 'none' } })).toEqual([1]);
});

test('with checks on saving, typing changes nothing until the file is saved', async () => {
  await client.initialize({}, { initializationOptions: { checkOn: 'save' } });
  client.open(uri, 'sign\n@visviva');
  await client.status(uri, 1);
  client.change(uri, 2, 'fine\n@visviva');
  client.notify('textDocument/didSave', { textDocument: { uri } });
  await client.status(uri, 2);
  expect(client.shown(uri)!.diagnostics).toEqual([]);
  client.change(uri, 3, 'sign\n@visviva');
  await new Promise((next) => setTimeout(next, 150));
  expect(client.statuses.some((s) => s.version === 3)).toBe(false);
});

test('files are left out by patterns, seen from their folder', () => {
  expect(isExcluded('/yard/vendor/a.ts', ['/yard'], ['vendor/'])).toBe(true);
  expect(isExcluded('/yard/src/a.gen.ts', ['/yard'], ['*.gen.ts', '!keep.gen.ts'])).toBe(true);
  expect(isExcluded('/yard/keep.gen.ts', ['/yard'], ['*.gen.ts', '!keep.gen.ts'])).toBe(false);
  expect(isExcluded('/elsewhere/vendor/a.ts', ['/yard'], ['vendor/'])).toBe(false);
});
