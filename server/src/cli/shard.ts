import { InvalidArgumentError } from 'commander';
import { byPath } from './inputs';

/** One of several parts of a run: `index` from 1. */
export interface Shard {
  readonly index: number;
  readonly count: number;
}

export function parseShard(text: string): Shard {
  const m = /^(\d{1,4})\/(\d{1,4})$/.exec(text);
  const [index, count] = [Number(m?.[1]), Number(m?.[2])];
  if (!m || index < 1 || index > count) throw new InvalidArgumentError('It must be I/N, such as 2/4: the second of four parts.');
  return { index, count };
}

/**
 * The files of one part. Largest first, each goes to the part that has least so far (R. L. Graham, Bounds on multiprocessing
 * timing anomalies, 1969): the same on every machine that has the same files.
 * @param weight about how long a file takes
 */
export function filesOfShard(files: readonly string[], { index, count }: Shard, weight: (file: string) => number): string[] {
  const loads = new Array<number>(count).fill(0);
  const weighed = files.map((file) => ({ file, weight: weight(file) })).sort((a, b) => b.weight - a.weight || byPath(a.file, b.file));
  const mine: string[] = [];
  for (const w of weighed) {
    let least = 0;
    for (let k = 1; k < count; k++) if (loads[k]! < loads[least]!) least = k;
    loads[least] = loads[least]! + w.weight + 1;
    if (least === index - 1) mine.push(w.file);
  }
  return mine.sort(byPath);
}
