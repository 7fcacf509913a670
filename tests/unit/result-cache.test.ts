import { describe, expect, test } from 'vitest';
import { createService } from '../../server/src/service';
import { Budget } from '../../server/src/text/budget';
import { filesOf } from '../support/check';

const DECLARATION = `/* @visviva osc
 * coordinates x
 * parameters m, k > 0
 * T = 1/2*m*x'^2
 * V = 1/2*k*x^2
 */
`;
const one = (i: number, body = '-pull(x, k) / m') => `/** @visviva osc
 * checks return = x''
 */
function f${i}(x, m, k) { return ${body}; }
`;
const HELPERS = 'function pull(x, k) { return k * x; }\nfunction unrelated(a) { return a + 1; }\n';

function file(bodies: (string | undefined)[], helpers = HELPERS): string {
  return DECLARATION + helpers + bodies.map((b, i) => one(i, b)).join('');
}

async function session(others = new Map<string, string>()) {
  const service = createService(filesOf(others));
  const check = async (text: string) => {
    service.update('a.ts', text);
    const before = service.readings;
    const result = await service.check('a.ts', new Budget());
    return { result, read: service.readings - before, verdicts: result.claims.map((c) => c.verdict) };
  };
  return { service, check };
}

describe('remembered results', () => {
  const ten = new Array<string | undefined>(10).fill(undefined);

  test('one edit reads one function again', async () => {
    const { check } = await session();
    expect((await check(file(ten))).read).toBe(10);
    const edited = [...ten];
    edited[3] = '-pull(x, k) * 1 / m';
    const second = await check(file(edited));
    expect(second.read).toBe(1);
    expect(second.verdicts).toEqual(new Array(10).fill('holds'));
  });

  test('an edit that makes one wrong is seen, and places below have moved', async () => {
    const { check } = await session();
    await check(file(ten));
    const edited = [...ten];
    edited[3] = '(\n  pull(x, k)\n) / m';
    edited[7] = 'pull(x, k) / m';
    const { result, read } = await check(file(edited));
    expect(read).toBe(2);
    expect(result.claims.map((c) => c.verdict === 'differs')).toEqual(ten.map((_, i) => i === 3 || i === 7));
    const again = await check(`\n\n${file(edited)}`);
    expect(again.read).toBe(0);
    again.result.claims.forEach((c, i) => {
      expect(c.line).toBe(result.claims[i]!.line + 2);
      c.findings.forEach((f, k) => {
        const before = result.claims[i]!.findings[k]!;
        expect(f.message).toBe(before.message);
        expect(f.range.start).toEqual({ ...before.range.start, line: before.range.start.line + 2 });
        expect(f.repair?.edits[0]?.range.start.line).toBe(before.repair && before.repair.edits[0]!.range.start.line + 2);
      });
    });
  });

  test('a helper that is used reads its users again, another one does not', async () => {
    const { check } = await session();
    await check(file(ten));
    expect((await check(file(ten, HELPERS.replace('a + 1', 'a + 2')))).read).toBe(0);
    const { read, verdicts } = await check(file(ten, HELPERS.replace('k * x', '2 * k * x')));
    expect(read).toBe(10);
    expect(verdicts).toEqual(new Array(10).fill('differs'));
  });

  test('a name that was missing and is there now counts', async () => {
    const { check } = await session();
    const [first, second] = ['', 'function pull(x, k) { return k * x; }\n'];
    expect((await check(file([undefined], first))).verdicts).toEqual(['unread']);
    expect((await check(file([undefined], second))).verdicts).toEqual(['holds']);
  });

  test('the declaration and imported files count', async () => {
    const others = new Map([['b.ts', 'export function pull(x, k) { return k * x; }\n']]);
    const { check } = await session(others);
    const text = file([undefined], "import { pull } from './b';\n");
    expect((await check(text)).verdicts).toEqual(['holds']);
    expect((await check(text)).read).toBe(0);
    expect((await check(text.replace('V = 1/2*k', 'V = k'))).verdicts).toEqual(['differs']);
    const { service, check: checkAgain } = await session(others);
    expect((await checkAgain(text)).verdicts).toEqual(['holds']);
    others.set('b.ts', 'export function pull(x, k) { return 2 * k * x; }\n');
    service.invalidate('b.ts');
    expect((await checkAgain(text)).verdicts).toEqual(['differs']);
  });

  test('what is not told of yet is not taken for read', async () => {
    const others = new Map([['b.ts', 'export function pull(x, k) { return k * x; }\n']]);
    const { service, check } = await session(others);
    const text = `import { pull } from './b';\n${DECLARATION}${one(0)}`;
    expect((await check(text)).verdicts).toEqual(['holds']);
    // The file on disk is newer already when the text is checked again, for a hover say, and the news of it comes later.
    others.set('b.ts', 'export function pull(x, k) { return 2 * k * x; }\n');
    expect((await check(text)).verdicts).toEqual(['holds']);
    service.invalidate('b.ts');
    expect((await check(text)).verdicts).toEqual(['differs']);
  });

  test('whether a name is assigned anywhere counts', async () => {
    const { check } = await session();
    const constant = `${DECLARATION}let scale = 1;\n${one(0, '-scale * k * x / m')}`;
    const first = await check(constant);
    const second = await check(`${constant}function later() { scale = 3; }\n`);
    expect(second.read).toBe(1);
    expect([first.verdicts, second.verdicts]).not.toContain(['differs']);
  });
});
