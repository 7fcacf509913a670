import { shown } from '../host/paths';
import { rewriteTextFile } from '../host/rewrite';
import { readTextFile } from '../host/text-file';
import type { Service } from '../service/api';
import { repairDocument } from '../service/repairs';
import { unifiedDiff } from '../service/unified-diff';
import type { Budget } from '../text/budget';
import type { Io } from './io';

export interface FixOptions {
  /** Make the verified repairs in the files. */
  readonly fix?: boolean;
  /** With `fix`: print them as a diff instead. */
  readonly dryRun?: boolean;
}

/** Repairs files before they are reported on; with `dryRun` they stay as they are and the diff is returned. */
export async function fixFiles(service: Service, files: readonly string[], options: FixOptions, budget: () => Budget, io: Io): Promise<string> {
  let diff = '';
  for (const file of files) {
    const read = readTextFile(file);
    if ('skipped' in read || !read.text.includes('@visviva')) continue;
    const repaired = await repairDocument(service, file, read.text, budget);
    service.close(file);
    if (repaired.titles.length === 0) continue;
    const name = shown(file, io.folder);
    if (options.dryRun) {
      diff += unifiedDiff(name, read.text, repaired.text);
      continue;
    }
    const refused = rewriteTextFile(file, read.text, repaired.text);
    service.invalidate(file);
    io.log(refused ? `${name} is not repaired: ${refused}.` : [`${name} is repaired:`, ...repaired.titles.map((t) => `  ${t}`)].join('\n'));
  }
  return diff;
}
