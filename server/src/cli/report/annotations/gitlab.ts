import { listFindings } from '../findings';
import { fromRoot, type Page } from '../page';

/** Source: GitLab Docs, "Code Quality", section "Code Quality report format". */
export function gitlabReport(page: Page): string {
  const issues = listFindings(page.report)
    .filter((f) => !f.accepted)
    .map((f) => ({
      description: f.message,
      check_name: `visviva-${f.code}`,
      fingerprint: f.fingerprint,
      severity: f.level === 'error' ? 'critical' : f.level === 'warning' ? 'minor' : 'info',
      location: { path: fromRoot(page, f.file), lines: { begin: f.range.start.line, end: f.range.end.line } },
    }));
  return `${JSON.stringify(issues, null, 2)}\n`;
}
