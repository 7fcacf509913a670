import { version, type Problem, type Report, type ReportClaim } from '@visviva/shared';
import type { FileResult } from '../service/api';
import { byPath, type Skipped } from './inputs';
import { UsageError } from './io';

export interface Choice {
  readonly function?: string;
  readonly system?: string;
}

/**
 * The report of some results, cut down to one function or system where that was asked for.
 * @param files how many files were read
 * @param show the name of a file in the report
 * @throws UsageError where nothing goes by the chosen name
 */
export function assemble(
  results: readonly FileResult[],
  skipped: readonly Skipped[],
  files: number,
  choice: Choice,
  show: (file: string) => string,
): Report {
  const chosen = results.map((r) => choose(r, choice));
  const { system, function: name } = choice;
  if (system !== undefined && !results.some((r) => r.systems.some((s) => s.name === system) || r.claims.some((c) => c.system === system))) {
    throw new UsageError(`No system "${system}" is declared in the given paths.${offer(results.flatMap((r) => r.systems.map((s) => s.name)))}`);
  }
  if (name !== undefined && !chosen.some((r) => r.claims.length > 0)) {
    throw new UsageError(`No claim about a function "${name}" is made in the given paths.${offer(results.flatMap((r) => r.claims.map((c) => c.function)))}`);
  }
  const claims = chosen.flatMap((r) => byLine(r.claims)).map((c) => shownClaim(c, show));
  const problems = chosen.flatMap((r) => r.problems).map((p) => ({ ...p, file: show(p.file) }));
  return {
    schema: 1,
    tool: { name: 'visviva', version },
    summary: summaryOf(claims, problems, files, chosen.reduce((n, r) => n + r.systems.length, 0)),
    claims,
    problems,
    skipped: [...skipped].map((s) => ({ file: show(s.file), reason: s.reason })).sort((a, b) => byPath(a.file, b.file)),
  };
}

export function summaryOf(claims: readonly ReportClaim[], problems: readonly Problem[], files: number, systems: number): Report['summary'] {
  const count = (verdict: string) => claims.filter((c) => c.verdict === verdict).length;
  const accepted = claims.flatMap((c) => c.findings).filter((f) => f.accepted).length + problems.filter((p) => p.accepted).length;
  return {
    files,
    systems,
    claims: claims.length,
    holds: count('holds'),
    differs: count('differs'),
    unread: count('unread'),
    problems: problems.length,
    ...(accepted > 0 ? { accepted } : {}),
  };
}

function choose(r: FileResult, choice: Choice): FileResult {
  const { system, function: name } = choice;
  if (system === undefined && name === undefined) return r;
  const claims = r.claims.filter(
    (c) => (system === undefined || c.system === system) && (name === undefined || isNamed(c.function, name)),
  );
  const wanted = system ?? new Set(claims.map((c) => c.system));
  const systems = r.systems.filter((s) => (typeof wanted === 'string' ? s.name === wanted : wanted.has(s.name)));
  const problems = r.problems.filter((p) => systems.some((s) => isInside(p, s.range)));
  return { ...r, claims, systems, problems };
}

/** `rates` names the function rates and the method Crane.rates. */
function isNamed(path: string, name: string): boolean {
  return path === name || path.endsWith(`.${name}`);
}

function isInside(p: Problem, range: Problem['range']): boolean {
  return p.range.start.line >= range.start.line && p.range.start.line <= range.end.line;
}

function byLine(claims: readonly ReportClaim[]): ReportClaim[] {
  return [...claims].sort((a, b) => a.line - b.line);
}

function shownClaim(c: ReportClaim, show: (file: string) => string): ReportClaim {
  return {
    ...c,
    file: show(c.file),
    findings: c.findings.map((f) => (f.file === undefined ? f : { ...f, file: show(f.file) })),
  };
}

function offer(names: readonly string[]): string {
  const known = [...new Set(names)].filter((n) => n !== '').sort(byPath);
  if (known.length === 0) return '';
  return ` Known: ${known.slice(0, 12).join(', ')}${known.length > 12 ? ', ...' : ''}.`;
}
