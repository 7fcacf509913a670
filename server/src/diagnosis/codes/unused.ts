import type { CodeDoc } from './doc';

export const unused: CodeDoc = {
  code: 'unused',
  about: 'declaration',
  title: 'a declared name is used nowhere',
  meaning: `A coordinate, parameter, input or shorthand occurs in no energy, force, constraint or claim.`,
  why: `Often the declaration is incomplete: a mass whose energy was forgotten, a damping that no force mentions.`,
  found: `The names that formulas and claims depend on are collected, and the rest is reported.`,
  example: `parameters M, m [kg], J [kg m^2]
T = 1/2*(M + m)*x'^2                          J occurs nowhere`,
  remedy: `Add the missing energy or force, or remove the name.`,
};
