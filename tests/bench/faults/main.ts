import { execFileSync } from 'node:child_process';
import { readFileSync, writeFileSync } from 'node:fs';
import { loadFixtures } from '../../support/fixtures';
import { Bench, type Outcome } from './measure';
import { FOLDERS, mutationsOf, type Mutation } from './mutations';
import { resultsText, summaryText, type Run } from './tables';

/**
 * A mutation benchmark: every correct function of the fixtures, changed at one place (and at two) by ten operators.
 * Arguments: `--every N` takes each N-th mutant, `--pairs N` pairs of each N-th function, `--only NAME` files that contain
 * NAME, `--match TEXT` mutants whose description does (or contains a line of the file, for `--match @FILE`), `--show`
 * lists what was missed, `--all` everything.
 */
const argument = (name: string): string | undefined => {
  const at = process.argv.indexOf(`--${name}`);
  return at < 0 ? undefined : (process.argv[at + 1] ?? '');
};
const every = Number(argument('every') ?? 1);
const only = argument('only');
const match = argument('match');
const matches = match?.startsWith('@') ? readFileSync(match.slice(1), 'utf8').split('\n').filter((l) => l.trim() !== '') : match === undefined ? undefined : [match];
const everyPairs = Number(argument('pairs') ?? 6);
const all = process.argv.includes('--all');
const show = all || process.argv.includes('--show');

// What is measured is what the bundle was made of, whatever is committed meanwhile.
const commit = (() => {
  try {
    return execFileSync('git', ['rev-parse', '--short', 'HEAD'], { encoding: 'utf8' }).trim();
  } catch {
    return 'unknown';
  }
})();
const single: Outcome[] = [];
const pairs: Outcome[] = [];
let functions = 0;
let alarms = 0;
let count = 0;
const languages = new Map<string, number>();
for (const folder of FOLDERS) {
  const { fixtures, others } = loadFixtures(folder);
  for (const fixture of fixtures) {
    if (only !== undefined && !fixture.file.includes(only)) continue;
    for (const section of fixture.sections) {
      if (section.run.length === 0 || section.expectations.length > 0) continue;
      await takeFunction(new Bench(fixture, section, others), folder);
    }
  }
}

async function takeFunction(bench: Bench, folder: string): Promise<void> {
  const start = bench.worst(bench.fixture.text);
  if (start === undefined || start > 1e-6) return;
  functions++;
  languages.set(folder, (languages.get(folder) ?? 0) + 1);
  const plain = await bench.check(bench.fixture.text);
  alarms += plain.claims.filter((c) => c.verdict === 'differs').length;
  const mutations = mutationsOf(bench.fixture, bench.section);
  for (const m of mutations) if (count++ % every === 0) await take(single, bench, [m]);
  if (everyPairs > 0 && functions % everyPairs === 0) for (const pair of somePairs(mutations)) await take(pairs, bench, pair);
}

async function take(into: Outcome[], bench: Bench, mutations: readonly Mutation[]): Promise<void> {
  const what = mutations
    .map((m) => `${m.operator} ${JSON.stringify(bench.fixture.text.slice(m.start, m.end))} -> ${JSON.stringify(m.text)} (${m.start})`)
    .join(' and ');
  const name = `${bench.fixture.file} ${bench.section.name}: ${what}`;
  if (matches && !matches.some((m) => name.includes(m))) return;
  const outcome = await bench.measure(mutations);
  if (!outcome) return;
  into.push(outcome);
  const kind = missed(outcome);
  if (all || (show && kind !== 'RIGHT')) {
    console.log(`${kind} ${name}: ${outcome.note} ${outcome.milliseconds.toFixed(0)} ms`);
  }
}

function missed(o: Outcome): string {
  if (o.wrong) return 'WRONG';
  if (!o.detected) return 'UNSEEN';
  if (!o.repaired) return 'NO REPAIR';
  if (!o.placement.line) return 'ELSEWHERE';
  return o.placement.expression ? 'RIGHT' : 'BESIDE';
}

/** A dozen pairs of mutations that do not touch each other. */
function somePairs(mutations: readonly Mutation[]): Mutation[][] {
  const out: Mutation[][] = [];
  const step = Math.max(1, Math.floor(mutations.length / 12));
  for (let i = 0; i < mutations.length && out.length < 12; i += step) {
    const a = mutations[i]!;
    const b = mutations[(i + Math.floor(mutations.length / 2) + 1) % mutations.length]!;
    if (a.end < b.start || b.end < a.start) out.push([a, b]);
  }
  return out;
}

const run: Run = { single, pairs, functions, languages, alarms, every, commit, date: new Date().toISOString().slice(0, 10) };
const text = resultsText(run);
console.log(text);
if (only === undefined && match === undefined) {
  writeFileSync('tests/bench/faults/results.md', text);
  const readme = readFileSync('README.md', 'utf8');
  const block = /(<!-- faults:begin -->\n)[^]*?(<!-- faults:end -->)/;
  writeFileSync('README.md', readme.replace(block, (_, begin: string, end: string) => `${begin}${summaryText(run)}\n${end}`));
}
