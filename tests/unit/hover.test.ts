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
