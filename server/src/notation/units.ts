import unit from 'unitmath/dist/UnitMath.js';
import { Rational } from '../expression/rational';
import { nearest } from './suggest';

const BASES = ['kg', 'm', 's', 'A', 'K', 'cd', 'mol', 'bit'] as const;
/** Which of the library's base dimensions each of ours is; its angles and solid angles count as numbers here. */
const FROM_LIBRARY: readonly (number | undefined)[] = [0, 1, 2, 3, 4, 5, 6, undefined, 7, undefined];

/** A physical dimension: rational powers of the base units kg, m, s, A, K, cd, mol and bit. Immutable. */
export class Dimension {
  private constructor(readonly exponents: readonly Rational[]) {}

  static readonly NONE = new Dimension(BASES.map(() => Rational.ZERO));

  /** `Dimension.of({ kg: 1, m: 2, s: -2 })` */
  static of(powers: Partial<Record<(typeof BASES)[number], number | Rational>>): Dimension {
    return new Dimension(
      BASES.map((b) => {
        const p = powers[b] ?? 0;
        return typeof p === 'number' ? (Rational.fromDouble(p) ?? Rational.ZERO) : p;
      }),
    );
  }

  multiply(o: Dimension): Dimension {
    return new Dimension(this.exponents.map((e, i) => e.add(o.exponents[i]!)));
  }

  divide(o: Dimension): Dimension {
    return new Dimension(this.exponents.map((e, i) => e.subtract(o.exponents[i]!)));
  }

  power(exponent: Rational): Dimension {
    return new Dimension(this.exponents.map((e) => e.multiply(exponent)));
  }

  equals(o: Dimension): boolean {
    return this.exponents.every((e, i) => e.equals(o.exponents[i]!));
  }

  involves(base: (typeof BASES)[number]): boolean {
    return !this.exponents[BASES.indexOf(base)]!.isZero;
  }

  get isNone(): boolean {
    return this.exponents.every((e) => e.isZero);
  }

  /** In base units: `kg m^2/s^2`, `1/s`, `1`. */
  toString(): string {
    const show = (negative: boolean): string[] =>
      BASES.flatMap((base, i) => {
        const e = this.exponents[i]!;
        if (e.isZero || e.sign < 0 !== negative) return [];
        const size = negative ? e.negate() : e;
        return [size.isOne ? base : size.isInteger ? `${base}^${size}` : `${base}^(${size})`];
      });
    const above = show(false);
    const below = show(true);
    const top = above.length ? above.join(' ') : '1';
    if (below.length === 0) return top;
    return `${top}/${below.length > 1 ? `(${below.join(' ')})` : below[0]}`;
  }

  /** For messages, with the usual name where there is one: `in J (kg m^2/s^2)`, `without a unit`. */
  describe(): string {
    if (this.isNone) return 'without a unit';
    const named = NAMED.find(([, dimension]) => dimension.equals(this));
    return named ? `in ${named[0]} (${this})` : `in ${this}`;
  }
}

const joule = Dimension.of({ kg: 1, m: 2, s: -2 });

/** Dimensions that formulas of mechanics are checked against. */
export const DIMENSIONS = {
  none: Dimension.NONE,
  time: Dimension.of({ s: 1 }),
  length: Dimension.of({ m: 1 }),
  mass: Dimension.of({ kg: 1 }),
  energy: joule,
  power: Dimension.of({ kg: 1, m: 2, s: -3 }),
  force: Dimension.of({ kg: 1, m: 1, s: -2 }),
  acceleration: Dimension.of({ m: 1, s: -2 }),
  inertia: Dimension.of({ kg: 1, m: 2 }),
} as const;

const NAMED: readonly (readonly [string, Dimension])[] = [
  ['J', joule],
  ['N', DIMENSIONS.force],
  ['W', DIMENSIONS.power],
  ['N/m', Dimension.of({ kg: 1, s: -2 })],
  ['N s/m', Dimension.of({ kg: 1, s: -1 })],
  ['V', Dimension.of({ kg: 1, m: 2, s: -3, A: -1 })],
  ['C', Dimension.of({ A: 1, s: 1 })],
  ['T', Dimension.of({ kg: 1, s: -2, A: -1 })],
  ['H', Dimension.of({ kg: 1, m: 2, s: -2, A: -2 })],
  ['F', Dimension.of({ kg: -1, m: -2, s: 4, A: 2 })],
  ['ohm', Dimension.of({ kg: 1, m: 2, s: -3, A: -2 })],
];

