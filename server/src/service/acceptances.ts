import { isCode, type Finding, type Problem, type ReportClaim, type ReportRange } from '@visviva/shared';
import { LineIndex } from '../text/line-index';
import type { FileResult } from './api';

/**
 * Findings that a person accepts, by a comment with its reason:
 *
 *     visviva: accept CODE because REASON              about its own line, or else the next one
 *     visviva: accept CODE of OUTPUT because REASON    about the claim of that output or quantity
 *
 * Several codes stand with commas between.
 */
export interface AcceptanceComment {
  readonly range: ReportRange;
  readonly codes: readonly string[];
  /** Lines it is about, where it names no claim. */
  readonly lines: readonly number[];
  /** An output or a quantity, without blanks. */
  readonly of?: string;
  readonly reason: string;
}

const MARK = /visviva:\s*accept\b/;
/** After a comment's own mark or blanks only, so that prose and strings are not taken for one. */
const LINE = /(?:^|[\s/#%!*;-])visviva:\s*accept\b(.*)$/;
const FORM = /^\s+([\w-]+(?:\s*,\s*[\w-]+)*)(?:\s+of\s+(.+?))?\s+because\s+(\S.*)$/;

const HOW = '`visviva: accept CODE because REASON`, or `accept CODE of OUTPUT because REASON`';

export function acceptanceComments(file: string, text: string): { readonly comments: readonly AcceptanceComment[]; readonly problems: readonly Problem[] } {
  if (!MARK.test(text)) return { comments: [], problems: [] };
  const index = new LineIndex(text);
  const comments: AcceptanceComment[] = [];
  const problems: Problem[] = [];
  for (let n = 1; n <= index.lineCount; n++) {
    const line = index.line(n);
    const match = LINE.exec(line);
    if (!match) continue;
    const rest = match[1]!.replace(/\s*(\*\/|-->|%\}|#=|"""|''')\s*$/, '').trimEnd();
    const start = line.length - match[1]!.length - /visviva:\s*accept$/.exec(line.slice(0, line.length - match[1]!.length))![0].length;
    const range = { start: { line: n, column: start + 1 }, end: { line: n, column: line.length - (match[1]!.length - rest.length) + 1 } };
    const problem = (message: string) => problems.push({ file, code: 'syntax', message, range, severity: 'error' });
    const form = FORM.exec(rest);
    if (!form) {
      problem(/\bbecause\b/.test(rest) ? `this is not understood; write ${HOW}` : `the reason is missing; write ${HOW}`);
      continue;
    }
    const codes = form[1]!.split(',').map((c) => c.trim());
    const unknown = codes.find((c) => !isCode(c));
    if (unknown !== undefined) {
      problem(`there is no code \`${unknown}\`; \`visviva explain\` lists them`);
      continue;
    }
    const of = form[2];
    comments.push({ range, codes, lines: [n, nextLine(index, n)], reason: form[3]!.trim(), ...(of === undefined ? {} : { of: bare(of) }) });
  }
  return { comments, problems };
}

/** The next line that is neither blank nor another such comment. */
function nextLine(index: LineIndex, from: number): number {
  for (let n = from + 1; n <= index.lineCount; n++) {
    const line = index.line(n);
    if (line.trim() !== '' && !LINE.test(line)) return n;
  }
  return from;
}

/**
 * The result with what comments accept marked so; comments that nothing needs any more are told.
 * @param isComplete false where faults were not searched for: a claim that differs may then get any of its codes later
 */
export function withAcceptances(result: FileResult, text: string, isComplete: boolean): FileResult {
  const { comments, problems } = acceptanceComments(result.file, text);
  if (comments.length === 0 && problems.length === 0) return result;
  const used = new Set<AcceptanceComment>();
  const accepted = <T extends Finding | Problem>(f: T, claim?: ReportClaim): T => {
    const found = comments.find((c) => {
      const isCodeOf = c.codes.includes(f.code) || (!isComplete && claim !== undefined && f.code === 'differs');
      if (!isCodeOf) return false;
      if (c.of !== undefined) return claim !== undefined && (c.of === bare(claim.output) || c.of === bare(claim.quantity));
      return c.lines.includes(f.range.start.line);
    });
    if (!found) return f;
    used.add(found);
    return { ...f, accepted: { by: 'comment', reason: found.reason } };
  };
  const claims = result.claims.map((c) => ({ ...c, findings: c.findings.map((f) => accepted(f, c)) }));
  const own = result.problems.map((p) => accepted(p));
  const idle = isComplete ? comments.filter((c) => !used.has(c)) : [];
  const unused = idle.map((c): Problem => ({
    file: result.file,
    code: 'unused',
    message: `nothing ${c.of === undefined ? 'here' : `about ${c.of}`} is told as ${c.codes.map((x) => `\`${x}\``).join(' or ')} any more: take this comment out`,
    range: c.range,
    severity: 'warning',
  }));
  return { ...result, claims, problems: [...own, ...problems, ...unused] };
}

function bare(text: string): string {
  return text.replace(/[\s`]/g, '');
}
