import { describe, expect, test } from 'vitest';
import { Graph } from '../../server/src/expression/graph';
import type { Expr } from '../../server/src/expression/node';
import type { Rational } from '../../server/src/expression/rational';
import { INTRINSICS } from '../../server/src/program/intrinsics/table';
import { typescriptLibrary as library } from '../../server/src/languages/typescript/library';

/** The value of a node whose symbols have the values given; enough for the table's own functions. */
function evaluate(e: Expr, values: ReadonlyMap<string, number>): number {
  const a = e.args.map((x) => evaluate(x, values));
  switch (e.op) {
    case 'number':
      return (e.data as Rational).toNumber();
    case 'symbol':
      return values.get((e.data as { name: string }).name)!;
    case 'pi':
      return Math.PI;
    case 'nan':
      return NaN;
    case 'sum':
      return a.reduce((x, y) => x + y, 0);
    case 'product':
      return a.reduce((x, y) => x * y, 1);
    case 'power':
      return a[0]! ** a[1]!;
    case 'less':
      return Number(a[0]! < a[1]!);
    case 'select':
      return a[0]! ? a[1]! : a[2]!;
    default:
      return (Math[e.op as 'sin'] as (...args: number[]) => number)(...a);
  }
}

function apply(path: string, ...args: number[]): number {
  const g = new Graph();
  const names = args.map((_, i) => `x${i}`);
  const symbols = names.map((name) => g.symbol({ name, role: 'parameter', order: 0 }));
  const made = library.scalars.get(path)!(g, symbols);
  if ('unread' in made) throw new Error(made.unread);
  return evaluate(made, new Map(names.map((name, i) => [name, args[i]!])));
}

const functions: string[] = Object.getOwnPropertyNames(Math).filter((n) => typeof Math[n as 'sin'] === 'function');
const bits = ['imul', 'clz32', 'f16round', 'sumPrecise', 'fround', 'random'];

describe('Math', () => {
  test.each(functions.filter((n) => !bits.includes(n)))('%s is what the language computes', (name) => {
    const real = Math[name as 'sin'] as (...args: number[]) => number;
    const counts = ['pow', 'atan2'].includes(name) ? [2] : ['min', 'max', 'hypot'].includes(name) ? [1, 2, 4] : [1];
    for (const count of counts) {
      for (const start of [0.3, 1.7, -0.4, -2.5, 2.5, 12]) {
        const args = Array.from({ length: count }, (_, i) => start * (1 - 0.3 * i));
        const expected = real(...args);
        if (Number.isFinite(expected)) expect(apply(`Math.${name}`, ...args)).toBeCloseTo(expected, 10);
      }
    }
  });

  test('constants', () => {
    for (const name of ['PI', 'E', 'SQRT2', 'SQRT1_2', 'LN2', 'LN10', 'LOG2E', 'LOG10E'] as const) {
      const made = library.constants.get(`Math.${name}`)!(new Graph());
      expect(evaluate(made, new Map())).toBeCloseTo(Math[name], 14);
    }
    const g = new Graph();
    expect(library.constants.get('Math.PI')!(g)).toBe(g.pi);
    expect(library.constants.get('NaN')!(g)).toBe(g.nan);
  });

  test('what has no fixed value is unread, and so is a call without arguments', () => {
    const g = new Graph();
    expect(library.scalars.get('Math.random')!(g, [])).toHaveProperty('unread');
    for (const [name, f] of library.scalars) {
      if (name !== 'Math.hypot') expect(f(g, []), name).toHaveProperty('unread');
    }
  });
});

test('conversions pass numbers through', () => {
  for (const name of ['Number', 'parseFloat', 'Number.parseFloat', 'Math.fround']) expect(apply(name, -2.5)).toBe(-2.5);
});

test('every intrinsic it names is there', () => {
  for (const [path, name] of [...library.intrinsics, ...library.methods]) expect(INTRINSICS.has(name), path).toBe(true);
});

test('packages give their names with a prefix', () => {
  expect(library.modules.get('mathjs')).toBe('math.');
  expect(apply('math.log', 8, 2)).toBeCloseTo(3, 12);
  expect(apply('math.add', 1, 2, 3)).toBe(6);
  expect(apply('numeric.sub', 1, 2.5)).toBe(-1.5);
  expect(apply('math.cube', -2)).toBe(-8);
});
