import type { Language } from './language';

export type { Language, LanguageCore } from './language';

const typescript = async () => (await import('./typescript/language')).core;

/** Every language that can be read. A new one adds its folder and a line here. */
export const languages: readonly Language[] = [
  { id: 'typescript', extensions: ['.ts', '.mts', '.cts', '.tsx'], lineMarks: ['//'], load: typescript },
  { id: 'javascript', extensions: ['.js', '.mjs', '.cjs', '.jsx'], lineMarks: ['//'], load: typescript },
  { id: 'html', extensions: ['.html', '.htm'], lineMarks: ['//'], load: typescript },
  { id: 'python', extensions: ['.py'], lineMarks: ['#'], load: async () => (await import('./python/language')).load() },
  { id: 'visviva', extensions: ['.visviva'], lineMarks: [], load: async () => (await import('./declarations')).core },
];

const byExtension = new Map(languages.flatMap((l) => l.extensions.map((e): [string, Language] => [e, l])));

/** The language of a file by its extension; undefined for files that are none of ours. */
export function languageOf(file: string): Language | undefined {
  const name = /[^/\\]*$/.exec(file)![0];
  const dot = name.lastIndexOf('.');
  return dot < 0 ? undefined : byExtension.get(name.slice(dot).toLowerCase());
}

const MARK = '@visviva';

/** True where a text, or the bytes of a UTF-8 file, may hold a declaration: a scan that needs no parser. */
export function mayDeclare(text: string | Uint8Array): boolean {
  if (typeof text === 'string') return text.includes(MARK);
  for (let at = text.indexOf(MARK.charCodeAt(0)); at >= 0; at = text.indexOf(MARK.charCodeAt(0), at + 1)) {
    let k = 1;
    while (k < MARK.length && text[at + k] === MARK.charCodeAt(k)) k++;
    if (k === MARK.length) return true;
  }
  return false;
}
