import type { DiskFiles } from '../../host/files';
import { digest, type Reads } from '../../host/result-store';
import type { FileResult, Files } from '../../service/api';
import { createService } from '../../service/index';
import { Budget } from '../../text/budget';

/** A result, and all that it was made from. */
export interface Checked {
  readonly result: FileResult;
  readonly reads: Reads;
  readonly declaring: string | null;
  /** False where the time ran out: such a result is not kept. */
  readonly isWhole: boolean;
}

/** Checks one file by a service of its own, so that what it reads is known: remembered files would not be read again. */
export async function checkOneFile(file: string, disk: DiskFiles, milliseconds: number, clock: () => number): Promise<Checked> {
  const reads: Record<string, string | null> = {};
  let declaring: string | null = null;
  const files: Files = {
    read(name) {
      const text = disk.read(name);
      reads[name] = text === undefined ? null : digest(text);
      return text;
    },
    declarations() {
      const list = disk.declarations();
      declaring = digest(...list);
      return list;
    },
    settings: (name) => disk.settings(name),
    isLeftOut: (name) => disk.isLeftOut(name),
  };
  const budget = new Budget({ milliseconds: disk.settings(file).timeLimit ?? milliseconds }, clock);
  const result = await createService(files).check(file, budget);
  return { result, reads, declaring, isWhole: budget.why === undefined };
}
