import { existsSync, readFileSync } from 'node:fs';
import { dirname } from 'node:path';
import ignore, { type Ignore } from 'ignore';
import { shown, toSlashes } from '../host/paths';
import { ignoreFiles } from '../host/walk';

/**
 * What the ignore files above a folder, up to the root of its repository, say about files below the folder. The
 * search through the folder itself reads the ones inside it.
 */
export function ignoredAbove(folder: string): (file: string) => boolean {
  const rules: { readonly folder: string; readonly matcher: Ignore }[] = [];
  for (let above = dirname(folder), below = folder; !existsSync(`${below}/.git`) && above !== below; ) {
    for (const name of ignoreFiles) {
      const matcher = readRules(`${above}/${name}`);
      if (matcher) rules.push({ folder: above, matcher });
    }
    below = above;
    above = dirname(above);
  }
  // A folder that is ignored as a whole was asked for by name; its files are wanted then.
  const apply = rules.filter((r) => !r.matcher.ignores(`${toSlashes(shown(folder, r.folder))}/`));
  return (file) => apply.some((r) => r.matcher.ignores(toSlashes(shown(file, r.folder))));
}

function readRules(file: string): Ignore | undefined {
  try {
    return existsSync(file) ? ignore().add(readFileSync(file, 'utf8')) : undefined;
  } catch {
    return undefined;
  }
}
