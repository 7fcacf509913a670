import { createRequire } from 'node:module';
import { fileURLToPath } from 'node:url';
import { Language, Parser } from 'web-tree-sitter';
import { PythonParser } from './parser';

/** The files with compiled code that the parser needs: in the package they come from, else beside the bundle. */
const FILES = {
  runtime: { package: 'web-tree-sitter/web-tree-sitter.wasm', file: 'web-tree-sitter.wasm' },
  grammar: { package: 'tree-sitter-python/tree-sitter-python.wasm', file: 'tree-sitter-python.wasm' },
} as const;

let loaded: Promise<PythonParser> | undefined;

/** Loads the parser, once. */
export function loadParser(): Promise<PythonParser> {
  return (loaded ??= start());
}

async function start(): Promise<PythonParser> {
  await Parser.init({ locateFile: () => pathOf(FILES.runtime) });
  const language = await Language.load(pathOf(FILES.grammar));
  const parser = new Parser();
  parser.setLanguage(language);
  return new PythonParser(parser, language);
}

function pathOf(wanted: (typeof FILES)[keyof typeof FILES]): string {
  try {
    return createRequire(import.meta.url).resolve(wanted.package);
  } catch {
    // Bundled: the build puts them into dist/, one above the chunks.
    return fileURLToPath(new URL(`../${wanted.file}`, import.meta.url));
  }
}
