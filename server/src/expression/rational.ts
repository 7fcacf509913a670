/** Exact rational numbers: bigint numerator and positive bigint denominator in lowest terms. Immutable. */
export class Rational {
  static readonly ZERO = new Rational(0n, 1n);
  static readonly ONE = new Rational(1n, 1n);
  static readonly MINUS_ONE = new Rational(-1n, 1n);
  static readonly HALF = new Rational(1n, 2n);

  private constructor(
    readonly numerator: bigint,
    readonly denominator: bigint,
  ) {}

  /** @throws RangeError when the denominator is zero */
  static of(numerator: bigint | number, denominator: bigint | number = 1n): Rational {
    let n = BigInt(numerator);
    let d = BigInt(denominator);
    if (d === 0n) throw new RangeError('a rational with denominator zero');
    if (d < 0n) [n, d] = [-n, -d];
    if (d === 1n) return n === 0n ? Rational.ZERO : n === 1n ? Rational.ONE : new Rational(n, d);
    const g = gcd(n < 0n ? -n : n, d);
    return new Rational(n / g, d / g);
  }

  /**
   * The exact value of a decimal literal such as `9.81`, `1e-3`, `.5`, `2.`, with `_` between digits allowed.
   * Undefined where the text is none, or its exponent is so large (over 400) that no double could hold it.
   */
  static parse(text: string): Rational | undefined {
    const m = /^([+-]?)(\d*)(?:\.(\d*))?(?:[eEdD]([+-]?\d+))?$/.exec(text.replace(/_/g, ''));
    if (!m) return undefined;
    const whole = m[2] ?? '';
    const fraction = m[3] ?? '';
    if (whole === '' && fraction === '') return undefined;
    if (whole.length + fraction.length > 1000) return undefined;
    const exponent = (m[4] === undefined ? 0 : Number(m[4])) - fraction.length;
    if (Math.abs(exponent) > 1400) return undefined;
    let n = BigInt(whole + fraction);
    if (m[1] === '-') n = -n;
    return exponent >= 0 ? Rational.of(n * 10n ** BigInt(exponent)) : Rational.of(n, 10n ** BigInt(-exponent));
  }

  /** The exact value of a finite double. */
  static fromDouble(x: number): Rational | undefined {
    if (!Number.isFinite(x)) return undefined;
    if (Number.isInteger(x)) return Rational.of(BigInt(x));
    let d = 1n;
    let y = x;
    while (!Number.isInteger(y)) {
      y *= 2;
      d *= 2n;
    }
    return Rational.of(BigInt(y), d);
  }

  add(o: Rational): Rational {
    if (this.denominator === 1n && o.denominator === 1n) return Rational.of(this.numerator + o.numerator);
    return Rational.of(this.numerator * o.denominator + o.numerator * this.denominator, this.denominator * o.denominator);
  }

  subtract(o: Rational): Rational {
    return this.add(o.negate());
  }

  multiply(o: Rational): Rational {
    return Rational.of(this.numerator * o.numerator, this.denominator * o.denominator);
  }

  /** @throws RangeError when `o` is zero */
  divide(o: Rational): Rational {
    return Rational.of(this.numerator * o.denominator, this.denominator * o.numerator);
  }

  negate(): Rational {
    return new Rational(-this.numerator, this.denominator);
  }

  /** @throws RangeError for zero to a negative power */
  power(exponent: number): Rational {
    if (exponent < 0) return Rational.ONE.divide(this.power(-exponent));
    return new Rational(this.numerator ** BigInt(exponent), this.denominator ** BigInt(exponent));
  }

  get sign(): -1 | 0 | 1 {
    return this.numerator === 0n ? 0 : this.numerator < 0n ? -1 : 1;
  }

  get isZero(): boolean {
    return this.numerator === 0n;
  }

  get isOne(): boolean {
    return this.numerator === 1n && this.denominator === 1n;
  }

  get isInteger(): boolean {
    return this.denominator === 1n;
  }

  equals(o: Rational): boolean {
    return this.numerator === o.numerator && this.denominator === o.denominator;
  }

  compare(o: Rational): number {
    const d = this.numerator * o.denominator - o.numerator * this.denominator;
    return d < 0n ? -1 : d > 0n ? 1 : 0;
  }

  /** Nearest double, within one unit in the last place even for long numerators. */
  toNumber(): number {
    const n = Number(this.numerator);
    const d = Number(this.denominator);
    if (Number.isSafeInteger(n) && Number.isSafeInteger(d)) return n / d;
    const bits = (x: bigint) => (x < 0n ? -x : x).toString(2).length;
    const shift = bits(this.denominator) - bits(this.numerator) + 64;
    const scaled =
      shift >= 0 ? (this.numerator << BigInt(shift)) / this.denominator : this.numerator / (this.denominator << BigInt(-shift));
    const high = Number(scaled);
    return shift > 1000 ? (high * 2 ** -1000) * 2 ** (1000 - shift) : high * 2 ** -shift;
  }

  /** `3`, `-7/6`. */
  toString(): string {
    return this.denominator === 1n ? `${this.numerator}` : `${this.numerator}/${this.denominator}`;
  }
}

function gcd(a: bigint, b: bigint): bigint {
  while (b !== 0n) [a, b] = [b, a % b];
  return a;
}
