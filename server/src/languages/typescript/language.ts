import type { LanguageCore } from '../language';
import { typescriptLibrary } from './library';
import { TypeScriptParser } from './parser';
import { resolveImport } from './resolve';

const parser = new TypeScriptParser();

/** TypeScript, JavaScript and the scripts of HTML pages. Loaded on first use only: it brings a whole compiler along. */
export const core: LanguageCore = {
  parse: (file, text) => parser.parse(file, text),
  library: typescriptLibrary,
  resolveImport,
};
