import type { KnownFinding, Problem, Report, ReportClaim } from '@visviva/shared';
import type { Command } from 'commander';
import { readFileSync } from 'node:fs';
import { absolute, toSlashes } from '../host/paths';
import { Budget } from '../text/budget';
import { summaryOf } from './assemble';
import { formatList, formatOption, pageOf } from './check-command';
import { byPath } from './inputs';
import { UsageError, type Io, type Status } from './io';
import { addJudgement, judgementOf, statusOf, type Judgement } from './judgement';
import { parseOutlets, writeOutlets } from './report/outlets';
import { openSession } from './session';

interface Options extends Judgement {
  readonly format: readonly string[];
}

/** Defines `visviva merge`. */
export function addMerge(program: Command, io: Io, finish: (status: Status) => void): void {
  const command = program
    .command('merge')
    .description('make one report of the JSON reports of several runs, such as the parts of --shard')
    .argument('<report...>', 'JSON reports, as visviva check --format json=FILE writes them')
    .addOption(formatOption());
  addJudgement(command)
    .addHelpText('after', () => `\n${formatList()}\n\nExit status: as of visviva check; 2 where a part is missing or is no report.`)
    .action(async (files: string[], options: Options) => {
      const outlets = parseOutlets(options.format, io.folder);
      const report = mergeReports(files.map((file) => ({ file, report: readReport(file, io) })));
      const session = openSession([], io);
      const details = async (file: string) => (await session.service()).details(toSlashes(absolute(file, io.folder)), new Budget({ milliseconds: 120_000 }));
      const status = statusOf(report, judgementOf(options, session.settings().settings));
      finish((await writeOutlets(outlets, pageOf({ report, details }, io), io)) ? status : 2);
    });
}

interface Part {
  readonly file: string;
  readonly report: Report;
}

function readReport(file: string, io: Io): Report {
  let value: unknown;
  try {
    value = JSON.parse(readFileSync(absolute(file, io.folder), 'utf8'));
  } catch (error) {
    const { code } = error as NodeJS.ErrnoException;
    throw new UsageError(`"${file}": ${code === 'ENOENT' ? 'there is no such file' : code ? `it cannot be read (${code})` : 'it is not JSON'}.`);
  }
  const report = value as Partial<Report> | null;
  const isReport = report?.schema === 1 && report.tool?.name === 'visviva' && Array.isArray(report.claims) && Array.isArray(report.problems) && Array.isArray(report.skipped);
  if (!isReport) throw new UsageError(`"${file}": it is no JSON report of visviva check.`);
  return report as Report;
}

/**
 * One report of several; what is told by more than one of them counts once.
 * @throws UsageError where a part of a run is missing
 */
export function mergeReports(parts: readonly Part[]): Report {
  const versions = [...new Set(parts.map((p) => p.report.tool.version))];
  if (versions.length > 1) throw new UsageError(`The reports are of different versions (${versions.join(', ')}): run all parts with one.`);
  const shards = parts.flatMap((p) => (p.report.shard ? [p.report.shard] : []));
  const counts = [...new Set(shards.map((s) => s.count))];
  if (counts.length > 1) throw new UsageError(`The reports are parts of runs in ${counts.join(' and ')} parts: give those of one run.`);
  const missing = counts.length === 0 ? [] : Array.from({ length: counts[0]! }, (_, i) => i + 1).filter((i) => !shards.some((s) => s.index === i));
  if (missing.length > 0) throw new UsageError(`Of a run in ${counts[0]!} parts, ${missing.length === 1 ? 'part' : 'parts'} ${missing.join(', ')} ${missing.length === 1 ? 'is' : 'are'} missing.`);
  const first = new Map<string, Part>();
  for (const p of parts) {
    const key = p.report.shard ? `${p.report.shard.index}` : JSON.stringify(p.report);
    if (!first.has(key)) first.set(key, p);
  }
  const reports = [...first.values()].map((p) => p.report);
  const claims = distinct(reports.flatMap((r) => r.claims), (c: ReportClaim) => JSON.stringify([c.file, c.system, c.function, c.output, c.quantity, c.line]));
  const problems = distinct(reports.flatMap((r) => r.problems), (p: Problem) => JSON.stringify([p.file, p.code, p.range, p.message]));
  const inOrder = <T extends { readonly file: string }>(list: readonly T[]) => list.map((x, i) => ({ x, i })).sort((a, b) => byPath(a.x.file, b.x.file) || a.i - b.i).map(({ x }) => x);
  const sum = (of: (r: Report) => number) => reports.reduce((n, r) => n + of(r), 0);
  const gone = distinct(reports.flatMap((r) => r.gone ?? []), (k: KnownFinding) => k.fingerprint);
  const sorted = inOrder(claims);
  return {
    schema: 1,
    tool: reports[0]!.tool,
    summary: summaryOf(sorted, problems, sum((r) => r.summary.files), sum((r) => r.summary.systems)),
    claims: sorted,
    problems: inOrder(problems),
    skipped: inOrder(distinct(reports.flatMap((r) => r.skipped), (s) => JSON.stringify(s))),
    ...(gone.length > 0 ? { gone } : {}),
  };
}

function distinct<T>(list: readonly T[], key: (item: T) => string): T[] {
  return [...new Map([...list].reverse().map((x) => [key(x), x])).values()].reverse();
}
