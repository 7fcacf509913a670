/** What names in dynamics code usually mean (common practice): which is whose velocity, and the units of parameters. */

const GREEK_VELOCITIES: readonly (readonly [RegExp, RegExp])[] = [
  [/^(?:omega|om|w|angularVelocity|rate)(\d*)$/i, /^(?:theta|th|phi|angle|alpha|a|psi)(\d*)$/i],
  [/^(?:v|vel|speed|velocity)(\d*)$/i, /^(?:x|pos|position|s|q|z|y|h)(\d*)$/i],
];

/** True where `velocity` is a usual spelling of the time derivative of `name`. */
export function isVelocityOf(velocity: string, name: string): boolean {
  const v = velocity.replace(/_$/, '');
  const index = /^(.*?)_?(\d+)$/.exec(name);
  const forms = [`${name}dot`, `${name}_dot`, `${name}Dot`, `d${name}`, `d_${name}`, `${name}d`, `${name}_d`, `dot_${name}`, `${name}_v`, `${name}Vel`, `${name}_vel`, `v${name}`, `v_${name}`, `${name}Velocity`, `${name}Speed`, `d${name}dt`, `d${name}_dt`];
  if (index) forms.push(`${index[1]}dot${index[2]}`, `${index[1]}Dot${index[2]}`, `d${index[1]}${index[2]}`, `${index[1]}d${index[2]}`, `v${index[2]}`);
  if (forms.includes(v)) return true;
  return GREEK_VELOCITIES.some(([one, other]) => {
    const a = one.exec(v);
    const b = other.exec(name);
    return a !== null && b !== null && a[1] === b[1];
  });
}

/** True for a name that is used for a second derivative or its result. */
export function isAcceleration(name: string): boolean {
  return /(?:ddot|DDot|_dd|dd|acc|acceleration|alpha|Acc|Acceleration|_a)\d*$/.test(name) || /^(?:dd[a-z]|a[xyz]?\d*$|acc|alpha)/i.test(name);
}

export interface Guess {
  readonly kind: 'parameter' | 'input' | 'time';
  /** With the sign, as a declaration says it: `[kg] > 0`. */
  readonly unit: string;
}

const GUESSES: readonly (readonly [RegExp, Guess])[] = [
  [/^(?:t|time)$/, { kind: 'time', unit: '' }],
  [/^(?:h|dt|step|timestep|timeStep|deltaT)$/, { kind: 'parameter', unit: '[s] > 0' }],
  [/^(?:tau|torque|moment)\w*$/i, { kind: 'input', unit: '[N m]' }],
  [/^(?:F|f|force|thrust|push)\d*$/, { kind: 'input', unit: '[N]' }],
  [/^(?:u|input|control|action)\d*$/, { kind: 'input', unit: '' }],
  [/^(?:g|gravity|grav|G0)$/, { kind: 'parameter', unit: '[m/s^2] > 0' }],
  [/^(?:m|M|mass)\w*$/, { kind: 'parameter', unit: '[kg] > 0' }],
  [/^(?:I|J|inertia)\w*$/, { kind: 'parameter', unit: '[kg m^2] > 0' }],
  [/^(?:l|L|len|length|r|R|radius)\w*$/, { kind: 'parameter', unit: '[m] > 0' }],
  [/^(?:k|stiffness|spring)\w*$/i, { kind: 'parameter', unit: '> 0' }],
  [/^(?:c|b|d|damping|friction|drag|mu)\w*$/, { kind: 'parameter', unit: '>= 0' }],
];

export function guessOf(name: string): Guess {
  return GUESSES.find(([pattern]) => pattern.test(name))?.[1] ?? { kind: 'parameter', unit: '' };
}

/** What an energy function's name says it gives. */
export function energyOf(name: string): 'T' | 'V' | 'L' | 'E' | undefined {
  const words = name.replace(/([a-z])([A-Z])/g, '$1 $2').toLowerCase();
  if (/kinetic|^ke$/.test(words)) return 'T';
  if (/potential|^pe$/.test(words)) return 'V';
  if (/lagrangian/.test(words)) return 'L';
  return /energy|hamiltonian/.test(words) ? 'E' : undefined;
}
