import type { ReportClaim } from '@visviva/shared';
import { createHash } from 'node:crypto';
import { LineIndex } from '../../../text/line-index';
import { formatNumber } from '../../../text/number';
import type { ClaimDetails, FileDetails, SystemDetails, TermTable } from '../../../service/api';
import { listFindings, type Listed } from '../findings';
import { html } from '../markdown';
import { fromRoot, type Page } from '../page';
import { CAUTION, groupsOf, summaryText, verdictText, worstOf, type Group } from '../words';
import { plot } from './plot';
import { STYLE } from './style';
import { Typesetter } from './typeset';

/** Rows of a term table that differ by less than this part of the largest one count as the same. */
const SAME = 1e-9;

/** One file that needs no other: opens without a network, and runs nothing. */
export async function htmlReport(page: Page): Promise<string> {
  const { report } = page;
  const typesetter = new Typesetter();
  const groups = groupsOf(report.claims);
  const body: string[] = [];
  body.push(`<header><h1>Code against declared physics</h1><p class="subtitle">Visviva ${html(report.tool.version)}</p></header>`);
  body.push(`<p class="summary">${html(summaryText(report))}</p>`);
  if (groups.length > 0) body.push(overview(page, groups));
  const files = [...new Set(groups.map((g) => g.file))];
  for (const file of files) {
    const details = await page.details(file);
    for (const [i, g] of groups.entries()) if (g.file === file) body.push(groupSection(page, typesetter, g, i, details));
  }
  const problems = listFindings({ claims: [], problems: report.problems });
  if (problems.length > 0) body.push(`<section class="card"><h2>Problems in declarations</h2>${problems.map((p) => finding(page, p)).join('')}</section>`);
  if (report.gone && report.gone.length > 0) {
    body.push(`<section class="card"><h2>In the baseline, and no more in the code</h2><ul>${report.gone.map((g) => `<li><code>${html(g.file)}</code> ${html(g.code)}</li>`).join('')}</ul></section>`);
  }
  if (report.skipped.length > 0) {
    body.push(`<details><summary>${report.skipped.length} left out</summary><ul>${report.skipped.map((s) => `<li><code>${html(s.file)}</code>: ${html(s.reason)}</li>`).join('')}</ul></details>`);
  }
  body.push(`<footer>${html(CAUTION)}</footer>`);
  body.push(typesetter.letters);
  const style = `${STYLE}${typesetter.rules}\n`;
  const hash = createHash('sha256').update(style, 'utf8').digest('base64');
  return `<!DOCTYPE html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="default-src 'none'; style-src 'sha256-${hash}'; base-uri 'none'; form-action 'none'">
<meta name="viewport" content="width=device-width, initial-scale=1">
<title>Code against declared physics</title>
<style>${style}</style>
</head>
<body>
${body.join('\n')}
</body>
</html>
`;
}

function overview(page: Page, groups: readonly Group[]): string {
  const rows = groups.map((g, i) => {
    const worst = worstOf(g.claims);
    return `<tr><td><a href="#g${i}">${html(g.system)}</a></td><td>${g.function === '' ? '' : `<code>${html(g.function)}</code>`}</td><td class="verdict ${worst}">${html(verdictText(g))}</td><td class="place">${html(placeOf(page, g.file, g.claims[0]!.line))}</td></tr>`;
  });
  return `<div class="scroll"><table><thead><tr><th>system</th><th>function</th><th>claims</th><th>declared at</th></tr></thead><tbody>${rows.join('')}</tbody></table></div>`;
}

function groupSection(page: Page, typesetter: Typesetter, g: Group, number: number, details: FileDetails | undefined): string {
  const worst = worstOf(g.claims);
  const name = g.function === '' ? html(g.system) : `${html(g.system)} · <code>${html(g.function)}</code>`;
  const out = [`<section class="card" id="g${number}"><h2>${name}</h2>`];
  out.push(`<p><span class="verdict ${worst}">${html(verdictText(g))}</span> <span class="place">${html(placeOf(page, g.file, g.claims[0]!.line))}</span></p>`);
  for (const f of listFindings({ claims: g.claims, problems: [] })) {
    const claim = f.claim!;
    const close = details?.claims.find((d) => d.system === claim.system && d.line === claim.line && d.output === claim.output && d.quantity === claim.quantity);
    out.push(finding(page, f, close && claim.findings[0]?.code === f.code ? closeUp(typesetter, claim, close) : ''));
  }
  const system = details?.systems.find((s) => s.name === g.system);
  if (system && system.equations.length > 0) out.push(equations(typesetter, system, worst !== 'holds'));
  out.push(claimTable(g));
  out.push('</section>');
  return out.join('\n');
}

function finding(page: Page, f: Listed, more = ''): string {
  const kind = f.accepted ? 'accepted' : f.level;
  const accepted = f.accepted ? ` <span class="accepted">accepted${f.accepted.reason ? `: ${html(f.accepted.reason)}` : ' by the baseline'}</span>` : '';
  const head = `<p><span class="badge ${kind}">${html(f.code)}</span> <span class="place">${html(placeOf(page, f.file, f.range.start.line, f.range.start.column))}</span>${accepted}</p>`;
  const also = f.alsoFor.length > 0 ? `<p>The same goes for ${f.alsoFor.map((o) => `<code>${html(o)}</code>`).join(', ')}.</p>` : '';
  const repair = f.repair ? `<p><strong>${f.repair.verified ? 'Repair' : 'Try'}:</strong> ${prose(f.repair.title)}</p>` : '';
  return `<div class="finding">${head}<p>${prose(f.message)}</p>${also}${source(page, f)}${repair}${more}</div>`;
}

