import { readFileSync } from 'node:fs';
import { expect, test } from 'vitest';
import { watchedFiles } from '../../../server/src/lsp/server';
import { languages } from '../../../server/src/languages';
import { version } from '../../../shared/src';

const root = new URL('../../../', import.meta.url);
const text = (file: string): string => readFileSync(new URL(file, root), 'utf8');
const manifest = JSON.parse(text('package.json')) as {
  version: string;
  activationEvents: string[];
  contributes: { configuration: { properties: Record<string, { default: unknown }> } };
};

/** The editor's own languages are known to it by these names; `.visviva` is contributed, which activates by itself. */
test.each(languages.map((language) => language.id).filter((id) => id !== 'visviva'))(
  'the extension starts for %s, and passes it on',
  (id) => {
    expect(manifest.activationEvents).toContain(`onLanguage:${id}`);
    expect(text('client/src/checker-client.ts')).toContain(`'${id}'`);
    expect(text('server/src/lsp/addresses.ts')).toMatch(new RegExp(`\\b${id}: '\\.`));
  },
);

test('files of every language are watched', () => {
  for (const extension of languages.flatMap((language) => language.extensions)) {
    expect(watchedFiles).toMatch(new RegExp(`[{,]${extension.slice(1)}[,}]`));
  }
});

test('the version is stated once', () => expect(version).toBe(manifest.version));

test('the lock file names no registry', () => {
  expect(text('package-lock.json')).not.toMatch(/"resolved": "https?:/);
  expect(text('tests/editor/host/package-lock.json')).not.toMatch(/"resolved": "https?:/);
});
