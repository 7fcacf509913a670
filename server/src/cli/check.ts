import type { Report } from '@visviva/shared';
import { statSync } from 'node:fs';
import { dirname } from 'node:path';
import { absolute, shown, toSlashes } from '../host/paths';
import { repositoryOf, seenFrom } from '../host/repository';
import { readTextFile, type TextFile } from '../host/text-file';
import type { FileDetails, Service } from '../service/api';
import { handlesFile } from '../service/handles';
import { Budget } from '../text/budget';
import { assemble, type Choice } from './assemble';
import { againstBaseline, readBaseline, writeBaseline } from './baseline';
import { touchedSince } from './changed';
import { checkFiles, type CheckedFiles } from './checking/files';
import { fixFiles } from './fix';
import { projectOf, type Inputs } from './inputs';
import { UsageError, type Io, type Status } from './io';
import { judgementOf, statusOf, type Judgement } from './judgement';
import { withFingerprints } from './report/fingerprint';
import { openSession, type Session } from './session';
import { filesOfShard, type Shard } from './shard';

export interface CheckOptions extends Choice, Judgement {
  readonly fix?: boolean;
  readonly dryRun?: boolean;
  /** False: nothing is taken from earlier runs, nothing left for later ones. */
  readonly cache?: boolean;
  readonly changedSince?: string;
  readonly shard?: Shard;
  readonly baseline?: string;
  readonly updateBaseline?: boolean;
  /** The text that stands for this file. */
  readonly typed?: { readonly file: string; readonly text: string };
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
  return checkSession(openSession(paths, io), options, io);
}

/** The same in a session that goes on: what did not change is remembered. */
export async function checkSession(session: Session, options: CheckOptions, io: Io): Promise<Outcome> {
  const settings = session.settings();
  const touched = options.changedSince === undefined ? undefined : touchedSince(options.changedSince, io);
  const inputs = chosenInputs(session, options, io);
  const budget = () => new Budget({ milliseconds: MILLISECONDS_PER_FILE });
  const diff = options.fix ? await fixFiles(await session.service(), inputs.files, options, budget, io) : '';
  const all = options.typed ? await checkTyped(inputs.files[0]!, options.typed.text, session) : await checkNamed(inputs, session, options, io);
  for (const { file, failure } of all.failures) io.log(`Internal failure while checking ${shown(file, io.folder)}: ${failure}`);
  const results = touched ? all.results.filter(touched) : all.results;
  const skipped = [...inputs.skipped, ...all.skipped];
  const root = repositoryOf(io.folder);
  const nameOf = (file: string) => seenFrom(root, io.folder, file);
  const whole = assemble(results, skipped, touched ? results.length : all.read, options, (file) => shown(file, io.folder));
  const report = withFingerprints({ ...whole, ...(options.shard ? { shard: options.shard } : {}) }, (file) => {
    const text = textOf(toSlashes(absolute(file, io.folder)), options, io);
    return 'text' in text ? text.text : undefined;
  }, nameOf);
  const checked = new Set(inputs.files.map(nameOf));
  const partly = options.function !== undefined || options.system !== undefined || touched !== undefined;
  const known = baselineOf(options, settings, io);
  const covers = (file: string) => !partly && (checked.has(file) || (!options.shard && !exists(absolute(file, root))));
  if (options.updateBaseline) updateBaseline(known, report, nameOf, covers, io);
  const judged = known === undefined ? report : withAcceptedCount(againstBaseline(report, readBaseline(known, io), covers));
  const details = async (file: string) => (await session.service()).details(toSlashes(absolute(file, io.folder)), budget());
  const status = all.failures.length > 0 ? 2 : statusOf(judged, judgementOf(options, settings.settings));
  return { report: judged, details, status, ...(options.fix && options.dryRun ? { diff } : {}) };
}

