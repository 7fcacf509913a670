import { Rational } from '../rational';
import type { Factor, Monomial } from './polynomial';

/**
 * The largest monomial that divides all terms: greatest common divisor of the coefficients, smallest positive powers of
 * what all share. Its sign is plus.
 * @param may which factors may be taken
 */
export function takeContent(terms: readonly Monomial[], may: (f: Factor) => boolean = () => true): Monomial {
  const c = terms.map((m) => m.coefficient).reduce(commonDivisor);
  let shared: Factor[] = terms[0]!.factors.filter(may);
  for (const m of terms) {
    shared = shared.flatMap((f) => {
      const other = m.factors.find((g) => g.base === f.base)?.exponent ?? Rational.ZERO;
      const exponent = other.compare(f.exponent) < 0 ? other : f.exponent;
      return exponent.sign > 0 ? [{ base: f.base, exponent }] : [];
    });
  }
  return { coefficient: c.sign < 0 ? c.negate() : c, factors: shared };
}

function commonDivisor(a: Rational, b: Rational): Rational {
  return Rational.of(
    gcd(a.numerator, b.numerator),
    (a.denominator / gcd(a.denominator, b.denominator)) * b.denominator,
  );
}

function gcd(a: bigint, b: bigint): bigint {
  while (b !== 0n) [a, b] = [b, a % b];
  return a < 0n ? -a : a;
}
