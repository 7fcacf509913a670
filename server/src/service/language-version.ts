import type { Files } from './api';

/** The version of a language that the project's settings name for a file. */
export function languageVersion(files: Files, file: string, language: string): number | undefined {
  return language === 'python' ? files.settings?.(file).python : undefined;
}
