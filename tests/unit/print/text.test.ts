import * as fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { Graph } from '../../../server/src/expression/graph';
import type { Expr } from '../../../server/src/expression/node';
import { Rational } from '../../../server/src/expression/rational';
import { equationText, text, texts } from '../../../server/src/expression/print/text';
import { formatNumber, formatPair, formatQuantity } from '../../../server/src/expression/print/number';
import { build, evaluate, pointOf, recipes, Symbols } from '../../support/expressions';
import { num, parseFormula } from '../../support/formula';

const g = new Graph();
const s = new Symbols(g);
const [M, m, l, gr, c, k] = ['M', 'm', 'l', 'g', 'c', 'k'].map((n) => s.parameter(n)) as [Expr, Expr, Expr, Expr, Expr, Expr];
const [x, th] = [s.coordinate('x'), s.coordinate('th')];
const [xd, thd, xdd, thdd] = ["x'", "th'", "x''", "th''"].map((n) => s.coordinate(n)) as [Expr, Expr, Expr, Expr];
const F = s.input('F');
const sin = (e: Expr) => g.apply('sin', [e]);
const cos = (e: Expr) => g.apply('cos', [e]);
const n = (a: number, b = 1) => g.number(Rational.of(a, b));

describe('the text of an expression', () => {
  const cases: [string, Expr][] = [
    ["m*l^2*th'' + m*g*l*sin(th)", g.add(g.multiply(gr, l, m, sin(th)), g.multiply(g.square(l), thdd, m))],
    ["(M + m)*x'' + m*l*th''*cos(th) - m*l*th'^2*sin(th) + c*x' - F",
      g.add(g.negate(F), g.multiply(c, xd), g.multiply(xdd, g.add(m, M)), g.multiply(m, l, thdd, cos(th)), g.multiply(n(-1), m, l, g.square(thd), sin(th)))],
    ["1/2*m*x'^2", g.multiply(n(1, 2), m, g.square(xd))],
    ['3*g/(2*l)', g.divide(g.multiply(n(3, 2), gr), l)],
    ['-g/l*th'.replace('/l*th', '*th/l'), g.negate(g.divide(g.multiply(gr, th), l))],
    ['1/x', g.divide(g.one, x)],
    ['1/sqrt(x)', g.power(x, n(-1, 2))],
    ['sqrt(m/k)', g.sqrt(g.divide(m, k))],
    ['x^(3/2)', g.power(x, n(3, 2))],
    ['-x', g.negate(x)],
    ['-(x + th)', g.negate(g.add(x, th))],
    ['-(x + th)*m'.replace('(x + th)*m', 'm*(x + th)'), g.multiply(n(-1), m, g.add(x, th))],
    ['th - x', g.subtract(th, x)],
    ['x - (-th + 1)*m'.replace('(-th + 1)*m', 'm*(1 - th)'), g.subtract(x, g.multiply(m, g.subtract(g.one, th)))],
    ['9.81*m', g.multiply(n(981, 100), m)],
    ['0.1*m', g.multiply(n(1, 10), m)],
    ['2/5*m', g.multiply(n(2, 5), m)],
    ['9.8*m/l', g.divide(g.multiply(n(49, 5), m), l)],
    ['0.3333333333333333*m', g.multiply(g.number(1 / 3), m)],
    ['sin(th)^2', g.square(sin(th))],
    ['(m + x)^2', g.square(g.add(x, m))],
    ['(-x)^(1/3)'.replace('(1/3)', 'k'), g.power(g.negate(x), k)],
    ['(x^2)^k', g.power(g.square(x), k)],
    ['-1/2', n(-1, 2)],
    ['(1/2)^k', g.power(n(1, 2), k)],
    ['m/(x*(1 + th))', g.divide(m, g.multiply(x, g.add(g.one, th)))],
    ["(m*g*sin(th) - F)/(M + m*sin(th)^2)", g.divide(g.subtract(g.multiply(m, gr, sin(th)), F), g.add(M, g.multiply(m, g.square(sin(th)))))],
    ['x if x < m else -m', g.select(g.less(x, m), x, g.negate(m))],
    ['x*(1 if x < m else 2)', g.multiply(x, g.select(g.less(x, m), g.one, n(2)))],
    ['atan2(x, -m)', g.apply('atan2', [x, g.negate(m)])],
    ['solve([[M, m], [m, k]], [F, 1])[2]', g.solve([M, m, m, k], [F, g.one])[1]!],
  ];
  it.each(cases)('%s', (expected, expr) => {
    expect(text(expr)).toBe(expected);
  });

  it('writes equations', () => {
    expect(equationText(g.add(g.multiply(m, xdd), g.multiply(k, x)), F)).toBe("m*x'' + k*x = F");
  });

  it('names shared parts where the text would be long, and stays linear', () => {
    let e: Expr = x;
    for (let i = 0; i < 200; i++) e = g.add(g.multiply(e, sin(g.add(e, s.parameter(`length${i}`)))), m);
    const printed = texts([e]);
    expect(printed.where.length).toBeGreaterThan(100);
    expect(text(e).length).toBeLessThan(200 * 60);
    let d: Expr = x;
    for (let i = 0; i < 300; i++) d = g.divide(g.one, g.add(g.divide(m, g.add(d, g.one)), g.divide(k, g.add(d, g.one))));
    expect(text(d).length).toBeLessThan(300 * 80);
  });

  it('survives hostile depth', () => {
    let deep: Expr = x;
    for (let i = 0; i < 50_000; i++) deep = i % 2 === 0 ? sin(deep) : g.multiply(g.add(deep, m), l);
    expect(text(deep).length).toBeGreaterThan(50_000);
  });
});

