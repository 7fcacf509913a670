/** A measured number to `digits` significant digits, without trailing zeros: 4.2055, -0.5, 123456, 1.2e-7. */
export function formatNumber(x: number, digits = 5): string {
  if (Number.isNaN(x)) return 'no value';
  if (!Number.isFinite(x)) return x > 0 ? 'infinity' : '-infinity';
  if (Number.isInteger(x) && Math.abs(x) < 1e6) return String(x === 0 ? 0 : x);
  const rounded = Number(x.toPrecision(digits));
  const size = Math.abs(rounded);
  if (size >= 1e-4 && size < 1e6) return String(rounded);
  const [mantissa, exponent] = rounded.toExponential(digits - 1).split('e');
  return `${String(Number(mantissa))}e${Number(exponent)}`;
}

/** Two numbers that are not equal, with as many digits as it takes to see that. */
export function formatPair(a: number, b: number): [string, string] {
  for (let digits = 5; digits < 17; digits++) {
    const [x, y] = [formatNumber(a, digits), formatNumber(b, digits)];
    if (x !== y || a === b) return [x, y];
  }
  return [String(a), String(b)];
}

/** A value with its unit in mind: angles in radians are shown in degrees, `30°`; others as plain numbers. */
export function formatQuantity(x: number, unit?: string): string {
  if (unit !== 'rad') return formatNumber(x);
  return Number.isFinite(x) ? `${formatNumber((x * 180) / Math.PI)}°` : formatNumber(x);
}
