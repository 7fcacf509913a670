import { execFileSync } from 'node:child_process';
import { readFileSync, writeFileSync } from 'node:fs';
import { loadFixtures } from '../../support/fixtures';
import { Bench, type Outcome } from './measure';
import { mutationsOf, type Mutation } from './mutations';

/**
 * A mutation benchmark: every correct function of the fixtures, changed at one place (and at two) by ten operators.
 * Arguments: `--every N` takes each N-th mutant, `--only NAME` files that contain NAME, `--show` lists what was missed.
 */
const argument = (name: string): string | undefined => {
  const at = process.argv.indexOf(`--${name}`);
  return at < 0 ? undefined : (process.argv[at + 1] ?? '');
};
const every = Number(argument('every') ?? 1);
const only = argument('only');
const show = process.argv.includes('--show');

const { fixtures, others } = loadFixtures('typescript');
const single: Outcome[] = [];
const pairs: Outcome[] = [];
let functions = 0;
let alarms = 0;
let count = 0;
for (const fixture of fixtures) {
  if (only !== undefined && !fixture.file.includes(only)) continue;
  for (const section of fixture.sections) {
    if (section.run.length === 0 || section.expectations.length > 0) continue;
    const bench = new Bench(fixture, section, others);
    const start = bench.worst(fixture.text);
    if (start === undefined || start > 1e-6) continue;
    functions++;
    const plain = await bench.check(fixture.text);
    alarms += plain.claims.filter((c) => c.verdict === 'differs').length;
    const mutations = mutationsOf(fixture, section);
    for (const m of mutations) {
      if (count++ % every !== 0) continue;
      await take(single, bench, [m]);
    }
    if (functions % 6 === 0) for (const pair of somePairs(mutations)) await take(pairs, bench, pair);
  }
}

async function take(into: Outcome[], bench: Bench, mutations: readonly Mutation[]): Promise<void> {
  const outcome = await bench.measure(mutations);
  if (!outcome) return;
  into.push(outcome);
  const missed = !outcome.detected || !outcome.repaired || outcome.wrong || !outcome.line;
  if (show && missed) {
    const what = mutations.map((m) => `${m.operator} ${JSON.stringify(bench.fixture.text.slice(m.start, m.end))} -> ${JSON.stringify(m.text)}`);
    const kind = outcome.wrong ? 'WRONG' : !outcome.detected ? 'UNSEEN' : !outcome.repaired ? 'NO REPAIR' : 'ELSEWHERE';
    console.log(`${kind} ${bench.fixture.file} ${bench.section.name}: ${what.join(' and ')}: ${outcome.note}`);
  }
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

const share = (list: readonly Outcome[], of: (o: Outcome) => boolean): string =>
  list.length === 0 ? '-' : `${((100 * list.filter(of).length) / list.length).toFixed(1)} %`;
const time = (list: readonly Outcome[], q: number): string => {
  const times = list.map((o) => o.milliseconds).sort((a, b) => a - b);
  return times.length === 0 ? '-' : `${times[Math.min(times.length - 1, Math.floor(q * times.length))]!.toFixed(0)} ms`;
};

function table(title: string, list: readonly Outcome[]): string[] {
  const row = (name: string, o: readonly Outcome[]): string =>
    `| ${name} | ${o.length} | ${share(o, (x) => x.detected)} | ${share(o, (x) => x.line)} | ${share(o, (x) => x.expression)} | ${share(o, (x) => x.repaired)} | ${o.filter((x) => x.wrong).length} | ${time(o, 0.5)} | ${time(o, 0.95)} |`;
  const kinds = [...new Set(list.flatMap((o) => (o.operators.length === 1 ? o.operators : [])))].sort();
  return [
    `## ${title}`,
    '',
    '| mutation | mutants | detected | right line | right expression | repaired | wrong repairs | median | p95 |',
    '|---|---|---|---|---|---|---|---|---|',
    row('all', list),
    ...kinds.map((k) => row(k, list.filter((o) => o.operators[0] === k))),
    '',
  ];
}

function usualTests(): string[] {
  const row = (name: string, of: (o: Outcome) => boolean | undefined): string => {
    const able = single.filter((o) => of(o) !== undefined);
    return `| ${name} | ${able.length} | ${share(able, (o) => of(o)!)} | ${share(single, (o) => of(o) === true)} | ${share(able, (o) => o.detected)} |`;
  };
  return [
    '## The usual tests on the same single faults',
    '',
    'Runge-Kutta integration over two seconds at default parameters (all 1, no damping, no inputs).',
    '',
    '| test | mutants it applies to | detected of these | detected of all | Visviva detects of these |',
    '|---|---|---|---|---|',
    row('energy drift above 1e-4', (o) => o.energy),
    row('golden trajectory', (o) => o.golden),
    '',
  ];
}

const commit = (() => {
  try {
    return execFileSync('git', ['rev-parse', '--short', 'HEAD'], { encoding: 'utf8' }).trim();
  } catch {
    return 'unknown';
  }
})();
const text = [
  '# Mutation benchmark',
  '',
  `${new Date().toISOString().slice(0, 10)}, commit ${commit}: ${functions} correct functions; every ${every === 1 ? '' : `${every}th `}mutant.`,
  'Mutants that compute the same by independent finite differences, or do not run, are left out. Times are of the processor.',
  `False alarms on the functions as they are: ${alarms}.`,
  '',
  ...table('One fault', single),
  ...table('Two faults', pairs),
  ...usualTests(),
].join('\n');
console.log(text);
if (only === undefined) {
  writeFileSync('tests/bench/faults/results.md', text);
  const readme = readFileSync('README.md', 'utf8');
  const block = /(<!-- faults:begin -->\n)[^]*?(<!-- faults:end -->)/;
  writeFileSync('README.md', readme.replace(block, (_, begin: string, end: string) => `${begin}${summary()}\n${end}`));
}

/** What the README shows: all single faults, all pairs, and the usual tests. */
function summary(): string {
  const row = (name: string, o: readonly Outcome[]): string =>
    `| ${name} | ${o.length} | ${share(o, (x) => x.detected)} | ${share(o, (x) => x.line)} | ${share(o, (x) => x.expression)} | ${share(o, (x) => x.repaired)} | ${o.filter((x) => x.wrong).length} | ${time(o, 0.5)} | ${time(o, 0.95)} |`;
  const usual = (name: string, of: (o: Outcome) => boolean | undefined): string =>
    `| ${name} | ${single.length} | ${share(single, (o) => of(o) === true)} | - | - | - | - | | |`;
  return [
    '| on the same mutants | mutants | detected | right line | right expression | repaired | wrong repairs | median | p95 |',
    '|---|---|---|---|---|---|---|---|---|',
    row('Visviva, one fault', single),
    row('Visviva, two faults', pairs),
    usual('energy drift above 1e-4, one fault', (o) => o.energy),
    usual('golden trajectory, one fault', (o) => o.golden),
    '',
    `${new Date().toISOString().slice(0, 10)}, commit ${commit}: ${functions} correct functions, ${every === 1 ? 'every mutant' : `one mutant in ${every}`};`,
    `false alarms on the functions as they are: ${alarms}. The usual tests run at default parameters (all 1, no damping, no`,
    `inputs); where they cannot run, they detect nothing. Written by \`npm run bench:faults\`; by kind in`,
    '[results.md](tests/bench/faults/results.md).',
  ].join('\n');
}
