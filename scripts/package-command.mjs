/**
 * Makes the command's own npm package in a folder: the bundles that it loads, nothing to install beside it, no scripts.
 * `node scripts/package-command.mjs FOLDER`, then `npm publish FOLDER`.
 */
import { cp, mkdir, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';
import { buildAll } from './build.mjs';

const root = fileURLToPath(new URL('..', import.meta.url));

export async function packageCommand(folder) {
  const built = join(folder, 'dist');
  await rm(folder, { recursive: true, force: true });
  await mkdir(folder, { recursive: true });
  await buildAll({ production: true, outdir: built });
  // The extension is a package of its own.
  for (const name of await readdir(built)) if (name.startsWith('client.')) await rm(join(built, name));
  for (const name of ['README.md', 'LICENSE', 'CHANGELOG.md']) await cp(join(root, name), join(folder, name));
  await cp(join(root, 'docs'), join(folder, 'docs'), { recursive: true });
  await cp(join(root, 'media', 'visviva.schema.json'), join(folder, 'visviva.schema.json'));
  const { name, version, description, license, keywords, engines } = JSON.parse(await readFile(join(root, 'package.json'), 'utf8'));
  const manifest = {
    name,
    version,
    description,
    license,
    keywords,
    type: 'module',
    bin: { visviva: 'dist/visviva.mjs' },
    engines: { node: engines.node },
    files: ['dist', 'docs', 'visviva.schema.json'],
  };
  await writeFile(join(folder, 'package.json'), `${JSON.stringify(manifest, null, 2)}\n`);
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  if (!process.argv[2]) {
    console.error('Name the folder that the package is to be made in.');
    process.exitCode = 2;
  } else await packageCommand(resolve(process.argv[2]));
}
