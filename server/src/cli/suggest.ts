import { Budget } from '../text/budget';
import { openService } from './check';
import { UsageError, type Io, type Status } from './io';
import { harmless } from './report/width';

/**
 * Prints a first declaration for each function of a file that looks like dynamics and has none.
 * @returns 1 where there is nothing to suggest
 */
export async function suggest(file: string, only: string | undefined, io: Io): Promise<Status> {
  const { service, inputs } = await openService([file], io);
  const path = inputs.files[0];
  if (path === undefined || inputs.files.length > 1) {
    const why = inputs.files.length > 1 ? 'is a folder; name one file' : (inputs.skipped[0]?.reason ?? 'holds no source file');
    throw new UsageError(`"${file}": ${why}.`);
  }
  const all = await service.suggest(path, new Budget({ milliseconds: 30_000 }));
  const wanted = all.filter((s) => only === undefined || s.function === only || s.function.endsWith(`.${only}`));
  if (wanted.length === 0) {
    io.log(`${file}: no function here looks like dynamics without a declaration${only === undefined ? '' : ` under the name "${only}"`}.`);
    return 1;
  }
  io.out(wanted.map((s) => `${harmless(s.function)}, line ${s.range.start.line}\n\n${s.text}\n`).join('\n'));
  return 0;
}
