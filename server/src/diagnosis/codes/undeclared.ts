import type { CodeDoc } from './doc';

export const undeclared: CodeDoc = {
  code: 'undeclared',
  about: 'declaration',
  title: 'a formula uses a name that is declared nowhere',
  meaning: `A symbol of an energy, force or claim is neither coordinate, parameter, input nor shorthand of the system.`,
  why: `An unknown name cannot be given a value, so that nothing can be decided about what depends on it. Mostly it is a
slip of the pen for a declared one.`,
  found: `Every name of every formula is looked up among the names of the system.`,
  example: `parameters m, l [m], g [m/s^2]
T = 1/2*m*L^2*th'^2                           L is not declared (l is)`,
  remedy: `Correct the spelling, or declare the name: \`parameters L [m] > 0\`.`,
};
