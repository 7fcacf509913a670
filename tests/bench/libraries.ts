import { spawnSync } from 'node:child_process';
import { createRequire } from 'node:module';
import { createService } from '../../server/src/service';
import { Budget } from '../../server/src/text/budget';
import { chainSource } from './chain-source';
import { cpuTime, median, report, type Row } from './measure';

/**
 * The chain's equations by general computer algebra: Lagrange's equations by differentiation, then simplified, each in a
 * process of its own with a time limit. None of them decides whether code agrees; the product's time includes that.
 */
const require = createRequire(import.meta.url);
const LIMIT = 20_000;
const MOST = 4;

/** The Lagrangian of the chain in symbols q1, v1, a1, m1, l1, g. */
function lagrangian(n: number): string {
  const terms: string[] = [];
  for (let k = 1; k <= n; k++) {
    const sum = (f: string): string => Array.from({ length: k }, (_, i) => `l${i + 1}*v${i + 1}*${f}(q${i + 1})`).join('+');
    terms.push(`m${k}*((${sum('cos')})^2+(${sum('sin')})^2)/2`);
    terms.push(`m${k}*g*(${Array.from({ length: k }, (_, i) => `l${i + 1}*cos(q${i + 1})`).join('+')})`);
  }
  return terms.join('+');
}

interface Algebra {
  diff(f: string, by: string): string;
  simplify(f: string): string;
}

function algebra(name: string): Algebra {
  switch (name) {
    case 'nerdamer': {
      const nerdamer = require('nerdamer/all') as ((f: string) => { toString(): string }) & { diff(f: string, x: string): { toString(): string } };
      return { diff: (f, x) => nerdamer(`diff(${f}, ${x})`).toString(), simplify: (f) => nerdamer(`simplify(${f})`).toString() };
    }
    case 'algebrite': {
      const { run } = require('algebrite') as { run(f: string): string };
      return { diff: (f, x) => run(`d(${f},${x})`), simplify: (f) => run(`simplify(${f})`) };
    }
    default: {
      const { derivative, simplify } = require('mathjs') as { derivative(f: string, x: string, o: object): { toString(): string }; simplify(f: string): { toString(): string } };
      return { diff: (f, x) => derivative(f, x, { simplify: false }).toString(), simplify: (f) => simplify(f).toString() };
    }
  }
}

function derive(name: string, n: number): number {
  const a = algebra(name);
  const L = lagrangian(n);
  const index = Array.from({ length: n }, (_, i) => i + 1);
  const before = cpuTime();
  for (const i of index) {
    const p = a.diff(L, `v${i}`);
    const rate = index.map((j) => `(${a.diff(p, `q${j}`)})*v${j}+(${a.diff(p, `v${j}`)})*a${j}`).join('+');
    a.simplify(`${rate}-(${a.diff(L, `q${i}`)})`);
  }
  return cpuTime() - before;
}

const [, self, library, size] = process.argv;
if (library !== undefined) {
  console.log(derive(library, Number(size)));
} else {
  const rows: Row[] = [];
  const own: number[] = [];
  const check = async (n: number): Promise<number> => {
    const text = chainSource(n);
    const before = cpuTime();
    await createService({ read: () => text, declarations: () => [] }).check('chain.ts', new Budget(), 'verdicts');
    return cpuTime() - before;
  };
  for (let i = 0; i < 60; i++) await check(2);
  for (let n = 1; n <= MOST; n++) own.push(median(await times(20, () => check(n))));
  const gone = new Set<string>();
  for (let n = 1; n <= MOST; n++) {
    const cells = ['nerdamer', 'algebrite', 'mathjs'].map((name) => {
      if (gone.has(name)) return 'not tried';
      const r = spawnSync(process.execPath, [self!, name, String(n)], { encoding: 'utf8', timeout: LIMIT, cwd: process.cwd() });
      const ms = Number(r.stdout);
      if (r.status === 0 && ms > 0) return `${ms.toFixed(0)} (${(ms / own[n - 1]!).toFixed(0)} x)`;
      gone.add(name);
      return r.error || r.signal ? `more than ${LIMIT / 1000} s` : 'failed';
    });
    rows.push([String(n), own[n - 1]!.toFixed(1), ...cells]);
  }
  report('libraries', 'The same chain by general computer algebra: derivation and simplification', ['n', 'Visviva, with the verdict', 'nerdamer', 'algebrite', 'mathjs'], rows, [
    'Milliseconds of processor time; in brackets how many times the product\'s.',
  ]);
}

async function times(n: number, f: () => Promise<number>): Promise<number[]> {
  const out: number[] = [];
  for (let i = 0; i < n; i++) out.push(await f());
  return out;
}
