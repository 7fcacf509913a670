import { describe, expect, test } from 'vitest';
import { parseTypeScript } from '../../server/src/languages/typescript/parse';
import { suggestDeclarations } from '../../server/src/service/suggest';

const suggest = (code: string) => suggestDeclarations(parseTypeScript('file.ts', code)).map((s) => [s.function, ...s.lines].join('\n'));

describe('a first declaration from names', () => {
  test('state taken apart, a record of parameters, an input', () => {
    const [text] = suggest(`export function rates(s: number[], p: P, tau: number) {
      const [theta, omega] = s;
      return [omega, tau / (p.m * p.l ** 2) - (p.g / p.l) * Math.sin(theta)];
    }`);
    expect(text).toContain('@visviva rates');
    expect(text).toMatch(/coordinates +theta \[rad\]/);
    expect(text).toContain("m [kg] > 0, l [m] > 0, g [m/s^2] > 0");
    expect(text).toMatch(/inputs +tau \[N m\]/);
    expect(text).toContain("s[0] = theta, s[1] = theta'");
    expect(text).toContain("return = [theta', theta'']");
  });

  test('index constants name the slots', () => {
    const [text] = suggest(`const X = 0, XDOT = 1;
    function f(y: number[], out: number[], m: number, k: number) { out[X] = y[XDOT]; out[XDOT] = (-k * y[X] * y[X] * y[X]) / m; }`);
    expect(text).toContain("y[0] = x, y[1] = x'");
    expect(text).toContain("out[0] = x', out[1] = x''");
  });

  test('energy functions are declarations, and functions without motion get none', () => {
    const all = suggest(`function step(x: number, xdot: number, m: number, k: number) { return (-k * x * x - 2 * xdot) / m; }
    function potential(x: number, k: number) { return 0.5 * k * x * x; }
    function area(w: number, h: number) { return w * h / 2 + w * w; }`);
    expect(all).toHaveLength(2);
    expect(all[0]).not.toContain('V =');
    expect(all[1]).toContain('defines  V');
  });

  test('what is declared already is left alone', () => {
    expect(suggest(`/** @visviva a\n * coordinates x [m]\n */\nfunction f(x: number, xdot: number, k: number) { return -k * x - 2 * xdot * x; }`)).toEqual([]);
  });
});
