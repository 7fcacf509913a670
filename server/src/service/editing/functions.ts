/** What the functions of formulas take, and what they give. */
export interface FunctionHelp {
  readonly name: string;
  readonly parameters: readonly string[];
  readonly description: string;
}

const help = (name: string, parameters: string, description: string): FunctionHelp => ({ name, parameters: parameters.split(', '), description });

export const FUNCTION_HELP: readonly FunctionHelp[] = [
  help('sin', 'angle', 'Sine of an angle in radians.'),
  help('cos', 'angle', 'Cosine of an angle in radians.'),
  help('tan', 'angle', 'Tangent of an angle in radians.'),
  help('asin', 'x', 'The angle between -pi/2 and pi/2 whose sine is x.'),
  help('acos', 'x', 'The angle between 0 and pi whose cosine is x.'),
  help('atan', 'x', 'The angle between -pi/2 and pi/2 whose tangent is x.'),
  help('atan2', 'y, x', 'The angle of the direction (x, y), between -pi and pi.'),
  help('sinh', 'x', 'Hyperbolic sine.'),
  help('cosh', 'x', 'Hyperbolic cosine.'),
  help('tanh', 'x', 'Hyperbolic tangent.'),
  help('exp', 'x', 'e to the power of x.'),
  help('log', 'x', 'Natural logarithm.'),
  help('sqrt', 'x', 'Square root.'),
  help('abs', 'x', 'x without its sign.'),
  help('sign', 'x', '-1, 0 or 1.'),
  help('floor', 'x', 'The largest whole number not above x.'),
  help('min', 'a, b', 'The smaller one.'),
  help('max', 'a, b', 'The larger one.'),
  help('dot', 'a, b', 'Scalar product of two vectors.'),
  help('cross', 'a, b', 'Vector product; of two vectors in a plane the component across it.'),
  help('norm', 'a', 'Length of a vector.'),
  help('transpose', 'A', 'A with rows and columns exchanged.'),
  help('det', 'A', 'Determinant of a square matrix.'),
  help('sum', 'term over i in 1..n', 'Sum over a family: `sum(m[i]*x[i] over i in 1..n)`.'),
];

/** What the right side of a claim may name, beside symbols and formulas of them. */
export const QUANTITY_HELP: readonly (readonly [name: string, snippet: string, description: string])[] = [
  ['p[q]', 'p[${1:q}]', 'Conjugate momentum dL/dq\'.'],
  ['T', 'T', 'Kinetic energy.'],
  ['V', 'V', 'Potential energy.'],
  ['L', 'L', 'The Lagrangian.'],
  ['E', 'E', 'Total energy T + V.'],
  ['H', 'H', 'The Hamiltonian.'],
  ['dH/dq', 'dH/dq', 'Gradient of the Hamiltonian by the coordinates, as a function of q and p.'],
  ['dH/dp', 'dH/dp', 'Gradient of the Hamiltonian by the momenta, as a function of q and p.'],
  ['mass matrix', 'mass matrix', 'd2L/dq\'dq\', by rows.'],
  ['coriolis vector', 'coriolis vector', 'C q\': velocity terms of the equations.'],
  ['coriolis matrix', 'coriolis matrix', 'Any C with the right C q\'.'],
  ['gravity vector', 'gravity vector', 'dV/dq.'],
  ['damping vector', 'damping vector', 'dD/dq\'.'],
  ['bias', 'bias', 'Coriolis, gravity and damping vectors together.'],
  ['input matrix', 'input matrix', 'How the inputs enter the generalized forces.'],
  ['right side', 'right side', 'M q\'\'.'],
  ['residual', 'residual', 'Zero along the motion.'],
  ['multiplier', 'multiplier ${1:lam}', 'Force of a constraint.'],
  ['jacobian', 'jacobian of ${1:X} by ${2:q}', 'Derivatives of X.'],
  ['linearised A', 'linearised A', 'State matrix about the point of `near`.'],
  ['linearised B', 'linearised B', 'Input matrix about the point of `near`.'],
  ['constant', 'constant', 'Does not change along the motion.'],
];
