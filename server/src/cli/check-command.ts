import { Option, type Command } from 'commander';
import { repositoryOf } from '../host/repository';
import { readTextFile } from '../host/text-file';
import { absolute } from '../host/paths';
import { check, type CheckOptions, type Outcome } from './check';
import { UsageError, type Io, type Status } from './io';
import { formats } from './report/formats';
import { parseOutlets, writeOutlets } from './report/outlets';
import type { Page } from './report/page';

interface Options extends CheckOptions {
  readonly format: readonly string[];
}

/** Defines `visviva check`. */
export function addCheck(program: Command, io: Io, finish: (status: Status) => void): void {
  program
    .command('check')
    .description('check every claim in the given files and folders')
    .argument('[path...]', 'files and folders; the current folder when none is given')
    .addOption(
      new Option('--format <format[=file]>', `how the report is written: ${Object.keys(formats).join(', ')}; may be given several times`)
        .argParser((value: string, before: readonly string[]) => [...before, value])
        .default([], 'text'),
    )
    .option('--require-claims', 'end with status 1 when nothing is claimed')
    .option('--function <name>', 'only claims about this function')
    .option('--system <name>', 'only this system')
    .option('--fix', 'make the repairs that were verified, then report')
    .option('--no-cache', 'check everything anew, and keep no results for the next run')
    .option('--dry-run', 'with --fix: print the repairs as a diff and change nothing')
    .addHelpText('after', () => `\n${formatList()}\n\nExit status: 0 every claim holds, 1 something differs, is unread or wrongly declared, 2 failure.`)
    .action(async (paths: string[], options: Options) => finish(await runCheck(paths, options, io)));
}

async function runCheck(paths: readonly string[], options: Options, io: Io): Promise<Status> {
  if (options.dryRun && !options.fix) throw new UsageError('--dry-run says how --fix is to work: give both.');
  const outlets = parseOutlets(options.format, io.folder);
  const outcome = await check(paths, options, io);
  if (outcome.diff !== undefined) {
    io.out(outcome.diff);
    return outcome.status;
  }
  return (await writeOutlets(outlets, pageOf(outcome, io), io)) ? outcome.status : 2;
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

function formatList(): string {
  const width = Math.max(...Object.keys(formats).map((f) => f.length));
  return ['Formats:', ...Object.entries(formats).map(([name, f]) => `  ${name.padEnd(width)}  ${f.about}`), 'FORMAT=FILE writes to a file; the rest goes to standard output.'].join('\n');
}
