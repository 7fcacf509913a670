import { readFileSync, readdirSync } from 'node:fs';
import { codeOnly, extension, lineMark } from './source-text';

/**
 * Fixtures are ordinary source files that carry their expected outcome in comments, shown here for languages whose line
 * comments begin with `//`:
 *
 * - `//! return[2] unread: reason` or `//! return[2] differs`: the verdict of a claim. Claims without a line must hold.
 *   `//! problem CODE: words` expects a finding about the declaration. `//! ^^^` says that a finding lies on the line
 *   above, over these columns.
 * - `//~ NAME: OLD -> NEW`: a fault. OLD stands exactly once in the code (comments do not count) between the declaration
 *   before this line and the next one; `OLD @2` is the second of several. ` && ` joins edits made together. The faulty
 *   twin must differ somewhere, and whatever it gets right must still hold.
 * - `//= CODE`: how the tests run the code, to find out what it really computes (the product never runs it). Symbols of
 *   the declaration stand for numbers, `th'` included; the last line is the call, and its value is what `return` means.
 *   `//= none: why` where it cannot be run.
 *
 * Everything that is not understood is an error, so that no expectation can silently do nothing.
 */
export interface Fixture {
  readonly file: string;
  readonly text: string;
  readonly sections: readonly Section[];
}

/** A declaration and what belongs to it, up to the next declaration. */
export interface Section {
  readonly name: string;
  readonly start: number;
  readonly end: number;
  /** Lines from 1, the last one not included. */
  readonly startLine: number;
  readonly endLine: number;
  readonly expectations: readonly Expectation[];
  readonly problems: readonly { readonly code: string; readonly words: string }[];
  readonly underlines: readonly { readonly line: number; readonly from: number; readonly to: number }[];
  readonly faults: readonly Fault[];
  readonly run: readonly string[];
  readonly notRun?: string;
}

export interface Expectation {
  readonly output: string;
  readonly verdict: 'holds' | 'differs' | 'unread';
  readonly words: string;
}

export interface Fault {
  readonly name: string;
  readonly edits: readonly { readonly start: number; readonly end: number; readonly text: string }[];
}

type Draft = { -readonly [K in keyof Section]: Section[K] extends readonly (infer E)[] ? E[] : Section[K] };

export function parseFixture(file: string, text: string): Fixture {
  const sections = splitSections(file, text);
  const code = codeOnly(file, text);
  const mark = lineMark(file);
  const lines = text.split('\n');
  let offset = 0;
  lines.forEach((line, index) => {
    const at = line.indexOf(mark);
    const sign = at < 0 || line.startsWith('#!/') ? '' : line[at + mark.length];
    if (sign === '!' || sign === '~' || sign === '=') {
      const body = line.slice(at + mark.length + 1).trim();
      const section = sections.filter((s) => s.start <= offset).at(-1) ?? sections[0]!;
      const where = `${file}:${index + 1}`;
      if (sign === '!') readExpectation(section, body, where, lines, index);
      else if (sign === '~') section.faults.push(readFault(section, code, body, where));
      else if (body.startsWith('none:')) section.notRun = body.slice(5).trim();
      else section.run.push(body);
    }
    offset += line.length + 1;
  });
  for (const section of sections) refuseTwins(file, section);
  return { file, text, sections };
}

function splitSections(file: string, text: string): Draft[] {
  const names = [...text.matchAll(/@visviva[ \t]+(\S+)/g)];
  if (names.length === 0) throw new Error(`${file}: a fixture needs a declaration`);
  const lineOf = (at: number): number => text.slice(0, at).split('\n').length;
  return names.map((match, i) => {
    const start = i === 0 ? 0 : match.index;
    const end = names[i + 1]?.index ?? text.length;
    return {
      name: match[1]!,
      start,
      end,
      startLine: lineOf(start),
      endLine: names[i + 1] ? lineOf(end) : lineOf(end) + 1,
      expectations: [],
      problems: [],
      underlines: [],
      faults: [],
      run: [],
    };
  });
}

