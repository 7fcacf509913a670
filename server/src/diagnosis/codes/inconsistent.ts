import type { CodeDoc } from './doc';

export const inconsistent: CodeDoc = {
  code: 'inconsistent',
  about: 'declaration',
  title: 'parts of the declaration contradict each other',
  meaning: `The same thing is stated twice and not alike: a typed T against the one of the declared points, an energy in the
declaration against the energy function it defines, a range that excludes itself, a name declared in two roles.`,
  why: `There is no telling which of the two was meant, and a verdict against one of them would be worth nothing.`,
  found: `Both statements are evaluated at sampled states within the declared ranges and compared.`,
  example: `parameters l [m] > 0
ranges l in [-2, -1]                          no value satisfies both`,
  remedy: `Keep the statement that is right, and remove the other.`,
};
