import { describe, expect, test } from 'vitest';
import { isRuledOut } from '../../server/src/comparison/ruled-out';
import { Graph } from '../../server/src/expression/graph';

const g = new Graph();
const symbol = (name: string) => g.symbol({ name, role: 'parameter', order: 0 });
const [m, x, c] = [symbol('m'), symbol('x'), symbol('c')];
const domains = new Map([
  [m, { low: 0 }],
  [x, { low: -1, high: 2 }],
]);

describe('sides of a condition that declared ranges rule out', () => {
  test.each([
    ['m <= 0', g.lessEqual(m, g.zero), true],
    ['m < -1', g.less(m, g.number(-1)), true],
    ['x + m < -2', g.less(g.add(x, m), g.number(-2)), true],
    ['x*x < 0', g.less(g.square(x), g.zero), true],
    ['x < 1', g.less(x, g.one), false],
    ['c < 0', g.less(c, g.zero), false],
    ['m*x < -5', g.less(g.multiply(m, x), g.number(-5)), false],
  ] as const)('%s', (_, condition, isOut) => {
    expect(isRuledOut(condition, true, domains)).toBe(isOut);
    expect(isRuledOut(g.not(condition), false, domains)).toBe(isOut);
    expect(isRuledOut(condition, false, domains)).toBe(false);
  });
});
