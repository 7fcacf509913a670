import type { CodeDoc } from './doc';

export const wrongPower: CodeDoc = {
  code: 'wrong-power',
  about: 'claim',
  title: 'a symbol has the wrong exponent',
  meaning: `A length, a velocity or a mass is squared where it should not be, or is not where it should.`,
  why: `l and l^2 are the same number while l = 1. The units often tell: see the finding \`dimension\`.`,
  found: `With one exponent of the code changed, every claim of the function holds when it is read again.`,
  example: `T = 1/2*m*l^2*th'^2

  const M = m * l;                           // claims mass matrix: should be m * l * l`,
  remedy: `Correct the exponent that the message names.`,
};
