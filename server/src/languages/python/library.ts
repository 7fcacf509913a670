import type { Library } from '../../program/library';
import { INTRINSICS, METHODS, PROPERTIES } from './library-arrays';
import { MODULES } from './library-modules';
import { CONSTANTS, SCALARS } from './library-scalars';

const LOGGING = 'debug info warning warn error critical exception log'.split(' ');

/**
 * What Python's numeric libraries mean: nothing of them is imported or run. Names are looked up by dotted path behind the
 * imports of the file, so that `import numpy as np`, `from math import *` and `s = np.sin` all come back to these entries.
 */
export const pythonLibrary: Library = {
  scalars: SCALARS,
  constants: CONSTANTS,
  intrinsics: INTRINSICS,
  methods: METHODS,
  properties: PROPERTIES,
  modules: MODULES,
  ignorable: new Set([
    'print',
    'warnings.warn',
    'time.sleep',
    ...LOGGING.flatMap((n) => [`logging.${n}`, `logger.${n}`, `log.${n}`, `this.logger.${n}`]),
    'numpy.set_printoptions',
    'numpy.seterr',
  ]),
};
