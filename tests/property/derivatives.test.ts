import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { derivative, gradient, timeDerivatives } from '../../server/src/expression/differentiate';
import { Graph } from '../../server/src/expression/graph';
import type { Expr } from '../../server/src/expression/node';
import { Rational } from '../../server/src/expression/rational';
import { substitute } from '../../server/src/expression/substitute';
import { Tape } from '../../server/src/expression/tape';

const NAMES = ['a', 'b', 'c'] as const;

type Recipe =
  | { op: 'symbol'; name: (typeof NAMES)[number] }
  | { op: 'number'; n: number; d: number }
  | { op: 'add' | 'multiply' | 'divide' | 'select' | 'max'; args: [Recipe, Recipe] }
  | { op: 'sin' | 'cos' | 'exp' | 'sqrt' | 'atan' | 'square' | 'tanh'; args: [Recipe] };

const { recipe } = fc.letrec<{ recipe: Recipe }>((tie) => ({
  recipe: fc.oneof(
    { maxDepth: 5, depthSize: 'small' },
    fc.record({ op: fc.constant('symbol' as const), name: fc.constantFrom(...NAMES) }),
    fc.record({ op: fc.constant('number' as const), n: fc.integer({ min: -9, max: 9 }), d: fc.integer({ min: 1, max: 9 }) }),
    fc.record({
      op: fc.constantFrom('add' as const, 'multiply' as const, 'divide' as const, 'select' as const, 'max' as const),
      args: fc.tuple(tie('recipe'), tie('recipe')),
    }),
    fc.record({
      op: fc.constantFrom('sin' as const, 'cos' as const, 'exp' as const, 'sqrt' as const, 'atan' as const, 'square' as const, 'tanh' as const),
      args: fc.tuple(tie('recipe')),
    }),
  ),
}));

function make(g: Graph, r: Recipe): Expr {
  switch (r.op) {
    case 'symbol':
      return g.symbol({ name: r.name, role: 'coordinate', order: 0 });
    case 'number':
      return g.number(Rational.of(r.n, r.d));
    case 'add':
      return g.add(make(g, r.args[0]), make(g, r.args[1]));
    case 'multiply':
      return g.multiply(make(g, r.args[0]), make(g, r.args[1]));
    case 'divide':
      return g.divide(make(g, r.args[0]), make(g, r.args[1]));
    case 'max':
      return g.apply('max', [make(g, r.args[0]), make(g, r.args[1])]);
    case 'select': {
      const [a, b] = [make(g, r.args[0]), make(g, r.args[1])];
      return g.select(g.less(a, b), g.multiply(a, b), g.subtract(a, b));
    }
    case 'square':
      return g.square(make(g, r.args[0]));
    case 'sqrt':
      return g.sqrt(make(g, r.args[0]));
    default:
      return g.apply(r.op, [make(g, r.args[0])]);
  }
}

/** The same recipe in plain doubles, sharing nothing with the graph. */
function plain(r: Recipe, at: Record<string, number>): number {
  switch (r.op) {
    case 'symbol':
      return at[r.name]!;
    case 'number':
      return r.n / r.d;
    case 'add':
      return plain(r.args[0], at) + plain(r.args[1], at);
    case 'multiply':
      return plain(r.args[0], at) * plain(r.args[1], at);
    case 'divide':
      return plain(r.args[0], at) / plain(r.args[1], at);
    case 'max':
      return Math.max(plain(r.args[0], at), plain(r.args[1], at));
    case 'select': {
      const [a, b] = [plain(r.args[0], at), plain(r.args[1], at)];
      return a < b ? a * b : a - b;
    }
    case 'square':
      return plain(r.args[0], at) ** 2;
    default:
      return Math[r.op](plain(r.args[0], at));
  }
}

const point = fc.record({ a: value(), b: value(), c: value() });
function value() {
  return fc.double({ min: 0.2, max: 2, noNaN: true });
}

function evaluate(roots: Expr[], at: Record<string, number>): { value: number; error: number }[] {
  const tape = new Tape(roots);
  const run = tape.run((s) => ({ values: Float64Array.of(at[(s.data as { name: string }).name]!) }), 1);
  return roots.map((r) => ({ value: run.value(r, 0), error: run.error(r, 0) }));
}

