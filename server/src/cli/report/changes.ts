import type { ClaimChange, QuantityChange, SystemChange } from '../../service/physics-changes';
import { html, plain } from './markdown';
import { harmless } from './width';
import { count } from './words';

/** What a comparison of two states of a project tells. */
export interface Comparison {
  readonly before: string;
  readonly after: string;
  readonly systems: readonly SystemChange[];
}

export function changesJson(c: Comparison): string {
  return `${JSON.stringify({ schema: 1, before: c.before, after: c.after, systems: c.systems }, null, 2)}\n`;
}

export function changesText(c: Comparison): string {
  const out: string[] = [];
  for (const s of told(c)) {
    out.push(`${harmless(s.name)}  ${harmless(headline(s))}   ${harmless(s.file)}`);
    for (const line of lines(s)) out.push(`  ${harmless(line)}`);
    out.push('');
  }
  out.push(summary(c), '');
  return out.join('\n');
}

export function changesMarkdown(c: Comparison): string {
  const out = ['### What changed in the physics', '', plain(summary(c)), ''];
  for (const s of told(c)) {
    out.push(`#### <code>${html(s.name)}</code> ${plain(headline(s))}`, '', ...lines(s).map((l) => `- ${plain(l)}`), '');
  }
  return out.join('\n');
}

function told(c: Comparison): SystemChange[] {
  return c.systems.filter((s) => s.status !== 'same');
}

function headline(s: SystemChange): string {
  switch (s.status) {
    case 'added':
      return 'is new';
    case 'removed':
      return 'is gone';
    case 'renamed':
      return `is the new name of ${s.before!}`;
    case 'rewritten':
      return 'is written differently; the physics is as it was';
    case 'changed':
      if (s.equations === 'differ') return 'moves differently';
      if (s.equations === 'same motion') return 'moves as before, by other equations';
      if (s.equations === 'undecided') return 'changed';
      return 'has the same equations of motion';
    default:
      return 'is as it was';
  }
}

function lines(s: SystemChange): string[] {
  const out: string[] = [];
  if (s.note) out.push(s.note);
  for (const x of s.symbols) out.push(`${x.kind} ${x.name} ${x.change}`);
  for (const q of s.quantities) out.push(...quantityLines(q, s.name));
  if (s.claims.length > 0) for (const c of s.claims) out.push(claimLine(c));
  for (const b of s.bindings) out.push(`in ${b.function}: ${b.code} means ${b.after ?? 'nothing'} now, before ${b.before ?? 'nothing'}`);
  if (s.status !== 'added' && s.status !== 'removed') {
    for (const f of s.code) out.push(`the code of ${f === '' ? 'the file' : f} changed${s.claims.some((c) => c.function === f) ? '' : '; its claims have the same verdicts'}`);
  }
  return out;
}

function quantityLines(q: QuantityChange, system: string): string[] {
  const name = /^[TVLD]$|^Q\[/.test(q.quantity) ? `${q.quantity} of ${system}` : q.quantity;
  return [
    ...(q.gained.length > 0 ? [`${name} gained ${q.gained.join(', ')}`] : []),
    ...(q.lost.length > 0 ? [`${name} lost ${q.lost.join(', ')}`] : []),
    ...q.became.map((b) => `in ${name}, ${b.before} became ${b.after}`),
  ];
}

function claimLine(c: ClaimChange): string {
  const claim = `${c.function === '' ? '' : `${c.function}: `}${c.output} = ${c.quantity}`;
  if (c.before === undefined) return `claim added: ${claim} (${words(c.after!)})`;
  if (c.after === undefined) return `claim removed: ${claim} (${words(c.before)} before)`;
  return `${claim} ${words(c.after)} now; before it ${c.before === 'holds' ? 'held' : c.before === 'differs' ? 'differed' : 'was not read'}`;
}

function words(verdict: string): string {
  return verdict === 'unread' ? 'is not read' : verdict;
}

function summary(c: Comparison): string {
  const n = (status: SystemChange['status']) => c.systems.filter((s) => s.status === status).length;
  const parts = (['changed', 'added', 'removed', 'renamed', 'rewritten', 'same'] as const).flatMap((s) => (n(s) > 0 ? [`${n(s)} ${s === 'rewritten' ? 'rewritten without a change of physics' : s === 'same' ? 'as before' : s}`] : []));
  if (c.systems.length === 0) return `From ${c.before} to ${c.after}: no system is declared on either side.`;
  return `From ${c.before} to ${c.after}: ${count(c.systems.length, 'system')}: ${parts.join(', ')}.`;
}
