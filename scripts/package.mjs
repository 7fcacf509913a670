/** Packs the extension into a .vsix: only what runs, no packages beside the bundles. Prints the file's path. */
import { createVSIX } from '@vscode/vsce';
import { mkdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

const root = fileURLToPath(new URL('..', import.meta.url));

export async function packageExtension(folder = root) {
  const { name, version } = JSON.parse(readFileSync(join(root, 'package.json'), 'utf8'));
  mkdirSync(folder, { recursive: true });
  const packagePath = join(folder, `${name}-${version}.vsix`);
  await createVSIX({ cwd: root, packagePath, dependencies: false, allowMissingRepository: true, rewriteRelativeLinks: false });
  return packagePath;
}

if (process.argv[1] === fileURLToPath(import.meta.url)) console.log(await packageExtension());
