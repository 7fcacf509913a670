import { languageOf } from '../languages';

/** True for files whose language is read here, by name; known without loading any parser. */
export function handlesFile(file: string): boolean {
  return languageOf(file) !== undefined;
}
