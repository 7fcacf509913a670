import type { CodeDoc } from './doc';

export const missingTerm: CodeDoc = {
  code: 'missing-term',
  about: 'claim',
  title: 'a term of the derived equation is not in the code',
  meaning: `All terms of the code are right, but one that the energies give is absent.`,
  why: `The terms that get lost are the ones without which a simulation still runs: Coriolis and centrifugal terms, the
reaction of a damper on the second body, the coupling through an off-diagonal mass.`,
  found: `Expected minus found equals one or more terms of the derived equation, at every sampled state.`,
  example: `T = 1/2*m*(r'^2 + r^2*ph'^2)

  const rdd = -k / (m * r * r);              // differs: the term r*ph'^2 is missing`,
  remedy: `Add the term. \`visviva derive FILE\` prints the whole equation.`,
};
