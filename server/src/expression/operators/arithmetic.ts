import type { Expr } from '../node';
import { Rational } from '../rational';
import { ULP, type Operator } from './operator';

/**
 * Running error analysis: N. J. Higham, Accuracy and Stability of Numerical Algorithms, section 3.3. Each bound is of
 * first order in the unit roundoff, with products of bounds kept.
 */

export const number: Operator = {
  evaluate(v, e, out, _args, n, data) {
    const r = data as Rational;
    const x = r.toNumber();
    const exact = Rational.fromDouble(x)?.equals(r) ?? false;
    v.fill(x, out, out + n);
    e.fill(exact ? 0 : Math.abs(x) * ULP, out, out + n);
  },
};

export const pi: Operator = {
  evaluate(v, e, out, _args, n) {
    v.fill(Math.PI, out, out + n);
    e.fill(Math.PI * ULP, out, out + n);
  },
};

export const nan: Operator = {
  evaluate(v, e, out, _args, n) {
    v.fill(NaN, out, out + n);
    e.fill(0, out, out + n);
  },
};

export const sum: Operator = {
  evaluate(v, e, out, args, n) {
    const first = args[0]!;
    const second = args[1]!;
    for (let s = 0; s < n; s++) {
      const x = v[first + s]! + v[second + s]!;
      v[out + s] = x;
      e[out + s] = e[first + s]! + e[second + s]! + ULP * Math.abs(x);
    }
    for (let k = 2; k < args.length; k++) {
      const a = args[k]!;
      for (let s = 0; s < n; s++) {
        const x = v[out + s]! + v[a + s]!;
        v[out + s] = x;
        e[out + s] = e[out + s]! + e[a + s]! + ULP * Math.abs(x);
      }
    }
  },
  partial: (graph) => graph.one,
};

export const product: Operator = {
  evaluate(v, e, out, args, n) {
    multiplyInto(v, e, out, args[0]!, args[1]!, n);
    for (let k = 2; k < args.length; k++) multiplyInto(v, e, out, out, args[k]!, n);
  },
  partial: (graph, node, k) => graph.product(node.args.filter((_, i) => i !== k)),
};

function multiplyInto(v: Float64Array, e: Float64Array, out: number, a: number, b: number, n: number): void {
  for (let s = 0; s < n; s++) {
    const x = v[a + s]!;
    const y = v[b + s]!;
    const ex = e[a + s]!;
    const ey = e[b + s]!;
    const z = x * y;
    v[out + s] = z;
    e[out + s] = Math.abs(x) * ey + Math.abs(y) * ex + ex * ey + ULP * Math.abs(z);
  }
}

export const power: Operator = {
  evaluate(v, e, out, args, n) {
    const a = args[0]!;
    const b = args[1]!;
    const y = v[b]!;
    let same = true;
    for (let s = 1; s < n && same; s++) same = v[b + s] === y;
    for (let s = 0; s < n; s++) if (e[b + s]! > 0 && !isSmallInteger(v[b + s]!)) same = false;
    if (same && y === 2) {
      multiplyInto(v, e, out, a, a, n);
    } else if (same && y === -1) {
      for (let s = 0; s < n; s++) {
        const x = Math.abs(v[a + s]!);
        const ex = e[a + s]!;
        const z = 1 / v[a + s]!;
        v[out + s] = z;
        e[out + s] = ex < x ? ex / (x * (x - ex)) + ULP * Math.abs(z) : Infinity;
      }
    } else if (same && y === 0.5) {
      for (let s = 0; s < n; s++) {
        const x = v[a + s]!;
        const ex = e[a + s]!;
        const z = Math.sqrt(x);
        v[out + s] = z;
        e[out + s] = x > 2 * ex ? ex / (2 * Math.sqrt(x - ex)) + ULP * z : Math.sqrt(Math.max(0, x) + ex);
      }
    } else {
      for (let s = 0; s < n; s++) generalPower(v, e, out + s, a + s, b + s);
    }
  },
  partial(graph, node, k) {
    const [base, exponent] = node.args as [Expr, Expr];
    if (k === 0) return graph.product([exponent, graph.power(base, graph.subtract(exponent, graph.one))]);
    return graph.product([node, graph.apply('log', [base])]);
  },
};

function generalPower(v: Float64Array, e: Float64Array, out: number, a: number, b: number): void {
  const x = v[a]!;
  const y = v[b]!;
  const z = Math.pow(x, y);
  const size = Math.abs(x);
  const ex = e[a]!;
  v[out] = z;
  if (ex === 0 && e[b] === 0) e[out] = 4 * ULP * Math.abs(z);
  else if (isSmallInteger(y) && y > 0) e[out] = y * Math.pow(size + ex, y - 1) * ex + 4 * ULP * Math.abs(z);
  else if (size <= 2 * ex) e[out] = Infinity;
  else {
    const relative = Math.abs(y) * (ex / (size - ex)) + (e[b] === 0 ? 0 : Math.abs(Math.log(size)) * e[b]!);
    e[out] = Math.abs(z) * Math.expm1(Math.min(relative, 50)) + 4 * ULP * Math.abs(z);
  }
}

function isSmallInteger(x: number): boolean {
  return Number.isInteger(x) && Math.abs(x) < 1000;
}
