import type { Report, ReportClaim, Witness } from '@visviva/shared';
import { formatNumber, formatPair } from '../../text/number';

/** What every report says alike. */

export const CAUTION = 'A claim that holds means that code and declaration agree, not that the model is right or a machine safe.';

export function count(n: number, word: string): string {
  return `${n} ${word}${n === 1 ? '' : 's'}`;
}

export function summaryText(report: Report): string {
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

export function witnessText(w: Witness): string {
  const state = Object.entries(w.state).map(([name, value]) => `${name} = ${formatNumber(value)}`);
  const [found, expected] = formatPair(w.found, w.expected);
  const where = state.length > 0 ? `At ${state.join(', ')} the` : 'The';
  return `${where} code gives ${found}, the declared energies give ${expected}.`;
}

/** True where a message tells the two numbers of a witness itself. */
export function mentions(message: string, w: Witness): boolean {
  const [found, expected] = formatPair(w.found, w.expected);
  return message.includes(found) && message.includes(expected);
}

/** The claims of one function about one system. */
export interface Group {
  readonly file: string;
  readonly system: string;
  readonly function: string;
  readonly claims: ReportClaim[];
}

export function groupsOf(claims: readonly ReportClaim[]): Group[] {
  const groups = new Map<string, Group>();
  for (const c of claims) {
    const key = JSON.stringify([c.file, c.system, c.function]);
    const group = groups.get(key);
    if (group) group.claims.push(c);
    else groups.set(key, { file: c.file, system: c.system, function: c.function, claims: [c] });
  }
  return [...groups.values()];
}

/** `4 claims hold`, `1 of 4 claims differs`, `3 of 4 claims differ, 1 not read`. */
export function verdictText(g: Group): string {
  const n = g.claims.length;
  const differ = g.claims.filter((c) => c.verdict === 'differs').length;
  const unread = g.claims.filter((c) => c.verdict === 'unread').length;
  if (differ === 0 && unread === 0) return n === 1 ? '1 claim holds' : `${n} claims hold`;
  const parts: string[] = [];
  if (differ > 0) parts.push(`${differ} of ${count(n, 'claim')} ${differ === 1 ? 'differs' : 'differ'}`);
  if (unread > 0) parts.push(differ > 0 ? `${unread} not read` : `${unread} of ${count(n, 'claim')} not read`);
  return parts.join(', ');
}

export function worstOf(claims: readonly ReportClaim[]): ReportClaim['verdict'] {
  if (claims.some((c) => c.verdict === 'differs')) return 'differs';
  return claims.some((c) => c.verdict === 'unread') ? 'unread' : 'holds';
}
