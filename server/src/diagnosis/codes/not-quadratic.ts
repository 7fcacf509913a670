import type { CodeDoc } from './doc';

export const notQuadratic: CodeDoc = {
  code: 'not-quadratic',
  about: 'declaration',
  title: 'T is not a positive quadratic form in the velocities',
  meaning: `The kinetic energy has no square of some velocity, a power other than two, or becomes negative for some velocities.`,
  why: `Then a mass matrix that can be inverted does not exist, and accelerations do not follow from the energies. Usually a
term was typed with the wrong sign or the wrong prime.`,
  found: `T is differentiated twice by the velocities; the matrix must be positive definite at the sampled states.`,
  example: `T = 1/2*m*x'^2 - 1/2*J*th'^2                  the sign of the second term`,
  remedy: `Describe the bodies by points and positions (\`point load: mass m at (...)\`): their energy is always of the right form.`,
};
