import { spawn, spawnSync } from 'node:child_process';
import type { Socket } from 'node:net';
import { createInterface } from 'node:readline';
import { fileURLToPath } from 'node:url';
import type { Claimed } from './run-code';

/**
 * Runs Python fixture code with numbers in one python3 process that lives as long as the tests. Only tests do this: the
 * product reads code and never runs it.
 */
export interface PythonRun {
  readonly file: string;
  readonly text: string;
  readonly run: readonly string[];
  readonly claims: readonly Claimed[];
  readonly constants: ReadonlySet<string>;
  readonly others: ReadonlyMap<string, string>;
}

/** Why Python code cannot be run here; undefined where it can. */
export const pythonMissing: string | undefined = (() => {
  const { status, error } = spawnSync('python3', ['-c', 'import numpy, scipy'], { stdio: 'ignore' });
  if (error) return 'there is no python3 on this machine';
  return status === 0 ? undefined : 'python3 has no numpy or scipy here';
})();

/** A name in a run line: `th''` is `th_2`. */
const primed = (code: string): string =>
  code.replace(/([\p{L}_][\p{L}\p{N}_]*)('+)/gu, (_, name: string, primes: string) => `${name}_${primes.length}`);

const isName = (text: string): boolean => /^[\p{L}_][\p{L}\p{N}_]*'*$/u.test(text);

type Answer = { readonly values?: (number | null)[][]; readonly error?: string };

let running: { readonly ask: (request: unknown) => Promise<Answer> } | undefined;
let last: Promise<unknown> = Promise.resolve();

/** One request after the other. */
function ask(request: unknown): Promise<Answer> {
  const one = last.then(() => (running ??= start()).ask(request));
  last = one.catch(() => undefined);
  return one;
}

function start(): NonNullable<typeof running> {
  // A bundle of the benchmark lies one folder up from here.
  const script = fileURLToPath(new URL(import.meta.url.includes('/support/') ? 'python-run.py' : '../support/python-run.py', import.meta.url));
  const child = spawn('python3', ['-u', script], { stdio: ['pipe', 'pipe', 'inherit'] });
  const { stdin, stdout } = child as unknown as { stdin: Socket; stdout: Socket };
  const all = [child, stdin, stdout];
  // It must not keep the tests from ending, but an answer is waited for.
  for (const x of all) x.unref();
  const answers = createInterface({ input: stdout });
  const kill = (): unknown => child.kill();
  process.once('exit', kill);
  child.once('exit', () => {
    process.off('exit', kill);
    running = undefined;
  });
  return {
    ask: (request) =>
      new Promise((resolve, reject) => {
        for (const x of all) x.ref();
        const gone = (): void => reject(new Error('the python3 process ended'));
        child.once('exit', gone);
        answers.once('line', (line) => {
          child.off('exit', gone);
          for (const x of all) x.unref();
          resolve(JSON.parse(line) as Answer);
        });
        stdin.write(`${JSON.stringify(request)}\n`);
      }),
  };
}

/** The values of the claims' left sides at each of the given states, increments as differences. */
export async function runPython(job: PythonRun, states: readonly ReadonlyMap<string, number>[]): Promise<number[][]> {
  const symbols = [...states[0]!.keys()].filter(isName);
  const setup = job.run.slice(0, -1).map(primed);
  const made = new Set(setup.flatMap((line) => /^\s*([\w, ]+?)\s*=[^=]/.exec(line)?.[1]?.split(/\s*,\s*/) ?? []));
  const roots = job.claims.flatMap((c) => [...c.left.matchAll(/(?<![.\p{L}\p{N}_])([\p{L}_][\p{L}\p{N}_]*)(?!['\p{L}\p{N}_(])/gu)].map((m) => m[1]!));
  const watched = [...new Set(roots)].filter((name) => name !== 'return' && name !== 'self' && !made.has(name));
  const [root, ...path] = job.file.replace(/\.py$/, '').split('/');
  const answer = await ask({
    text: job.text,
    module: path.join('.'),
    root: root ?? '',
    others: Object.fromEntries(job.others),
    constants: [...job.constants],
    symbols,
    given: symbols,
    values: states.map((s) => symbols.map((name) => s.get(name)!)),
    setup,
    call: primed(job.run.at(-1)!),
    lefts: job.claims.map((c) => primed(c.left).replace(/\breturn\b/g, 'return_')),
    ops: job.claims.map((c) => c.op),
    watched,
  });
  if (!answer.values) throw new Error(`${job.file}: ${answer.error ?? 'no answer'}`);
  return answer.values.map((row) => row.map((v) => v ?? NaN));
}
