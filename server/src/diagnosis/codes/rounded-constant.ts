import type { CodeDoc } from './doc';

export const roundedConstant: CodeDoc = {
  code: 'rounded-constant',
  about: 'claim',
  title: 'a constant is written with few digits',
  meaning: `The code agrees with the declaration up to a small steady difference, and a number in it explains that: 3.14 for pi,
0.01745 for a degree, 0.333 for a third.`,
  why: `The motion is nearly right. Energy drifts, and comparisons with other code fail in the fifth digit without anyone
knowing why. A value of g such as 9.81 is not meant here: constants that are declared stay symbols.`,
  found: `Sampled states differ by more than rounding of the arithmetic explains, and the difference vanishes when the literal is
replaced by the exact value it is near to.`,
  example: `  const omega = 3.14 / 180 * degreesPerSecond;   // 3.14 is pi rounded`,
  remedy: `Use the language's own constant, or an exact fraction.`,
};
