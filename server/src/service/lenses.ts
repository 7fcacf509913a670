import type { ReportPosition } from '@visviva/shared';
import type { ClaimResult } from '../comparison/subject';
import { symbolsOf } from '../expression/reach';
import { text } from '../expression/print';
import { solvedAccelerations, tidy } from '../mechanics/equations';
import type { Document } from '../workspace/documents';
import type { Lens } from './api';
import { subjectName, type BlockOutcome } from './check';

const LONGEST = 90;
const MOST_NAMED = 3;

export function lensesOf(document: Document, outcomes: readonly BlockOutcome[]): Lens[] {
  return outcomes.flatMap((o): Lens[] => {
    const { block, subject } = o.placed;
    const claims = o.result?.claims ?? [];
    const asked = block.statements.some((s) => s.kind === 'checks');
    if (!asked) return [];
    const span = subject.kind === 'file' ? block.nameSpan : subject.node.nameSpan;
    const verdict = claims.length > 0 ? verdictText(claims) : 'nothing is checked: the declaration has errors';
    return [{ range: document.lines.range(span), system: block.name, function: subjectName(subject), verdict }];
  });
}

/** What became of some claims, in plain words. */
export function verdictText(claims: readonly Pick<ClaimResult, 'quantity' | 'decision'>[]): string {
  const of = (verdict: string) => claims.filter((c) => c.decision.verdict === verdict);
  const [holds, differs, unread] = [of('holds'), of('differs'), of('unread')];
  const all = claims.length === 1 ? '1 claim' : `${claims.length} claims`;
  if (holds.length === claims.length) return claims.length === 1 ? '1 claim holds' : `${all} hold`;
  const parts: string[] = [];
  const some = (list: readonly Pick<ClaimResult, 'quantity'>[], one: string, more: string): void => {
    if (list.length === 0) return;
    const names = list.slice(0, MOST_NAMED).map((c) => c.quantity);
    if (list.length > MOST_NAMED) names.push('...');
    const count = parts.length > 0 ? `${list.length}` : claims.length === 1 ? '1 claim' : `${list.length} of ${all}`;
    parts.push(`${count} ${list.length === 1 ? one : more}: ${names.join(', ')}`);
  };
  some(differs, 'differs', 'differ');
  some(unread, 'could not be read', 'could not be read');
  return parts.join('; ');
}

/** The derived expressions of the claims, each at the end of its line; several in a row are told apart by name. */
export function inlaysOf(document: Document, outcomes: readonly BlockOutcome[]): { position: ReportPosition; text: string }[] {
  const byLine = new Map<number, string[]>();
  for (const o of outcomes) {
    const derived = o.entry?.derived;
    if (!derived || derived.system.blocked) continue;
    const solved = solvedAccelerations(derived) ?? [];
    const moving = new Set(derived.system.coordinates.map((c) => c.acceleration));
    for (const c of o.result?.claims ?? []) {
      if (!c.expected) continue;
      const own = solved.find((s) => s.coordinate.acceleration === c.expected)?.expr;
      if (!own && (c.expected.op === 'symbol' || symbolsOf(c.expected).some((s) => moving.has(s)))) continue;
      const written = text(own ?? tidy(derived.system.graph, c.expected));
      if (written.length > LONGEST || written === c.quantity) continue;
      const { line } = document.lines.position(c.span.start);
      byLine.set(line, [...(byLine.get(line) ?? []), `${c.quantity} = ${written}`]);
    }
  }
  return [...byLine].map(([line, parts]) => ({
    position: { line, column: document.lines.line(line).length + 1 },
    text: [...new Set(parts)].join(';  '),
  }));
}
