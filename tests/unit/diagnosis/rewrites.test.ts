import { describe, expect, test } from 'vitest';
import { createService } from '../../../server/src/service';
import { Budget } from '../../../server/src/text/budget';
import { filesOf } from '../../support/check';
import { applied, cart, pendulum, RIGHT_CART } from './support';

/** What each rewrite offered at the line with a text makes of a file. */
async function rewritten(source: string, at: string, file = 'yard/code.ts'): Promise<{ title: string; text: string; verdicts: string[] }[]> {
  const service = createService(filesOf(new Map([[file, source]])));
  const line = source.slice(0, source.indexOf(at)).split('\n').length;
  const point = { line, column: 1 };
  const offered = await service.rewrites(file, { start: point, end: point }, new Budget());
  const out = [];
  for (const { title, edits } of offered) {
    const text = applied(source, edits);
    const again = await createService(filesOf(new Map([[file, text]]))).check(file, new Budget());
    out.push({ title, text, verdicts: again.claims.map((c) => c.verdict) });
  }
  return out;
}

describe('an output written anew', () => {
  test('uses the names of the code and makes the claim hold', async () => {
    const made = await rewritten(pendulum('  return 7 * th + Math.cos(g) * tau;'), 'return 7');
    expect(made).toHaveLength(1);
    expect(made[0]).toMatchObject({ title: "Replace return with the derived expression for th''", verdicts: ['holds'] });
    expect(made[0]!.text).toContain('thDot');
    expect(made[0]!.text).not.toContain('Math.cos(g)');
  });

  test('names common parts in lines of their own', async () => {
    const wrong = RIGHT_CART.replace('const a = (F + m * sn * (l * w * w + g * cs)) / (M + m * sn * sn);', 'const a = F * F + sn;');
    const made = await rewritten(cart(wrong), 'const a = F * F');
    expect(made.length).toBeGreaterThan(0);
    expect(made[0]!.text).toMatch(/\n {2}const s1 = .*;\n[^]*const a = .*s1/);
    // The other acceleration is made from this one.
    expect(made[0]!.verdicts).toEqual(['holds', 'holds', 'holds', 'holds']);
  });

  test('does not take a name that the code has', async () => {
    const wrong = RIGHT_CART.replace('const a = (F + m * sn * (l * w * w + g * cs)) / (M + m * sn * sn);', 'const s1 = sn;\n  const a = F * F + s1;');
    const made = await rewritten(cart(wrong), 'const a = F * F');
    expect(made[0]!.text).toContain('const part1 = ');
    expect(made[0]!.verdicts).toEqual(['holds', 'holds', 'holds', 'holds']);
  });

  test('is one expression where no line can stand before', async () => {
    const head = cart('').split('export function')[0]!.replace(/ \* reads .*\n \* checks .*/, " * checks return = [x'', th'']");
    const parameters = 'x: number, th: number, xDot: number, thDot: number, F: number, M: number, m: number, l: number, g: number';
    const source = `${head}export const rates = (${parameters}) => [F * F + th, -g];\n`;
    const made = await rewritten(source, 'export const');
    expect(made.map((m) => m.verdicts.filter((v) => v === 'holds').length)).toEqual([1, 1]);
    expect(made.every((m) => m.text.split('\n').length === source.split('\n').length)).toBe(true);
  });

  test('keeps line ends', async () => {
    const wrong = RIGHT_CART.replace('const a = (F + m * sn * (l * w * w + g * cs)) / (M + m * sn * sn);', 'const a = F * F + sn;');
    const made = await rewritten(cart(wrong).replaceAll('\n', '\r\n'), 'const a = F * F');
    expect(made[0]!.text.replaceAll('\r\n', '')).not.toContain('\n');
  });

  test('is written in Python with the module that the file imports', async () => {
    const source = `import numpy as np


def swing(th, w, l, g):
    """
    @visviva bob
    coordinates th [rad]   from straight down
    parameters  m [kg] > 0, l [m] > 0, g [m/s^2] > 0
    point bob: mass m at (l*sin(th), -l*cos(th))
    gravity (0, -g)
    reads w = th'
    checks return = th''
    """
    return w * w + np.cos(th)
`;
    const made = await rewritten(source, 'return w * w', 'yard/swing.py');
    expect(made.map((m) => m.verdicts)).toEqual([['holds']]);
    expect(made[0]!.text).toContain('np.sin(th)');
  });

  test('is not offered for right code, nor away from the output', async () => {
    expect(await rewritten(cart(RIGHT_CART), 'const a =')).toEqual([]);
    expect(await rewritten(pendulum('  return 7 * th;'), 'coordinates th')).toEqual([]);
  });

  test('is not offered where a symbol has no name in the code', async () => {
    const source = pendulum('  return 7 * th;').replace('th: number, thDot: number, ', 'th: number, ');
    expect(await rewritten(source, 'return 7')).toEqual([]);
  });
});
