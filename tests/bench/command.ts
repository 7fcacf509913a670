import { spawnSync } from 'node:child_process';
import { mkdirSync, mkdtempSync, readdirSync, readFileSync, realpathSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { chainSource } from './chain-source';
import { megabytes, report, type Row } from './measure';

/**
 * The built command on trees of which 5 % of the files declare something, cold (no results of earlier runs) and warm,
 * against a plain byte scan of the same tree, each as a process of its own. Processor time of the process and its threads.
 */
const sizes = (process.env['SIZES'] ?? '10,100,1000,10000').split(',').map(Number);
const command = join(process.cwd(), 'dist', 'visviva.mjs');
const filler = Array.from({ length: 120 }, (_, k) => `export function helper${k}(x: number): number {\n  return x * ${k} + Math.sin(x);\n}\n`).join('\n');

interface Run {
  readonly cpu: number;
  readonly wall: number;
  readonly memory: number;
}

/** Runs a program with Node and tells what it took, by a line that it adds at its end. */
function run(args: readonly string[], cwd: string, cache: string): Run {
  const tell = "process.on('exit',()=>{const{userCPUTime:u,systemCPUTime:s,maxRSS:m}=process.resourceUsage();require('fs').writeSync(2,'\\nUSED '+(u+s)/1000+' '+m*1024+'\\n')})";
  const hook = join(cache, '..', 'hook.cjs');
  writeFileSync(hook, tell);
  const before = performance.now();
  const r = spawnSync(process.execPath, ['--require', hook, ...args], { cwd, encoding: 'utf8', env: { ...process.env, XDG_CACHE_HOME: cache }, maxBuffer: 1 << 28 });
  const [, cpu, memory] = /USED (\S+) (\S+)/.exec(r.stderr) ?? [];
  if (cpu === undefined || (r.status ?? 2) > 1) throw new Error(`${args.join(' ')}: ${r.stderr}`);
  return { cpu: Number(cpu), wall: performance.now() - before, memory: Number(memory) };
}

function makeTree(root: string, files: number): void {
  for (let k = 0; k < files; k++) {
    const folder = join(root, `part${Math.floor(k / 50)}`);
    mkdirSync(folder, { recursive: true });
    writeFileSync(join(folder, `file${k}.ts`), k % 20 === 0 ? `${chainSource(1 + (k % 2))}\n// ${k}\n` : `${filler}\n// ${k}\n`);
  }
}

if (process.argv[2] === 'scan') {
  let found = 0;
  const visit = (folder: string): void => {
    for (const entry of readdirSync(folder, { withFileTypes: true })) {
      const path = join(folder, entry.name);
      if (entry.isDirectory()) visit(path);
      else if (readFileSync(path).includes('@visviva')) found++;
    }
  };
  visit(process.argv[3]!);
  console.log(found);
} else {
  const base = realpathSync(mkdtempSync(join(tmpdir(), 'visviva-bench-')));
  const rows: Row[] = [];
  try {
    for (const files of sizes) {
      const root = join(base, `tree${files}`);
      const cache = join(base, `cache${files}`);
      makeTree(root, files);
      const scan = run([process.argv[1]!, 'scan', root], root, cache);
      const cold = run([command, 'check', root], root, cache);
      const warm = run([command, 'check', root], root, cache);
      const cell = (r: Run): string => `${r.cpu.toFixed(0)} ms (${(r.cpu / scan.cpu).toFixed(1)} x), ${megabytes(r.memory)}`;
      rows.push([String(files), `${scan.cpu.toFixed(0)} ms`, cell(cold), cell(warm)]);
      rmSync(root, { recursive: true });
    }
  } finally {
    rmSync(base, { recursive: true, force: true });
  }
  report('command', 'The command on a tree of files, one in 20 with a declaration', ['files', 'byte scan', 'cold', 'warm'], rows, [
    'Processor time of the process with all its threads, its multiple of the byte scan\'s, and peak memory.',
  ]);
}
