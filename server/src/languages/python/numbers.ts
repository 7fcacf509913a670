import { Rational } from '../../expression/rational';

/** The exact value of a number as typed; undefined for complex numbers and what no double could hold. */
export function literalValue(text: string): Rational | undefined {
  const plain = text.replace(/_/g, '').replace(/[lL]$/, '');
  if (/[jJ]$/.test(plain)) return undefined;
  if (/^0[xX][\da-fA-F]+$|^0[bB][01]+$|^0[oO][0-7]+$/.test(plain)) return Rational.of(BigInt(plain));
  if (/^0[0-7]+$/.test(plain)) return Rational.of(BigInt(`0o${plain.slice(1)}`));
  const value = Rational.parse(plain);
  return value && (plain.length > 400 || Number.isFinite(Number(plain))) ? value : undefined;
}
