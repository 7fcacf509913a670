import { expect, test } from 'vitest';
import { createService } from '../../server/src/service';
import { Budget } from '../../server/src/text/budget';
import { filesOf } from '../support/check';

test('a hover tells equations, what stays constant, equilibria, verdicts and bindings', async () => {
  const text = `/** @visviva swing
 * coordinates th [rad]      th from straight down
 * parameters  m, l, g > 0
 * point bob: mass m at (l*sin(th), -l*cos(th))
 * gravity (0, -g)
 * reads p.len = l
 * checks return = th'' */
function f(th, p) { return -p.g / p.len * Math.sin(th); }
`;
  const service = createService(filesOf(new Map([['a.js', text]])));
  const hover = await service.hover('a.js', { line: 1, column: 16 }, new Budget());
  for (const part of [
    "m*l^2*th'' + m*g*l*sin(th) = 0",
    'E = 1/2*m*l^2*th',
    'th = 0: stable, small oscillations with omega^2 = g/l',
    'th = pi: unstable',
    'holds: identity',
    '`p.len` is l (reads)',
    'Convention: th from straight down',
  ]) {
    expect(hover?.markdown).toContain(part);
  }
  const name = await service.hover('a.js', { line: 8, column: 30 }, new Budget());
  expect(name?.markdown).toContain('`p.g` is **g**');
});

test('small oscillations of several coordinates', async () => {
  const of = async (declaration: string) => {
    const service = createService(filesOf(new Map([['a.visviva', `@visviva s\n${declaration}\n`]])));
    return (await service.derive('a.visviva', 'text', new Budget()))[0]!.text;
  };
  const pair = "coordinates x1, x2\nparameters m, k, kc > 0\nT = 1/2*m*(x1'^2 + x2'^2)\nV = 1/2*k*(x1^2 + x2^2) + 1/2*kc*(x1 - x2)^2";
  // Common practice: modes k/m and (k + 2 kc)/m, whose sum and product these are.
  expect(await of(pair)).toMatch(/roots of \(m\^2\)\*w\^2 - \(2\*k\*m \+ 2\*kc\*m|roots of \(m\^2\)\*w\^2 - \(2\*m\*k \+ 2\*m\*kc/);
  const plane = "coordinates x, y\nparameters m, kx, ky > 0\nT = 1/2*m*(x'^2 + y'^2)\nV = 1/2*kx*x^2 + 1/2*ky*y^2";
  expect(await of(plane)).toMatch(/omega\^2 = kx\/m \(x\), omega\^2 = ky\/m \(y\)/);
});
