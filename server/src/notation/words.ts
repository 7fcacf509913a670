/** A statement's first word: what it is for, and a snippet with `$1`, `$2` as places to fill in. */
export interface StatementWord {
  readonly word: string;
  readonly description: string;
  readonly snippet: string;
}

export const STATEMENT_WORDS: readonly StatementWord[] = [
  { word: 'coordinates', description: 'Generalized coordinates with their units; words after two spaces state the convention.', snippet: 'coordinates ${1:x} [${2:m}]' },
  { word: 'parameters', description: 'Constants with unit and sign: `m [kg] > 0`.', snippet: 'parameters ${1:m} [${2:kg}] > 0' },
  { word: 'inputs', description: 'Prescribed functions of time: forces, motor torques, moving pivots.', snippet: 'inputs ${1:F} [${2:N}]' },
  { word: 'time', description: 'The name of time, where it is not `t`.', snippet: 'time ${1:t}' },
  { word: 'where', description: 'Shorthand for later formulas; `P = (x, y)` names a position and P\' its velocity.', snippet: 'where ${1:P} = (${2:x}, ${3:y})' },
  { word: 'point', description: 'A point mass: its T, and its V under gravity, follow.', snippet: 'point ${1:name}: mass ${2:m} at (${3:x}, ${4:y})' },
  { word: 'body', description: 'A rigid body: mass, inertia about its centre, centre and angle.', snippet: 'body ${1:name}: mass ${2:m}, inertia ${3:J}, centre (${4:x}, ${5:y}), angle ${6:th}' },
  { word: 'gravity', description: 'The acceleration of gravity as a vector.', snippet: 'gravity (0, -${1:g})' },
  { word: 'spring', description: 'A linear spring between two points.', snippet: 'spring ${1:k}, rest ${2:L0} between ${3:A} and ${4:B}' },
  { word: 'damper', description: 'A linear damper between two points.', snippet: 'damper ${1:c} between ${2:A} and ${3:B}' },
  { word: 'T', description: 'Kinetic energy.', snippet: 'T = ${1}' },
  { word: 'V', description: 'Potential energy.', snippet: 'V = ${1}' },
  { word: 'L', description: 'The Lagrangian itself, T - V.', snippet: 'L = ${1}' },
  { word: 'D', description: 'Rayleigh dissipation function: half the power lost to linear damping.', snippet: "D = 1/2*${1:c}*${2:x}'^2" },
  { word: 'Q', description: 'Generalized force along a coordinate, beyond V and D.', snippet: 'Q[${1:x}] = ${2:F}' },
  { word: 'force', description: 'A force applied at a point.', snippet: 'force (${1:F}, 0) at ${2:P}' },
  { word: 'torque', description: 'A torque applied on an angle.', snippet: 'torque ${1:tau} on ${2:th}' },
  { word: 'constraint', description: 'An equation the motion obeys; `with` names its multiplier.', snippet: 'constraint ${1:A} = ${2:B} with ${3:lam}' },
  { word: 'ranges', description: 'Where the code is meant to hold.', snippet: 'ranges ${1:th} in [${2:-pi}, ${3:pi}]' },
  { word: 'near', description: 'The code implements the expansion about this point.', snippet: 'near ${1:th} = 0, order 1' },
  { word: 'assume', description: 'Which branch of the code is meant; `within limits` means that every clip lets its argument through.', snippet: 'assume ${1:condition}' },
  { word: 'reads', description: "What the code's expressions mean: code on the left, physics on the right.", snippet: 'reads ${1:code} = ${2:formula}' },
  { word: 'checks', description: 'The claims: an output of the code on the left, a derived quantity on the right.', snippet: "checks ${1:return} = ${2:x''}" },
  { word: 'defines', description: 'The function below is the declaration of this energy.', snippet: 'defines ${1:T}' },
];

/** One coordinate reads better in the singular. */
export const SINGULARS: ReadonlyMap<string, string> = new Map([
  ['coordinate', 'coordinates'],
  ['parameter', 'parameters'],
  ['input', 'inputs'],
  ['range', 'ranges'],
]);

/** Words that begin a statement and are long enough to be misspelt recognisably. */
export const LONG_WORDS: ReadonlySet<string> = new Set(STATEMENT_WORDS.map((w) => w.word).filter((w) => w.length >= 4));

export const ENERGY_WORDS: ReadonlySet<string> = new Set(['T', 'V', 'L', 'D']);

/** Words of a statement that parameters are often named by as well: `point bob: mass mass at (x, y)`. */
export const NOUNS: ReadonlySet<string> = new Set('mass inertia centre center angle rotation rest length stiffness coefficient'.split(' '));
