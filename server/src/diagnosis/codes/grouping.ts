import type { CodeDoc } from './doc';

export const grouping: CodeDoc = {
  code: 'grouping',
  about: 'claim',
  title: 'a bracket closes in the wrong place',
  meaning: `The right symbols and operators are there, grouped in another way.`,
  why: `\`a / b * c\` is (a/b)*c in most languages; the formula on paper often meant a/(b*c).`,
  found: `With brackets set otherwise around a part of the code, every claim of the function holds when it is read again.`,
  example: `  const thdd = -g * Math.sin(th) / l * m;    // differs: should be / (l * m)`,
  remedy: `Set the brackets as the message shows.`,
};
