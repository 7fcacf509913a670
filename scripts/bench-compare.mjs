/**
 * Compares two commits in one run: `npm run bench:compare BEFORE [AFTER]` (AFTER is the working tree where none is given).
 * Each is bundled with the same bench of the working tree, and both take turns, so that a busy machine slows both. Prints
 * ratios of processor time and ends with 1 where the later one is slower by more than 15 %.
 */
import { spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, rmSync, symlinkSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { build } from 'esbuild';

const root = fileURLToPath(new URL('..', import.meta.url));
const [before, after] = process.argv.slice(2);
if (!before) {
  console.error('Name the commit to compare with: npm run bench:compare BEFORE [AFTER].');
  process.exit(2);
}
const work = join(root, '.artifacts', 'compare');
const sizes = [1, 2, 5, 10];
const rounds = 7;

const trees = [];
try {
  const programs = [];
  for (const commit of [before, after]) programs.push(await bundle(commit === undefined ? root : checkout(commit)));
  /** @type {Map<string, number[][]>} */
  const times = new Map(sizes.map((n) => [`chain of ${n}`, [[], []]]));
  for (let round = 0; round < rounds; round++) {
    for (const which of round % 2 === 0 ? [0, 1] : [1, 0]) {
      const r = spawnSync(process.execPath, [programs[which], JSON.stringify(sizes)], { cwd: root, encoding: 'utf8' });
      if (r.status !== 0) throw new Error(r.stderr);
      const all = JSON.parse(r.stdout);
      sizes.forEach((n, i) => times.get(`chain of ${n}`)[which].push(all[i]));
    }
  }
  let slower = false;
  for (const [name, [a, b]] of times) {
    const [x, y] = [a, b].map((list) => list.sort((p, q) => p - q)[Math.floor(list.length / 2)]);
    slower ||= y / x > 1.15;
    console.log(`${name.padEnd(14)} ${x.toFixed(1).padStart(8)} ms  ${y.toFixed(1).padStart(8)} ms  ${(y / x).toFixed(2)} x`);
  }
  process.exitCode = slower ? 1 : 0;
} finally {
  for (const tree of trees) spawnSync('git', ['worktree', 'remove', '--force', tree], { cwd: root });
  rmSync(work, { recursive: true, force: true });
}

function checkout(commit) {
  const tree = join(work, `tree-${trees.length}`);
  mkdirSync(work, { recursive: true });
  const r = spawnSync('git', ['worktree', 'add', '--detach', tree, commit], { cwd: root, encoding: 'utf8' });
  if (r.status !== 0) throw new Error(r.stderr);
  trees.push(tree);
  // The packages of the working tree serve both.
  for (const folder of ['node_modules', 'server/node_modules']) {
    if (existsSync(join(root, folder)) && !existsSync(join(tree, folder))) symlinkSync(join(root, folder), join(tree, folder));
  }
  return tree;
}

async function bundle(tree) {
  const outfile = join(work, `program-${trees.length}-${tree === root ? 'now' : 'then'}.mjs`);
  await build({
    stdin: { contents: program(tree), resolveDir: root, loader: 'ts' },
    outfile,
    bundle: true,
    platform: 'node',
    target: 'node20',
    format: 'esm',
    external: ['typescript', 'web-tree-sitter'],
    alias: { '@visviva/shared': join(tree, 'shared/src/index.ts') },
    banner: { js: "import { createRequire as make } from 'node:module'; const require = make(import.meta.url);" },
    logLevel: 'warning',
  });
  return outfile;
}

function program(tree) {
  return `
import { createService } from '${tree}/server/src/service';
import { Budget } from '${tree}/server/src/text/budget';
import { chainSource } from '${root}/tests/bench/chain-source';
const once = async (text) => {
  const before = process.cpuUsage();
  await createService({ read: () => text, declarations: () => [] }).check('chain.ts', new Budget(), 'verdicts');
  const { user, system } = process.cpuUsage(before);
  return (user + system) / 1000;
};
for (let i = 0; i < 30; i++) await once(chainSource(2));
const out = [];
for (const n of JSON.parse(process.argv[2])) {
  const all = [];
  for (let i = 0; i < 9; i++) all.push(await once(chainSource(n)));
  out.push(all.sort((a, b) => a - b)[4]);
}
console.log(JSON.stringify(out));
`;
}
