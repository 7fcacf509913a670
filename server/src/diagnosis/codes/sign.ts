import type { CodeDoc } from './doc';

export const sign: CodeDoc = {
  code: 'sign',
  about: 'claim',
  title: 'a term or a whole output has the opposite sign',
  meaning: `The code computes a term, or a whole output, with plus where the declared energies give minus, or the other way round.`,
  why: `A force that should pull back pushes away. Near rest the motion often looks plausible for a while, and a restoring
force with the wrong sign can even hide behind damping. With the angle counted the other way, or from the top, the sign
is right: the message names the declared convention for that reason.`,
  found: `The ratio of the code's value to the expected one is -1 at every sampled state, for the output as a whole or for one
term of the derived equation.`,
  example: `th measured from straight down, V = -m*g*l*cos(th)

  return [thd, (g / l) * Math.sin(th)];      // differs: should be -(g / l) * Math.sin(th)`,
  remedy: `Compare the zero and the sense of the angle in the declaration with those of the code. If they agree, change the sign.
If they do not, correct the declaration, or bind the code's angle with a line such as \`reads th = pi - th\`.`,
};