/** Units that engineers write and the library does not know, or reads as something else. */
const OWN: Readonly<Record<string, Dimension>> = (() => {
  const perSecond = Dimension.of({ s: -1 });
  const table: Record<string, Dimension> = {
    rpm: perSecond, rps: perSecond, Hz: perSecond, rev: Dimension.NONE, turn: Dimension.NONE, '%': Dimension.NONE, percent: Dimension.NONE,
    rad: Dimension.NONE, radian: Dimension.NONE, radians: Dimension.NONE, deg: Dimension.NONE, degree: Dimension.NONE, degrees: Dimension.NONE,
    '°': Dimension.NONE, mrad: Dimension.NONE, sr: Dimension.NONE, '-': Dimension.NONE, none: Dimension.NONE, dimensionless: Dimension.NONE,
    sec: DIMENSIONS.time, secs: DIMENSIONS.time, seconds: DIMENSIONS.time, min: DIMENSIONS.time, hr: DIMENSIONS.time,
    metre: DIMENSIONS.length, metres: DIMENSIONS.length, meters: DIMENSIONS.length, 'in': DIMENSIONS.length, um: DIMENSIONS.length, 'Å': DIMENSIONS.length,
    kgf: DIMENSIONS.force, kp: DIMENSIONS.force, pound: DIMENSIONS.mass, lbm: DIMENSIONS.mass, lb: DIMENSIONS.mass, slug: DIMENSIONS.mass,
    kph: Dimension.of({ m: 1, s: -1 }), mph: Dimension.of({ m: 1, s: -1 }), kmh: Dimension.of({ m: 1, s: -1 }), kn: Dimension.of({ m: 1, s: -1 }), knot: Dimension.of({ m: 1, s: -1 }),
    Nm: joule, Nmm: joule, kNm: joule, mNm: joule, Ns: Dimension.of({ kg: 1, m: 1, s: -1 }), Nms: Dimension.of({ kg: 1, m: 2, s: -1 }),
    'Ω': Dimension.of({ kg: 1, m: 2, s: -3, A: -2 }), PS: DIMENSIONS.power, cal: joule, kcal: joule, mps: Dimension.of({ m: 1, s: -1 }), St: Dimension.of({ m: 2, s: -1 }),
    P: Dimension.of({ kg: 1, m: -1, s: -1 }), cP: Dimension.of({ kg: 1, m: -1, s: -1 }), Gal: DIMENSIONS.acceleration, g0: DIMENSIONS.acceleration,
    '°C': Dimension.of({ K: 1 }), '°F': Dimension.of({ K: 1 }), '°K': Dimension.of({ K: 1 }), au: DIMENSIONS.length, AU: DIMENSIONS.length, gauss: Dimension.of({ kg: 1, s: -2, A: -1 }), bps: Dimension.of({ bit: 1, s: -1 }),
  };
  return Object.assign(Object.create(null) as Record<string, Dimension>, table);
})();

/** Unit names for completion, the common ones of mechanics first. */
export const UNIT_NAMES: readonly string[] = [
  ...('m kg s rad N J W Pa Hz m/s m/s^2 rad/s N/m N s/m N m N m/rad N m s/rad kg m^2 kg/m kg/m^3 1 deg rpm mm cm km g t ms min h kN kJ kW MPa bar A V ohm H F T C K'.match(/(?:N m s\/rad|N m\/rad|N s\/m|N m|kg m\^2|\S+)/g) ?? []),
];

const SUPERSCRIPTS: Readonly<Record<string, string>> = {
  '⁰': '0', '¹': '1', '²': '2', '³': '3', '⁴': '4', '⁵': '5', '⁶': '6', '⁷': '7', '⁸': '8', '⁹': '9', '⁻': '-', '⁺': '',
};

const known = new Map<string, Dimension | null>();

/** The dimension of one unit name, prefixes included; undefined where there is none. */
function unitNamed(name: string): Dimension | undefined {
  const own = OWN[name];
  if (own) return own;
  let found = known.get(name);
  if (found === undefined) {
    try {
      const { dimension } = unit(name);
      const powers = BASES.map(() => Rational.ZERO);
      dimension.forEach((e, i) => {
        const base = FROM_LIBRARY[i];
        if (base !== undefined) powers[base] = Rational.fromDouble(e) ?? Rational.ZERO;
      });
      found = Dimension.of(Object.fromEntries(BASES.map((b, i) => [b, powers[i]!])));
    } catch {
      found = null;
    }
    if (known.size < 2000) known.set(name, found);
  }
  return found ?? undefined;
}

/**
 * The dimension of a unit as typed between the brackets: `N s/m`, `kg·m²`, `m s^-2`, `N m/(rad/s)`, `1`. A `/` divides by what
 * follows it up to the next `*` or `/`, and by a whole run of factors set side by side: `J/kg K` is J/(kg K).
 */