function source(page: Page, f: Listed): string {
  const line = new LineIndex(page.read(f.file) ?? '').line(f.range.start.line);
  if (line.trim() === '' || line.length > 2000) return '';
  const from = f.range.start.column - 1;
  const to = f.range.end.line > f.range.start.line ? line.length : f.range.end.column - 1;
  const cut = /^\s*/.exec(line)![0].length;
  const [before, marked, after] = [line.slice(Math.min(cut, from), from), line.slice(from, to), line.slice(to)];
  return `<pre>${html(before)}${marked === '' ? '' : `<mark>${html(marked)}</mark>`}${html(after)}</pre>`;
}

function closeUp(typesetter: Typesetter, claim: ReportClaim, d: ClaimDetails): string {
  const out: string[] = ['<details open><summary>At the witness</summary>'];
  if (claim.witness) {
    const rows = d.state.map((s) => `<tr><td><code>${html(s.name)}</code></td><td class="number">${number(s.value)}</td></tr>`);
    rows.push(`<tr class="sum"><td>${html(claim.quantity)} by the declared energies</td><td class="number">${number(claim.witness.expected)}</td></tr>`);
    rows.push(`<tr class="sum"><td><code>${html(claim.output)}</code> in the code</td><td class="number differs">${number(claim.witness.found)}</td></tr>`);
    out.push(`<table class="narrow">${rows.join('')}</table>`);
  }
  if (d.terms) out.push(termTable(typesetter, d.terms));
  if (d.curve) out.push(plot(d.curve, d.quantity));
  out.push('</details>');
  return out.join('\n');
}

function termTable(typesetter: Typesetter, t: TermTable): string {
  const size = Math.max(...t.rows.flatMap((r) => [Math.abs(r.declared), Math.abs(r.code ?? 0)]));
  const rows = t.rows.map((r) => {
    const differs = r.code !== undefined && Math.abs(r.code - r.declared) > SAME * size;
    const code = t.isEquation ? `<td class="number">${number(r.code!)}</td>` : '';
    return `<tr${differs ? ' class="blamed"' : ''}><td>${typesetter.draw(r.tex, r.text)}</td><td class="number">${number(r.declared)}</td>${code}</tr>`;
  });
  const sum = (values: readonly number[]) => {
    const total = values.reduce((a, b) => a + b, 0);
    return Math.abs(total) <= SAME * size ? 0 : total;
  };
  const code = t.isEquation ? `<td class="number">${number(sum(t.rows.map((r) => r.code!)))}</td>` : '';
  rows.push(`<tr class="sum"><td>sum${t.isEquation ? ', zero along the motion' : ''}</td><td class="number">${number(sum(t.rows.map((r) => r.declared)))}</td>${code}</tr>`);
  const head = t.isEquation ? '<th class="number">with the declared energies</th><th class="number">with the code</th>' : '<th class="number">value</th>';
  return `<h3>Terms of the ${t.isEquation ? '' : 'quantity '}${html(t.of.text)}</h3><div class="scroll"><table><thead><tr><th>term</th>${head}</tr></thead><tbody>${rows.join('')}</tbody></table></div>`;
}

function equations(typesetter: Typesetter, s: SystemDetails, isOpen: boolean): string {
  const draw = (list: readonly { readonly tex: string; readonly text: string }[]) => list.map((e) => typesetter.draw(e.tex, e.text, true)).join('');
  const conventions = s.coordinates.map((c) => `<li><code>${html(c.name)}</code>${c.unit ? ` [${html(c.unit)}]` : ''}${c.remark ? `: ${html(c.remark)}` : ''}</li>`);
  return [
    `<details${isOpen ? ' open' : ''}><summary>Physics as declared</summary>`,
    `<ul>${conventions.join('')}</ul>`,
    s.energies.length > 0 ? `<h3>Energies and forces</h3>${draw(s.energies)}` : '',
    `<h3>Equations of motion</h3>${draw(s.equations)}`,
    s.accelerations.length > 0 ? `<h3>Accelerations</h3>${draw(s.accelerations)}` : '',
    '</details>',
  ].join('\n');
}

function claimTable(g: Group): string {
  const rows = g.claims.map((c) => `<tr><td><code>${html(c.output)}</code></td><td><code>${html(c.quantity)}</code></td><td class="verdict ${c.verdict}">${c.verdict}</td><td>${html(evidenceText(c))}</td></tr>`);
  return `<details><summary>All claims</summary><div class="scroll"><table><thead><tr><th>output</th><th>quantity</th><th>verdict</th><th>evidence</th></tr></thead><tbody>${rows.join('')}</tbody></table></div></details>`;
}

function evidenceText({ evidence: e }: ReportClaim): string {
  if (!e) return '';
  const states = `${e.states} states, largest relative difference ${formatNumber(e.worst, 2)}`;
  return e.kind === 'identity' ? `the same formula, by exact arithmetic; ${states}` : states;
}

/** A message, with what stands between backquotes as code. */
function prose(text: string): string {
  return text
    .split(/`([^`\n]*)`/)
    .map((part, i) => (i % 2 === 1 ? `<code>${html(part)}</code>` : html(part)))
    .join('');
}

function placeOf(page: Page, file: string, line: number, column?: number): string {
  return `${fromRoot(page, file)}:${line}${column === undefined ? '' : `:${column}`}`;
}

function number(x: number): string {
  return html(formatNumber(x).replace(/^-/, '\u2212'));
}
