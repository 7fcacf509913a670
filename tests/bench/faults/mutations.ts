import { extension } from '../../support/source-text';
import type { Fixture, Section } from '../../support/fixtures';
import { mutateTypeScript } from './mutate-typescript';

/** One changed place in a correct function. */
export interface Mutation {
  readonly operator: string;
  readonly start: number;
  readonly end: number;
  readonly text: string;
}

type Mutate = (fixture: Fixture, section: Section) => Mutation[];

/** By file name ending: how the code of a section is changed. A language comes in with its fixtures' folder and a line here. */
const MUTATE: Readonly<Record<string, Mutate>> = {
  ts: mutateTypeScript,
  tsx: mutateTypeScript,
  mts: mutateTypeScript,
  js: mutateTypeScript,
  mjs: mutateTypeScript,
  jsx: mutateTypeScript,
  html: mutateTypeScript,
};

/** Folders of tests/fixtures whose functions are changed. */
export const FOLDERS: readonly string[] = ['typescript'];

/** Every single-place mutation, by ten operators, of the code of a section. */
export function mutationsOf(fixture: Fixture, section: Section): Mutation[] {
  const seen = new Set<string>();
  return (MUTATE[extension(fixture.file)]?.(fixture, section) ?? []).filter((m) => {
    const key = `${m.start} ${m.end} ${m.text}`;
    if (seen.has(key) || fixture.text.slice(m.start, m.end) === m.text) return false;
    seen.add(key);
    return true;
  });
}
