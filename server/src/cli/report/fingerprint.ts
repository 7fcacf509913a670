import type { Report, ReportRange } from '@visviva/shared';
import { createHash } from 'node:crypto';
import { LineIndex } from '../../text/line-index';
import { findingsOf } from './findings';

/**
 * Gives every finding a mark that stays when lines move, files are formatted anew or the program's words change: from the
 * claim, the code of the finding and the text that it is about, blanks left out. What is told twice is counted.
 * @param read the text of a file of the report
 * @param nameOf the name of a file, the same from wherever the command runs
 */
export function withFingerprints(report: Report, read: (file: string) => string | undefined, nameOf: (file: string) => string): Report {
  const lines = new Map<string, LineIndex>();
  const seen = new Map<string, number>();
  const textAt = (file: string, range: ReportRange): string => {
    let index = lines.get(file);
    if (!index) lines.set(file, (index = new LineIndex(read(file) ?? '')));
    const { start, end } = range;
    if (start.line === end.line) return index.line(start.line).slice(start.column - 1, end.column - 1);
    let text = index.line(start.line).slice(start.column - 1);
    for (let n = start.line + 1; n < Math.min(end.line, start.line + 40); n++) text += index.line(n);
    return text;
  };
  const mark = (file: string, range: ReportRange, parts: readonly string[]): string => {
    const text = textAt(file, range).replace(/\s+/g, '');
    const key = JSON.stringify([nameOf(file), ...parts, text]);
    const count = seen.get(key) ?? 0;
    seen.set(key, count + 1);
    return createHash('sha256').update(`${key}#${count}`).digest('hex').slice(0, 32);
  };
  return {
    ...report,
    claims: report.claims.map((c) => ({
      ...c,
      findings: findingsOf(c).map((f) => ({
        ...f,
        fingerprint: mark(f.file ?? c.file, f.range, [c.system, c.function, c.output, c.quantity, f.code]),
      })),
    })),
    problems: report.problems.map((p) => ({ ...p, fingerprint: mark(p.file, p.range, [p.code]) })),
  };
}
