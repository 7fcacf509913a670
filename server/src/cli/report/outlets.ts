import { statSync } from 'node:fs';
import { dirname } from 'node:path';
import { absolute } from '../../host/paths';
import { writeWholeFile } from '../../host/write-file';
import { UsageError, type Io } from '../io';
import { formats } from './formats';
import type { Page } from './page';

/** A report that was asked for: its format, and the file it goes to; standard output where there is none. */
export interface Outlet {
  readonly format: string;
  readonly file?: string;
}

/**
 * `FORMAT` or `FORMAT=FILE`, as often as they are given.
 * @throws UsageError before any work is done, for what could not be written afterwards
 */
export function parseOutlets(values: readonly string[], folder: string): Outlet[] {
  const outlets = (values.length === 0 ? ['text'] : values).map((value): Outlet => {
    const at = value.indexOf('=');
    const format = at < 0 ? value : value.slice(0, at);
    if (!Object.hasOwn(formats, format)) {
      throw new UsageError(`There is no format "${format}". The formats are: ${Object.keys(formats).join(', ')}; FORMAT=FILE writes to a file.`);
    }
    if (at < 0) return { format };
    const file = value.slice(at + 1);
    if (file === '') throw new UsageError(`--format ${value}: the name of the file is missing after "=".`);
    return { format, file };
  });
  const toOutput = outlets.filter((o) => o.file === undefined);
  if (toOutput.length > 1) {
    throw new UsageError(`Only one report can go to standard output, not ${toOutput.map((o) => o.format).join(' and ')}: give the others a file, as in --format ${toOutput[1]!.format}=FILE.`);
  }
  const seen = new Map<string, string>();
  for (const o of outlets) {
    if (o.file === undefined) continue;
    const path = absolute(o.file, folder);
    const other = seen.get(path);
    if (other !== undefined) throw new UsageError(`The ${other} and the ${o.format} report cannot both go to "${o.file}".`);
    seen.set(path, o.format);
    const fault = placeFault(path);
    if (fault) throw new UsageError(`The ${o.format} report cannot go to "${o.file}": ${fault}.`);
  }
  return outlets;
}

function placeFault(path: string): string | undefined {
  try {
    if (statSync(path, { throwIfNoEntry: false })?.isDirectory()) return 'it is a folder; name a file in it';
    if (!statSync(dirname(path), { throwIfNoEntry: false })?.isDirectory()) return `there is no folder ${dirname(path)}; make it first`;
  } catch (error) {
    return (error as NodeJS.ErrnoException).code === 'ENAMETOOLONG' ? 'its name is too long' : `that place cannot be looked at (${(error as NodeJS.ErrnoException).code})`;
  }
  return undefined;
}

/**
 * Writes every report, each whole or not at all.
 * @returns false where one could not be written; the reason is told
 */
export async function writeOutlets(outlets: readonly Outlet[], page: Page, io: Io): Promise<boolean> {
  let written = true;
  for (const { format, file } of outlets) {
    const text = await formats[format]!.write({ ...page, colour: page.colour && file === undefined });
    if (file === undefined) {
      io.out(text);
      continue;
    }
    const refused = writeWholeFile(absolute(file, io.folder), text);
    if (refused === undefined) continue;
    written = false;
    io.log(`The ${format} report was not written to "${file}": ${refused}.`);
  }
  return written;
}
