import { isAbsolute, relative, resolve } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';

/** A path with `/` between folders, as the service takes it. */
export function toSlashes(path: string): string {
  return path.replaceAll('\\', '/');
}

/** Absolute, with `/` between folders. */
export function absolute(path: string, base = process.cwd()): string {
  const full = resolve(base, path);
  return process.platform === 'win32' ? toSlashes(full) : full;
}

/** The shortest way to show a path to a person: relative to `base` where it lies below it. */
export function shown(path: string, base = process.cwd()): string {
  const short = relative(base, path);
  return short === '' || short.startsWith('..') || isAbsolute(short) ? path : toSlashes(short);
}

/** The path of a `file:` address; undefined for every other scheme and for addresses that are no path. */
export function pathOf(uri: string): string | undefined {
  if (!/^file:/i.test(uri)) return undefined;
  try {
    const path = fileURLToPath(uri);
    return process.platform === 'win32' ? toSlashes(path) : path;
  } catch {
    return undefined;
  }
}

export function uriOf(path: string): string {
  return pathToFileURL(path).href;
}
