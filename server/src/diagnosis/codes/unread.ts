import type { CodeDoc } from './doc';

export const unread: CodeDoc = {
  code: 'unread',
  about: 'claim',
  title: 'the code of this claim could not be read, so nothing is said about it',
  meaning: `The claim depends on something that is not read: a call into code that is not in the project, a loop without known
bounds, input, randomness, or a name without a meaning. The message names it and its place. The claim is neither right
nor wrong.`,
  why: `A check that passes over what it cannot read would be worth little. Other claims of the same function are decided
as usual.`,
  found: `Reading stops at the expression, and every claim that depends on its value carries the reason.`,
  example: `  const wind = forecast.at(position);        // what forecast.at returns is not known
  return [v, (F + wind) / m];                // the second claim is unread`,
  remedy: `Give the value a meaning: declare an input and bind it (\`inputs W [N]\` and \`reads wind = W\`). Where a branch or a flag
stops the reading, say which one is meant: \`assume kind == "rod"\`.`,
};