describe('expressions', () => {
  test('a tape gives what plain doubles give, within its own bound', () => {
    fc.assert(
      fc.property(recipe, point, (r, at) => {
        const [got] = evaluate([make(new Graph(), r)], at);
        const want = plain(r, at);
        if (!Number.isFinite(want) || !Number.isFinite(got!.value) || !Number.isFinite(got!.error)) return;
        expect(Math.abs(got!.value - want)).toBeLessThanOrEqual(2 * got!.error + 1e-300);
      }),
      { numRuns: 600, seed: 20261201 },
    );
  });

  test('forward and reverse derivatives agree with central differences', () => {
    fc.assert(
      fc.property(recipe, point, fc.constantFrom(...NAMES), (r, at, name) => {
        const g = new Graph();
        const e = make(g, r);
        const by = g.symbol({ name, role: 'coordinate', order: 0 });
        const all = NAMES.map((n) => g.symbol({ name: n, role: 'coordinate', order: 0 }));
        const forward = derivative(g, e, by);
        const reverse = gradient(g, [e], [g.one], all)[NAMES.indexOf(name)]!;
        const [f, b] = evaluate([forward, reverse], at);
        if (!Number.isFinite(f!.value) || !Number.isFinite(b!.value)) return;
        if (!(f!.error < 1e-6) || !(b!.error < 1e-6)) return;
        expect(b!.value).toBeCloseTo(f!.value, 5);
        const slope = (h: number) => (plain(r, { ...at, [name]: at[name] + h }) - plain(r, { ...at, [name]: at[name] - h })) / (2 * h);
        const [coarse, fine] = [slope(2e-5), slope(1e-5)];
        // A kink, a step or a pole near the point: differences settle nothing there.
        if (!Number.isFinite(fine) || Math.abs(coarse - fine) > 1e-5 * (1 + Math.abs(fine))) return;
        const here = plain(r, at);
        const side = (h: number) => (plain(r, { ...at, [name]: at[name] + h }) - here) / h;
        if (!(Math.abs(side(1e-6) - side(-1e-6)) <= 1e-3 * (1 + Math.abs(fine)))) return;
        expect(Math.abs(f!.value - fine)).toBeLessThanOrEqual(1e-3 * (1 + Math.abs(fine)));
      }),
      { numRuns: 600, seed: 20261201 },
    );
  });

  test('rebuilding on the same arguments changes nothing', () => {
    fc.assert(
      fc.property(recipe, (r) => {
        const g = new Graph();
        const e = make(g, r);
        expect(substitute(g, [e], new Map())[0]).toBe(e);
        expect(g.rebuild(e, e.args)).toBe(e);
      }),
      { numRuns: 300, seed: 20261201 },
    );
  });

  test('a linear system differentiates like its closed form', () => {
    const g = new Graph();
    const [a, b, c] = NAMES.map((name) => g.symbol({ name, role: 'coordinate', order: 0 })) as [Expr, Expr, Expr];
    const [x] = g.solve([a, b, b, c], [g.apply('sin', [a]), g.square(b)]);
    const det = g.subtract(g.multiply(a, c), g.square(b));
    const closed = g.divide(g.subtract(g.multiply(g.apply('sin', [a]), c), g.multiply(b, g.square(b))), det);
    for (const by of [a, b, c]) {
      const roots = [derivative(g, x!, by), derivative(g, closed, by), gradient(g, [x!], [g.one], [by])[0]!];
      const [f, want, r] = evaluate(roots, { a: 1.3, b: 0.4, c: 2.1 });
      expect(f!.value).toBeCloseTo(want!.value, 11);
      expect(r!.value).toBeCloseTo(want!.value, 11);
    }
  });

  test('time derivatives raise coordinates and inputs, and count time itself', () => {
    const g = new Graph();
    const x = g.symbol({ name: 'x', role: 'coordinate', order: 0 });
    const t = g.symbol({ name: 't', role: 'time', order: 0 });
    const k = g.symbol({ name: 'k', role: 'parameter', order: 0 });
    const v = g.symbol({ name: 'x', role: 'coordinate', order: 1 });
    const rate = timeDerivatives(g, [g.multiply(k, x, t)])[0]!;
    const want = g.add(g.multiply(k, t, v), g.multiply(k, x));
    const values = new Map([[x, 0.7], [t, 1.9], [k, 2.3], [v, -0.4]]);
    const run = new Tape([rate, want]).run((s) => ({ values: Float64Array.of(values.get(s)!) }), 1);
    expect(run.value(rate, 0)).toBeCloseTo(run.value(want, 0), 14);
  });

  test('growth: the gradient of a deep shared graph stays linear in it', () => {
    const g = new Graph();
    const x = g.symbol({ name: 'x', role: 'coordinate', order: 0 });
    let e: Expr = x;
    for (let i = 0; i < 200; i++) e = g.add(g.multiply(e, g.apply('sin', [e])), x);
    const before = g.nodes.length;
    gradient(g, [e], [g.one], [x]);
    expect(g.nodes.length).toBeLessThan(before * 6);
  });
});
