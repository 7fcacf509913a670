/** Packages whose names the tables know, and the prefix under which they stand there. */
const NUMERIC = ['numpy', 'jax.numpy', 'torch', 'sympy', 'casadi', 'cupy'];

const SAME: readonly (readonly [module: string, prefix: string])[] = [
  ['autograd.numpy', 'numpy.'],
  ['pennylane.numpy', 'numpy.'],
  ['numpy.linalg', 'numpy.linalg.'],
  ['jax.numpy.linalg', 'jax.numpy.linalg.'],
  ['jax.scipy.linalg', 'scipy.linalg.'],
  ['torch.linalg', 'torch.linalg.'],
  ['scipy', 'scipy.'],
  ['scipy.linalg', 'scipy.linalg.'],
  ['scipy.constants', 'scipy.constants.'],
  ['scipy.special', 'scipy.special.'],
  ['jax', 'jax.'],
  ['pylab', 'numpy.'],
  ['math', 'math.'],
  ['cmath', 'cmath.'],
  ['copy', 'copy.'],
  ['itertools', 'itertools.'],
  ['functools', 'functools.'],
  ['operator', 'operator.'],
  ['typing', 'typing.'],
  ['warnings', 'warnings.'],
  ['logging', 'logging.'],
  ['time', 'time.'],
];

/** Import text to prefix. */
export const MODULES: ReadonlyMap<string, string> = new Map<string, string>([
  ...NUMERIC.map((m): [string, string] => [m, `${m}.`]),
  ...SAME.map(([m, p]): [string, string] => [m, p]),
]);

/** The prefixes under which the names of numpy are known too. */
export const ARRAY_PREFIXES: readonly string[] = ['numpy.', 'jax.numpy.', 'torch.', 'cupy.'];

export const LINALG_PREFIXES: readonly string[] = ['numpy.linalg.', 'jax.numpy.linalg.', 'torch.linalg.', 'scipy.linalg.', 'cupy.linalg.'];

/** Where plain functions of numbers are found. */
export const SCALAR_PREFIXES: readonly string[] = [...ARRAY_PREFIXES, 'math.', 'sympy.', 'casadi.', 'scipy.', 'cmath.'];
