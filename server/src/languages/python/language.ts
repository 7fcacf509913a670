import type { LanguageCore } from '../language';
import { pythonLibrary } from './library';
import { loadParser } from './load';
import { resolveImport } from './resolve';

/** Python. Loaded on first use only: its parser is compiled code of some size. */
export async function load(): Promise<LanguageCore> {
  const parser = await loadParser();
  return {
    parse: (file, text, version) => parser.parse(file, text, version),
    library: pythonLibrary,
    resolveImport,
  };
}
