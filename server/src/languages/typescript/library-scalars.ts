import type { Graph } from '../../expression/graph';
import type { Expr, FunctionName } from '../../expression/node';
import { Rational } from '../../expression/rational';
import type { ScalarFunction } from '../../program/library';

type One = (g: Graph, x: Expr) => Expr;
type Two = (g: Graph, x: Expr, y: Expr) => Expr;

const DIRECT: readonly FunctionName[] = [
  'sin', 'cos', 'tan', 'asin', 'acos', 'atan', 'sinh', 'cosh', 'tanh', 'exp', 'log', 'abs', 'sign', 'floor',
];

const ceiling: One = (g, x) => g.negate(g.apply('floor', [g.negate(x)]));

const ONE: Readonly<Record<string, One>> = {
  ...Object.fromEntries(DIRECT.map((name): [string, One] => [name, (g, x) => g.apply(name, [x])])),
  sqrt: (g, x) => g.sqrt(x),
  cbrt: (g, x) => g.multiply(g.apply('sign', [x]), g.power(g.apply('abs', [x]), g.number(Rational.of(1, 3)))),
  log10: (g, x) => g.divide(g.apply('log', [x]), g.apply('log', [g.number(10)])),
  log2: (g, x) => g.divide(g.apply('log', [x]), g.apply('log', [g.number(2)])),
  log1p: (g, x) => g.apply('log', [g.add(g.one, x)]),
  expm1: (g, x) => g.subtract(g.apply('exp', [x]), g.one),
  asinh: (g, x) => g.apply('log', [g.add(x, g.sqrt(g.add(g.square(x), g.one)))]),
  acosh: (g, x) => g.apply('log', [g.add(x, g.sqrt(g.subtract(g.square(x), g.one)))]),
  atanh: (g, x) =>
    g.multiply(g.number(Rational.HALF), g.apply('log', [g.divide(g.add(g.one, x), g.subtract(g.one, x))])),
  ceil: ceiling,
  // Halves are rounded up, below zero too.
  round: (g, x) => g.apply('floor', [g.add(x, g.number(Rational.HALF))]),
  trunc: (g, x) => g.select(g.less(x, g.zero), ceiling(g, x), g.apply('floor', [x])),
  fround: (_, x) => x,
};

const TWO: Readonly<Record<string, Two>> = {
  pow: (g, x, y) => g.power(x, y),
  atan2: (g, y, x) => g.apply('atan2', [y, x]),
};

/** `Math.sin` and its like, by dotted path. */
export const SCALARS: ReadonlyMap<string, ScalarFunction> = new Map<string, ScalarFunction>([
  ...Object.entries(ONE).map(([name, f]): [string, ScalarFunction] => [`Math.${name}`, one(`Math.${name}`, f)]),
  ...Object.entries(TWO).map(([name, f]): [string, ScalarFunction] => [`Math.${name}`, two(`Math.${name}`, f)]),
  ['Math.hypot', (g, args) => g.sqrt(g.sum(args.map((a) => g.square(a))))],
  ['Math.min', extreme('min')],
  ['Math.max', extreme('max')],
  ['Math.random', () => ({ unread: 'a random number' })],
  // The argument is a number already.
  ['Number', one('Number', (_, x) => x)],
  ['parseFloat', one('parseFloat', (_, x) => x)],
  ['Number.parseFloat', one('Number.parseFloat', (_, x) => x)],
  // States that are not finite have no vote, so these tests always go one way (a one is true, a zero false).
  ['isFinite', one('isFinite', (g) => g.one)],
  ['Number.isFinite', one('Number.isFinite', (g) => g.one)],
  ['isNaN', one('isNaN', (g) => g.zero)],
  ['Number.isNaN', one('Number.isNaN', (g) => g.zero)],
]);

/** `Math.PI` and its like, by dotted path. `Infinity` is left out: the graph has no number for it. */
export const CONSTANTS: ReadonlyMap<string, (graph: Graph) => Expr> = new Map<string, (graph: Graph) => Expr>([
  ['Math.PI', (g) => g.pi],
  ['Math.E', (g) => g.apply('exp', [g.one])],
  ['Math.SQRT2', (g) => g.sqrt(g.number(2))],
  ['Math.SQRT1_2', (g) => g.sqrt(g.number(Rational.HALF))],
  ['Math.LN2', (g) => g.apply('log', [g.number(2)])],
  ['Math.LN10', (g) => g.apply('log', [g.number(10)])],
  ['Math.LOG2E', (g) => g.divide(g.one, g.apply('log', [g.number(2)]))],
  ['Math.LOG10E', (g) => g.divide(g.one, g.apply('log', [g.number(10)]))],
  ['Number.EPSILON', (g) => g.number(Number.EPSILON)],
  ['Number.MAX_SAFE_INTEGER', (g) => g.number(Number.MAX_SAFE_INTEGER)],
  ['Number.MIN_SAFE_INTEGER', (g) => g.number(Number.MIN_SAFE_INTEGER)],
  ['Number.MAX_VALUE', (g) => g.number(Number.MAX_VALUE)],
  ['Number.MIN_VALUE', (g) => g.number(Number.MIN_VALUE)],
  ['NaN', (g) => g.nan],
  ['Number.NaN', (g) => g.nan],
]);

function one(name: string, f: One): ScalarFunction {
  return (g, [x]) => (x ? f(g, x) : { unread: `a call of ${name} without an argument` });
}

function two(name: string, f: Two): ScalarFunction {
  return (g, [x, y]) => (x && y ? f(g, x, y) : { unread: `a call of ${name} with fewer than two arguments` });
}

function extreme(name: 'min' | 'max'): ScalarFunction {
  return (g, args) => (args.length > 0 ? g.apply(name, args) : { unread: `Math.${name} of nothing` });
}
