import { ESLint } from 'eslint';
import { readdirSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { directions } from '../../../scripts/lint/directions.mjs';
import { importDirections } from '../../../scripts/lint/import-directions.mjs';

const root = new URL('../../../', import.meta.url).pathname;

/** Lints a text as if it stood in a file of the repository; only the rule about import directions speaks. */
async function faults(file: string, text: string): Promise<string[]> {
  const tseslint = (await import('typescript-eslint')).default;
  const eslint = new ESLint({
    cwd: root,
    overrideConfigFile: true,
    overrideConfig: [
      {
        files: ['**/*.ts'],
        languageOptions: { parser: tseslint.parser as never },
        plugins: { visviva: { rules: { 'import-directions': importDirections as never } } },
        rules: { 'visviva/import-directions': 'error' },
      },
    ],
  });
  const [result] = await eslint.lintText(text, { filePath: `${root}${file}` });
  return result!.messages.map((message) => message.messageId ?? message.message);
}

describe('imports go one way', () => {
  test.each([
    ['server/src/text/a.ts', "import { x } from '../expression/graph';"],
    ['server/src/expression/operators/a.ts', "import type { x } from '../../notation/tree';"],
    ['server/src/program/a.ts', "export * from '../mechanics/system';"],
    ['server/src/languages/typescript/a.ts', "export { x } from '../../comparison/verdict';"],
    ['server/src/service/a.ts', "import { x } from '../host/files';"],
    ['server/src/host/a.ts', "import { x } from '../service/index';"],
    ['server/src/lsp/a.ts', "const x = await import('../cli/main');"],
    ['server/src/comparison/a.ts', "type X = import('../diagnosis/finding').X;"],
    ['client/src/a.ts', "import { x } from '@visviva/server/text/span';"],
    ['client/src/a.ts', "import { x } from '../../server/src/text/span';"],
    ['shared/src/a.ts', "import { x } from '../../server/src/text/span';"],
  ])('%s: %s', async (file, text) => expect(await faults(file, text)).toEqual(['direction']));

  test.each([
    ['server/src/service/a.ts', "import { readFileSync } from 'node:fs';"],
    ['server/src/workspace/a.ts', "import { readFileSync } from 'fs';"],
    ['server/src/program/a.ts', "const fs = require('fs/promises');"],
    ['client/src/a.ts', "import { join } from 'node:path';"],
  ])('no input or output there: %s: %s', async (file, text) => expect(await faults(file, text)).toEqual(['node']));

  test.each([
    ['server/src/service/a.ts', "import { Range } from 'vscode-languageserver';"],
    ['server/src/cli/a.ts', "import { Range } from 'vscode-languageserver/node';"],
    ['server/src/mechanics/a.ts', "import ts from 'typescript';"],
    ['client/src/a.ts', "import picocolors from 'picocolors';"],
  ])('no such package there: %s: %s', async (file, text) => expect(await faults(file, text)).toEqual(['package']));

  test('a folder that nobody has placed', async () =>
    expect(await faults('server/src/elsewhere/a.ts', "import { x } from '../text/span';")).toEqual(['unknown']));

  test.each([
    ['server/src/expression/a.ts', "import { x } from '../text/span'; import { y } from './graph';"],
    ['server/src/service/a.ts', "import { x } from '../diagnosis/codes/sign'; import type { R } from '@visviva/shared';"],
    ['server/src/host/a.ts', "import fs from 'node:fs'; import type { Files } from '../service/api';"],
    ['server/src/lsp/a.ts', "import { x } from '../service'; import { c } from 'vscode-languageserver/node';"],
    ['client/src/a.ts', "import { S } from '@visviva/shared'; import * as vscode from 'vscode';"],
    ['tests/unit/a.ts', "import fs from 'node:fs'; import { x } from '../../server/src/cli/main';"],
  ])('allowed: %s: %s', async (file, text) => expect(await faults(file, text)).toEqual([]));
});

test('every folder of the server has its place', () => {
  const folders = readdirSync(`${root}server/src`, { withFileTypes: true }).filter((entry) => entry.isDirectory());
  for (const { name } of folders) expect(Object.keys(directions)).toContain(`server/src/${name}`);
});

test('the table itself has no circle', () => {
  const from = (folder: string): readonly string[] => directions[`server/src/${folder}`]?.from ?? [];
  const visit = (folder: string, path: string[]): void => {
    expect(path).not.toContain(folder);
    for (const next of from(folder)) visit(next, [...path, folder]);
  };
  for (const folder of Object.keys(directions)) visit(folder.replace('server/src/', ''), []);
});
