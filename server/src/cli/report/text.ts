import type { Acceptance, Problem, Report, ReportRange } from '@visviva/shared';
import pc from 'picocolors';
import { LineIndex } from '../../text/line-index';
import { evidenceLines } from './evidence';
import { excerpt } from './excerpt';
import { listFindings, type Listed } from './findings';
import { harmless, textWidth } from './width';
import { CAUTION, count, groupsOf, mentions, summaryText, verdictText, witnessText, worstOf, type Group } from './words';

const LINE_WIDTH = 100;

export interface TextReportOptions {
  readonly colour: boolean;
  /** The text of a file of the report, for the lines it quotes. */
  readonly read: (file: string) => string | undefined;
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
    const worst = worstOf(group.claims);
    const paint = worst === 'differs' ? colours.red : worst === 'unread' ? colours.yellow : colours.green;
    out.push(`${colours.bold(cells[0]!)}  ${cells[1]!}  ${paint(cells[2]!)}   ${colours.dim(place)}`);
    for (const line of evidenceLines(group.claims)) for (const part of wrapped(line)) out.push(colours.dim(`  ${part}`));
    for (const s of listFindings({ claims: group.claims, problems: [] })) story(s);
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
  if (report.gone && report.gone.length > 0) {
    blank();
    out.push(colours.bold('in the baseline, and no more in the code'));
    for (const g of report.gone) out.push(`  ${harmless(`${g.file}: ${g.code}${g.output === undefined ? '' : ` at ${g.output} of ${g.system ?? ''}`}`)}`);
  }
  blank();
  out.push(summaryText(report));
  if (report.summary.holds > 0) out.push(colours.dim(CAUTION));
  return `${out.join('\n')}\n`;

  function story(f: Listed): void {
    blank();
    const { claim } = f;
    const paint = f.accepted ? colours.dim : f.level === 'error' ? colours.red : colours.yellow;
    out.push(`  ${placeText(f.file, f.range)}   ${paint(f.code)}${acceptedText(f.accepted)}`);
    paragraph(f.message);
    if (claim?.witness && !mentions(f.message, claim.witness)) paragraph(witnessText(claim.witness));
    if (f.alsoFor.length > 0) paragraph(`The same goes for ${f.alsoFor.join(', ')}.`);
    quote(f.file, f.range, paint);
    if (f.repair) paragraph(`${f.repair.verified ? 'Repair' : 'Try'}: ${f.repair.title}`);
  }

  function problem(p: Problem): void {
    blank();
    const paint = p.accepted ? colours.dim : p.severity === 'error' ? colours.red : colours.yellow;
    out.push(`  ${placeText(p.file, p.range)}   ${paint(p.code)}${acceptedText(p.accepted)}`);
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

function cellsOf(g: Group): string[] {
  return [harmless(g.system), harmless(g.function) || '-', verdictText(g)];
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

function acceptedText(accepted: Acceptance | undefined): string {
  if (!accepted) return '';
  return accepted.by === 'baseline' ? '   accepted by the baseline' : `   accepted: ${harmless(accepted.reason ?? '')}`;
}
