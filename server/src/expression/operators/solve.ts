import { ULP, type Operator } from './operator';

/**
 * Linear systems, solved sample by sample with partial pivoting. The bound follows from the perturbed system
 * (A + dA)(x + dx) = b + db: |dx| <= |A^-1| (|dA||x| + |db| + n ulp |A||x|), N. J. Higham, Accuracy and Stability of
 * Numerical Algorithms, section 7.2, with the inverse computed. A singular matrix gives NaN: the point does not vote.
 */
export const solve: Operator = {
  evaluate(v, e, out, args, n, data) {
    const size = data as number;
    const work = new Float64Array(size * 2 * size);
    const x = new Float64Array(size);
    const bound = new Float64Array(size);
    for (let s = 0; s < n; s++) {
      const a = (i: number, j: number) => args[i * size + j]! + s;
      const b = (i: number) => args[size * size + i]! + s;
      const regular = invert(work, size, (i, j) => v[a(i, j)]!);
      for (let i = 0; i < size; i++) {
        let xi = 0;
        for (let j = 0; j < size; j++) xi += work[i * 2 * size + size + j]! * v[b(j)]!;
        x[i] = regular ? xi : NaN;
      }
      for (let i = 0; i < size; i++) {
        let doubt = e[b(i)]! + ULP * Math.abs(v[b(i)]!);
        for (let j = 0; j < size; j++) {
          doubt += (e[a(i, j)]! + (size + 2) * ULP * Math.abs(v[a(i, j)]!)) * Math.abs(x[j]!);
        }
        bound[i] = doubt;
      }
      for (let i = 0; i < size; i++) {
        let error = ULP * Math.abs(x[i]!);
        for (let j = 0; j < size; j++) error += Math.abs(work[i * 2 * size + size + j]!) * 2 * bound[j]!;
        v[out + i * n + s] = x[i]!;
        e[out + i * n + s] = error;
      }
    }
  },
};

/** Gauss-Jordan with partial pivoting; the inverse ends in the right half of `work`. False when singular. */
function invert(work: Float64Array, size: number, entry: (i: number, j: number) => number): boolean {
  const width = 2 * size;
  for (let i = 0; i < size; i++) {
    for (let j = 0; j < size; j++) {
      work[i * width + j] = entry(i, j);
      work[i * width + size + j] = i === j ? 1 : 0;
    }
  }
  for (let column = 0; column < size; column++) {
    let pivot = column;
    for (let i = column + 1; i < size; i++) {
      if (Math.abs(work[i * width + column]!) > Math.abs(work[pivot * width + column]!)) pivot = i;
    }
    const head = work[pivot * width + column]!;
    if (!(Math.abs(head) > 0) || !Number.isFinite(head)) return false;
    if (pivot !== column) {
      for (let j = 0; j < width; j++) {
        const t = work[pivot * width + j]!;
        work[pivot * width + j] = work[column * width + j]!;
        work[column * width + j] = t;
      }
    }
    for (let j = 0; j < width; j++) work[column * width + j] = work[column * width + j]! / head;
    for (let i = 0; i < size; i++) {
      const factor = work[i * width + column]!;
      if (i === column || factor === 0) continue;
      for (let j = column; j < width; j++) work[i * width + j] = work[i * width + j]! - factor * work[column * width + j]!;
    }
  }
  return true;
}
