import { LineIndex } from '../../text/line-index';
import type { FileDetails } from '../../service/api';
import { listFindings, type Listed } from './findings';
import { fromRoot, type Page } from './page';
import { CAUTION, groupsOf, mentions, summaryText, verdictText, witnessText, worstOf } from './words';

/** Services refuse comments that are longer than about 65,000 characters. */
const LONGEST = 60_000;

const MARKS = { holds: '✅', differs: '❌', unread: '❔' } as const;

/** A comment for a code review: what was found at the top, the rest to unfold. */
export async function markdownReport(page: Page): Promise<string> {
  const { report } = page;
  const found = listFindings(report);
  const open = found.filter((f) => !f.accepted);
  const out: string[] = [];
  const title = report.summary.differs > 0 ? 'Code and declared physics differ' : open.length > 0 ? 'Not everything was confirmed' : 'Code and declared physics agree';
  out.push(`### Visviva: ${report.summary.claims === 0 && open.length === 0 ? 'nothing to check' : title}`, '', summaryText(report), '');
  const groups = groupsOf(report.claims);
  if (groups.length > 0) {
    out.push('| | system | function | claims | declared at |', '|---|---|---|---|---|');
    for (const g of groups) {
      const place = `${fromRoot(page, g.file)}:${g.claims[0]!.line}`;
      out.push(`| ${MARKS[worstOf(g.claims)]} | ${cell(g.system)} | ${g.function === '' ? '-' : cell(g.function)} | ${verdictText(g)} | ${cell(place)} |`);
    }
    out.push('');
  }
  const sections: string[] = [];
  for (const f of open) sections.push(findingSection(page, f));
  sections.push(...(await equationSections(page, new Set(groups.filter((g) => worstOf(g.claims) !== 'holds').map((g) => g.file)))));
  const accepted = found.filter((f) => f.accepted);
  if (accepted.length > 0) {
    sections.push(unfold(`${accepted.length} accepted`, accepted.map((f) => `- ${code(placeText(page, f))} ${f.code}: ${f.accepted!.by === 'baseline' ? 'in the baseline' : plain(f.accepted!.reason ?? '')}`).join('\n')));
  }
  if (report.gone && report.gone.length > 0) {
    sections.push(unfold(`${report.gone.length} of the baseline no more there`, report.gone.map((g) => `- ${code(g.file)} ${g.code}`).join('\n')));
  }
  if (report.skipped.length > 0) {
    sections.push(unfold(`${report.skipped.length} left out`, report.skipped.map((s) => `- ${code(s.file)}: ${plain(s.reason)}`).join('\n')));
  }
  let size = out.join('\n').length + CAUTION.length + 200;
  let dropped = 0;
  for (const s of sections) {
    if (size + s.length > LONGEST) {
      dropped++;
      continue;
    }
    out.push(s, '');
    size += s.length + 2;
  }
  if (dropped > 0) out.push(`${dropped} further sections are left out here: a comment has to be short. The other report formats have them.`, '');
  out.push(`<sub>${CAUTION}</sub>`, '');
  return out.join('\n');
}

function findingSection(page: Page, f: Listed): string {
  const head = `${f.level === 'error' ? '❌' : f.level === 'warning' ? '❔' : 'ℹ️'} <code>${html(placeText(page, f))}</code> ${f.code}${f.claim ? `: <code>${html(`${f.claim.output} = ${f.claim.quantity}`)}</code>` : ''}`;
  const body = [plain(f.message)];
  if (f.claim?.witness && !mentions(f.message, f.claim.witness)) body.push('', plain(witnessText(f.claim.witness)));
  if (f.alsoFor.length > 0) body.push('', `The same goes for ${f.alsoFor.map(code).join(', ')}.`);
  const lines = new LineIndex(page.read(f.file) ?? '');
  const source = lines.line(f.range.start.line);
  if (source.trim() !== '') {
    const repaired = f.repair && f.file === f.claim?.file ? repairedLine(source, f) : undefined;
    if (repaired === undefined) body.push('', fence('', source.trim()));
    else body.push('', 'Repair, verified by reading the code again with it:', '', fence('diff', `-${source}\n+${repaired}`));
  }
  if (f.repair) body.push('', plain(f.repair.title));
  return unfold(head, body.join('\n'), true);
}

/** The line with the repair made, where the repair stays in the line. */
function repairedLine(source: string, f: Listed): string | undefined {
  const { line } = f.range.start;
  const edits = f.repair!.edits;
  if (edits.some((e) => e.range.start.line !== line || e.range.end.line !== line || e.text.includes('\n'))) return undefined;
  return [...edits]
    .sort((a, b) => b.range.start.column - a.range.start.column)
    .reduce((text, e) => text.slice(0, e.range.start.column - 1) + e.text + text.slice(e.range.end.column - 1), source);
}

async function equationSections(page: Page, files: ReadonlySet<string>): Promise<string[]> {
  const sections: string[] = [];
  for (const file of files) {
    const details: FileDetails | undefined = await page.details(file);
    for (const s of details?.systems ?? []) {
      if (s.equations.length === 0) continue;
      const rows = [...s.equations, ...s.accelerations];
      const conventions = s.coordinates.flatMap((c) => (c.remark ? [`${c.name}: ${c.remark}`] : []));
      sections.push(
        unfold(
          `Equations of <code>${html(s.name)}</code>`,
          [
            fence('text', rows.map((e) => e.text).join('\n')),
            '',
            fence('math', rows.map((e) => e.tex).join(' \\\\\n')),
            ...(conventions.length > 0 ? ['', `Conventions: ${plain(conventions.join('; '))}`] : []),
          ].join('\n'),
        ),
      );
    }
  }
  return sections;
}

function placeText(page: Page, f: Listed): string {
  return `${fromRoot(page, f.file)}:${f.range.start.line}:${f.range.start.column}`;
}

function unfold(summary: string, body: string, isOpen = false): string {
  return `<details${isOpen ? ' open' : ''}><summary>${summary}</summary>\n\n${body}\n\n</details>`;
}

/** A fenced block whose fence is longer than any run of backquotes inside. */
function fence(language: string, text: string): string {
  const marks = '`'.repeat(Math.max(3, ...(text.match(/`+/g) ?? []).map((m) => m.length + 1)));
  return `${marks}${language}\n${text}\n${marks}`;
}

function code(text: string): string {
  const flat = text.replace(/[\r\n]+/g, ' ');
  const marks = '`'.repeat(Math.max(1, ...(flat.match(/`+/g) ?? []).map((m) => m.length + 1)));
  const space = flat.startsWith('`') || flat.endsWith('`') ? ' ' : '';
  return `${marks}${space}${flat}${space}${marks}`;
}

/** In a table a bar would end the cell, in code too. */
function cell(text: string): string {
  return code(text).replaceAll('|', '\\|');
}

/** Text with nothing in it that Markdown or HTML would take for marks; what stands between backquotes stays code. */
export function plain(text: string): string {
  return text
    .split(/(`[^`\n]*`)/)
    .map((part, i) => (i % 2 === 1 ? part : part.replace(/[\\*_[\]|~$#]/g, '\\$&').replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('@', '@\u200b')))
    .join('');
}

export function html(text: string): string {
  return text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;').replaceAll('"', '&quot;');
}
