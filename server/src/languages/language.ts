import type { Program } from '../program/form';
import type { Library } from '../program/library';

/** What a language's own folder gives. */
export interface LanguageCore {
  /** Never throws; syntax errors are in the program. Spans are UTF-16 offsets into `text`. */
  parse(file: string, text: string): Program;
  readonly library: Library;
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
