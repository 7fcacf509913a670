import { expect, test } from 'vitest';
import { createService } from '../../server/src/service';
import { remembered, withLastReading, type TextResult } from '../../server/src/service/last-reading';
import { Budget } from '../../server/src/text/budget';

const DECLARED = (mark: string): string => `${mark} @visviva boom
${mark} coordinates th
${mark} parameters m, l, g > 0
${mark} T = 1/2*m*l^2*th'^2
${mark} V = -m*g*l*cos(th)
`;

const PYTHON = `import math
${DECLARED('#')}# checks return = th''
def wrong(th, m, l, g):
    return g / l * math.sin(th)


# @visviva boom
# checks return = th''
def right(th, m, l, g):
    a = -g / l
    return a * math.sin(th)
`;

const TYPESCRIPT = `${DECLARED('//')}// checks return = th''
function wrong(th: number, l: number, g: number) {
  return g / l * Math.sin(th);
}

// @visviva boom
// checks return = th''
function right(th: number, l: number, g: number) {
  const a = -g / l;
  return a * Math.sin(th);
}
`;

async function typed(file: string, texts: readonly string[]): Promise<TextResult['result'][]> {
  const service = createService({ read: () => undefined, declarations: () => [] });
  const shown: TextResult['result'][] = [];
  let known: TextResult | undefined;
  for (const text of texts) {
    service.update(file, text);
    const now = { text, result: await service.check(file, new Budget()) };
    shown.push(withLastReading(known, now));
    known = remembered(known, now);
  }
  return shown;
}

test.each([
  ['boom.py', PYTHON, 'return g / l', 'return (g / l', 'a = -g / l', 'a = -(g / l'],
  ['boom.ts', TYPESCRIPT, 'return g / l', 'return (g / l', 'a = -g / l', 'a = -(g / '],
])('%s: what was known of a function stays, marked, while it is typed', { timeout: 120_000 }, async (file, text, old, half, other, otherHalf) => {
  const [whole, typing, longer, again] = await typed(file, [text, text.replace(old, half), `\n${text.replace(old, half)}`, text]);
  expect(whole!.claims.map((c) => c.verdict)).toEqual(['differs', 'holds']);
  expect(typing!.claims.map((c) => c.verdict)).toEqual(['differs', 'holds']);
  expect(typing!.claims[0]!.findings[0]!.message).toMatch(/As of the last complete text\.\)$/);
  expect(typing!.claims[0]!.findings.every((f) => !f.repair)).toBe(true);
  const moved = longer!.claims[0]!.findings[0]!;
  expect(moved.range.start.line).toBe(typing!.claims[0]!.findings[0]!.range.start.line + 1);
  expect(moved.message.match(/As of the last/g)).toHaveLength(1);
  expect(again!.claims[0]!.findings[0]!.message).not.toContain('last complete text');

  const [, broken] = await typed(file, [text, text.replace(other, otherHalf)]);
  expect(broken!.claims.map((c) => c.verdict)).toEqual(['differs', 'unread']);
  expect(broken!.claims[0]!.findings[0]!.message).not.toContain('last complete text');
  expect(broken!.claims[1]!.findings[0]!.message).toContain('As of the last complete text it holds.');
});
