import { Command, CommanderError, Option } from 'commander';
import { version } from '@visviva/shared';
import { readTextFile } from '../host/text-file';
import { absolute } from '../host/paths';
import { check, describe, type CheckOptions, type Outcome } from './check';
import { derive, deriveAgainst, DERIVE_FORMS, type DeriveForm } from './derive';
import { explain } from './explain';
import { UsageError, type Io, type Status } from './io';
import { suggest } from './suggest';
import { jsonReport } from './report/json';
import { textReport } from './report/text';

/** How a report is written, by the name that `--format` takes. */
const writers: Record<string, (outcome: Outcome, io: Io) => string> = {
  text: ({ report }, io) =>
    textReport(report, {
      colour: io.colour,
      read(file) {
        const text = readTextFile(absolute(file, io.folder));
        return 'text' in text ? text.text : undefined;
      },
    }),
  json: ({ report }) => jsonReport(report),
};

/**
 * Runs the command with its arguments (without the program's own name).
 * @returns its exit status; undefined when a server runs on
 */
export async function run(args: readonly string[], io: Io): Promise<Status | undefined> {
  let status: Status | undefined = 0;
  const program = createProgram(io, (s) => {
    status = s;
  });
  try {
    await program.parseAsync(args, { from: 'user' });
    return status;
  } catch (error) {
    if (error instanceof CommanderError) return error.exitCode === 0 ? 0 : 2;
    if (error instanceof UsageError) io.log(error.message);
    else io.log(`Internal failure: ${describe(error)}`);
    return 2;
  }
}

function createProgram(io: Io, finish: (status: Status | undefined) => void): Command {
  const program = new Command('visviva')
    .description('Checks hand-written dynamics code against the energies declared beside it.')
    .version(version)
    .exitOverride()
    .configureOutput({ writeOut: (s) => io.out(s), writeErr: (s) => io.log(s.replace(/\n$/, '')) })
    .showHelpAfterError('visviva --help tells how the command is used.');

  program
    .command('check')
    .description('check every claim in the given files and folders')
    .argument('[path...]', 'files and folders; the current folder when none is given')
    .addOption(new Option('--format <format>', 'how the report is written').choices(Object.keys(writers)).default('text'))
    .option('--require-claims', 'end with status 1 when nothing is claimed')
    .option('--function <name>', 'only claims about this function')
    .option('--system <name>', 'only this system')
    .option('--fix', 'make the repairs that were verified, then report')
    .option('--dry-run', 'with --fix: print the repairs as a diff and change nothing')
    .addHelpText('after', '\nExit status: 0 every claim holds, 1 something differs, is unread or wrongly declared, 2 failure.')
    .action(async (paths: string[], options: CheckOptions & { format: string }) => {
      if (options.dryRun && !options.fix) throw new UsageError('--dry-run says how --fix is to work: give both.');
      const outcome = await check(paths, options, io);
      io.out(outcome.diff ?? writers[options.format]!(outcome, io));
      finish(outcome.status);
    });

  program
    .command('explain')
    .description('tell what a code of the report means')
    .argument('[code]', 'the code; all are listed when none is given')
    .action((code?: string) => finish(explain(code, io)));

  program
    .command('derive')
    .description('print the equations that follow from what a file declares')
    .argument('<file>')
    .addOption(new Option('--as <form>', 'how they are written').choices([...DERIVE_FORMS]).default('text'))
    .option('--system <name>', 'only this system')
    .option('--against <file or name>', 'tell how they compare with those of another file, or with that system of the same file')
    .addHelpText('after', '\nExit status with --against: 0 the same equations of motion, 1 others or not decided, 2 failure.')
    .action(async (file: string, options: { as: DeriveForm; system?: string; against?: string }) => {
      if (options.against !== undefined) finish(await deriveAgainst(file, options.against, options.system, io));
      else finish(await derive(file, options.as, options.system, io));
    });

  program
    .command('suggest')
    .description('propose a first declaration for each function that looks like dynamics and has none')
    .argument('<file>')
    .option('--function <name>', 'only for this function')
    .addHelpText('after', '\nA proposal is a guess from names: complete the energies and read it before it counts.')
    .action(async (file: string, options: { function?: string }) => finish(await suggest(file, options.function, io)));

  program
    .command('serve')
    .description('run the language server, for an editor')
    .requiredOption('--stdio', 'speak on standard input and output')
    .action(async () => {
      finish(undefined);
      await import('../lsp/main');
    });

  return program;
}
