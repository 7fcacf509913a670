import type { OpName } from '../node';
import { nan, number, pi, power, product, sum } from './arithmetic';
import { functions } from './functions';
import type { Operator } from './operator';
import { piecewise } from './piecewise';
import { solve } from './solve';

export type { Operator } from './operator';
export { ULP } from './operator';

/** Every operator but symbols (whose values come from samples) and components (which only name an output of `solve`). */
export const operators = { number, pi, nan, sum, product, power, solve, ...functions, ...piecewise } as Readonly<
  Record<Exclude<OpName, 'symbol' | 'component'>, Operator>
>;