function checkNamed(inputs: Inputs, { disk }: Session, options: CheckOptions, io: Io): Promise<CheckedFiles> {
  const progress = new Progress(io);
  // What --fix would change is not what the files hold.
  const useCache = options.cache !== false && !options.fix;
  const done = (file: string, total: number) => progress.step(file, total);
  return checkFiles(inputs.files, { disk, projects: inputs.projects, milliseconds: MILLISECONDS_PER_FILE, useCache, done }).finally(() => progress.end());
}

async function checkTyped(file: string, text: string, session: Session): Promise<CheckedFiles> {
  const service = await session.service();
  service.update(file, text);
  const budget = new Budget({ milliseconds: session.disk.settings(file).timeLimit ?? MILLISECONDS_PER_FILE });
  return { results: [await service.check(file, budget)], skipped: [], failures: [], read: 1 };
}

function chosenInputs(session: Session, options: CheckOptions, io: Io): Inputs {
  const { typed, shard } = options;
  if (typed) {
    const file = toSlashes(absolute(typed.file, io.folder));
    if (!handlesFile(file)) throw new UsageError(`--stdin-filename ${typed.file}: files of this kind are not read.`);
    session.inputs();
    return { files: [file], skipped: [], projects: [projectOf(file)], named: new Set([file]) };
  }
  const inputs = session.inputs();
  return shard ? { ...inputs, files: filesOfShard(inputs.files, shard, sizeOf), skipped: shard.index === 1 ? inputs.skipped : [] } : inputs;
}

function textOf(file: string, { typed }: CheckOptions, io: Io): TextFile {
  return typed && toSlashes(absolute(typed.file, io.folder)) === file ? { text: typed.text } : readTextFile(file);
}

function sizeOf(file: string): number {
  return statSync(file, { throwIfNoEntry: false })?.size ?? 0;
}

function exists(file: string): boolean {
  return statSync(file, { throwIfNoEntry: false }) !== undefined;
}

/** The baseline's file: of the command line, or of the configuration, whose folder its name is taken from. */
function baselineOf(options: CheckOptions, { file, settings }: ReturnType<Session['settings']>, io: Io): string | undefined {
  if (options.baseline !== undefined) return options.baseline;
  if (settings.baseline !== undefined) return absolute(settings.baseline, dirname(file!));
  if (options.updateBaseline) throw new UsageError(`--update-baseline writes the file that --baseline names: give both. (From ${io.folder} no configuration names one.)`);
  return undefined;
}

function updateBaseline(file: string | undefined, report: Report, nameOf: (file: string) => string, covers: (file: string) => boolean, io: Io): void {
  const refused = writeBaseline(file!, report, nameOf, covers, io);
  if (refused !== undefined) throw new UsageError(`The baseline "${file!}" was not written: ${refused}.`);
}

function withAcceptedCount(report: Report): Report {
  const accepted = [...report.claims.flatMap((c) => c.findings), ...report.problems].filter((f) => f.accepted).length;
  return accepted === 0 ? report : { ...report, summary: { ...report.summary, accepted } };
}

/** A line on standard error for those who wait, gone when the work is done. */
class Progress {
  private readonly start = performance.now();
  private shown = 0;
  private at = 0;

  constructor(private readonly io: Io) {}

  step(file: string, total: number): void {
    this.at++;
    const now = performance.now();
    if (!this.io.isWatched || now - this.start < 1500 || now - this.shown < 100) return;
    this.shown = now;
    this.io.status(`${this.at} of ${total}  ${shown(file, this.io.folder).slice(-60)}`);
  }

  end(): void {
    if (this.shown > 0) this.io.status('');
  }
}

/** A session with what the paths name, for commands about one file. */
export async function openService(paths: readonly string[], io: Io): Promise<{ service: Service; inputs: Inputs }> {
  const session = openSession(paths, io);
  return { inputs: session.inputs(), service: await session.service() };
}

export function describe(error: unknown): string {
  return error instanceof Error ? (error.stack ?? error.message) : String(error);
}
