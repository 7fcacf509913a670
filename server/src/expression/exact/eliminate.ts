import { inverse, multiply, subtract } from './field';

/**
 * Solves `a` x = b in place, by elimination modulo the prime.
 * @param a rows of n entries and their right side, n (n + 1) residues
 * @param x takes the solution, NaN where the matrix is singular or an entry has no value
 */
export function eliminate(a: Float64Array, n: number, x: Float64Array): void {
  const width = n + 1;
  x.fill(NaN);
  for (let k = 0; k < n; k++) {
    let pivot = k;
    while (pivot < n && a[pivot * width + k] === 0) pivot++;
    if (pivot === n) return;
    const over = inverse(a[pivot * width + k]!);
    if (Number.isNaN(over)) return;
    for (let j = k; j < width; j++) {
      const t = a[pivot * width + j]!;
      a[pivot * width + j] = a[k * width + j]!;
      a[k * width + j] = multiply(t, over);
    }
    for (let i = k + 1; i < n; i++) {
      const f = a[i * width + k]!;
      if (f === 0) continue;
      for (let j = k + 1; j < width; j++) a[i * width + j] = subtract(a[i * width + j]!, multiply(f, a[k * width + j]!));
    }
  }
  for (let i = n - 1; i >= 0; i--) {
    let value = a[i * width + n]!;
    for (let j = i + 1; j < n; j++) value = subtract(value, multiply(a[i * width + j]!, x[j]!));
    x[i] = value;
  }
}
