import { basename } from 'node:path';
import { Budget } from '../text/budget';
import { guardRunners, isGuardRunner, writeGuards } from '../service/guard/write';
import { openService } from './check';
import { UsageError, type Io, type Status } from './io';

/**
 * Prints a test of a file's functions against what their declarations give.
 * @returns 1 where no function can be tested so
 */
export async function deriveTest(file: string, options: { readonly as: string; readonly for?: string; readonly system?: string }, io: Io): Promise<Status> {
  const runners = Object.keys(guardRunners).join(', ');
  if (options.as !== 'test' || options.for === undefined) throw new UsageError(`A test is written by --as test --for RUNNER; the runners are ${runners}.`);
  const { for: runner } = options;
  if (!isGuardRunner(runner)) throw new UsageError(`There is no runner "${runner}". The runners are ${runners}.`);
  const { service, inputs } = await openService([file], io);
  const path = inputs.files[0];
  if (path === undefined || inputs.files.length > 1) throw new UsageError(`"${file}": ${inputs.skipped[0]?.reason ?? 'name one source file'}.`);
  const language = /\.pyw?$/.test(path) ? 'python' : /\.[mc]?[jt]sx?$/.test(path) ? 'typescript' : undefined;
  if (language !== guardRunners[runner]) throw new UsageError(`${runner} does not run tests of ${file}.`);
  const all = await service.guards(path, new Budget({ milliseconds: 120_000 }));
  const wanted = all.filter((g) => options.system === undefined || g.system === options.system);
  for (const g of wanted) if ('refused' in g) io.log(`${g.function === '' ? g.system : g.function} is not covered: ${g.refused}.`);
  if (!wanted.some((g) => 'cases' in g)) {
    if (wanted.length === 0) io.log(`${file} makes no claim${options.system === undefined ? '' : ` about a system "${options.system}"`}.`);
    return 1;
  }
  io.out(writeGuards(wanted, basename(path).replace(/\.[^.]+$/, ''), runner));
  return 0;
}
