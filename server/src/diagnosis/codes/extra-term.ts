import type { CodeDoc } from './doc';

export const extraTerm: CodeDoc = {
  code: 'extra-term',
  about: 'claim',
  title: 'the code has a term that the energies do not give',
  meaning: `The code computes what is expected, and something more.`,
  why: `Often a term was counted twice, a force was declared in one place and coded in another, or a line was left from an
older model.`,
  found: `Found minus expected is a sum of terms made of declared symbols, at every sampled state, and no expected term has
that form.`,
  example: `V = 1/2*k*x^2, no damping declared

  const a = (-k * x - c * v) / m;            // differs: the term c*x' has no counterpart`,
  remedy: `If the term belongs to the model, declare it: \`D = 1/2*c*x'^2\` for linear damping, \`Q[x] = ...\` or \`force ... at ...\`
for an applied force. Otherwise take it out.`,
};
