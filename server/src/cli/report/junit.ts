import type { Problem, ReportClaim } from '@visviva/shared';
import { findingsOf } from './findings';
import { fromRoot, type Page } from './page';

/**
 * One test case per claim and per wrong declaration, a suite per file, in the form that test reports of build servers are
 * read in.
 */
export function junitReport(page: Page): string {
  const { claims, problems } = page.report;
  const files = [...new Set([...claims.map((c) => c.file), ...problems.map((p) => p.file)])];
  const suites = files.map((file) => {
    const name = fromRoot(page, file);
    return suite(name, [
      ...claims.filter((c) => c.file === file).map((c) => claimCase(name, c)),
      ...problems.filter((p) => p.file === file).map((p) => problemCase(name, p)),
    ]);
  });
  const total = (kind: Kind) => suites.reduce((n, s) => n + s.counts[kind], 0);
  const head = `name="visviva" tests="${suites.reduce((n, s) => n + s.tests, 0)}" failures="${total('failure')}" errors="${total('error')}" skipped="${total('skipped')}"`;
  const body = suites.map((s) => s.text).join('');
  return `<?xml version="1.0" encoding="UTF-8"?>\n<testsuites ${head}>\n${body}</testsuites>\n`;
}

type Kind = 'failure' | 'error' | 'skipped' | 'passed';

interface Case {
  readonly kind: Kind;
  readonly text: string;
}

function suite(name: string, cases: readonly Case[]): { text: string; tests: number; counts: Record<Kind, number> } {
  const counts = { failure: 0, error: 0, skipped: 0, passed: 0 };
  for (const c of cases) counts[c.kind]++;
  const head = `name="${xml(name)}" tests="${cases.length}" failures="${counts.failure}" errors="${counts.error}" skipped="${counts.skipped}"`;
  return { text: `  <testsuite ${head}>\n${cases.map((c) => c.text).join('')}  </testsuite>\n`, tests: cases.length, counts };
}

/** A claim that differs has failed; one that was not read could not be tested, which is an error. */
function claimCase(file: string, c: ReportClaim): Case {
  const name = `${c.function === '' ? '' : `${c.function}: `}${c.output} = ${c.quantity}`;
  const told = findingsOf(c);
  const counting = told.filter((f) => !f.accepted);
  const kind: Kind = c.verdict === 'holds' ? 'passed' : counting.length === 0 ? 'skipped' : c.verdict === 'differs' ? 'failure' : 'error';
  const lines = told.map((f) => `${file}:${f.range.start.line}:${f.range.start.column} ${f.code}: ${f.message}${f.repair ? `\nRepair: ${f.repair.title}` : ''}`);
  return testCase(kind, c.system, name, file, c.line, (kind === 'skipped' ? told : counting)[0], lines);
}

function problemCase(file: string, p: Problem): Case {
  const { line, column } = p.range.start;
  const kind: Kind = p.accepted ? 'skipped' : p.severity === 'error' ? 'error' : 'passed';
  return testCase(kind, 'declaration', `line ${line}: ${p.code}`, file, line, p, [`${file}:${line}:${column} ${p.code}: ${p.message}`]);
}

function testCase(
  kind: Kind,
  group: string,
  name: string,
  file: string,
  line: number,
  told: { readonly code: string; readonly message: string; readonly accepted?: { readonly reason?: string } } | undefined,
  lines: readonly string[],
): Case {
  const open = `    <testcase classname="${xml(`${file}.${group}`)}" name="${xml(name)}" file="${xml(file)}" line="${line}"`;
  if (kind === 'passed') {
    if (lines.length === 0) return { kind, text: `${open}/>\n` };
    return { kind, text: `${open}>\n      <system-out>${xml(lines.join('\n'))}</system-out>\n    </testcase>\n` };
  }
  if (kind === 'skipped') {
    const why = `accepted${told?.accepted?.reason ? `: ${told.accepted.reason}` : ' by the baseline'}`;
    return { kind, text: `${open}>\n      <skipped message="${xml(why)}"/>\n    </testcase>\n` };
  }
  const what = `type="${xml(told?.code ?? '')}" message="${xml(told?.message ?? '')}"`;
  return { kind, text: `${open}>\n      <${kind} ${what}>${xml(lines.join('\n'))}</${kind}>\n    </testcase>\n` };
}

/** Text for XML 1.0, without the characters that it has no way to write. */
export function xml(text: string): string {
  return text
    .replace(/[^\t\n\r\u0020-\ud7ff\ue000-\ufffd\u{10000}-\u{10ffff}]/gu, '\ufffd')
    .replace(/[&<>"'\n\t\r]/g, (c) => (c === '&' ? '&amp;' : c === '<' ? '&lt;' : c === '>' ? '&gt;' : `&#${c.charCodeAt(0)};`));
}
