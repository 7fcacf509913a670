import type { Finding, ReportClaim, ReportPosition, ReportRange } from '@visviva/shared';
import { LineIndex } from '../text/line-index';
import type { FileResult } from './api';

/** A result and the text it is about. */
export interface TextResult {
  readonly text: string;
  readonly result: FileResult;
}

const AS_OF = ' (As of the last complete text.)';

/**
 * While a function is being typed it cannot be read. What was found in it when it last could be stays, at the places where
 * that text is now, and says so; everything else is as it is found now. For editors only: a report is about one text.
 */
export function withLastReading(before: TextResult | undefined, now: TextResult): FileResult {
  const { result } = now;
  if (!before || result.unfinished.length === 0) return result;
  const place = placer(before.text, now.text);
  const known = new Map(before.result.claims.map((c) => [keyOf(c), c]));
  const claims = result.claims.map((claim): ReportClaim => {
    const old = result.unfinished.includes(claim.function) && claim.verdict === 'unread' ? known.get(keyOf(claim)) : undefined;
    if (!old || old.verdict === 'unread') return claim;
    if (old.verdict === 'holds') return { ...claim, findings: claim.findings.map((f) => ({ ...f, message: `${f.message} As of the last complete text it holds.` })) };
    const { witness, evidence } = old;
    return {
      ...claim,
      verdict: old.verdict,
      ...(evidence ? { evidence } : {}),
      ...(witness ? { witness } : {}),
      findings: old.findings.map((f) => aged(f, claim, place)),
    };
  });
  return { ...result, claims };
}

/** What to hold on to for the next text: of functions that are not finished, what was known before. */
export function remembered(before: TextResult | undefined, now: TextResult): TextResult {
  const { result } = now;
  if (!before || result.unfinished.length === 0) return now;
  const shown = withLastReading(before, now);
  const known = new Map(before.result.claims.map((c) => [keyOf(c), c]));
  const claims = shown.claims.map((c) => {
    const old = known.get(keyOf(c));
    return result.unfinished.includes(c.function) && c.verdict === 'unread' && old?.verdict === 'holds' ? { ...old, line: c.line } : c;
  });
  return { text: now.text, result: { ...shown, claims } };
}

function keyOf(c: ReportClaim): string {
  return JSON.stringify([c.system, c.function, c.output, c.quantity]);
}

/** A finding of an older text: without its repair, whose edits are about that text. */
function aged(finding: Finding, claim: ReportClaim, place: (p: ReportPosition) => ReportPosition | undefined): Finding {
  const { repair: _, ...rest } = finding;
  const start = place(finding.range.start);
  const end = place(finding.range.end);
  const line: ReportRange = { start: { line: claim.line, column: 1 }, end: { line: claim.line, column: 1 } };
  const message = finding.message.endsWith(AS_OF) ? finding.message : finding.message + AS_OF;
  return { ...rest, message, range: start && end && finding.file === undefined ? { start, end } : (finding.file === undefined ? line : finding.range) };
}

/** Where a place of the old text is in the new one: undefined for what was typed over. */
function placer(old: string, text: string): (p: ReportPosition) => ReportPosition | undefined {
  const shorter = Math.min(old.length, text.length);
  let start = 0;
  while (start < shorter && old.charCodeAt(start) === text.charCodeAt(start)) start++;
  let same = 0;
  while (same < shorter - start && old.charCodeAt(old.length - 1 - same) === text.charCodeAt(text.length - 1 - same)) same++;
  const before = new LineIndex(old);
  const after = new LineIndex(text);
  return (p) => {
    const at = before.offset(p);
    if (at <= start) return p;
    return at >= old.length - same ? after.position(at + text.length - old.length) : undefined;
  };
}
