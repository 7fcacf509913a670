import * as fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { Graph } from '../../server/src/expression/graph';
import type { Expr } from '../../server/src/expression/node';
import { collected, normalForm, simplify, Sizes, toExpr } from '../../server/src/expression/normal-form';
import { text } from '../../server/src/expression/print';
import { build, evaluate, pointOf, recipes, Symbols } from '../support/expressions';

const g = new Graph();
const s = new Symbols(g);
const [th, a, b] = ['th', 'a', 'b'].map((n) => s.coordinate(n)) as [Expr, Expr, Expr];
const thd = s.coordinate("th'");
const [m, M, l] = [s.parameter('m'), s.parameter('M'), s.parameter('l', true)];
const sin = (x: Expr) => g.apply('sin', [x]);
const cos = (x: Expr) => g.apply('cos', [x]);
const normal = (e: Expr) => toExpr(g, normalForm(g, e)!);

function same(x: Expr, y: Expr) {
  expect(normal(x)).toBe(normal(y));
}

describe('the normal form', () => {
  it('collects terms and multiplies out', () => {
    same(g.square(g.add(m, M)), g.add(g.square(m), g.multiply(g.number(2), m, M), g.square(M)));
    expect(normalForm(g, g.multiply(g.add(m, M), g.subtract(m, M)))!.terms).toHaveLength(2);
    expect(normalForm(g, g.subtract(g.square(g.add(m, M)), g.square(g.add(m, M))))!.terms).toHaveLength(0);
  });

  it('knows sin^2 + cos^2, in any company and power', () => {
    const r = g.multiply(m, g.square(thd));
    same(g.add(g.multiply(r, g.square(sin(th))), g.multiply(r, g.square(cos(th)))), r);
    same(g.subtract(g.add(m, M), g.multiply(m, g.square(cos(th)))), g.add(M, g.multiply(m, g.square(sin(th)))));
    const x = g.multiply(sin(a), cos(b));
    const y = g.multiply(sin(a), sin(b));
    same(g.add(g.square(x), g.square(y), g.square(cos(a))), g.one);
    same(g.subtract(g.square(g.apply('cosh', [a])), g.square(g.apply('sinh', [a]))), g.one);
  });

  it('joins products of sines and cosines into one of the sum or difference', () => {
    same(g.add(g.multiply(cos(a), cos(b)), g.multiply(sin(a), sin(b))), cos(g.subtract(a, b)));
    same(g.subtract(g.multiply(cos(a), cos(b)), g.multiply(sin(a), sin(b))), cos(g.add(a, b)));
    same(g.subtract(g.multiply(sin(a), cos(b)), g.multiply(cos(a), sin(b))), sin(g.subtract(a, b)));
    same(g.subtract(g.multiply(cos(a), sin(b)), g.multiply(sin(a), cos(b))), sin(g.subtract(b, a)));
    same(g.add(g.multiply(m, sin(a), cos(b)), g.multiply(m, cos(a), sin(b))), g.multiply(m, sin(g.add(a, b))));
    const different = g.add(g.multiply(m, cos(a), cos(b)), g.multiply(M, sin(a), sin(b)));
    expect(normalForm(g, different)!.terms).toHaveLength(2);
  });

  it('takes signs and quarter turns out of functions', () => {
    const half = g.multiply(g.number(0.5), g.pi);
    same(cos(g.subtract(b, a)), cos(g.subtract(a, b)));
    same(sin(g.subtract(b, a)), g.negate(sin(g.subtract(a, b))));
    same(cos(g.add(th, g.pi)), g.negate(cos(th)));
    same(sin(g.add(th, half)), cos(th));
    same(cos(g.subtract(half, th)), sin(th));
    same(cos(g.add(th, half)), g.negate(sin(th)));
    expect(normal(sin(g.pi))).toBe(g.zero);
  });

  it('handles roots and quotients', () => {
    same(g.square(g.sqrt(g.add(a, b))), g.add(a, b));
    same(g.sqrt(g.square(a)), g.apply('abs', [a]));
    same(g.sqrt(g.multiply(g.number(4), g.square(l))), g.multiply(g.number(2), l));
    same(g.divide(g.multiply(m, l, sin(th)), g.multiply(m, g.square(l))), g.divide(sin(th), l));
    const sum = g.add(M, g.multiply(m, g.square(sin(th))));
    same(g.divide(sum, g.subtract(g.add(M, m), g.multiply(m, g.square(cos(th))))), g.one);
    const scaled = g.add(g.multiply(g.number(2), m, l), g.multiply(g.number(2), M, l));
    same(g.divide(l, scaled), g.divide(g.number(0.5), g.add(m, M)));
  });

  it('takes terms with equal moving parts together', () => {
    const xdd = s.coordinate("x''");
    const mu = s.parameter('mu');
    const e = g.add(g.multiply(M, xdd), g.multiply(m, xdd), g.multiply(mu, thd), g.multiply(m, l, sin(th)));
    expect(text(collected(g, normalForm(g, e)!.terms))).toBe("(m + M)*x'' + mu*th' + m*l*sin(th)");
    const quotient = g.divide(m, g.add(g.multiply(M, l), g.multiply(m, l, g.square(sin(th)))));
    expect(text(simplify(g, quotient))).toBe('m/(l*(M + m*sin(th)^2))');
  });

  it('gives up on forms that would be long, and quickly', () => {
    let wide: Expr = g.one;
    for (let i = 0; i < 12; i++) wide = g.multiply(wide, g.add(s.parameter(`p${i}`), s.parameter(`q${i}`)));
    expect(normalForm(g, wide)).toBeUndefined();
    expect(normalForm(g, wide, 5000)!.terms).toHaveLength(4096);
    expect(simplify(g, wide)).toBe(wide);
  });

  it('keeps to its time on hostile depth', () => {
    let deep: Expr = th;
    for (let i = 0; i < 20_000; i++) deep = sin(g.add(deep, m));
    expect(normalForm(g, deep)!.terms).toHaveLength(1);
    let doubling: Expr = th;
    for (let i = 0; i < 2000; i++) doubling = g.add(g.multiply(doubling, sin(doubling)), m);
    expect(normalForm(g, doubling)).toBeUndefined();
    expect(simplify(g, doubling)).toBeDefined();
  });

  it('agrees with the original wherever that has a value', () => {
    fc.assert(
      fc.property(recipes, fc.integer(), (recipe, seed) => {
        const graph = new Graph();
        const expr = build(graph, recipe);
        const at = pointOf(seed);
        const expected = evaluate(expr, at);
        const form = normalForm(graph, expr);
        if (!Number.isFinite(expected) || Math.abs(expected) > 1e6) return;
        if (form) close(evaluate(toExpr(graph, form), at), expected, expr, at);
        close(evaluate(simplify(graph, expr), at), expected, expr, at);
      }),
      { numRuns: 1500 },
    );
  });

  it('never makes the simplified form longer', () => {
    fc.assert(
      fc.property(recipes, (recipe) => {
        const graph = new Graph();
        const expr = build(graph, recipe);
        expect(new Sizes().of(simplify(graph, expr))).toBeLessThanOrEqual(new Sizes().of(expr));
      }),
    );
  });
});

/** Equal up to rounding, judged by how much the original moves when the point does. */
function close(found: number, expected: number, expr: Expr, at: (name: string) => number) {
  const moved = evaluate(expr, (n) => at(n) * (1 + 1e-9));
  const slack = 1e-6 * (1 + Math.abs(expected)) + 1e3 * Math.abs(moved - expected);
  if (!Number.isFinite(moved)) return;
  if (!(Math.abs(found - expected) <= slack)) expect(found).toBe(expected);
}
