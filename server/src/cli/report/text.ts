import type { Finding, Problem, Report, ReportClaim, ReportRange, Witness } from '@visviva/shared';
import pc from 'picocolors';
import { LineIndex } from '../../text/line-index';
import { formatNumber, formatPair } from '../../text/number';
import { evidenceLines } from './evidence';
import { excerpt } from './excerpt';
import { harmless, textWidth } from './width';

export const CAUTION = 'A claim that holds means that code and declaration agree, not that the model is right or a machine safe.';

const LINE_WIDTH = 100;

export interface TextReportOptions {
  readonly colour: boolean;
  /** The text of a file of the report, for the lines it quotes. */
  readonly read: (file: string) => string | undefined;
}

/** The claims of one function about one system. */
interface Group {
  readonly file: string;
  readonly system: string;
  readonly function: string;
  readonly claims: ReportClaim[];
}

/** The report for people: a line per system that is well, the whole story of what is not. */
export function textReport(report: Report, options: TextReportOptions): string {
  const colours = pc.createColors(options.colour);
  const sources = new Map<string, LineIndex>();
  const out: string[] = [];
  const blank = () => {
    if (out.length > 0 && out.at(-1) !== '') out.push('');
  };
  const rows = table(groupsOf(report.claims).map((g) => [g, cellsOf(g)] as const));
  let previousWasQuiet = true;
  for (const { group, cells, place } of rows) {
    const isWell = group.claims.every((c) => c.verdict === 'holds' && c.findings.length === 0);
    if (!isWell || !previousWasQuiet) blank();
    const worst = worstOf(group);
    const paint = worst === 'differs' ? colours.red : worst === 'unread' ? colours.yellow : colours.green;
    out.push(`${colours.bold(cells[0]!)}  ${cells[1]!}  ${paint(cells[2]!)}   ${colours.dim(place)}`);
    for (const line of evidenceLines(group.claims)) for (const part of wrapped(line)) out.push(colours.dim(`  ${part}`));
    for (const s of storiesOf(group)) story(s);
    previousWasQuiet = isWell;
  }
  if (report.problems.length > 0) {
    blank();
    out.push(colours.bold(`${count(report.problems.length, 'problem')} in declarations`));
    for (const p of report.problems) problem(p);
  }
  if (report.skipped.length > 0) {
    blank();
    out.push(colours.bold('left out'));
    for (const s of report.skipped) out.push(`  ${harmless(s.file)}: ${s.reason}`);
  }
  blank();
  out.push(summaryText(report));
  if (report.summary.holds > 0) out.push(colours.dim(CAUTION));
  return `${out.join('\n')}\n`;

  function story({ claim, finding: f, alsoFor }: Story): void {
    blank();
    const paint = claim.verdict === 'differs' ? colours.red : colours.yellow;
    out.push(`  ${placeText(f.file ?? claim.file, f.range)}   ${paint(f.code)}`);
    paragraph(f.message);
    if (claim.witness && !mentions(f.message, claim.witness)) paragraph(witnessText(claim.witness));
    if (alsoFor.length > 0) paragraph(`The same goes for ${alsoFor.join(', ')}.`);
    quote(f.file ?? claim.file, f.range, paint);
    if (f.repair) paragraph(`${f.repair.verified ? 'Repair' : 'Try'}: ${f.repair.title}`);
  }

  function problem(p: Problem): void {
    blank();
    const paint = p.severity === 'error' ? colours.red : colours.yellow;
    out.push(`  ${placeText(p.file, p.range)}   ${paint(p.code)}`);
    paragraph(p.message);
    quote(p.file, p.range, paint);
  }

  function paragraph(text: string): void {
    for (const line of harmless(text).split('\n')) for (const part of wrapped(line)) out.push(`  ${part}`);
  }

  function quote(file: string, range: ReportRange, paint: (s: string) => string): void {
    let lines = sources.get(file);
    if (!lines) sources.set(file, (lines = new LineIndex(options.read(file) ?? '')));
    const e = excerpt(lines, range);
    if (!e) return;
    out.push(`      ${e.line}`, `      ${e.blanks}${paint(e.rule)}`);
  }
}

function groupsOf(claims: readonly ReportClaim[]): Group[] {
  const groups = new Map<string, Group>();
  for (const c of claims) {
    const key = JSON.stringify([c.file, c.system, c.function]);
    const group = groups.get(key);
    if (group) group.claims.push(c);
    else groups.set(key, { file: c.file, system: c.system, function: c.function, claims: [c] });
  }
  return [...groups.values()];
}

function cellsOf(g: Group): string[] {
  return [harmless(g.system), harmless(g.function) || '-', verdictText(g)];
}

