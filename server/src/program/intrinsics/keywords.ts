/**
 * Arguments that numeric libraries take by name, by the operation they mean. A name that is not here may change the result
 * in a way that is not known.
 */
const NAMES: Readonly<Record<string, string>> = {
  'array-copy': 'dtype copy order object',
  'array-same': 'dtype copy order',
  'array-of-kind': 'dtype copy',
  'array-range': 'dtype',
  'array-zeros': 'shape size dtype order',
  'array-empty': 'shape size dtype order',
  'array-ones': 'shape size dtype order',
  'array-full': 'shape size fill_value dtype order',
  'array-zeros-like': 'a dtype order shape',
  'array-empty-like': 'dtype order',
  'array-ones-like': 'dtype order',
  'array-full-like': 'fill_value dtype order',
  'array-reshape': 'shape newshape order',
  'array-flat': 'order',
  'array-flat-copy': 'order',
  'array-squeeze': 'axis dim',
  'array-expand': 'axis dim',
  'array-concatenate': 'axis dim',
  'array-stack': 'axis dim',
  'array-append': 'axis',
  'array-sum': 'axis dim dtype',
  'array-product': 'axis dim dtype',
  'array-mean': 'axis dim dtype',
  'array-min': 'axis dim',
  'array-max': 'axis dim',
  'array-running-sum': 'axis dim',
  'array-running-product': 'axis dim',
  'array-differences': 'n axis',
  'array-norm': 'ord axis keepdims dim',
  'array-einsum': 'optimize',
  'matrix-identity': 'N M n m k dtype',
  'matrix-diagonal': 'k offset',
  'array-solve': 'a b assume_a check_finite sym_pos overwrite_a overwrite_b lower',
  'matrix-inverse': 'check_finite overwrite_a rcond rtol hermitian',
  'matrix-factor': 'check_finite overwrite_a',
  'matrix-factor-symmetric': 'lower check_finite overwrite_a',
  'factor-solve': 'check_finite overwrite_b',
  'least-squares': 'rcond check_finite',
  'number-clamp': 'a_min a_max min max',
};

/** Operations of arrays and matrices, which take no other names than those above. */
const STRICT = /^(?:array-|matrix-|vector-|factor-|least-|number-|plus$|minus$|times$|divided$)/;

/** Names that say where or how the numbers are kept, not what they are. */
const SILENT = new Set(['device', 'requires_grad', 'like', 'pin_memory', 'memory_format', 'casting', 'subok']);

const SETS = new Map(Object.entries(NAMES).map(([operation, names]): [string, ReadonlySet<string>] => [operation, new Set(names.split(' '))]));

/** The first named argument of a call that is not known; undefined where all are. */
export function unknownName(operation: string, names: Iterable<string>): string | undefined {
  if (!STRICT.test(operation)) return undefined;
  for (const name of names) if (!SILENT.has(name) && !SETS.get(operation)?.has(name)) return name;
  return undefined;
}
