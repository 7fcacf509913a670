import type { Outcome } from './measure';

export interface Run {
  readonly single: readonly Outcome[];
  readonly pairs: readonly Outcome[];
  readonly functions: number;
  /** Functions by folder of fixtures. */
  readonly languages: ReadonlyMap<string, number>;
  readonly alarms: number;
  readonly every: number;
  readonly commit: string;
  readonly date: string;
}

const HEADING = [
  'mutants | detected | right line | right expression | repaired | wrong repairs | median | p95 |',
  '---|---|---|---|---|---|---|---|',
];

const RULE = [
  'A fault is placed on the right line when a finding of at most four lines covers the line that was changed, and on the right',
  'expression when the finding, or an edit of its repair, meets the changed text and is not much longer than it (40 characters',
  'and three times its length). Some faults can not be told from one elsewhere: a sign lost in a term, or where the variable that',
  'holds the term is used. A repair that makes the function right, as the tests find out for themselves, and changes no more words',
  'of the text than taking the fault back would, counts as placed; the columns "strictly" are without this. Where one fault makes',
  'several claims differ, what is said about the first of them counts.',
];

/** The whole report, as it stands in results.md. */
export function resultsText(run: Run): string {
  const { single, pairs, functions, languages, alarms, every } = run;
  const parts = [...languages].map(([name, n]) => `${n} ${name}`).join(', ');
  return [
    '# Mutation benchmark',
    '',
    `${run.date}, commit ${run.commit}: ${functions} correct functions (${parts}); ${everyText(every)}.`,
    'Mutants that compute the same by independent finite differences, or do not run, are left out; so are pairs of which one does.',
    'Times are of the processor, with reading the file for the first time.',
    `False alarms on the functions as they are: ${alarms}.`,
    '',
    ...RULE,
    '',
    ...table('One fault', single),
    ...table('Two faults', pairs),
    ...usualTests(single),
  ].join('\n');
}

/** What the README shows: all single faults, all pairs, and the usual tests. */
export function summaryText({ single, pairs, functions, alarms, every, commit, date }: Run): string {
  const usual = (name: string, of: (o: Outcome) => boolean | undefined): string =>
    `| ${name} | ${single.length} | ${share(single, (o) => of(o) === true)} | - | - | - | - | | |`;
  return [
    `| on the same mutants | ${HEADING[0]}`,
    `|---|${HEADING[1]}`,
    row('Visviva, one fault', single),
    row('Visviva, two faults', pairs),
    usual('energy drift above 1e-4, one fault', (o) => o.energy),
    usual('golden trajectory, one fault', (o) => o.golden),
    '',
    `${date}, commit ${commit}: ${functions} correct functions, ${everyText(every)};`,
    `false alarms on the functions as they are: ${alarms}. The usual tests run at default parameters (all 1, no damping, no`,
    'inputs); where they cannot run, they detect nothing. Written by `npm run bench:faults`; by kind, and what counts as the',
    'right place, in [results.md](tests/bench/faults/results.md).',
  ].join('\n');
}

function everyText(every: number): string {
  return every === 1 ? 'every mutant' : `one mutant in ${every}`;
}

function table(title: string, list: readonly Outcome[]): string[] {
  const kinds = [...new Set(list.flatMap((o) => (o.operators.length === 1 ? o.operators : [])))].sort();
  const strict = (o: readonly Outcome[]): string => `${share(o, (x) => x.placement.strict.line)} | ${share(o, (x) => x.placement.strict.expression)} |`;
  return [
    `## ${title}`,
    '',
    `| mutation | ${HEADING[0]} line strictly | expression strictly |`,
    `|---|${HEADING[1]}---|---|`,
    `${row('all', list)} ${strict(list)}`,
    ...kinds.map((k) => list.filter((o) => o.operators[0] === k)).map((o) => `${row(o[0]!.operators[0]!, o)} ${strict(o)}`),
    '',
  ];
}

function row(name: string, o: readonly Outcome[]): string {
  const cells = [
    name,
    o.length,
    share(o, (x) => x.detected),
    share(o, (x) => x.placement.line),
    share(o, (x) => x.placement.expression),
    share(o, (x) => x.repaired),
    o.filter((x) => x.wrong).length,
    time(o, 0.5),
    time(o, 0.95),
  ];
  return `| ${cells.join(' | ')} |`;
}

function usualTests(single: readonly Outcome[]): string[] {
  const line = (name: string, of: (o: Outcome) => boolean | undefined): string => {
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
    line('energy drift above 1e-4', (o) => o.energy),
    line('golden trajectory', (o) => o.golden),
    '',
  ];
}

function share(list: readonly Outcome[], of: (o: Outcome) => boolean): string {
  return list.length === 0 ? '-' : `${((100 * list.filter(of).length) / list.length).toFixed(1)} %`;
}

function time(list: readonly Outcome[], q: number): string {
  const times = list.map((o) => o.milliseconds).sort((a, b) => a - b);
  return times.length === 0 ? '-' : `${times[Math.min(times.length - 1, Math.floor(q * times.length))]!.toFixed(0)} ms`;
}
