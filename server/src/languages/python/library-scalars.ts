import type { Graph } from '../../expression/graph';
import type { Expr, FunctionName } from '../../expression/node';
import { Rational } from '../../expression/rational';
import type { ScalarFunction } from '../../program/library';
import { ARRAY_PREFIXES, SCALAR_PREFIXES } from './library-modules';

type One = (g: Graph, x: Expr) => Expr;
type Two = (g: Graph, x: Expr, y: Expr) => Expr;

const DIRECT: readonly FunctionName[] = ['sin', 'cos', 'tan', 'asin', 'acos', 'atan', 'sinh', 'cosh', 'tanh', 'exp', 'log', 'sign', 'abs', 'floor'];

const half = (g: Graph): Expr => g.number(Rational.HALF);
const ceiling: One = (g, x) => g.negate(g.apply('floor', [g.negate(x)]));
const cut: One = (g, x) => g.select(g.less(x, g.zero), ceiling(g, x), g.apply('floor', [x]));
const asinh: One = (g, x) => g.apply('log', [g.add(x, g.sqrt(g.add(g.square(x), g.one)))]);
const acosh: One = (g, x) => g.apply('log', [g.add(x, g.sqrt(g.subtract(g.square(x), g.one)))]);
const atanh: One = (g, x) => g.multiply(half(g), g.apply('log', [g.divide(g.add(g.one, x), g.subtract(g.one, x))]));
/** To the nearest integer. Halves, which go to the even neighbour, are no generic state; only a constant can be one. */
const rounded: One = (g, x) => {
  const up = g.apply('floor', [g.add(x, half(g))]);
  if (x.op !== 'number' || (x.data as Rational).denominator !== 2n || up.op !== 'number') return up;
  return (up.data as Rational).numerator % 2n === 0n ? up : g.subtract(up, g.one);
};
const radians: One = (g, x) => g.divide(g.multiply(x, g.pi), g.number(180));
const degrees: One = (g, x) => g.divide(g.multiply(x, g.number(180)), g.pi);
const floorRest: Two = (g, x, y) => g.subtract(x, g.multiply(y, g.apply('floor', [g.divide(x, y)])));
const cutRest: Two = (g, x, y) => g.subtract(x, g.multiply(y, cut(g, g.divide(x, y))));
const apply =
  (name: FunctionName): One =>
  (g, x) =>
    g.apply(name, [x]);

const ONE: Readonly<Record<string, One>> = {
  ...Object.fromEntries(DIRECT.map((name): [string, One] => [name, apply(name)])),
  arcsin: apply('asin'),
  arccos: apply('acos'),
  arctan: apply('atan'),
  absolute: apply('abs'),
  fabs: apply('abs'),
  sgn: apply('sign'),
  sqrt: (g, x) => g.sqrt(x),
  cbrt: (g, x) => g.multiply(g.apply('sign', [x]), g.power(g.apply('abs', [x]), g.number(Rational.of(1, 3)))),
  square: (g, x) => g.square(x),
  negative: (g, x) => g.negate(x),
  neg: (g, x) => g.negate(x),
  positive: (_, x) => x,
  reciprocal: (g, x) => g.divide(g.one, x),
  rsqrt: (g, x) => g.divide(g.one, g.sqrt(x)),
  log2: (g, x) => g.divide(g.apply('log', [x]), g.apply('log', [g.number(2)])),
  log10: (g, x) => g.divide(g.apply('log', [x]), g.apply('log', [g.number(10)])),
  log1p: (g, x) => g.apply('log', [g.add(g.one, x)]),
  expm1: (g, x) => g.subtract(g.apply('exp', [x]), g.one),
  exp2: (g, x) => g.power(g.number(2), x),
  asinh,
  acosh,
  atanh,
  arcsinh: asinh,
  arccosh: acosh,
  arctanh: atanh,
  ceil: ceiling,
  trunc: cut,
  fix: cut,
  rint: rounded,
  round: rounded,
  around: rounded,
  radians,
  deg2rad: radians,
  degrees,
  rad2deg: degrees,
  float64: (_, x) => x,
  float32: (_, x) => x,
  float_: (_, x) => x,
  double: (_, x) => x,
  real: (_, x) => x,
  conj: (_, x) => x,
  sec: (g, x) => g.divide(g.one, g.apply('cos', [x])),
  csc: (g, x) => g.divide(g.one, g.apply('sin', [x])),
  cot: (g, x) => g.divide(g.one, g.apply('tan', [x])),
  // States that are not finite have no vote, so these tests always go one way (a one is true, a zero false).
  isfinite: (g) => g.one,
  isnan: (g) => g.zero,
  isinf: (g) => g.zero,
};

