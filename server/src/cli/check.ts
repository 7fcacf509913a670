import { version, type Problem, type Report, type ReportClaim } from '@visviva/shared';
import { createDiskFiles, type DiskFiles } from '../host/files';
import { absolute, shown, toSlashes } from '../host/paths';
import { repositoryOf, seenFrom } from '../host/repository';
import { readTextFile } from '../host/text-file';
import type { FileDetails, FileResult, Service } from '../service/api';
import { handlesFile } from '../service/handles';
import { Budget } from '../text/budget';
import { checkFiles } from './checking/files';
import { fixFiles } from './fix';
import { byPath, findInputs, type Skipped } from './inputs';
import { UsageError, type Io, type Status } from './io';
import { withFingerprints } from './report/fingerprint';

export interface CheckOptions {
  readonly requireClaims?: boolean;
  readonly function?: string;
  readonly system?: string;
  readonly fix?: boolean;
  readonly dryRun?: boolean;
  /** False: nothing is taken from earlier runs, nothing left for later ones. */
  readonly cache?: boolean;
}

export interface Outcome {
  readonly report: Report;
  /** Equations and terms behind the claims of a file of the report. */
  readonly details: (file: string) => Promise<FileDetails | undefined>;
  /** The repairs as a diff, where only that was asked for. */
  readonly diff?: string;
  readonly status: Status;
}

/** Far more than any file should need, as a result should not depend on how busy the machine is; but nothing hangs. */
const MILLISECONDS_PER_FILE = 30_000;

/** Checks the files that the paths name. Paths in the report are relative to the folder the command runs in. */
export async function check(paths: readonly string[], options: CheckOptions, io: Io): Promise<Outcome> {
  const { disk, inputs, service } = openProject(paths, io);
  const budget = () => new Budget({ milliseconds: MILLISECONDS_PER_FILE });
  const diff = options.fix ? await fixFiles(await service(), inputs.files, options, budget, io) : '';
  // What --fix would change is not what the files hold.
  const useCache = options.cache !== false && !options.fix;
  const checked = await checkFiles(inputs.files, { disk, projects: inputs.projects, milliseconds: MILLISECONDS_PER_FILE, useCache });
  for (const { file, failure } of checked.failures) io.log(`Internal failure while checking ${shown(file, io.folder)}: ${failure}`);
  const skipped = [...inputs.skipped, ...checked.skipped];
  const report = withFingerprints(assemble(checked.results, skipped, checked.read, options, io.folder), (file) => textOf(absolute(file, io.folder)), (file) =>
    seenFrom(repositoryOf(io.folder), io.folder, file),
  );
  const details = async (file: string) => (await service()).details(toSlashes(absolute(file, io.folder)), budget());
  const status = checked.failures.length > 0 ? 2 : statusOf(report, options);
  return { report, details, status, ...(options.fix && options.dryRun ? { diff } : {}) };
}

function textOf(file: string): string | undefined {
  const read = readTextFile(file);
  return 'text' in read ? read.text : undefined;
}

interface OpenProject {
  readonly disk: DiskFiles;
  readonly inputs: ReturnType<typeof findInputs>;
  /** Loads what checks; not needed where nothing is declared or all is known. */
  service(): Promise<Service>;
}

function openProject(paths: readonly string[], io: Io): OpenProject {
  const inputs = findInputs(paths, io.folder, handlesFile);
  const disk = createDiskFiles(() => inputs.projects, handlesFile);
  let made: Promise<Service> | undefined;
  return { disk, inputs, service: () => (made ??= import('../service/index').then((m) => m.createService(disk))) };
}

export async function openService(paths: readonly string[], io: Io): Promise<{ service: Service; inputs: ReturnType<typeof findInputs> }> {
  const { inputs, service } = openProject(paths, io);
  return { inputs, service: await service() };
}

function assemble(
  results: readonly FileResult[],
  skipped: readonly Skipped[],
  files: number,
  options: CheckOptions,
  folder: string,
): Report {
  const chosen = results.map((r) => choose(r, options));
  if (options.system !== undefined && !results.some((r) => r.systems.some((s) => s.name === options.system) || r.claims.some((c) => c.system === options.system))) {
    throw new UsageError(`No system "${options.system}" is declared in the given paths.${offer(results.flatMap((r) => r.systems.map((s) => s.name)))}`);
  }
  if (options.function !== undefined && !chosen.some((r) => r.claims.length > 0)) {
    throw new UsageError(`No claim about a function "${options.function}" is made in the given paths.${offer(results.flatMap((r) => r.claims.map((c) => c.function)))}`);
  }
  const show = (file: string) => shown(file, folder);
  const claims = chosen.flatMap((r) => byLine(r.claims)).map((c) => shownClaim(c, show));
  const problems = chosen.flatMap((r) => r.problems).map((p) => ({ ...p, file: show(p.file) }));
  const count = (verdict: string) => claims.filter((c) => c.verdict === verdict).length;
  return {
    schema: 1,
    tool: { name: 'visviva', version },
    summary: {
      files,
      systems: chosen.reduce((n, r) => n + r.systems.length, 0),
      claims: claims.length,
      holds: count('holds'),
      differs: count('differs'),
      unread: count('unread'),
      problems: problems.length,
    },
    claims,
    problems,
    skipped: [...skipped].map((s) => ({ file: show(s.file), reason: s.reason })).sort((a, b) => byPath(a.file, b.file)),
  };
}

function choose(r: FileResult, options: CheckOptions): FileResult {
  const { system, function: name } = options;
  if (system === undefined && name === undefined) return r;
  const claims = r.claims.filter(
    (c) => (system === undefined || c.system === system) && (name === undefined || isNamed(c.function, name)),
  );
  const wanted = system ?? new Set(claims.map((c) => c.system));
  const systems = r.systems.filter((s) => (typeof wanted === 'string' ? s.name === wanted : wanted.has(s.name)));
  const problems = r.problems.filter((p) => systems.some((s) => isInside(p, s.range)));
  return { ...r, claims, systems, problems };
}

/** `rates` names the function rates and the method Crane.rates. */
function isNamed(path: string, name: string): boolean {
  return path === name || path.endsWith(`.${name}`);
}

function isInside(p: Problem, range: Problem['range']): boolean {
  return p.range.start.line >= range.start.line && p.range.start.line <= range.end.line;
}

function byLine(claims: readonly ReportClaim[]): ReportClaim[] {
  return [...claims].sort((a, b) => a.line - b.line);
}

function shownClaim(c: ReportClaim, show: (file: string) => string): ReportClaim {
  return {
    ...c,
    file: show(c.file),
    findings: c.findings.map((f) => (f.file === undefined ? f : { ...f, file: show(f.file) })),
  };
}

function statusOf(report: Report, options: CheckOptions): Status {
  const { claims, differs, unread } = report.summary;
  if (differs > 0 || unread > 0 || report.problems.some((p) => p.severity === 'error')) return 1;
  return claims === 0 && options.requireClaims ? 1 : 0;
}

function offer(names: readonly string[]): string {
  const known = [...new Set(names)].filter((n) => n !== '').sort(byPath);
  if (known.length === 0) return '';
  return ` Known: ${known.slice(0, 12).join(', ')}${known.length > 12 ? ', ...' : ''}.`;
}

export function describe(error: unknown): string {
  return error instanceof Error ? (error.stack ?? error.message) : String(error);
}
