import type { CodeDoc } from './doc';

export const wrongFunction: CodeDoc = {
  code: 'wrong-function',
  about: 'claim',
  title: 'another function belongs here',
  meaning: `sin stands for cos, tan for sin, sqrt for a square, abs is missing, or the like.`,
  why: `Which of sine and cosine belongs to a component depends on where the angle is counted from. Near 45 degrees the two
are hardly told apart.`,
  found: `With one function of the code exchanged for another, every claim of the function holds when it is read again.`,
  example: `th from the vertical: height of the load = -l*cos(th)

  const V = -m * g * l * Math.sin(th);       // differs: cos belongs here`,
  remedy: `Change the function, after a look at the zero of the angle that the declaration states.`,
};
