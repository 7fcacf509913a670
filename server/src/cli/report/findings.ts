import type { Acceptance, Finding, FindingCode, Problem, ProblemCode, Repair, Report, ReportClaim, ReportRange, Severity } from '@visviva/shared';

/** One thing that a report tells, about a claim or about a declaration. */
export interface Listed {
  readonly file: string;
  readonly range: ReportRange;
  readonly code: FindingCode | ProblemCode;
  readonly message: string;
  readonly level: Severity;
  /** Where the project gives it. */
  readonly given?: Severity;
  readonly fingerprint: string;
  readonly accepted?: Acceptance;
  readonly repair?: Repair;
  /** The claim it is about; undefined for problems of declarations. */
  readonly claim?: ReportClaim;
  /** Outputs of other claims of the same function with the same to tell. */
  readonly alsoFor: readonly string[];
}

/** Everything that a report tells, in its order; several claims that fail at one place for one reason are told once. */
export function listFindings(report: Pick<Report, 'claims' | 'problems'>): Listed[] {
  const told = new Map<string, Listed & { alsoFor: string[] }>();
  for (const claim of report.claims) {
    for (const f of findingsOf(claim)) {
      const general = f.message.replace(claim.output, '');
      const key = JSON.stringify([claim.file, claim.system, claim.function, f.code, f.file, f.range, general, f.accepted]);
      const before = told.get(key);
      if (before) before.alsoFor.push(claim.output);
      else told.set(key, { ...listed(claim.file, f, f.severity ?? levelOf(claim)), claim, alsoFor: [] });
    }
  }
  return [...told.values(), ...report.problems.map((p) => ({ ...listed(p.file, p, p.severity), alsoFor: [] }))];
}

/** A claim that is not well always has something to say, if only that. */
export function findingsOf(claim: ReportClaim): readonly Finding[] {
  if (claim.findings.length > 0 || claim.verdict === 'holds') return claim.findings;
  const at = { line: claim.line, column: 1 };
  const message = `${claim.output} = ${claim.quantity} ${claim.verdict === 'differs' ? 'does not hold.' : 'was not read.'}`;
  return [{ code: claim.verdict, message, range: { start: at, end: at } }];
}

export function levelOf(claim: ReportClaim): Severity {
  return claim.verdict === 'differs' ? 'error' : claim.verdict === 'unread' ? 'warning' : 'note';
}

function listed(file: string, f: Finding | Problem, level: Severity): Omit<Listed, 'alsoFor' | 'claim'> {
  const repair = 'repair' in f ? f.repair : undefined;
  return {
    file: f.file ?? file,
    range: f.range,
    code: f.code,
    message: f.message,
    level,
    fingerprint: f.fingerprint ?? '',
    ...('severity' in f && f.severity ? { given: f.severity } : {}),
    ...(f.accepted ? { accepted: f.accepted } : {}),
    ...(repair ? { repair } : {}),
  };
}
