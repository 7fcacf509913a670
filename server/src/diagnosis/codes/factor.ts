import type { CodeDoc } from './doc';

export const factor: CodeDoc = {
  code: 'factor',
  about: 'claim',
  title: 'a constant or symbolic factor too many or too few',
  meaning: `The code's value, or one term of it, is a fixed multiple of the expected one: 2, 1/2, 4/3, a mass, a length.`,
  why: `Factors get lost when energies with 1/2 are differentiated by hand, when a rod is treated as a point, or when half a
length is taken for the whole. At a shipped default such as m = 1 the fault cannot be seen at all.`,
  found: `At all sampled states the ratio of found and expected value is the same rational number, or the same product of
powers of declared symbols.`,
  example: `T = 1/2*m*l^2*th'^2, V = -m*g*l*cos(th)

  const thdd = -g / (2 * l) * Math.sin(th);  // differs: the factor 1/2 is too much`,
  remedy: `Check what the length stands for (whole or half), and whether the body is a point or extended. Then remove or add the
factor that the message names.`,
};
