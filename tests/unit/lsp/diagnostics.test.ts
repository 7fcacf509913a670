import type { Finding, ReportClaim, ReportRange } from '@visviva/shared';
import { expect, test } from 'vitest';
import { toCodeActions } from '../../../server/src/lsp/code-actions';
import { plainText } from '../../../server/src/lsp/hover';
import { toDiagnostics } from '../../../server/src/lsp/diagnostics';
import type { FileResult } from '../../../server/src/service/api';

const lines = ['// @visviva crane', '//   checks return = th\'\'  ', 'code'];
const context = { uriOf: (file: string) => `file://${file}`, line: (line: number) => lines[line - 1] ?? '' };

function place(line: number, from: number, to: number): ReportRange {
  return { start: { line, column: from }, end: { line, column: to } };
}

function claim(output: string, verdict: ReportClaim['verdict'], ...findings: Finding[]): ReportClaim {
  return {
    file: '/a.ts', language: 'typescript', system: 'crane', function: 'f', output, quantity: "th''", line: 2, verdict, findings,
  };
}

function result(parts: Partial<FileResult>): FileResult {
  return { file: '/a.ts', language: 'typescript', systems: [], claims: [], problems: [], dependsOn: [], unfinished: [], ...parts };
}

test('one fault under several claims is shown once, with each claim', () => {
  const fault: Finding = { code: 'sign', message: 'wrong', range: place(3, 1, 5) };
  const shown = toDiagnostics(result({ claims: [claim('a', 'unread', fault), claim('b', 'differs', fault)] }), context);
  expect(shown).toHaveLength(1);
  expect(shown[0]).toMatchObject({
    severity: 1,
    range: { start: { line: 2, character: 0 }, end: { line: 2, character: 4 } },
    relatedInformation: [
      { message: "claimed here: a = th'' (crane)", location: { range: { start: { line: 1, character: 5 }, end: { line: 1, character: 25 } } } },
      { message: "claimed here: b = th'' (crane)" },
    ],
  });
});

test('a fault in another file is shown at the claim and leads there', () => {
  const fault: Finding = { code: 'sign', message: 'wrong', range: place(9, 2, 3), file: '/b.ts' };
  expect(toDiagnostics(result({ claims: [claim('a', 'differs', fault)] }), context)).toMatchObject([
    {
      range: { start: { line: 1 } },
      relatedInformation: [{ location: { uri: 'file:///b.ts', range: { start: { line: 8, character: 1 } } } }, {}],
    },
  ]);
});

test('a claim that does not hold is never passed over', () => {
  const shown = toDiagnostics(result({ claims: [claim('a', 'differs'), claim('b', 'unread'), claim('c', 'holds')] }), context);
  expect(shown.map((d) => [d.code, d.severity])).toEqual([
    ['differs', 1],
    ['unread', 3],
  ]);
});

test('a verified repair is offered once where its finding is; an unverified one never', () => {
  const at = place(3, 1, 5);
  const repair = { title: 'Write b', edits: [{ range: at, text: 'b' }], verified: true };
  const fault: Finding = { code: 'sign', message: 'wrong', range: at, repair };
  const claims = [
    claim('a', 'differs', fault, { ...fault, repair: { ...repair, title: 'c', verified: false } }),
    claim('b', 'differs', fault),
  ];
  const ask = (line: number): unknown =>
    toCodeActions(result({ claims }), { start: { line, character: 2 }, end: { line, character: 2 } }, [], context.uriOf);
  expect(ask(2)).toEqual([
    {
      title: 'Write b',
      kind: 'quickfix',
      isPreferred: true,
      diagnostics: [],
      edit: {
        changes: {
          'file:///a.ts': [{ range: { start: { line: 2, character: 0 }, end: { line: 2, character: 4 } }, newText: 'b' }],
        },
      },
    },
  ]);
  expect(ask(1)).toEqual([]);
});

test('problems keep their severity, in order of place', () => {
  const problem = { file: '/a.ts', message: 'm' } as const;
  const shown = toDiagnostics(
    result({
      problems: [
        { ...problem, code: 'unused', severity: 'warning', range: place(3, 2, 3) },
        { ...problem, code: 'syntax', severity: 'error', range: place(1, 2, 3) },
        { ...problem, code: 'ambiguous', severity: 'error', range: place(7, 2, 3), file: '/b.ts' },
      ],
    }),
    context,
  );
  expect(shown.map((d) => [d.code, d.severity, d.range.start.line])).toEqual([
    ['ambiguous', 1, 0],
    ['syntax', 1, 0],
    ['unused', 2, 2],
  ]);
});

test('markdown as plain text keeps code as it is', () => {
  expect(plainText("### crane\n**th**: `a**2` and b**2\n\n```\nx**2 = `y`\n```\nend\\_x\n")).toBe(
    'crane\nth: a**2 and b**2\n\nx**2 = `y`\nend_x',
  );
});
