import { Rational } from '../../expression/rational';

/**
 * The exact value of a numeric literal as typed: decimal with exponent, hexadecimal, binary, octal (also the old `017`),
 * with `_` between digits. Undefined where no double could hold it.
 */
export function literalValue(text: string): Rational | undefined {
  const plain = text.replace(/_/g, '');
  if (plain.length > 400) return Rational.parse(plain);
  if (/^0[xX][\da-fA-F]+$|^0[bB][01]+$|^0[oO][0-7]+$/.test(plain)) return Rational.of(BigInt(plain));
  if (/^0[0-7]+$/.test(plain)) return Rational.of(BigInt(`0o${plain.slice(1)}`));
  const value = Rational.parse(plain);
  return value && Number.isFinite(Number(plain)) ? value : undefined;
}
