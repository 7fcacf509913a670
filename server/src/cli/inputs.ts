import { existsSync, lstatSync, statSync } from 'node:fs';
import { dirname } from 'node:path';
import { globSync, isDynamicPattern } from 'tinyglobby';
import { absolute, shown, toSlashes } from '../host/paths';
import { walk } from '../host/walk';
import { ignoredAbove } from './ignored';
import { UsageError } from './io';

export interface Inputs {
  /** Absolute paths, each once, in order of their names. */
  readonly files: readonly string[];
  readonly skipped: readonly Skipped[];
  /** The folders whose files may declare what these files refer to. */
  readonly projects: readonly string[];
  /** Files that were named one by one. */
  readonly named: ReadonlySet<string>;
}

export interface Skipped {
  readonly file: string;
  readonly reason: string;
}

/** Folders of built output; looked into only when they are named. */
const BUILT = /(^|\/)dist\//;

/** Files whose folder is the root of a project. */
const ROOT_MARKS = ['.git', 'package.json', 'pyproject.toml', 'Cargo.toml', 'go.mod', 'CMakeLists.txt', 'Project.toml', 'pom.xml'];

/**
 * The source files that the given paths name. A file named by itself is taken whatever its name; folders are searched.
 * @throws UsageError for a path that does not exist
 */
export function findInputs(paths: readonly string[], base: string, handles: (file: string) => boolean): Inputs {
  const files = new Set<string>();
  const skipped = new Map<string, string>();
  const projects = new Set<string>();
  const named = new Set<string>();
  for (const path of paths.length === 0 ? ['.'] : paths) {
    const full = absolute(path, base);
    if (!exists(full) && isDynamicPattern(path)) {
      const found = matching(path, base, handles);
      if (found.length === 0) throw new UsageError(`No source file matches "${path}". Patterns are taken from ${base}.`);
      for (const f of found) files.add(f);
      projects.add(base);
      continue;
    }
    if (!exists(full)) throw new UsageError(`There is no file or folder "${path}". Paths are taken from ${base}.`);
    if (isFolder(full)) {
      projects.add(full);
      const found = walk(full, handles);
      const ignored = ignoredAbove(full);
      for (const f of found.files) if (!isHidden(f, full) && !BUILT.test(below(f, full)) && !ignored(f)) files.add(f);
      for (const s of found.skipped) if (!isHidden(s.file, full)) skipped.set(s.file, s.reason);
    } else {
      const file = toSlashes(full);
      projects.add(projectOf(file));
      named.add(file);
      if (handles(file)) files.add(file);
      else skipped.set(file, 'files of this kind are not read');
    }
  }
  return {
    files: [...files].sort(byPath),
    skipped: [...skipped].map(([file, reason]) => ({ file, reason })),
    projects: [...projects].sort(byPath),
    named,
  };
}

/** What a pattern matches, less what a search through the folder would leave out. */
function matching(pattern: string, base: string, handles: (file: string) => boolean): string[] {
  const matched = new Set(globSync(pattern, { cwd: base, absolute: true, ignore: ['**/node_modules/**', '**/.git/**'] }).map(toSlashes));
  const ignored = ignoredAbove(base);
  return walk(base, (file) => matched.has(file) && handles(file)).files.filter((file) => !ignored(file));
}

/** A fixed order, the same on every machine. */
export function byPath(a: string, b: string): number {
  return a < b ? -1 : a > b ? 1 : 0;
}

/** The nearest folder above a file that looks like the root of a project; the file's own folder where none does. */
export function projectOf(file: string): string {
  const own = dirname(file);
  for (let folder = own; ; folder = dirname(folder)) {
    if (ROOT_MARKS.some((mark) => existsSync(`${folder}/${mark}`))) return folder;
    if (dirname(folder) === folder) return own;
  }
}

function below(file: string, root: string): string {
  return toSlashes(shown(file, root));
}

function isHidden(file: string, root: string): boolean {
  return below(file, root).split('/').some((part) => part.startsWith('.') && part !== '.' && part !== '..');
}

function exists(path: string): boolean {
  try {
    lstatSync(path);
    return true;
  } catch {
    return false;
  }
}

function isFolder(path: string): boolean {
  try {
    return statSync(path).isDirectory();
  } catch {
    return false;
  }
}
