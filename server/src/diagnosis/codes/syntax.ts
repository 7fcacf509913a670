import type { CodeDoc } from './doc';

export const syntax: CodeDoc = {
  code: 'syntax',
  about: 'declaration',
  title: 'a line of a declaration cannot be read',
  meaning: `The declaration contains something that is not a statement or a formula of its language. Other lines still count, as
far as they do not depend on this one.`,
  why: `A line that was left out silently would make a claim about another system than the one that was meant.`,
  found: `The parser names the place where it expected something else, and goes on with the next line.`,
  example: `@visviva loading-arm
  coordinates th [rad
  V = -m*g*l*cos(th))                        two errors: a bracket not closed, one too many`,
  remedy: `Correct the line. Formulas use + - * / ^, brackets, primes for time derivatives, and the functions sin, cos, sqrt and
so on.`,
};
