import type { CodeDoc } from './doc';

export const swappedSymbol: CodeDoc = {
  code: 'swapped-symbol',
  about: 'claim',
  title: 'one declared symbol stands where another belongs',
  meaning: `With another symbol in one place of the code (a sibling such as m2 for m1, another coordinate, another slot of the
state) every claim of the function would hold.`,
  why: `Copying a line for the second body and missing one index is the classic case. With equal masses or lengths as
defaults the result does not change.`,
  found: `For each place in the code the value is determined that would make all claims right; a place where that value is a
declared symbol of the same kind is the fault, once the edited code has been read and checked again.`,
  example: `  const th2dd = -(m1 * g / (m2 * l2)) * Math.sin(th2);   // differs: m1 in place of m2`,
  remedy: `Put the symbol that the message names, and look at the lines copied from the same source.`,
};