describe('numbers for people', () => {
  it.each([
    [0.1 + 0.2, '0.3'], [-0, '0'], [4.20553, '4.2055'], [123456, '123456'], [1.23456789e-7, '1.2346e-7'], [1e21, '1e21'],
    [0.30000000000000004e7, '3e6'], [NaN, 'no value'], [-Infinity, '-infinity'], [100000.4, '100000'],
  ])('%s -> %s', (value, expected) => {
    expect(formatNumber(value)).toBe(expected);
  });

  it('shows angles in degrees', () => {
    expect(formatQuantity(Math.PI / 6, 'rad')).toBe('30°');
    expect(formatQuantity(-0.5, 'm')).toBe('-0.5');
  });

  it('shows enough digits to tell two numbers apart', () => {
    expect(formatPair(1, 1.0000001)).toEqual(['1', '1.0000001']);
    fc.assert(
      fc.property(fc.double({ noNaN: true }), fc.double({ noNaN: true }), (a, b) => {
        const [p, q] = formatPair(a, b);
        if (a !== b) expect(p).not.toBe(q);
      }),
    );
  });
});

describe('what is printed', () => {
  it('means the same when it is read again', () => {
    fc.assert(
      fc.property(recipes, fc.integer(), (recipe, seed) => {
        const graph = new Graph();
        const expr = build(graph, recipe);
        const printed = text(expr, { limit: Infinity });
        if (/ if |solve|undefined|infinity/.test(printed)) return;
        const at = pointOf(seed);
        const expected = evaluate(expr, at);
        if (!Number.isFinite(expected) || Math.abs(expected) > 1e12) return;
        const scope = { lookup: (name: string, order: number) => (name === 'pi' ? Math.PI : at(name + "'".repeat(order))), rate: () => NaN };
        const found = num(parseFormula(printed)(scope));
        const moved = evaluate(expr, (x) => at(x) * (1 + 1e-12));
        if (Math.abs(found - expected) > 1e-6 * (1 + Math.abs(expected)) + 1e3 * Math.abs(moved - expected)) {
          expect(`${printed} = ${found}`).toBe(expected);
        }
      }),
      { numRuns: 1500 },
    );
  });
});
