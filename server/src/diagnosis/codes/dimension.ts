import type { CodeDoc } from './doc';

export const dimension: CodeDoc = {
  code: 'dimension',
  about: 'declaration',
  title: 'the units of a formula do not fit',
  meaning: `Two terms that are added or compared have different units, or a function such as sin has an argument with a unit.`,
  why: `A wrong power or a lost factor mostly breaks the units, so this often finds a fault in the energies before anything is
compared.`,
  found: `Units are carried through every formula. Names without a unit are left out of the comparison.`,
  example: `parameters m [kg], l [m], g [m/s^2]
V = -m*g*cos(th)                              newtons, where T is in joules: l is missing`,
  remedy: `Correct the formula or the unit. \`[1]\` marks a number without a unit.`,
};
