import type { CodeDoc } from './doc';

export const differs: CodeDoc = {
  code: 'differs',
  about: 'claim',
  title: 'code and declared energies disagree, and no single cause was found',
  meaning: `At the state that is shown, the code gives another value than the energies. Neither a pattern for the whole output nor
a single place in the code explains it.`,
  why: `Several faults at once do this (real faulty code often has more than one), and so does a declaration that describes
another model than the code.`,
  found: `The difference at a generic state is larger than a bound on all rounding errors of the evaluation. Nothing is
reported as different without such a state.`,
  example: `  const xdd = (F + m * Math.sin(th) * thd * thd) / M;    // an l is missing, and m*sin(th)^2 in the denominator`,
  remedy: `Print the equations with \`visviva derive FILE\` and compare term by term. Claims about intermediate values
(\`checks mass matrix = ...\`, \`checks rhs = right side\`) narrow it down.`,
};
