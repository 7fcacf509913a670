import { version, type KnownFinding, type Report } from '@visviva/shared';
import { existsSync, readFileSync } from 'node:fs';
import { absolute } from '../host/paths';
import { writeWholeFile } from '../host/write-file';
import { byPath } from './inputs';
import { UsageError, type Io } from './io';
import { findingsOf } from './report/findings';

/** The findings that a project has accepted, as its file lists them. */
interface BaselineFile {
  readonly schema: 1;
  readonly tool: { readonly name: 'visviva'; readonly version: string };
  readonly findings: readonly KnownFinding[];
}

/** @throws UsageError for a file that is not there or is none */
export function readBaseline(file: string, io: Io): readonly KnownFinding[] {
  let value: unknown;
  try {
    value = JSON.parse(readFileSync(absolute(file, io.folder), 'utf8'));
  } catch (error) {
    const { code } = error as NodeJS.ErrnoException;
    const why = code === 'ENOENT' ? 'there is no such file; --update-baseline makes it' : code ? `it cannot be read (${code})` : 'it is not JSON';
    throw new UsageError(`The baseline "${file}": ${why}.`);
  }
  const findings = (value as Partial<BaselineFile> | null)?.findings;
  const isList = (value as Partial<BaselineFile> | null)?.schema === 1 && Array.isArray(findings);
  if (!isList || !findings.every((f) => typeof f?.fingerprint === 'string' && typeof f.file === 'string' && typeof f.code === 'string')) {
    throw new UsageError(`The baseline "${file}": it is none that this version reads; --update-baseline writes it anew.`);
  }
  return findings;
}

/**
 * The report with what the baseline knows marked as accepted, and with what it knows that is there no more.
 * @param nameOf the name of a file of the report as the baseline has it
 * @param covers whether the report would tell what is wrong with a file of the baseline
 */
export function againstBaseline(report: Report, known: readonly KnownFinding[], covers: (file: string) => boolean): Report {
  const fingerprints = new Set(known.map((k) => k.fingerprint));
  const seen = new Set<string>();
  const mark = <T extends { readonly fingerprint?: string; readonly accepted?: object }>(f: T): T => {
    if (f.fingerprint === undefined || !fingerprints.has(f.fingerprint)) return f;
    seen.add(f.fingerprint);
    return f.accepted ? f : { ...f, accepted: { by: 'baseline' } };
  };
  const claims = report.claims.map((c) => ({ ...c, findings: c.findings.map(mark) }));
  const problems = report.problems.map(mark);
  const gone = known.filter((k) => !seen.has(k.fingerprint) && covers(k.file));
  return { ...report, claims, problems, ...(gone.length > 0 ? { gone } : {}) };
}

/**
 * Writes all findings that no comment accepts; what the report does not cover stays as it was.
 * @returns why it was not written
 */
export function writeBaseline(file: string, report: Report, nameOf: (file: string) => string, covers: (file: string) => boolean, io: Io): string | undefined {
  const path = absolute(file, io.folder);
  const before = existsSync(path) ? readBaseline(file, io).filter((k) => !covers(k.file)) : [];
  const now = knownFindings(report, nameOf);
  const findings = [...new Map([...before, ...now].map((k) => [k.fingerprint, k])).values()].sort(
    (a, b) => byPath(a.file, b.file) || byPath(a.code, b.code) || byPath(a.fingerprint, b.fingerprint),
  );
  const value: BaselineFile = { schema: 1, tool: { name: 'visviva', version }, findings };
  return writeWholeFile(path, `${JSON.stringify(value, null, 2)}\n`);
}

function knownFindings(report: Report, nameOf: (file: string) => string): KnownFinding[] {
  const ofClaims = report.claims.flatMap((c) =>
    (c.verdict === 'holds' ? [] : findingsOf(c))
      .filter((f) => f.accepted?.by !== 'comment')
      .map((f): KnownFinding => ({ fingerprint: f.fingerprint!, file: nameOf(f.file ?? c.file), code: f.code, system: c.system, function: c.function, output: c.output, message: f.message })),
  );
  const ofDeclarations = report.problems
    .filter((p) => p.accepted?.by !== 'comment')
    .map((p): KnownFinding => ({ fingerprint: p.fingerprint!, file: nameOf(p.file), code: p.code, message: p.message }));
  return [...ofClaims, ...ofDeclarations];
}
