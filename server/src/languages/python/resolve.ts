import { MODULES } from './library-modules';

/** The files of the project, by path; undefined where there is none. */
export interface Files {
  read(path: string): string | undefined;
}

/**
 * The file a module name means, seen from the file that imports it: `.rig` and `..parts.rig` from its folder, `rig` and
 * `harbour.rig` beside it, then in the folders above and their `src`. Undefined for packages and for what is not there.
 * Paths are answered with `/`, beginning as `importer` does.
 */
export function resolveImport(from: string, importer: string, files: Files): string | undefined {
  const file = importer.replace(/\\/g, '/');
  const folder = file.slice(0, Math.max(0, file.lastIndexOf('/')));
  const dots = /^\.*/.exec(from)![0].length;
  const path = from.slice(dots).split('.').filter((p) => p !== '');
  if (dots > 0) {
    let at: string | undefined = folder;
    for (let k = 1; k < dots && at !== undefined; k++) at = parentOf(at);
    return at === undefined ? undefined : existing(at, path, files);
  }
  if (path.length === 0 || MODULES.has(path[0]!)) return undefined;
  for (let at: string | undefined = folder, k = 0; at !== undefined && k < 12; at = parentOf(at), k++) {
    const found = existing(at, path, files) ?? existing(join(at, 'src'), path, files);
    if (found !== undefined && found !== file) return found;
  }
  return undefined;
}

function existing(folder: string, path: readonly string[], files: Files): string | undefined {
  const base = path.reduce(join, folder);
  const candidates = path.length === 0 ? [join(base, '__init__.py')] : [`${base}.py`, join(base, '__init__.py')];
  return candidates.find((p) => files.read(p) !== undefined);
}

function parentOf(folder: string): string | undefined {
  if (folder === '' || folder === '.' || /^(?:[a-zA-Z]:)?\/?$/.test(folder)) return undefined;
  const at = folder.lastIndexOf('/');
  if (at < 0) return '';
  return at === 0 ? undefined : folder.slice(0, at);
}

function join(folder: string, name: string): string {
  return folder === '' ? name : `${folder}/${name}`;
}
