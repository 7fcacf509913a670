import { Command, CommanderError, Option } from 'commander';
import { version } from '@visviva/shared';
import { describe } from './check';
import { addCheck } from './check-command';
import { derive, deriveAgainst, DERIVE_FORMS, type DeriveForm } from './derive';
import { deriveTest } from './derive-test';
import { explain } from './explain';
import { guardRunners } from '../service/guard/write';
import { addCompletions } from './completions';
import { addCompare } from './compare';
import { addMerge } from './merge';
import { UsageError, type Io, type Status } from './io';
import { suggest } from './suggest';

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

  addCheck(program, io, finish);
  addMerge(program, io, finish);
  addCompare(program, io, finish);

  program
    .command('explain')
    .description('tell what a code of the report means')
    .argument('[code]', 'the code; all are listed when none is given')
    .action((code?: string) => finish(explain(code, io)));

  program
    .command('derive')
    .description('print the equations that follow from what a file declares')
    .argument('<file>')
    .addOption(new Option('--as <form>', 'how they are written').choices([...DERIVE_FORMS, 'test']).default('text'))
    .option('--for <runner>', `with --as test: the runner of the test, ${Object.keys(guardRunners).join(', ')}`)
    .option('--system <name>', 'only this system')
    .option('--against <file or name>', 'tell how they compare with those of another file, or with that system of the same file')
    .addHelpText('after', '\nExit status with --against: 0 the same equations of motion, 1 others or not decided, 2 failure.')
    .action(async (file: string, options: { as: DeriveForm | 'test'; for?: string; system?: string; against?: string }) => {
      if (options.as === 'test' || options.for !== undefined) finish(await deriveTest(file, options, io));
      else if (options.against !== undefined) finish(await deriveAgainst(file, options.against, options.system, io));
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

  addCompletions(program, io, finish);

  return program;
}
