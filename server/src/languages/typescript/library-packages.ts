import type { Graph } from '../../expression/graph';
import type { Expr } from '../../expression/node';
import type { ScalarFunction } from '../../program/library';
import { CONSTANTS, SCALARS } from './library-scalars';

/**
 * The two packages for matrices of plain lists that simulations in JavaScript use most: mathjs (as `math`) and numeric.
 * Only what means the same for lists as for the matrices of the executor is here; all else stays unread.
 */

/** Package name to the prefix of its names. */
export const PACKAGE_MODULES: readonly [string, string][] = [
  ['mathjs', 'math.'],
  ['numeric', 'numeric.'],
];

const FOLDED: Readonly<Record<string, (g: Graph, args: readonly Expr[]) => Expr>> = {
  add: (g, args) => g.sum(args),
  subtract: (g, [a, b]) => g.subtract(a!, b!),
  divide: (g, [a, b]) => g.divide(a!, b!),
  dotMultiply: (g, [a, b]) => g.multiply(a!, b!),
  dotDivide: (g, [a, b]) => g.divide(a!, b!),
  square: (g, [a]) => g.square(a!),
  cube: (g, [a]) => g.power(a!, g.number(3)),
  unaryMinus: (g, [a]) => g.negate(a!),
};

const ARGUMENTS: Readonly<Record<string, number>> = { square: 1, cube: 1, unaryMinus: 1 };

const NUMERIC: Readonly<Record<string, string>> = { add: 'add', sub: 'subtract', mul: 'dotMultiply', div: 'dotDivide', neg: 'unaryMinus' };

/** Functions of `Math` that both packages have under the same name, for one argument or element by element. */
const SHARED = 'sin cos tan asin acos atan atan2 sinh cosh tanh exp sqrt abs sign pow floor ceil';

export const PACKAGE_SCALARS: readonly [string, ScalarFunction][] = [
  ...SHARED.split(' ').flatMap((name): [string, ScalarFunction][] => {
    const f = SCALARS.get(`Math.${name}`)!;
    return [
      [`math.${name}`, f],
      [`numeric.${name}`, f],
    ];
  }),
  ...Object.keys(FOLDED).map((name): [string, ScalarFunction] => [`math.${name}`, folded(name)]),
  ...Object.entries(NUMERIC).map(([name, meaning]): [string, ScalarFunction] => [`numeric.${name}`, folded(meaning)]),
  ['math.log', logarithm],
];

export const PACKAGE_CONSTANTS: readonly [string, (graph: Graph) => Expr][] = [
  ['math.pi', CONSTANTS.get('Math.PI')!],
  ['math.e', CONSTANTS.get('Math.E')!],
];

export const PACKAGE_INTRINSICS: readonly [string, string][] = [
  ['math.multiply', 'matrix-multiply'],
  ['math.transpose', 'matrix-transpose'],
  ['math.inv', 'matrix-inverse'],
  ['math.det', 'matrix-determinant'],
  ['math.dot', 'vector-dot'],
  ['math.cross', 'vector-cross'],
  ['numeric.dot', 'matrix-multiply'],
  ['numeric.transpose', 'matrix-transpose'],
  ['numeric.inv', 'matrix-inverse'],
  ['numeric.det', 'matrix-determinant'],
  ['numeric.solve', 'matrix-solve'],
  ['numeric.norm2', 'vector-norm'],
  ['numeric.identity', 'matrix-identity'],
  ['numeric.clone', 'deep-copy'],
];

function folded(name: string): ScalarFunction {
  const least = ARGUMENTS[name] ?? 2;
  return (g, args) => (args.length >= least ? FOLDED[name]!(g, args) : { unread: `a call of \`${name}\` with too few arguments` });
}

/** `log(x)` or `log(x, base)` */
function logarithm(g: Graph, [x, base]: readonly Expr[]): ReturnType<ScalarFunction> {
  if (!x) return { unread: 'a call of `log` without an argument' };
  return base ? g.divide(g.apply('log', [x]), g.apply('log', [base])) : g.apply('log', [x]);
}
