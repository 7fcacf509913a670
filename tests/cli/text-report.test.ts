import type { Report, ReportClaim } from '@visviva/shared';
import { describe, expect, it } from 'vitest';
import { textReport } from '../../server/src/cli/report/text';
import { jsonReport } from '../../server/src/cli/report/json';
import { textWidth } from '../../server/src/cli/report/width';

const at = (line: number, from: number, to: number) => ({ start: { line, column: from }, end: { line, column: to } });

const claim: ReportClaim = {
  file: 'a.ts', language: 'typescript', system: 'hoist', function: 'f', output: 'return[0]', quantity: "x''", line: 3, verdict: 'unread',
  findings: [{ code: 'unread', message: 'return[0] is not checked: no value of `a b c` is known.', range: at(1, 5, 8) }],
};

function report(claims: readonly ReportClaim[], more: Partial<Report> = {}): Report {
  const count = (v: string) => claims.filter((c) => c.verdict === v).length;
  return {
    schema: 1, tool: { name: 'visviva', version: '1.2.3' }, problems: [], skipped: [], claims,
    summary: { files: 1, systems: 1, claims: claims.length, holds: count('holds'), differs: count('differs'), unread: count('unread'), problems: 0 },
    ...more,
  };
}

const shown = (r: Report, source = '', colour = false) => textReport(r, { colour, read: () => source });

describe('the report for people', () => {
  it('tells once what several claims have in common', () => {
    const twin = { ...claim, output: 'return[1]', findings: [{ ...claim.findings[0]!, message: 'return[1] is not checked: no value of `a b c` is known.' }] };
    expect(shown(report([claim, twin]), 'let abc;')).toBe(
      [
        'hoist  f  2 of 2 claims not read   a.ts:3',
        '',
        '  a.ts:1:5   unread',
        '  return[0] is not checked: no value of `a b c` is known.',
        '  The same goes for return[1].',
        '      let abc;',
        '          ‾‾‾',
        '',
        '1 file, 1 system, 2 claims: 2 not read.',
        '',
      ].join('\n'),
    );
  });

  it('says what claims that hold rest on, once for all of one kind', () => {
    const held = (output: string, evidence: ReportClaim['evidence']): ReportClaim => ({ ...claim, output, verdict: 'holds', evidence, findings: [] });
    const proved = { kind: 'identity', states: 64, worst: 3e-16, chance: 1e-20 } as const;
    const numeric = (worst: number) => ({ kind: 'numeric', states: 64, worst, inexact: 'a branch' }) as const;
    expect(shown(report([held('return[0]', proved), held('return[1]', proved)]))).toContain('a.ts:3\n  holds: identity, failure chance below 1e-15\n');
    const mixed = shown(report([held('return[0]', proved), held('return[1]', numeric(3e-14)), held('return[2]', numeric(1e-15))]));
    expect(mixed).toContain(
      '  return[0] holds: identity, failure chance below 1e-15\n' +
        '  return[1], return[2] hold: 64 states, worst relative difference 3e-14; not proved exactly: a branch\n',
    );
    expect(JSON.parse(jsonReport(report([held('y', proved), held('z', numeric(0.5))]))).claims.map((c: ReportClaim) => c.evidence)).toEqual([proved, numeric(0.5)]);
  });

  it('gives the witness where the message does not', () => {
    const differs: ReportClaim = { ...claim, verdict: 'differs', findings: [], witness: { state: { th: 0.5, "th'": 1 }, expected: 4.2055, found: -4.2055 } };
    expect(shown(report([differs]))).toContain("At th = 0.5, th' = 1 the code gives -4.2055, the declared energies give 4.2055.");
  });

  it('keeps control characters of other people from the terminal', () => {
    const evil = { ...claim, system: 'x\u001b[2J', findings: [{ ...claim.findings[0]!, message: 'a\u001b]0;title\u0007b' }] };
    expect(shown(report([evil]), 'a\u001b[31m\u202eb')).not.toMatch(/[\u001b\u0007\u202e]/);
  });

  it('colours only when asked', () => {
    expect(shown(report([claim]), '', true)).toContain('\u001b[');
    expect(shown(report([claim]), '', false)).not.toContain('\u001b[');
  });

  it('shows a short window of a very long line, at once', () => {
    const source = `${'a'.repeat(4_000_000)}BAD${'c'.repeat(4_000_000)}`;
    const long = { ...claim, findings: [{ ...claim.findings[0]!, range: at(1, 4_000_001, 4_000_004) }] };
    const lines = shown(report([long]), source).split('\n');
    const i = lines.findIndex((l) => l.includes('BAD'));
    expect(lines[i]!.length).toBeLessThan(130);
    expect(lines[i + 1]!.indexOf('‾')).toBe(lines[i]!.indexOf('BAD'));
    expect(lines[i + 1]!.trim()).toBe('‾‾‾');
  });

  it('tells what was left out and what is wrong in declarations', () => {
    const text = shown(
      report([], {
        problems: [{ file: 'b.ts', code: 'syntax', message: 'no', range: at(2, 1, 2), severity: 'error' }],
        skipped: [{ file: 'c.ts', reason: 'it is a binary file' }],
        summary: { files: 1, systems: 0, claims: 0, holds: 0, differs: 0, unread: 0, problems: 1 },
      }),
    );
    expect(text).toBe('1 problem in declarations\n\n  b.ts:2:1   syntax\n  no\n\nleft out\n  c.ts: it is a binary file\n\n1 file: no claim was read.\n');
  });
});

describe('widths', () => {
  it.each([['abc', 3], ['幅', 2], ['🏗️', 2], ['👩‍🔧', 2], ['é', 1], ['e\u0301', 1], ['θ̇', 1], ['🇫🇷', 2], ['\ufeff', 0], ['한글', 4]])('%s', (text, width) => {
    expect(textWidth(text)).toBe(width);
  });
});

describe('the JSON report', () => {
  it('has no numbers that JSON cannot hold', () => {
    const c: ReportClaim = { ...claim, evidence: { kind: 'numeric', states: 3, worst: Infinity } };
    expect(jsonReport(report([c]))).toContain('"worst": "Infinity"');
  });
});
