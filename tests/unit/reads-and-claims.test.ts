import { describe, expect, test } from 'vitest';
import { checkText } from '../support/check';

const physics = (lines: string): string => `/**
 * @visviva buoy
 * coordinates x [m]
 * parameters m [kg] > 0, k [N/m] > 0, w, p, dt
 * T = 1/2*m*x'^2
 * V = 1/2*k*x^2
 * ${lines}
 */`;

const problemsOf = async (text: string): Promise<string[]> => (await checkText('buoy.ts', text)).problems.filter((p) => p.severity === 'error').map((p) => p.message);

describe('what stands on each side of reads and checks', () => {
  test('a formula of the code has no meaning of its own', async () => {
    const text = `${physics("reads width - 2*pad = x\n * checks return = x''")}\nfunction f(width, pad, m, k) { return (-k * (width - 2 * pad)) / m; }`;
    expect((await problemsOf(text)).join()).toContain('takes a variable, field, element or call of the code, not the formula `width - 2*pad`');
  });

  test('code on the right of a claim', async () => {
    const text = `class Buoy {\n${physics("checks this.x = x + dt*this.v")}\nstep(dt) { this.x += this.v * dt; } }`;
    expect((await problemsOf(text)).join()).toContain('`this` is a word of the code');
  });

  test('names that no claim needs are not told apart', async () => {
    const code = 'function f(s, m, k) { const other = s.old.x - s.older.x; s.used = other; return (-k * s.pos) / m; }';
    expect(await problemsOf(`${physics("reads s.pos = x\n * checks return = x''")}\n${code}`)).toEqual([]);
  });

  test('names that a claim needs are', async () => {
    const code = 'function f(s, m, k) { return (-k * (s.old.x + s.older.x)) / m; }';
    expect((await problemsOf(`${physics("checks return = x''")}\n${code}`)).join()).toContain('could both mean the same symbol');
  });
});

test('the way out of a function that falls through after an early return', async () => {
  const declared = physics("assume not s.idle\n * reads s.v = x'\n * checks s.v += dt*x''");
  const { claims } = await checkText('buoy.ts', `${declared}\nfunction f(s, m, k, dt) { if (s.idle) return; s.v -= (k * s.x * dt) / m; }`);
  expect(claims.map((c) => c.verdict)).toEqual(['holds']);
  const open = await checkText('buoy.ts', `${declared.replace(' * assume not s.idle\n', '')}\nfunction f(s, m, k, dt) { if (s.idle) return; s.v -= (k * s.x * dt) / m; }`);
  expect(open.claims.map((c) => c.verdict)).toEqual(['unread']);
  const faulty = await checkText('buoy.ts', `${declared}\nfunction f(s, m, k, dt) { if (s.idle) return; s.v += (k * s.x * dt) / m; }`);
  expect(faulty.claims.map((c) => [c.verdict, c.findings[0]?.code])).toEqual([['differs', 'sign']]);
});
