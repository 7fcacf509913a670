import { describe, expect, it } from 'vitest';
import { Graph } from '../../../server/src/expression/graph';
import type { Expr } from '../../../server/src/expression/node';
import { code, python, pythonStyle } from '../../../server/src/expression/print';
import { Rational } from '../../../server/src/expression/rational';
import { Symbols } from '../../support/expressions';

const g = new Graph();
const s = new Symbols(g);
const [m, l, k] = ['m', 'l', 'k'].map((n) => s.parameter(n)) as [Expr, Expr, Expr];
const th = s.coordinate('th');
const n = (a: number, b = 1) => g.number(Rational.of(a, b));
const print = (e: Expr, style = python): string => code(style, [e], { limit: 1e9 }).values[0]!;

describe('expressions as Python', () => {
  it.each([
    ['m * l**2 * th_ddot', g.multiply(m, g.square(l), s.coordinate("th''"))],
    ['-k * np.sin(th) / m', g.negate(g.divide(g.multiply(k, g.apply('sin', [th])), m))],
    ['(1 / 2) * m * th_dot**2', g.multiply(n(1, 2), m, g.square(s.coordinate("th'")))],
    ['np.sqrt(k / m)', g.sqrt(g.divide(k, m))],
    ['np.arctan2(k, m)', g.apply('atan2', [k, m])],
    ['abs(th)', g.apply('abs', [th])],
    ['max(k, m)', g.apply('max', [k, m])],
    ['lambda_ * np.pi', g.multiply(s.parameter('lambda'), g.pi)],
    ['k if th < m else m', g.select(g.less(th, m), k, m)],
    ['(m + k)**(1 / 3)', g.power(g.add(k, m), n(1, 3))],
  ] as [string, Expr][])('%s', (expected, expr) => {
    expect(print(expr).split(' ').sort()).toEqual(expected.split(' ').sort());
  });

  it('takes the names that the surrounding code has', () => {
    const names = pythonStyle({ prefix: 'math.', isNumpy: false, arrays: 'np.' });
    expect(print(g.apply('atan', [g.apply('sin', [th])]), names)).toBe('math.atan(math.sin(th))');
    expect(print(g.apply('asin', [th]), pythonStyle({ prefix: '', isNumpy: false, arrays: '' }))).toBe('asin(th)');
  });

  it('solves linear systems with numpy', () => {
    const [x] = g.solve([m, k, k, l], [k, m]);
    const out = code(python, [x!]);
    expect(out.statements).toEqual(['s1 = np.linalg.solve([[m, k], [k, l]], [k, m])']);
    expect(out.values).toEqual(['s1[0]']);
    expect(out.helpers).toEqual([]);
  });

  it('writes whole functions', () => {
    const text = python.function({ name: 'quay-crane accelerations', remark: 'Two of them.', state: ['x', 'x_dot'], constants: ['m'], statements: ['a = m'], values: ['a', 'x'], helpers: [] });
    expect(text).toBe('def quay_crane_accelerations(state, m):\n    """Two of them."""\n    x, x_dot = state\n    a = m\n    return [a, x]');
  });
});
