import * as fc from 'fast-check';
import ts from 'typescript';
import { describe, expect, it } from 'vitest';
import { Graph } from '../../../server/src/expression/graph';
import type { Expr } from '../../../server/src/expression/node';
import { normalForm } from '../../../server/src/expression/normal-form';
import { code, equationText, tex, typescript } from '../../../server/src/expression/print';
import { compareTerms, splitEquation } from '../../../server/src/expression/terms';
import { Rational } from '../../../server/src/expression/rational';
import { build, evaluate, pointOf, recipes, Symbols } from '../../support/expressions';

const g = new Graph();
const s = new Symbols(g);
const [m, l, k] = ['m', 'l', 'k'].map((n) => s.parameter(n)) as [Expr, Expr, Expr];
const th = s.coordinate('th');
const theta1 = s.coordinate('theta1');
const sin = (e: Expr) => g.apply('sin', [e]);
const n = (a: number, b = 1) => g.number(Rational.of(a, b));

describe('TeX', () => {
  it.each([
    ['\\frac{1}{2} m \\dot{x}^{2}', g.multiply(n(1, 2), m, g.square(s.coordinate("x'")))],
    ['m l^{2} \\ddot{\\theta}_{1} + m l \\sin\\left(\\theta_{1}\\right)', g.add(g.multiply(m, g.square(l), s.coordinate("theta1''")), g.multiply(m, l, sin(theta1)))],
    ['\\frac{3 k}{2 m l}', g.divide(g.multiply(n(3, 2), k), g.multiply(m, l))],
    ['\\sin^{2}\\left(\\mathit{th}\\right)', g.square(sin(th))],
    ['-\\sqrt{\\frac{k}{m_{\\mathrm{load}}}}', g.negate(g.sqrt(g.divide(k, s.parameter('m_load'))))],
    ['\\left(m + x\\right)^{2}', g.square(g.add(m, s.coordinate('x')))],
    ['\\varphi \\Omega', g.multiply(s.parameter('φ'), s.parameter('Omega'))],
    ['\\left|x\\right|', g.apply('abs', [s.coordinate('x')])],
  ] as [string, Expr][])('%s', (expected, expr) => {
    expect(tex(expr)).toBe(expected);
  });
});

describe('code', () => {
  it('uses the names of the surrounding code and names common parts', () => {
    const names = new Map([['th', 's[0]'], ["th'", 's[1]'], ['m', 'p.mass']]);
    const c = g.apply('cos', [th]);
    const shared = g.add(g.multiply(m, c, c), g.divide(k, g.add(m, c)));
    const out = code(typescript, [shared, g.multiply(shared, g.square(s.coordinate("th'")))], { names, prefix: 't', limit: 0 });
    expect(out).toMatchInlineSnapshot(`
      {
        "helpers": [],
        "statements": [
          "const t1 = Math.cos(s[0]);",
          "const t2 = p.mass * t1 * t1 + k / (p.mass + t1);",
        ],
        "values": [
          "t2",
          "s[1] ** 2 * t2",
        ],
      }
    `);
  });

  it('makes identifiers of any name', () => {
    expect(typescript.identifier('th', 2)).toBe('thDDot');
    expect(typescript.identifier('class', 0)).toBe('_class');
    expect(typescript.identifier('r[1]', 1)).toBe('r_1Dot');
    expect(typescript.identifier('θ', 0)).toBe('θ');
  });

  it('computes what the expression says', () => {
    fc.assert(
      fc.property(recipes, fc.integer(), fc.constantFrom(0, 80, 1e9), (recipe, seed, limit) => {
        const graph = new Graph();
        const expr = build(graph, recipe);
        const at = pointOf(seed);
        const expected = evaluate(expr, at);
        if (!Number.isFinite(expected) || Math.abs(expected) > 1e12) return;
        const found = run(graph, expr, limit, at);
        if (Math.abs(found - expected) > 1e-6 * (1 + Math.abs(expected)) + 1e3 * Math.abs(evaluate(expr, (x) => at(x) * (1 + 1e-12)) - expected)) {
          expect(found).toBe(expected);
        }
      }),
      { numRuns: 1000 },
    );
  });
});

function run(_: Graph, expr: Expr, limit: number, at: (name: string) => number): number {
  const out = code(typescript, [expr], { limit });
  const body = [...out.helpers, ...out.statements, `return ${out.values[0]};`].join('\n');
  const js = ts.transpile(body, { target: ts.ScriptTarget.ES2022 });
  const symbols = ['a', 'b', 'm', 'l', "x'", 'th', "th'"];
  const names = symbols.map((x) => typescript.identifier(x.replace("'", ''), x.endsWith("'") ? 1 : 0));
  return new Function(...names, js)(...symbols.map(at)) as number;
}

describe('terms', () => {
  const form = (e: Expr) => normalForm(g, e)!;

  it('says which terms are missing, extra or scaled', () => {
    const a = g.multiply(m, th);
    const b = g.multiply(k, sin(th));
    const c = compareTerms(form(g.add(a, b, l)), form(g.add(g.negate(b), l, g.square(th))));
    expect(c.missing).toHaveLength(1);
    expect(c.extra).toHaveLength(1);
    expect(c.scaled.map((x) => x.ratio.toString())).toEqual(['-1']);
    expect(c.common).toBe(1);
  });

  it('moves what is applied to the right side', () => {
    const F = s.input('F');
    const e = splitEquation(g, form(g.subtract(g.multiply(m, s.coordinate("th''")), g.multiply(F, l))));
    expect(equationText(e.left, e.right)).toBe("m*th'' = l*F");
  });
});
