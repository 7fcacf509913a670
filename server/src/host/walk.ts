import { readdirSync, readFileSync, realpathSync, statSync, type Dirent } from 'node:fs';
import { join } from 'node:path';
import ignore, { type Ignore } from 'ignore';
import { toSlashes } from './paths';

export interface Walk {
  /** Absolute paths with `/`, in order of their names, folder by folder. */
  readonly files: readonly string[];
  readonly skipped: readonly { readonly file: string; readonly reason: string }[];
}

/** Folders that hold no source of the project itself. */
const neverEntered = new Set(['node_modules', '.git', '.hg', '.svn', 'bower_components', '__pycache__', '.venv']);

/** Both are read; what the second says goes before the first. */
export const ignoreFiles = ['.gitignore', '.visvivaignore'] as const;

const depthLimit = 64;

interface Rules {
  readonly folder: string;
  readonly matcher: Ignore;
}

/**
 * All files below a folder that `wanted` accepts, without what ignore files on the way exclude. Symbolic links are
 * followed, each folder is entered once: links that lead back do no harm.
 */
export function walk(root: string, wanted: (file: string) => boolean, fileLimit = Infinity): Walk {
  const files: string[] = [];
  const skipped: { file: string; reason: string }[] = [];
  const entered = new Set<string>();

  const enter = (folder: string, rules: readonly Rules[], depth: number): void => {
    if (files.length >= fileLimit) return;
    if (depth > depthLimit) {
      skipped.push({ file: toSlashes(folder), reason: `it lies more than ${depthLimit} folders deep` });
      return;
    }
    let entries: Dirent[];
    try {
      const real = realpathSync(folder);
      if (entered.has(real)) return;
      entered.add(real);
      entries = readdirSync(folder, { withFileTypes: true }).sort((a, b) => (a.name < b.name ? -1 : 1));
    } catch (error) {
      skipped.push({ file: toSlashes(folder), reason: `the folder cannot be read (${codeOf(error)})` });
      return;
    }
    const here = withRules(rules, folder, ignoreFiles.filter((name) => entries.some((e) => e.name === name)));
    for (const entry of entries) {
      const { name } = entry;
      if (neverEntered.has(name)) continue;
      const path = join(folder, name);
      let isFolder: boolean;
      try {
        // Links, and what the file system does not tell the kind of, are looked at.
        const kind = entry.isFile() || entry.isDirectory() ? entry : statSync(path);
        isFolder = kind.isDirectory();
        if (!isFolder && (!kind.isFile() || !wanted(toSlashes(path)))) continue;
      } catch (error) {
        if (wanted(toSlashes(path))) {
          skipped.push({ file: toSlashes(path), reason: `it cannot be read (${codeOf(error)})` });
        }
        continue;
      }
      if (excluded(here, path, isFolder)) continue;
      if (isFolder) enter(path, here, depth + 1);
      else if (files.length < fileLimit) files.push(toSlashes(path));
    }
  };
  enter(root, [], 0);
  return { files, skipped };
}

function withRules(rules: readonly Rules[], folder: string, names: readonly string[]): readonly Rules[] {
  let all = rules;
  for (const name of names) {
    try {
      all = [...all, { folder, matcher: ignore().add(readFileSync(join(folder, name), 'utf8')) }];
    } catch {
      // What cannot be read excludes nothing.
    }
  }
  return all;
}

/** The innermost file with an opinion decides, as git does it. */
function excluded(rules: readonly Rules[], path: string, isFolder: boolean): boolean {
  for (let i = rules.length - 1; i >= 0; i--) {
    const { folder, matcher } = rules[i]!;
    const relative = toSlashes(path.slice(folder.length)).replace(/^\/+/, '');
    if (relative === '') continue;
    const answer = matcher.test(isFolder ? `${relative}/` : relative);
    if (answer.ignored) return true;
    if (answer.unignored) return false;
  }
  return false;
}

function codeOf(error: unknown): string {
  return (error as NodeJS.ErrnoException).code ?? String(error);
}
