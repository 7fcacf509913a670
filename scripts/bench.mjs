/** Runs the benches of tests/bench, each in its own process: `npm run bench [NAME...]`. */
import { spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { availableParallelism } from 'node:os';
import { basename, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { build } from 'esbuild';

const root = fileURLToPath(new URL('..', import.meta.url));
const folder = join(root, 'tests', 'bench');
const outdir = join(root, '.artifacts', 'bench');
const wanted = process.argv.slice(2);
/** What the benches share. */
const notBenches = new Set(['arm-source.ts', 'chain-source.ts', 'reading-source.ts', 'measure.ts']);
const names = readdirSync(folder)
  .filter((file) => file.endsWith('.ts') && !notBenches.has(file))
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
  external: ['typescript', 'web-tree-sitter', 'nerdamer', 'algebrite', 'mathjs'],
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
writeTables();
process.exitCode = failed ? 1 : 0;

/** Puts the tables of all benches, those of earlier runs too, into the page of results. */
function writeTables() {
  const tables = join(outdir, 'tables');
  if (!existsSync(tables)) return;
  const page = join(folder, 'results.md');
  const order = ['chain', 'libraries', 'keystroke', 'command', 'modular'];
  const parts = order.filter((name) => existsSync(join(tables, `${name}.md`))).map((name) => readFileSync(join(tables, `${name}.md`), 'utf8'));
  const commit = spawnSync('git', ['rev-parse', '--short', 'HEAD'], { cwd: root, encoding: 'utf8' }).stdout.trim();
  const made = `${new Date().toISOString().slice(0, 10)}, commit ${commit}, Node ${process.version}, ${availableParallelism()} processors. Written by \`npm run bench\`.`;
  writeFileSync(page, `# Speed\n\n${made}\n\n${parts.join('\n')}`);
}