function readExpectation(section: Draft, body: string, where: string, lines: readonly string[], index: number): void {
  const problem = /^problem ([\w-]+)(?:: (.+))?$/.exec(body);
  const claim = /^(\S.*?) (holds|differs|unread)(?:: (.+))?$/.exec(body);
  if (/^\^+$/.test(body)) {
    const from = lines[index]!.indexOf('^');
    section.underlines.push({ line: index, from: from + 1, to: lines[index]!.lastIndexOf('^') + 2 });
  } else if (problem) section.problems.push({ code: problem[1]!, words: problem[2] ?? '' });
  else if (claim) {
    const verdict = claim[2] as Expectation['verdict'];
    if (verdict === 'unread' && !claim[3]) throw new Error(`${where}: say why it is unread: "unread: words of the reason"`);
    section.expectations.push({ output: claim[1]!, verdict, words: claim[3] ?? '' });
  } else throw new Error(`${where}: not an expectation: ${body}`);
}

function readFault(section: Draft, code: string, body: string, where: string): Fault {
  const parts = /^([\w-]+): (.+)$/.exec(body);
  if (!parts) throw new Error(`${where}: not a fault: ${body}`);
  const edits = parts[2]!.split(' && ').map((edit) => {
    const sides = edit.replace(/ ->$/, ' -> ').split(' -> ');
    if (sides.length !== 2) throw new Error(`${where}: not an edit "OLD -> NEW": ${edit}`);
    const nth = /^(.*) @(\d)$/.exec(sides[0]!);
    const old = nth ? nth[1]! : sides[0]!;
    const text = sides[1]!;
    if (old === text) throw new Error(`${where}: this edit changes nothing: ${edit}`);
    const start = find(section, code, old, nth ? Number(nth[2]) : undefined, where);
    return { start, end: start + old.length, text };
  });
  edits.sort((a, b) => a.start - b.start);
  if (edits.some((e, i) => i > 0 && edits[i - 1]!.end > e.start)) throw new Error(`${where}: edits overlap`);
  return { name: parts[1]!, edits };
}

function find(section: Draft, code: string, old: string, nth: number | undefined, where: string): number {
  const found: number[] = [];
  for (let i = code.indexOf(old, section.start); i >= 0 && i < section.end; i = code.indexOf(old, i + 1)) found.push(i);
  if (found.length === 0) throw new Error(`${where}: the code has no "${old}"`);
  if (nth === undefined && found.length > 1) throw new Error(`${where}: "${old}" stands ${found.length} times; add @N`);
  const start = found[(nth ?? 1) - 1];
  if (start === undefined) throw new Error(`${where}: "${old}" stands only ${found.length} times`);
  return start;
}

function refuseTwins(file: string, section: Section): void {
  const seen = new Set<string>();
  const names = new Set<string>();
  for (const fault of section.faults) {
    const key = JSON.stringify(fault.edits);
    if (seen.has(key)) throw new Error(`${file}: fault ${fault.name} of ${section.name} is there twice`);
    if (names.has(fault.name)) throw new Error(`${file}: two faults of ${section.name} are called ${fault.name}`);
    seen.add(key);
    names.add(fault.name);
  }
}

/** The text of the faulty twin. */
export function withFault(fixture: Fixture, fault: Fault): string {
  let text = fixture.text;
  for (const edit of [...fault.edits].reverse()) text = text.slice(0, edit.start) + edit.text + text.slice(edit.end);
  return text;
}

/**
 * All fixtures of a folder of tests/fixtures, in order of their names; `.visviva` files and files without a declaration,
 * which the others import, come apart.
 */
export function loadFixtures(folder: string): { fixtures: Fixture[]; others: Map<string, string> } {
  const root = new URL(`../fixtures/${folder}/`, import.meta.url);
  const fixtures: Fixture[] = [];
  const others = new Map<string, string>();
  const names = readdirSync(root, { recursive: true, encoding: 'utf8' }).map((n) => n.replaceAll('\\', '/'));
  for (const name of names.sort()) {
    if (!/\.\w+$/.test(name)) continue;
    const text = readFileSync(new URL(name, root), 'utf8');
    if (extension(name) === 'visviva' || !text.includes('@visviva')) others.set(`${folder}/${name}`, text);
    else fixtures.push(parseFixture(`${folder}/${name}`, text));
  }
  return { fixtures, others };
}
