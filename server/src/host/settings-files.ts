import { readProjectSettings, type ProjectSettings } from '@visviva/shared';
import ignore, { type Ignore } from 'ignore';
import { parse as parseJson, printParseErrorCode, type ParseError } from 'jsonc-parser';
import { existsSync, readFileSync } from 'node:fs';
import { dirname, relative } from 'node:path';
import { parse as parseToml } from 'smol-toml';
import { toSlashes } from './paths';

/** The settings that hold for a folder, and where they come from. */
export interface FoundSettings {
  /** Undefined where no file has any. */
  readonly file?: string;
  readonly settings: ProjectSettings;
  /** What is wrong with the file, each a sentence without its full stop. */
  readonly faults: readonly string[];
}

const NONE: FoundSettings = { settings: {}, faults: [] };

/** The names that settings are looked for under, the first that has any wins. */
export const settingsFileNames = ['visviva.json', 'package.json', 'pyproject.toml'] as const;

export function isSettingsFile(file: string): boolean {
  return settingsFileNames.some((name) => file.endsWith(`/${name}`));
}

/** Settings of folders, from the nearest file that has any; remembered until told of a change. */
export class SettingsFiles {
  private readonly byFolder = new Map<string, FoundSettings>();
  private readonly matchers = new Map<FoundSettings, { readonly include?: Ignore; readonly exclude?: Ignore }>();

  ofFile(file: string): FoundSettings {
    return this.ofFolder(dirname(file));
  }

  ofFolder(folder: string): FoundSettings {
    const known = this.byFolder.get(folder);
    if (known) return known;
    const own = readFolder(folder);
    const above = dirname(folder);
    // A repository's settings end at its root.
    const found = own ?? (above === folder || existsSync(`${folder}/.git`) ? NONE : this.ofFolder(above));
    this.byFolder.set(folder, found);
    return found;
  }

  /** Why a file is left out, as the end of a sentence; undefined where it is not. */
  reasonToSkip(file: string): string | undefined {
    const found = this.ofFile(file);
    if (found.file === undefined) return undefined;
    let matcher = this.matchers.get(found);
    if (!matcher) {
      const { include, exclude } = found.settings;
      matcher = { ...(include ? { include: ignore().add([...include]) } : {}), ...(exclude ? { exclude: ignore().add([...exclude]) } : {}) };
      this.matchers.set(found, matcher);
    }
    const path = toSlashes(relative(dirname(found.file), file));
    if (matcher.exclude?.ignores(path)) return `"exclude" of ${found.file} leaves it out`;
    if (matcher.include && !matcher.include.ignores(path)) return `"include" of ${found.file} does not take it`;
    return undefined;
  }

  reset(): void {
    this.byFolder.clear();
    this.matchers.clear();
  }
}

function readFolder(folder: string): FoundSettings | undefined {
  for (const name of settingsFileNames) {
    const file = toSlashes(`${folder === '/' ? '' : folder}/${name}`);
    if (!existsSync(file)) continue;
    const found = readSettingsFile(file, name);
    if (found) return found;
  }
  return undefined;
}

function readSettingsFile(file: string, name: (typeof settingsFileNames)[number]): FoundSettings | undefined {
  let text: string;
  try {
    text = readFileSync(file, 'utf8').replace(/^\ufeff/, '');
  } catch (error) {
    return name === 'visviva.json' ? { file, settings: {}, faults: [`it cannot be read (${(error as NodeJS.ErrnoException).code})`] } : undefined;
  }
  // Other people's files are only looked at where they speak of this program.
  if (name !== 'visviva.json' && !text.includes('visviva')) return undefined;
  const value = name === 'pyproject.toml' ? fromToml(text) : fromJson(text);
  if ('fault' in value) return name === 'visviva.json' || /tool\.visviva/.test(text) ? { file, settings: {}, faults: [value.fault] } : undefined;
  const own = name === 'visviva.json' ? value.value : name === 'package.json' ? at(value.value, 'visviva') : at(at(value.value, 'tool'), 'visviva');
  return own === undefined ? undefined : { file, ...readProjectSettings(own) };
}

function at(value: unknown, key: string): unknown {
  return typeof value === 'object' && value !== null && Object.hasOwn(value, key) ? (value as Record<string, unknown>)[key] : undefined;
}

type Parsed = { readonly value: unknown } | { readonly fault: string };

function fromJson(text: string): Parsed {
  const errors: ParseError[] = [];
  const value = parseJson(text, errors, { allowTrailingComma: true, disallowComments: false }) as unknown;
  const [first] = errors;
  if (!first) return { value };
  const line = text.slice(0, first.offset).split('\n').length;
  return { fault: `line ${line}: it is not JSON (${printParseErrorCode(first.error)})` };
}

function fromToml(text: string): Parsed {
  try {
    return { value: parseToml(text) };
  } catch (error) {
    return { fault: `it is not TOML (${(error as Error).message.split('\n')[0]!})` };
  }
}