export function parseUnit(text: string): { dimension: Dimension } | { error: string } {
  if (text.length > 200) return { error: 'this unit is too long' };
  const plain = [...text.normalize('NFC')]
    .map((c) => ('·×⋅∙•'.includes(c) ? '*' : c === '−' || c === '–' ? '-' : c === '÷' || c === '∕' || c === '⁄' ? '/' : c === 'µ' || c === 'μ' ? 'u' : c))
    .join('')
    .replace(/[⁺⁻⁰¹²³⁴-⁹]+/g, (s) => `^${[...s].map((c) => SUPERSCRIPTS[c] ?? c).join('')}`)
    .replace(/\*\*/g, '^')
    .trim();
  if (plain === '') return { error: 'the unit is missing: `[1]` is dimensionless' };
  if (plain === '-' || plain === '--') return { dimension: Dimension.NONE };
  const tokens = plain.match(/[\p{L}°%Ω_$][\p{L}\p{M}\d_°Ω]*|\d+(?:\.\d+)?|[*/^()-]|\S/gu) ?? [];
  return new UnitReader(tokens, text).whole();
}

class UnitReader {
  private at = 0;
  private error: string | undefined;

  constructor(
    private readonly tokens: readonly string[],
    private readonly text: string,
  ) {}

  whole(): { dimension: Dimension } | { error: string } {
    const dimension = this.product(0);
    if (!this.error && this.at < this.tokens.length) this.fail(`\`${this.tokens[this.at]}\` is not expected in the unit \`${this.text}\``);
    return this.error !== undefined ? { error: this.error } : { dimension };
  }

  private fail(message: string): Dimension {
    this.error ??= message;
    this.at = this.tokens.length;
    return Dimension.NONE;
  }

  private product(depth: number): Dimension {
    let result = this.run(depth);
    for (;;) {
      if (this.tokens[this.at] === '*') {
        this.at++;
        result = result.multiply(this.run(depth));
      } else if (this.tokens[this.at] === '/') {
        this.at++;
        result = result.divide(this.run(depth));
      } else return result;
    }
  }

  /** Factors side by side. */
  private run(depth: number): Dimension {
    let result = this.factor(depth);
    while (this.at < this.tokens.length && !'*/)^'.includes(this.tokens[this.at]!)) result = result.multiply(this.factor(depth));
    return result;
  }

  private factor(depth: number): Dimension {
    const token = this.tokens[this.at];
    if (token === undefined) return this.fail(this.error ?? `the unit \`${this.text}\` ends where another factor is expected`);
    let base: Dimension;
    this.at++;
    if (token === '(') {
      if (depth > 20) return this.fail('too many brackets in this unit');
      base = this.product(depth + 1);
      if (this.tokens[this.at] === ')') this.at++;
      else if (!this.error) return this.fail(`a bracket in the unit \`${this.text}\` is not closed`);
    } else if (/^\d/.test(token)) {
      if (token !== '1' && this.tokens[this.at] !== '^') {
        return this.fail(token === '0' ? '`[0]` is no unit: `[1]` is dimensionless' : `a unit has no number in it: \`${this.text}\`; \`[1]\` is dimensionless`);
      }
      base = Dimension.NONE;
    } else {
      const named = unitNamed(token) ?? this.split(token);
      if (!named) return this.fail(unknownUnit(token));
      base = named;
    }
    if (this.tokens[this.at] !== '^') return base;
    this.at++;
    const exponent = this.exponent();
    return exponent ? base.power(exponent) : this.fail(`a number is expected after \`^\` in the unit \`${this.text}\``);
  }

  /** `m2`, `s3`: a power without its mark. */
  private split(token: string): Dimension | undefined {
    const m = /^(\D+)([2-9])$/u.exec(token);
    const base = m && unitNamed(m[1]!);
    return base ? base.power(Rational.of(Number(m[2]))) : undefined;
  }

  private exponent(): Rational | undefined {
    if (this.tokens[this.at] === '(') {
      this.at++;
      const top = this.exponent();
      let result = top;
      if (top && this.tokens[this.at] === '/') {
        this.at++;
        const bottom = this.exponent();
        result = bottom && !bottom.isZero ? top.divide(bottom) : undefined;
      }
      if (this.tokens[this.at] !== ')') return undefined;
      this.at++;
      return result;
    }
    const negative = this.tokens[this.at] === '-';
    if (negative) this.at++;
    const token = this.tokens[this.at];
    const value = token !== undefined && /^\d{1,3}(?:\.\d{1,6})?$/.test(token) ? Rational.parse(token) : undefined;
    if (!value) return undefined;
    this.at++;
    return negative ? value.negate() : value;
  }
}

const SUGGESTED = 'm kg s rad N J W Pa Hz deg rpm mm cm km g t ms min h kN kJ kW MPa bar A V ohm K lb ft newton joule meter second kilogram radian degree watt pascal volt ampere coulomb kelvin'.split(' ');

function unknownUnit(token: string): string {
  const near = nearest(token, SUGGESTED);
  const lower = SUGGESTED.find((u) => u.toLowerCase() === token.toLowerCase() && u !== token);
  const hint = lower ?? near;
  return `unknown unit \`${token}\`${hint ? `: did you mean \`${hint}\`?` : '; products are written with a space: `N m`, `kg m^2`'}`;
}
