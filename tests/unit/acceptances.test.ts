import { describe, expect, it } from 'vitest';
import type { FileResult } from '../../server/src/service/api';
import { acceptanceComments, withAcceptances } from '../../server/src/service/acceptances';

const read = (text: string) => acceptanceComments('a.ts', text);

describe('comments that accept findings', () => {
  it.each([
    ['// visviva: accept sign because the winch turns the other way', ['sign'], undefined, 'the winch turns the other way'],
    ['x = 1  # visviva: accept factor, sign because of drawing 7', ['factor', 'sign'], undefined, 'of drawing 7'],
    ["/* visviva: accept differs of th'' because measured, see report 12 */", ['differs'], "th''", 'measured, see report 12'],
    ['! visviva: accept unread of return[1] because the table is from the maker', ['unread'], 'return[1]', 'the table is from the maker'],
    ['<!-- visviva: accept sign because so -->', ['sign'], undefined, 'so'],
  ])('%s', (line, codes, of, reason) => {
    const { comments, problems } = read(`\n${line}\ncode\n`);
    expect(problems).toEqual([]);
    expect(comments).toEqual([expect.objectContaining({ codes, reason, lines: [2, 3], ...(of ? { of } : {}) })]);
  });

  it.each([
    ['// visviva: accept sign', 'the reason is missing'],
    ['// visviva: accept because I say so', 'this is not understood'],
    ['// visviva: accept sing because it is', 'there is no code `sing`'],
  ])('%s: %s', (line, message) => {
    const { comments, problems } = read(line);
    expect(comments).toEqual([]);
    expect(problems).toEqual([expect.objectContaining({ code: 'syntax', severity: 'error', message: expect.stringContaining(message) as string })]);
  });

  it('is not read from the middle of a sentence', () => {
    expect(read("// see how xvisviva: accept sign because works").comments).toEqual([]);
  });

  const finding = (line: number) => ({ code: 'sign' as const, message: 'm', range: { start: { line, column: 1 }, end: { line, column: 2 } } });
  const result = (line: number): FileResult => ({
    file: 'a.ts', language: 'typescript', systems: [], problems: [], dependsOn: [],
    unfinished: [],
    claims: [{ file: 'a.ts', language: 'typescript', system: 's', function: 'f', output: 'return[1]', quantity: "th''", line: 1, verdict: 'differs', findings: [finding(line)] }],
  });

  it('is about its own line and the next line of code', () => {
    const text = 'one\n// visviva: accept sign because so\n\nfour\nfive\n';
    expect(withAcceptances(result(4), text, true).claims[0]!.findings[0]!.accepted).toEqual({ by: 'comment', reason: 'so' });
    const elsewhere = withAcceptances(result(5), text, true);
    expect(elsewhere.claims[0]!.findings[0]!.accepted).toBeUndefined();
    expect(elsewhere.problems).toEqual([expect.objectContaining({ code: 'unused', severity: 'warning', range: expect.objectContaining({ start: { line: 2, column: 4 } }) as object })]);
  });

  it('waits for the search before it is called unused', () => {
    const text = "// visviva: accept factor of th'' because so\n";
    expect(withAcceptances(result(5), text, false).problems).toEqual([]);
    expect(withAcceptances(result(5), text, true).problems).toHaveLength(1);
  });
});
