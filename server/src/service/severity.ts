import type { ProjectSettings } from '@visviva/shared';
import type { FileResult } from './api';

/** The result with the severities that the project gives its findings. */
export function withSeverities(result: FileResult, { severity }: ProjectSettings): FileResult {
  if (!severity) return result;
  return {
    ...result,
    claims: result.claims.map((c) => ({
      ...c,
      findings: c.findings.map((f) => (severity[f.code] ? { ...f, severity: severity[f.code]! } : f)),
    })),
    problems: result.problems.map((p) => (severity[p.code] ? { ...p, severity: severity[p.code]! } : p)),
  };
}
