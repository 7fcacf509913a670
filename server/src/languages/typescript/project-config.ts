import ts from 'typescript';
import { directoryOf, joinPath } from './paths';

interface Files {
  read(path: string): string | undefined;
}

interface PathRules {
  readonly baseUrl?: string;
  /** Patterns with their replacements, already joined to the folder they are relative to. */
  readonly paths?: readonly { readonly pattern: string; readonly targets: readonly string[] }[];
}

const NAMES = ['tsconfig.json', 'jsconfig.json'];

/** Longest chain of `extends` and of folders upwards that is followed. */
const MOST_STEPS = 64;

/** The paths that the nearest project file gives for an import that is not relative, best first. */
export function pathMappings(wanted: string, importer: string, files: Files): string[] {
  const config = nearestConfig(importer, files);
  if (config === undefined) return [];
  const rules = pathRules(config, files);
  const mapped = bestMatch(wanted, rules.paths ?? []);
  return rules.baseUrl === undefined ? mapped : [...mapped, joinPath(rules.baseUrl, wanted)];
}

function nearestConfig(importer: string, files: Files): string | undefined {
  let directory = directoryOf(importer);
  for (let i = 0; i < MOST_STEPS; i++) {
    for (const name of NAMES) {
      const path = joinPath(directory, name);
      if (files.read(path) !== undefined) return path;
    }
    if (directory === '/' || directory === '.' || /^[a-z]:$/i.test(directory)) return undefined;
    directory = directoryOf(directory);
  }
  return undefined;
}

/**
 * What a project file says about paths, with what it extends. A file that only gathers others by `references` takes the
 * rules of the first of them that has any.
 */
function pathRules(config: string, files: Files): PathRules {
  const seen = new Set<string>();
  const read = (path: string): PathRules => {
    if (seen.has(path) || seen.size > MOST_STEPS) return {};
    seen.add(path);
    const content = object(parsed(path, files));
    const folder = directoryOf(path);
    let rules: PathRules = {};
    for (const base of strings(content['extends'])) {
      const found = extended(base, folder, files);
      if (found !== undefined) rules = { ...rules, ...read(found) };
    }
    rules = { ...rules, ...ownRules(object(content['compilerOptions']), folder, rules.baseUrl) };
    if (rules.paths || rules.baseUrl !== undefined) return rules;
    for (const reference of list(content['references'])) {
      const target = object(reference)['path'];
      if (typeof target !== 'string') continue;
      const joined = joinPath(folder, target);
      const inner = read(joined.endsWith('.json') ? joined : joinPath(joined, 'tsconfig.json'));
      if (inner.paths || inner.baseUrl !== undefined) return inner;
    }
    return rules;
  };
  return read(config);
}

function ownRules(options: Record<string, unknown>, folder: string, inheritedBase: string | undefined): PathRules {
  const base = options['baseUrl'];
  const baseUrl = typeof base === 'string' ? joinPath(folder, base) : undefined;
  const paths = options['paths'];
  const root = baseUrl ?? inheritedBase ?? folder;
  return {
    ...(baseUrl === undefined ? {} : { baseUrl }),
    ...(typeof paths === 'object' && paths !== null
      ? {
          paths: Object.entries(paths).map(([pattern, targets]) => ({
            pattern,
            targets: strings(targets).map((t) => joinPath(root, t)),
          })),
        }
      : {}),
  };
}

function parsed(path: string, files: Files): unknown {
  const text = files.read(path);
  return text === undefined ? undefined : (ts.parseConfigFileTextToJson(path, text) as { config?: unknown }).config;
}

function extended(base: string, folder: string, files: Files): string | undefined {
  if (!/^\.\.?\/|^\//.test(base)) return undefined;
  const path = joinPath(folder, base);
  return [path, `${path}.json`].find((p) => files.read(p) !== undefined);
}

/** The replacements of an exact pattern, else of the pattern with the longest text before its `*`. */
function bestMatch(wanted: string, rules: NonNullable<PathRules['paths']>): string[] {
  let best: { length: number; targets: string[] } | undefined;
  for (const { pattern, targets } of rules) {
    if (pattern === wanted) return [...targets];
    const star = pattern.indexOf('*');
    if (star < 0) continue;
    const tail = pattern.slice(star + 1);
    if (wanted.length < star + tail.length || !wanted.startsWith(pattern.slice(0, star)) || !wanted.endsWith(tail)) continue;
    const middle = wanted.slice(star, wanted.length - tail.length);
    if (!best || star > best.length) best = { length: star, targets: targets.map((t) => t.replace('*', () => middle)) };
  }
  return best?.targets ?? [];
}

function object(value: unknown): Record<string, unknown> {
  return typeof value === 'object' && value !== null ? (value as Record<string, unknown>) : {};
}

function list(value: unknown): readonly unknown[] {
  return Array.isArray(value) ? value : [];
}

function strings(value: unknown): string[] {
  return (Array.isArray(value) ? value : [value]).filter((v): v is string => typeof v === 'string');
}
