import type { Rational } from '../rational';

/** Longer fractions are shown as the nearest double instead. */
const LONGEST = 12;

/** Numerator over denominator, or a decimal where that is exact and shorter to read. */
export type WrittenNumber =
  | { readonly kind: 'whole' | 'decimal'; readonly text: string }
  | { readonly kind: 'fraction'; readonly top: string; readonly bottom: string };

/** A rational that is not negative, as people write it: 3, 9.81, 1/2; a literal's double comes back as its literal. */
export function writeRational(r: Rational): WrittenNumber {
  if (r.isInteger) {
    const digits = r.numerator.toString();
    return digits.length <= 21 ? { kind: 'whole', text: digits } : { kind: 'decimal', text: exponentText(r.toNumber()) };
  }
  const decimals = decimalsOf(r.numerator, r.denominator);
  if (decimals !== undefined) return { kind: 'decimal', text: decimalText(r.numerator, r.denominator, decimals) };
  const top = r.numerator.toString();
  const bottom = r.denominator.toString();
  if (top.length + bottom.length <= LONGEST) return { kind: 'fraction', top, bottom };
  return { kind: 'decimal', text: exponentText(r.toNumber()) };
}

function exponentText(x: number): string {
  return String(x).replace('e+', 'e');
}

/** How many decimals make the fraction exact, where a decimal reads better: 9.8 and 0.35, but 2/5, 1/12 and 3/16. */
function decimalsOf(numerator: bigint, denominator: bigint): number | undefined {
  const binary = (denominator & (denominator - 1n)) === 0n;
  if (binary ? denominator <= 64n && numerator < 100n : denominator < 10n && numerator < 10n) return undefined;
  let power = 10n;
  for (let n = 1; n <= LONGEST; n++, power *= 10n) if (power % denominator === 0n) return n;
  return undefined;
}

function decimalText(numerator: bigint, denominator: bigint, decimals: number): string {
  const digits = ((numerator * 10n ** BigInt(decimals)) / denominator).toString().padStart(decimals + 1, '0');
  return `${digits.slice(0, -decimals)}.${digits.slice(-decimals)}`;
}

export { formatNumber, formatPair, formatQuantity } from '../../text/number';