/** `4 claims hold`, `1 of 4 claims differs`, `3 of 4 claims differ, 1 not read`. */
function verdictText(g: Group): string {
  const n = g.claims.length;
  const differ = g.claims.filter((c) => c.verdict === 'differs').length;
  const unread = g.claims.filter((c) => c.verdict === 'unread').length;
  if (differ === 0 && unread === 0) return n === 1 ? '1 claim holds' : `${n} claims hold`;
  const parts: string[] = [];
  if (differ > 0) parts.push(`${differ} of ${count(n, 'claim')} ${differ === 1 ? 'differs' : 'differ'}`);
  if (unread > 0) parts.push(differ > 0 ? `${unread} not read` : `${unread} of ${count(n, 'claim')} not read`);
  return parts.join(', ');
}

function worstOf(g: Group): ReportClaim['verdict'] {
  if (g.claims.some((c) => c.verdict === 'differs')) return 'differs';
  return g.claims.some((c) => c.verdict === 'unread') ? 'unread' : 'holds';
}

/** Equal columns down the page. */
function table(rows: readonly (readonly [Group, string[]])[]): { group: Group; cells: string[]; place: string }[] {
  const widths = [0, 1, 2].map((i) => Math.min(44, Math.max(0, ...rows.map(([, cells]) => textWidth(cells[i]!)))));
  return rows.map(([group, cells]) => ({
    group,
    cells: cells.map((c, i) => c + ' '.repeat(Math.max(0, widths[i]! - textWidth(c)))),
    place: `${harmless(group.file)}:${group.claims[0]!.line}`,
  }));
}

interface Story {
  readonly claim: ReportClaim;
  readonly finding: Finding;
  /** Outputs of other claims with the same to tell. */
  readonly alsoFor: string[];
}

/** What there is to tell about a group; several claims that fail at one place for one reason are told once. */
function storiesOf(group: Group): Story[] {
  const stories = new Map<string, Story>();
  for (const claim of group.claims) {
    for (const finding of findingsOf(claim)) {
      const general = finding.message.replace(claim.output, '');
      const key = JSON.stringify([finding.code, finding.file, finding.range, general]);
      const told = stories.get(key);
      if (told) told.alsoFor.push(claim.output);
      else stories.set(key, { claim, finding, alsoFor: [] });
    }
  }
  return [...stories.values()];
}

/** A claim that is not well always has something to say, if only its witness. */
function findingsOf(claim: ReportClaim): readonly Finding[] {
  if (claim.findings.length > 0 || claim.verdict === 'holds') return claim.findings;
  const at = { line: claim.line, column: 1 };
  const message = `${claim.output} = ${claim.quantity} ${claim.verdict === 'differs' ? 'does not hold.' : 'was not read.'}`;
  return [{ code: claim.verdict, message, range: { start: at, end: at } }];
}

function mentions(message: string, w: Witness): boolean {
  const [found, expected] = formatPair(w.found, w.expected);
  return message.includes(found) && message.includes(expected);
}

function witnessText(w: Witness): string {
  const state = Object.entries(w.state).map(([name, value]) => `${name} = ${formatNumber(value)}`);
  const [found, expected] = formatPair(w.found, w.expected);
  const where = state.length > 0 ? `At ${state.join(', ')} the` : 'The';
  return `${where} code gives ${found}, the declared energies give ${expected}.`;
}

/** A word, with the whole of what stands between backquotes. */
const UNBROKEN = /(?:`[^`]*`|[^\s`]|`)+/g;

/** Broken between words, the same on every terminal so that reports can be compared. */
function wrapped(text: string): string[] {
  const lines: string[] = [];
  let line = '';
  for (const word of text.match(UNBROKEN) ?? []) {
    if (line !== '' && textWidth(line) + 1 + textWidth(word) > LINE_WIDTH) {
      lines.push(line);
      line = word;
    } else line = line === '' ? word : `${line} ${word}`;
  }
  return [...lines, line];
}

function placeText(file: string, range: ReportRange): string {
  return `${harmless(file)}:${range.start.line}:${range.start.column}`;
}

function summaryText(report: Report): string {
  const s = report.summary;
  const files = count(s.files, 'file');
  if (s.claims === 0) {
    if (s.systems > 0) return `Nothing is claimed: ${count(s.systems, 'system')} in ${files}, but no \`checks\` line.`;
    if (report.problems.length > 0) return `${files}: no claim was read.`;
    return `Nothing is declared: no \`@visviva\` declaration in ${files}. Nothing was checked.`;
  }
  const verdicts: string[] = [];
  if (s.holds > 0) verdicts.push(s.holds === s.claims ? (s.claims === 1 ? 'holds' : 'all hold') : `${s.holds} ${s.holds === 1 ? 'holds' : 'hold'}`);
  if (s.differs > 0) verdicts.push(`${s.differs} ${s.differs === 1 ? 'differs' : 'differ'}`);
  if (s.unread > 0) verdicts.push(`${s.unread} not read`);
  return `${files}, ${count(s.systems, 'system')}, ${count(s.claims, 'claim')}: ${verdicts.join(', ')}.`;
}

function count(n: number, word: string): string {
  return `${n} ${word}${n === 1 ? '' : 's'}`;
}
