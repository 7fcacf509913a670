import type { CodeDoc } from './doc';

export const wrongOperator: CodeDoc = {
  code: 'wrong-operator',
  about: 'claim',
  title: 'plus for times, times for division, and the like',
  meaning: `One arithmetic operator of the code is not the one that the energies ask for. As a warning beside the claims: a division of integers that loses its fraction, as \`4/3\` does in Python 2.`,
  why: `\`a + b * c\` for \`a * b * c\` still has a value, and a simulation goes on with it.`,
  found: `With one operator exchanged, every claim of the function holds when it is read again.`,
  example: `  const denominator = M * m * Math.sin(th) ** 2;   // differs: M + m * Math.sin(th) ** 2`,
  remedy: `Put the operator that the message names.`,
};
