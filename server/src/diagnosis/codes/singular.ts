import type { CodeDoc } from './doc';

export const singular: CodeDoc = {
  code: 'singular',
  about: 'declaration',
  title: 'the equations do not determine the motion',
  meaning: `The mass matrix, or the system of mass matrix and constraints, cannot be solved: a coordinate without any inertia, a
constraint given twice, or constraints that contradict each other.`,
  why: `No acceleration follows from such a declaration, so that no claim about one can be decided.`,
  found: `The linear system for accelerations and multipliers is singular at every sampled state, within the bounds of rounding.`,
  example: `coordinates x, y
T = 1/2*m*x'^2                                y has no inertia`,
  remedy: `Give every coordinate its inertia, or remove the superfluous coordinate or constraint.`,
};
