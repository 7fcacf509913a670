import { pathMappings } from './project-config';
import { directoryOf, joinPath, slashes } from './paths';
import { extensionOf } from './source';

/** The files of the project, by path; undefined where there is none. */
export interface Files {
  read(path: string): string | undefined;
}

const TYPED = ['.ts', '.tsx', '.mts', '.cts'];
const PLAIN = ['.js', '.jsx', '.mjs', '.cjs'];

/** The source that a compiled name stands for: `./crane.js` is often `crane.ts`. */
const SOURCES: Readonly<Record<string, readonly string[]>> = {
  '.js': ['.ts', '.tsx'],
  '.jsx': ['.tsx'],
  '.mjs': ['.mts'],
  '.cjs': ['.cts'],
};

/**
 * The file an import means: relative paths with or without extension, folders with an `index` file, and the `paths` and
 * `baseUrl` of the nearest `tsconfig.json` or `jsconfig.json`. Undefined for packages and for what is not there.
 * Paths are answered with `/`, beginning as `importer` does.
 */
export function resolveImport(from: string, importer: string, files: Files): string | undefined {
  const wanted = from.replace(/[?#].*$/, '');
  const file = slashes(importer);
  const order = TYPED.includes(`.${extensionOf(file)}`) ? [...TYPED, ...PLAIN] : [...PLAIN, ...TYPED];
  const find = (path: string) => existing(path, order, files);
  if (/^\.\.?(?:\/|$)/.test(wanted)) return find(joinPath(directoryOf(file), wanted));
  if (wanted === '' || wanted.startsWith('/') || /^[a-z]+:/i.test(wanted)) return undefined;
  for (const path of pathMappings(wanted, file, files)) {
    const found = find(path);
    if (found !== undefined) return found;
  }
  return undefined;
}

function existing(path: string, order: readonly string[], files: Files): string | undefined {
  const name = path.replace(/\/$/, '');
  return candidates(name, order).find((p) => files.read(p) !== undefined);
}

function candidates(path: string, order: readonly string[]): string[] {
  const extension = /\.[cm]?[jt]sx?$/.exec(path)?.[0];
  const guesses = [...order.map((e) => path + e), ...order.map((e) => joinPath(path, `index${e}`))];
  if (extension === undefined) return guesses;
  const stem = path.slice(0, -extension.length);
  const sources = (SOURCES[extension] ?? []).map((e) => stem + e);
  return order[0] === '.ts' ? [...sources, path, ...guesses] : [path, ...sources, ...guesses];
}
