import { defaultSettings, type Finding, type ReportClaim, type Settings, type Severity, type ShownAs, type Verdict } from '@visviva/shared';
import {
  DiagnosticSeverity,
  type Diagnostic,
  type DiagnosticRelatedInformation,
  type Range,
} from 'vscode-languageserver';
import type { FileResult } from '../service/api';
import { toRange } from './ranges';

export interface DiagnosticContext {
  readonly uriOf: (file: string) => string;
  /** The text of a line (from 1) of the checked document; empty where there is none. */
  readonly line: (line: number) => string;
  /** As the settings say; as by default where absent. */
  readonly severity?: Settings['severity'];
}

/** Undefined: not shown at all. A steady small difference of a claim that holds is a warning at most. */
function severityOfClaim(verdict: Verdict, { severity = defaultSettings.severity }: DiagnosticContext): DiagnosticSeverity | undefined {
  if (verdict === 'holds') return DiagnosticSeverity.Warning;
  const shown = severity[verdict];
  return shown === 'none' ? undefined : severityOf[shown];
}

/** What is an error of a declaration is shown as the settings say, what is none never as more than a warning. */
function severityOfProblem(isError: boolean, { severity = defaultSettings.severity }: DiagnosticContext): DiagnosticSeverity | undefined {
  const { declaration } = severity;
  if (declaration === 'none') return undefined;
  return isError ? severityOf[declaration] : (Math.max(severityOf[declaration], DiagnosticSeverity.Warning) as DiagnosticSeverity);
}

const severityOf: Readonly<Record<Exclude<ShownAs, 'none'>, DiagnosticSeverity>> = {
  error: DiagnosticSeverity.Error,
  warning: DiagnosticSeverity.Warning,
  information: DiagnosticSeverity.Information,
  hint: DiagnosticSeverity.Hint,
};

const ofSeverity: Readonly<Record<Severity, DiagnosticSeverity>> = {
  error: DiagnosticSeverity.Error,
  warning: DiagnosticSeverity.Warning,
  note: DiagnosticSeverity.Information,
};

/**
 * What the editor shows for a checked file. One fault is shown once, however many claims it breaks; each diagnostic
 * leads to the claims that it belongs to.
 */
export function toDiagnostics(result: FileResult, context: DiagnosticContext): Diagnostic[] {
  const shown = new Map<string, Diagnostic>();
  const add = (diagnostic: Diagnostic): void => {
    if (diagnostic.severity === undefined) return;
    const { start, end } = diagnostic.range;
    const key = JSON.stringify([start, end, diagnostic.code, diagnostic.message]);
    const before = shown.get(key);
    if (!before) {
      shown.set(key, diagnostic);
      return;
    }
    before.severity = Math.min(before.severity ?? 1, diagnostic.severity ?? 1) as DiagnosticSeverity;
    before.relatedInformation = merge(before.relatedInformation, diagnostic.relatedInformation);
  };

  for (const problem of result.problems) {
    if (problem.accepted) continue;
    const elsewhere = problem.file !== result.file;
    add({
      range: elsewhere ? firstLine : toRange(problem.range),
      severity: problem.severity === 'note' ? DiagnosticSeverity.Information : severityOfProblem(problem.severity === 'error', context),
      code: problem.code,
      source: 'visviva',
      message: problem.message,
      relatedInformation: elsewhere
        ? [{ location: { uri: context.uriOf(problem.file), range: toRange(problem.range) }, message: 'the place' }]
        : undefined,
    });
  }
  for (const claim of result.claims) {
    for (const finding of claim.findings) if (!finding.accepted) add(ofFinding(result.file, claim, finding, context));
    if (claim.verdict !== 'holds' && claim.findings.length === 0) add(ofClaim(result.file, claim, context));
  }
  return [...shown.values()].sort(byPlace);
}

const firstLine: Range = { start: { line: 0, character: 0 }, end: { line: 0, character: 0 } };

function ofFinding(file: string, claim: ReportClaim, finding: Finding, context: DiagnosticContext): Diagnostic {
  const elsewhere = finding.file !== undefined && finding.file !== file;
  const related: DiagnosticRelatedInformation[] = [];
  if (elsewhere) {
    related.push({
      location: { uri: context.uriOf(finding.file!), range: toRange(finding.range) },
      message: 'the place in the code',
    });
  }
  related.push(toClaim(file, claim, context));
  return {
    range: elsewhere ? claimRange(file, claim, context) : toRange(finding.range),
    severity: finding.severity ? ofSeverity[finding.severity] : severityOfClaim(claim.verdict, context),
    code: finding.code,
    source: 'visviva',
    message: finding.message,
    relatedInformation: related,
  };
}

/** A claim that does not hold is never passed over, even if nothing more is known about it. */
function ofClaim(file: string, claim: ReportClaim, context: DiagnosticContext): Diagnostic {
  return {
    range: claimRange(file, claim, context),
    severity: severityOfClaim(claim.verdict, context),
    code: claim.verdict,
    source: 'visviva',
    message:
      claim.verdict === 'differs'
        ? `${claim.output} differs from ${claim.quantity} of ${claim.system}.`
        : `${claim.output} could not be compared with ${claim.quantity} of ${claim.system}.`,
  };
}

function toClaim(file: string, claim: ReportClaim, context: DiagnosticContext): DiagnosticRelatedInformation {
  return {
    location: { uri: context.uriOf(claim.file), range: claimRange(file, claim, context) },
    message: `claimed here: ${claim.output} = ${claim.quantity} (${claim.system})`,
  };
}

/** The claim's line without the comment's marks and the blanks around it; the line's start where its text is in another document. */
function claimRange(file: string, claim: ReportClaim, context: DiagnosticContext): Range {
  const text = claim.file === file ? context.line(claim.line) : '';
  const line = Math.max(0, claim.line - 1);
  const from = /^[\s*/#%!]*/.exec(text)![0].length;
  return { start: { line, character: from }, end: { line, character: Math.max(from, text.trimEnd().length) } };
}

function merge(
  a: readonly DiagnosticRelatedInformation[] = [],
  b: readonly DiagnosticRelatedInformation[] = [],
): DiagnosticRelatedInformation[] {
  const seen = new Map([...a, ...b].map((information) => [JSON.stringify(information), information]));
  return [...seen.values()];
}

function byPlace(a: Diagnostic, b: Diagnostic): number {
  return a.range.start.line - b.range.start.line || a.range.start.character - b.range.start.character;
}
