import { existsSync } from 'node:fs';
import { dirname, relative } from 'node:path';
import { absolute, toSlashes } from './paths';

/** The root of the repository that a folder lies in; the folder itself where it lies in none. */
export function repositoryOf(folder: string): string {
  for (let here = folder; ; here = dirname(here)) {
    if (existsSync(`${here}/.git`)) return here;
    if (dirname(here) === here) return folder;
  }
}

/** A path of a report, which is relative to `folder` or absolute, seen from `root`; absolute where it lies outside. */
export function seenFrom(root: string, folder: string, path: string): string {
  const full = absolute(path, folder);
  const short = toSlashes(relative(root, full));
  return short === '' || /^\.\.(\/|$)/.test(short) ? full : short;
}
