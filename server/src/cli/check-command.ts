import { Option, type Command } from 'commander';
import { repositoryOf } from '../host/repository';
import { readTextFile } from '../host/text-file';
import { absolute } from '../host/paths';
import { check, type CheckOptions, type Outcome } from './check';
import { UsageError, type Io, type Status } from './io';
import { addJudgement } from './judgement';
import { formats } from './report/formats';
import { parseOutlets, writeOutlets, type Outlet } from './report/outlets';
import type { Page } from './report/page';
import { parseShard } from './shard';
import { showConfig } from './show-config';
import { watch } from './watch';

interface Options extends CheckOptions {
  readonly format: readonly string[];
  readonly stdinFilename?: string;
  readonly showConfig?: boolean;
  readonly watch?: boolean;
}

/** Defines `visviva check`. */
export function addCheck(program: Command, io: Io, finish: (status: Status) => void): void {
  const command = program
    .command('check')
    .description('check every claim in the given files and folders')
    .argument('[path...]', 'files, folders and patterns such as "src/**/*.py"; - for standard input; the current folder when none is given')
    .addOption(formatOption())
    .option('--system <name>', 'only this system')
    .option('--function <name>', 'only claims about this function')
    .option('--changed-since <revision>', 'only claims whose code, helpers or declarations changed since then, by git')
    .option('--stdin-filename <name>', 'the name that the text on standard input goes by')
    .option('--watch', 'check again whenever a file changes')
    .addOption(new Option('--shard <i/n>', 'only one of n parts of the files, the same on every machine').argParser(parseShard))
    .option('--baseline <file>', 'accept the findings that this file lists, and tell those that are there no more')
    .option('--update-baseline', 'write all findings of today into the baseline');
  addJudgement(command)
    .option('--fix', 'make the repairs that were verified, then report')
    .option('--no-cache', 'check everything anew, and keep no results for the next run')
    .option('--dry-run', 'with --fix: print the repairs as a diff and change nothing')
    .option('--show-config', 'print the settings that hold here and where they come from, and check nothing')
    .addHelpText('after', () => `\n${formatList()}\n\n${EXAMPLES}\n\nExit status: 0 every claim holds, 1 something differs, is unread or wrongly declared, 2 failure.`)
    .action(async (paths: string[], options: Options) => finish(await runCheck(paths, options, io)));
}

const EXAMPLES = `Examples:
  visviva check src
  visviva check --changed-since origin/main --format github
  visviva check --format sarif=visviva.sarif --format text
  visviva check --baseline visviva-baseline.json --update-baseline`;

export function formatOption(): Option {
  return new Option('--format <format[=file]>', `how the report is written: ${Object.keys(formats).join(', ')}; may be given several times`)
    .argParser((value: string, before: readonly string[]) => [...before, value])
    .default([], 'text');
}

async function runCheck(paths: readonly string[], given: Options, io: Io): Promise<Status> {
  if (given.dryRun && !given.fix) throw new UsageError('--dry-run says how --fix is to work: give both.');
  if (given.showConfig) return showConfig(paths, io);
  const outlets = parseOutlets(given.format, io.folder);
  const options = withInput(paths, given, io);
  const named = options.typed ? [] : paths;
  const write = (outcome: Outcome) => writeCheck(outcome, outlets, options, io);
  if (!given.watch) return write(await check(named, options, io));
  if (options.typed || given.fix) throw new UsageError('--watch goes with files, and not with --fix.');
  return watch(named, options, write, io);
}

async function writeCheck(outcome: Outcome, outlets: readonly Outlet[], options: CheckOptions, io: Io): Promise<Status> {
  if (outcome.diff !== undefined) {
    io.out(outcome.diff);
    return outcome.status;
  }
  const page = pageOf(outcome, io);
  const { typed } = options;
  const read = (file: string) => (typed && absolute(file, io.folder) === absolute(typed.file, io.folder) ? typed.text : page.read(file));
  return (await writeOutlets(outlets, { ...page, read }, io)) ? outcome.status : 2;
}

/** `-` stands for text on standard input, under the name that goes with it. */
function withInput(paths: readonly string[], options: Options, io: Io): Options {
  const wanted = paths.includes('-');
  if (!wanted && options.stdinFilename === undefined) return options;
  if (!wanted || options.stdinFilename === undefined) {
    throw new UsageError('To check standard input, give "-" as the path and its name by --stdin-filename, as in: visviva check - --stdin-filename src/crane.ts');
  }
  if (paths.length > 1) throw new UsageError('"-" is the only path when standard input is checked.');
  if (options.fix) throw new UsageError('--fix changes files; standard input is none.');
  return { ...options, typed: { file: options.stdinFilename, text: io.input() } };
}

export function pageOf(outcome: Pick<Outcome, 'report' | 'details'>, io: Io): Page {
  return {
    report: outcome.report,
    folder: io.folder,
    root: repositoryOf(io.folder),
    colour: io.colour,
    environment: io.environment,
    read(file) {
      const text = readTextFile(absolute(file, io.folder));
      return 'text' in text ? text.text : undefined;
    },
    details: outcome.details,
  };
}

export function formatList(): string {
  const width = Math.max(...Object.keys(formats).map((f) => f.length));
  return ['Formats:', ...Object.entries(formats).map(([name, f]) => `  ${name.padEnd(width)}  ${f.about}`), 'FORMAT=FILE writes to a file; the rest goes to standard output.'].join('\n');
}
