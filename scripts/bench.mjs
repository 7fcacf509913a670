/** Runs the benches of tests/bench, each in its own process: `npm run bench [NAME...]`. */
import { spawnSync } from 'node:child_process';
import { mkdirSync, readdirSync } from 'node:fs';
import { basename, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { build } from 'esbuild';

const root = fileURLToPath(new URL('..', import.meta.url));
const folder = join(root, 'tests', 'bench');
const outdir = join(root, '.artifacts', 'bench');
const wanted = process.argv.slice(2);
const names = readdirSync(folder)
  .filter((file) => file.endsWith('.ts'))
  .map((file) => basename(file, '.ts'))
  .filter((name) => wanted.length === 0 || wanted.includes(name));

mkdirSync(outdir, { recursive: true });
await build({
  absWorkingDir: root,
  entryPoints: names.map((name) => join(folder, `${name}.ts`)),
  outdir,
  outExtension: { '.js': '.mjs' },
  bundle: true,
  platform: 'node',
  target: 'node20',
  format: 'esm',
  external: ['typescript'],
  banner: { js: "import { createRequire as make } from 'node:module'; const require = make(import.meta.url);" },
  logLevel: 'warning',
});
let failed = names.length === 0;
for (const name of names) {
  const { status } = spawnSync(process.execPath, [join(outdir, `${name}.mjs`)], { cwd: root, stdio: 'inherit' });
  if (status !== 0) {
    console.error(`The bench ${name} failed.`);
    failed = true;
  }
}
process.exitCode = failed ? 1 : 0;
