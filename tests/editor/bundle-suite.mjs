import { build } from 'esbuild';
import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** Bundles the suite into a folder as the CommonJS module that an extension host loads; gives its path. */
export async function bundleSuite(folder) {
  mkdirSync(folder, { recursive: true });
  writeFileSync(join(folder, 'package.json'), '{ "type": "commonjs" }\n');
  const outfile = join(folder, 'index.js');
  await build({
    entryPoints: [fileURLToPath(new URL('suite/index.ts', import.meta.url))],
    outfile,
    bundle: true,
    platform: 'node',
    target: 'node20',
    format: 'cjs',
    external: ['vscode'],
    logLevel: 'warning',
  });
  return outfile;
}
