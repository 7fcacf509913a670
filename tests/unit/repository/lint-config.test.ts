import { ESLint } from 'eslint';
import { mkdirSync, mkdtempSync, realpathSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { afterAll, beforeAll, expect, test } from 'vitest';
import config from '../../../eslint.config.mjs';

let root: string;
beforeAll(() => {
  root = realpathSync(mkdtempSync(join(tmpdir(), 'visviva-lint-')));
});
afterAll(() => rmSync(root, { recursive: true, force: true }));

/** Lints real files under the repository's configuration: imports between them are followed. */
async function rulesBroken(files: Record<string, string>): Promise<string[]> {
  for (const [name, text] of Object.entries(files)) {
    mkdirSync(dirname(join(root, name)), { recursive: true });
    writeFileSync(join(root, name), text);
  }
  writeFileSync(join(root, 'tsconfig.json'), '{ "compilerOptions": { "strict": true }, "include": ["**/*.ts"] }');
  const eslint = new ESLint({ cwd: root, overrideConfigFile: true, overrideConfig: config });
  const results = await eslint.lintFiles(['**/*.ts']);
  return results
    .flatMap((result) => result.messages.map((message) => `${message.ruleId ?? message.message}`))
    .sort();
}

test('the configuration finds circles, wrong ways, impurity, long files and forgotten promises', async () => {
  const broken = await rulesBroken({
    'server/src/text/one.ts': "import { two } from './two';\nexport const one = (): number => two() + Math.random();\n",
    'server/src/text/two.ts': "import { one } from './one';\nexport const two = (): number => one();\n",
    'server/src/text/three.ts': "import { join } from 'node:path';\nexport const three = join('a');\n",
    'server/src/text/long.ts': '// filling\n'.repeat(451) + 'export const long = 1;\n',
    'server/src/lsp/forgotten.ts': 'export function start(): void {\n  Promise.resolve(1);\n}\n',
    'server/src/text/good.ts': "import type { long } from './long';\nexport type Good = typeof long;\n",
  });
  expect(broken).toEqual([
    '@typescript-eslint/no-floating-promises',
    'import-x/no-cycle',
    'import-x/no-cycle',
    'max-lines',
    'no-restricted-properties',
    'visviva/import-directions',
  ]);
});
