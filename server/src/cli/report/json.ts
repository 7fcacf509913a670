import type { Acceptance, Evidence, Finding, Problem, Report, ReportClaim, ReportRange, Severity } from '@visviva/shared';

/** The report as JSON, its keys in the documented order whatever order they were made in. */
export function jsonReport(report: Report): string {
  const { schema, tool, summary, claims, problems, skipped } = report;
  const ordered = {
    schema,
    tool: { name: tool.name, version: tool.version },
    summary: {
      files: summary.files,
      systems: summary.systems,
      claims: summary.claims,
      holds: summary.holds,
      differs: summary.differs,
      unread: summary.unread,
      problems: summary.problems,
      ...(summary.accepted ? { accepted: summary.accepted } : {}),
    },
    claims: claims.map(claimJson),
    problems: problems.map(problemJson),
    skipped: skipped.map((s) => ({ file: s.file, reason: s.reason })),
    ...(report.shard ? { shard: report.shard } : {}),
    ...(report.gone ? { gone: report.gone } : {}),
  };
  return `${JSON.stringify(ordered, finite, 2)}\n`;
}

/** JSON has no word for infinity; such a number is written as text. */
function finite(_key: string, value: unknown): unknown {
  return typeof value === 'number' && !Number.isFinite(value) ? String(value) : value;
}

function claimJson(c: ReportClaim): object {
  return {
    file: c.file,
    language: c.language,
    system: c.system,
    function: c.function,
    output: c.output,
    quantity: c.quantity,
    line: c.line,
    verdict: c.verdict,
    ...(c.evidence ? { evidence: evidenceJson(c.evidence) } : {}),
    ...(c.witness
      ? { witness: { state: c.witness.state, expected: c.witness.expected, found: c.witness.found } }
      : {}),
    findings: c.findings.map(findingJson),
  };
}

function evidenceJson(e: Evidence): object {
  return {
    kind: e.kind,
    states: e.states,
    worst: e.worst,
    ...(e.chance === undefined ? {} : { chance: e.chance }),
    ...(e.inexact === undefined ? {} : { inexact: e.inexact }),
  };
}

function findingJson(f: Finding): object {
  return {
    code: f.code,
    message: f.message,
    ...(f.file === undefined ? {} : { file: f.file }),
    range: rangeJson(f.range),
    ...(f.repair
      ? {
          repair: {
            title: f.repair.title,
            edits: f.repair.edits.map((e) => ({ range: rangeJson(e.range), text: e.text })),
            verified: f.repair.verified,
          },
        }
      : {}),
    ...marks(f),
  };
}

function problemJson(p: Problem): object {
  return { file: p.file, code: p.code, message: p.message, range: rangeJson(p.range), severity: p.severity, ...marks({ ...p, severity: undefined }) };
}

function marks(f: { readonly fingerprint?: string; readonly severity?: Severity; readonly accepted?: Acceptance }): object {
  return {
    ...(f.severity ? { severity: f.severity } : {}),
    ...(f.fingerprint ? { fingerprint: f.fingerprint } : {}),
    ...(f.accepted ? { accepted: { by: f.accepted.by, ...(f.accepted.reason ? { reason: f.accepted.reason } : {}) } } : {}),
  };
}

function rangeJson(r: ReportRange): object {
  return {
    start: { line: r.start.line, column: r.start.column },
    end: { line: r.end.line, column: r.end.column },
  };
}
