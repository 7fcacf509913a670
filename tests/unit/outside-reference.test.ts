import { createRequire } from 'node:module';
import { describe, expect, test } from 'vitest';
import { decideFormulas } from '../support/decide-formulas';

const nerdamer = createRequire(import.meta.url)('nerdamer/all') as (formula: string) => { toString(): string };

/**
 * Lagrange's equations by a computer algebra package from outside (nerdamer), from the Lagrangian typed out in symbols: q1,
 * v1, a1 for a coordinate and its derivatives. What it gives must be what the declared energies give.
 */
function residuals(lagrangian: string, n: number): string[] {
  const diff = (f: string, by: string): string => nerdamer(`diff(${f}, ${by})`).toString();
  const index = Array.from({ length: n }, (_, i) => i + 1);
  return index.map((i) => {
    const p = diff(lagrangian, `v${i}`);
    const rate = index.map((j) => `(${diff(p, `q${j}`)})*v${j}+(${diff(p, `v${j}`)})*a${j}`).join('+');
    return `${rate}-(${diff(lagrangian, `q${i}`)})`;
  });
}

/** The same in the words of a declaration. */
function inWords(formula: string, names: readonly string[]): string {
  return names.reduce(
    (f, name, i) => f.replaceAll(new RegExp(`\\b([qva])${i + 1}\\b`, 'g'), (_, kind: string) => `(${name}${kind === 'q' ? '' : kind === 'v' ? "'" : "''"})`),
    formula,
  );
}

const SYSTEMS = [
  {
    name: 'a pendulum on a spring',
    lagrangian: 'm*(v1^2 + q1^2*v2^2)/2 + m*g*q1*cos(q2) - k*(q1 - b)^2/2',
    names: ['r', 'th'],
    declaration: `
coordinates r, th [rad]
parameters  m, g, k, b > 0
ranges r in [0.5, 2]
point bob: mass m at (r*sin(th), -r*cos(th))
gravity (0, -g)
V = 1/2*k*(r - b)^2`,
  },
  {
    name: 'a crane',
    lagrangian: 'M*v1^2/2 + m*(v1^2 + 2*l*v1*v2*cos(q2) + l^2*v2^2)/2 + m*g*l*cos(q2)',
    names: ['x', 'th'],
    declaration: `
coordinates x, th [rad]
parameters  M, m, l, g > 0
point trolley: mass M at (x, 0)
point load:    mass m at (x + l*sin(th), -l*cos(th))
gravity (0, -g)`,
  },
  {
    name: 'a double pendulum',
    lagrangian: 'm*l^2*v1^2 + m*l^2*v2^2/2 + m*l^2*v1*v2*cos(q1 - q2) + 2*m*g*l*cos(q1) + m*g*l*cos(q2)',
    names: ['th', 'ph'],
    declaration: `
coordinates th, ph [rad]
parameters  m, l, g > 0
where P = (l*sin(th), -l*cos(th))
point a: mass m at P
point b: mass m at P + (l*sin(ph), -l*cos(ph))
gravity (0, -g)`,
  },
];

describe.each(SYSTEMS)('$name by an outside reference', ({ lagrangian, names, declaration }) => {
  const rows = residuals(lagrangian, names.length);

  test('has the same equations of motion', () => {
    const claims = Object.fromEntries(rows.map((row, i) => [`residual[${names[i]!}]`, inWords(row, names)]));
    for (const decision of Object.values(decideFormulas(declaration, claims))) {
      expect(decision).toMatchObject({ verdict: 'holds', proof: { kind: 'identity' } });
    }
  });

  test('and other ones with a sign turned', () => {
    const wrong = residuals(lagrangian.replace('+ m*g', '- m*g').replace('+ 2*m*g', '- 2*m*g'), names.length);
    const claims = Object.fromEntries(wrong.map((row, i) => [`residual[${names[i]!}]`, inWords(row, names)]));
    expect(Object.values(decideFormulas(declaration, claims)).some((d) => d.verdict === 'differs')).toBe(true);
  });
});
