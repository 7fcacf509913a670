import type { ReportClaim } from '../../shared/src/report';
import type { FileResult } from '../../server/src/service/api';
import type { Fixture, Section } from './fixtures';
import type { Judgement } from './judge';

/** Everything in which the product's answer about a fixture is not what it should be, in words; empty when all is well. */
export function mismatches(result: FileResult, fixture: Fixture, section: Section, truth?: readonly Judgement[]): string[] {
  const claims = claimsOf(result, section);
  const wrong: string[] = [];
  const claiming = /\bchecks\b/.test(fixture.text.slice(section.start, section.end));
  if (claims.length === 0 && claiming) wrong.push(`${section.name} has no claim in the report`);
  for (const e of section.expectations) {
    if (!claims.some((c) => same(c.output, e.output))) wrong.push(`no claim about ${e.output} in the report`);
  }
  for (const j of truth ?? []) {
    if (!claims.some((c) => same(c.output, j.output))) wrong.push(`no claim about ${j.output} in the report`);
  }
  for (const claim of claims) {
    const e = section.expectations.find((x) => same(x.output, claim.output));
    const j = truth?.find((x) => same(x.output, claim.output));
    const expected = e?.verdict === 'unread' ? 'unread' : j ? (j.holds ? 'holds' : 'differs') : (e?.verdict ?? 'holds');
    if (j && !Number.isFinite(j.worst) && claim.verdict === 'unread') continue;
    if (claim.verdict !== expected) wrong.push(`${claim.output} = ${claim.quantity}: ${describeClaim(claim)}; it should be ${expected}`);
    else wrong.push(...incomplete(claim, e?.words ?? ''));
  }
  for (const p of section.problems) {
    const found = result.problems.some((x) => x.code === p.code && x.message.includes(p.words) && inside(x.range.start.line, section));
    if (!found) wrong.push(`no problem ${p.code}: ${p.words}; there are ${JSON.stringify(result.problems)}`);
  }
  if (section.problems.length === 0) {
    for (const p of result.problems) {
      if (inside(p.range.start.line, section)) wrong.push(`unexpected problem ${p.code}, line ${p.range.start.line}: ${p.message}`);
    }
  }
  for (const u of section.underlines) {
    const touches = claims
      .flatMap((c) => c.findings)
      .some(({ range: r }) => r.start.line <= u.line && r.end.line >= u.line && r.start.column < u.to && r.end.column > u.from);
    if (!touches) wrong.push(`no finding on line ${u.line}, columns ${u.from} to ${u.to} of ${fixture.file}`);
  }
  return wrong;
}

export function claimsOf(result: FileResult, section: Section): readonly ReportClaim[] {
  return result.claims.filter((c) => inside(c.line, section));
}

function inside(line: number, section: Section): boolean {
  return line >= section.startLine && line < section.endLine;
}

function same(a: string, b: string): boolean {
  return a.replace(/\s+/g, '') === b.replace(/\s+/g, '');
}

function describeClaim(c: ReportClaim): string {
  return `${c.verdict} (${c.findings.map((f) => f.message).join(' | ') || JSON.stringify(c.evidence)})`;
}

/** A verdict without what must come with it. */
function incomplete(c: ReportClaim, words: string): string[] {
  const wrong: string[] = [];
  const say = (what: string): unknown => wrong.push(`${c.output}: ${c.verdict} ${what}`);
  if (c.verdict === 'differs') {
    if (!c.witness) say('without a witness');
    else if (c.witness.expected === c.witness.found) say('with a witness at which both agree');
    if (c.findings.length === 0) say('without a finding');
  }
  if (c.verdict === 'holds' && !c.evidence) say('without evidence');
  if (c.verdict === 'unread') {
    const messages = c.findings.map((f) => f.message).join(' | ');
    if (c.findings.length === 0) say('without a reason');
    else if (!messages.includes(words)) say(`for another reason than "${words}": ${messages}`);
  }
  for (const f of c.findings) {
    const { start, end } = f.range;
    if (start.line < 1 || start.column < 1 || end.line < start.line) say(`with a finding nowhere: ${JSON.stringify(f.range)}`);
  }
  return wrong;
}
