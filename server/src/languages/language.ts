import type { Program } from '../program/form';
import type { Library } from '../program/library';

/** What a language's own folder gives. */
export interface LanguageCore {
  /**
   * Never throws; syntax errors are in the program. Spans are UTF-16 offsets into `text`.
   * @param version of the language, where the project says which; else what the text says of itself
   */
  parse(file: string, text: string, version?: number): Program;
  readonly library: Library;
  /**
   * The file that an import's text means, seen from the file it stands in; undefined for anything outside the project.
   * Absent where the language has no imports.
   */
  resolveImport?(from: string, importer: string, files: { read(file: string): string | undefined }): string | undefined;
}

/** An entry of the list of languages: light, so that it can be at hand without the parser. */
export interface Language {
  /** As in reports: `typescript`. */
  readonly id: string;
  /** Lower case, with the dot. */
  readonly extensions: readonly string[];
  /** Marks that open a line comment. */
  readonly lineMarks: readonly string[];
  /** The parser and library, loaded when first asked for. */
  load(): Promise<LanguageCore>;
}