const TWO: Readonly<Record<string, Two>> = {
  pow: (g, x, y) => g.power(x, y),
  power: (g, x, y) => g.power(x, y),
  float_power: (g, x, y) => g.power(x, y),
  atan2: (g, y, x) => g.apply('atan2', [y, x]),
  arctan2: (g, y, x) => g.apply('atan2', [y, x]),
  mod: floorRest,
  remainder: floorRest,
  fmod: cutRest,
  floor_divide: (g, x, y) => g.apply('floor', [g.divide(x, y)]),
  copysign: (g, x, y) => g.select(g.less(y, g.zero), g.negate(g.apply('abs', [x])), g.apply('abs', [x])),
};

/** Functions whose name in one package is not what it is elsewhere. */
const OWN: readonly (readonly [string, ScalarFunction])[] = [
  ['math.remainder', two('math.remainder', (g, x, y) => g.subtract(x, g.multiply(y, g.apply('floor', [g.add(g.divide(x, y), half(g))]))))],
  ['math.log', (g, [x, base]) => logarithm(g, x, base)],
  ['sympy.log', (g, [x, base]) => logarithm(g, x, base)],
  ['sympy.ln', one('sympy.ln', apply('log'))],
  ['sympy.Abs', one('sympy.Abs', apply('abs'))],
  ['sympy.Rational', two('sympy.Rational', (g, x, y) => g.divide(x, y))],
  ['sympy.S', one('sympy.S', (_, x) => x)],
  ['sympy.Float', one('sympy.Float', (_, x) => x)],
  ['sympy.Integer', one('sympy.Integer', (_, x) => x)],
  ['casadi.sumsqr', one('casadi.sumsqr', (g, x) => g.square(x))],
  ['scipy.special.cbrt', one('scipy.special.cbrt', ONE['cbrt']!)],
  // Built in.
  ['abs', one('abs', apply('abs'))],
  ['pow', two('pow', (g, x, y) => g.power(x, y))],
  ['round', (g, [x, digits]) => (!x ? { unread: 'a call of round without an argument' } : digits ? { unread: 'a number that is rounded to some digits' } : ONE['round']!(g, x))],
  ['operator.neg', one('operator.neg', (g, x) => g.negate(x))],
];

function logarithm(g: Graph, x: Expr | undefined, base: Expr | undefined): Expr | { unread: string } {
  if (!x) return { unread: 'a call of log without an argument' };
  return base ? g.divide(g.apply('log', [x]), g.apply('log', [base])) : g.apply('log', [x]);
}

/** `math.sin`, `numpy.sin` and their like, by dotted path; given arrays they work number by number. */
export const SCALARS: ReadonlyMap<string, ScalarFunction> = new Map<string, ScalarFunction>([
  ...SCALAR_PREFIXES.flatMap((p) => [
    ...Object.entries(ONE).map(([name, f]): [string, ScalarFunction] => [p + name, one(p + name, f)]),
    ...Object.entries(TWO).map(([name, f]): [string, ScalarFunction] => [p + name, two(p + name, f)]),
  ]),
  ...OWN.map(([name, f]): [string, ScalarFunction] => [name, f]),
  ...ARRAY_PREFIXES.flatMap((p): [string, ScalarFunction][] => [
    [`${p}heaviside`, (g, [x, h]) => (x && h ? g.select(g.less(x, g.zero), g.zero, g.select(g.less(g.zero, x), g.one, h)) : { unread: 'a step without a value at zero' })],
  ]),
]);

const VALUES: Readonly<Record<string, (g: Graph) => Expr>> = {
  pi: (g) => g.pi,
  e: (g) => g.apply('exp', [g.one]),
  tau: (g) => g.multiply(g.number(2), g.pi),
  nan: (g) => g.nan,
  NaN: (g) => g.nan,
};

/** `math.pi` and its like, by dotted path. Infinity is left out: the graph has no number for it. */
export const CONSTANTS: ReadonlyMap<string, (graph: Graph) => Expr> = new Map<string, (graph: Graph) => Expr>([
  ...SCALAR_PREFIXES.flatMap((p) => Object.entries(VALUES).map(([name, f]): [string, (g: Graph) => Expr] => [p + name, f])),
  ['scipy.constants.pi', (g) => g.pi],
  // Standard gravity, exact by definition (3rd CGPM, 1901).
  ['scipy.constants.g', (g) => g.number(Rational.of(980665, 100000))],
  ['sympy.S.Half', half],
]);

function one(name: string, f: One): ScalarFunction {
  return (g, [x, more]) => (x && !more ? f(g, x) : { unread: `a call of ${name} ${x ? 'with more than one argument' : 'without an argument'}` });
}

function two(name: string, f: Two): ScalarFunction {
  return (g, [x, y, more]) => (x && y && !more ? f(g, x, y) : { unread: `a call of ${name} with ${more ? 'more' : 'fewer'} than two arguments` });
}
