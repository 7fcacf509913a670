import type { Expr } from '../node';
import { Rational } from '../rational';

export interface Factor {
  readonly base: Expr;
  /** Never zero. */
  readonly exponent: Rational;
}

export interface Monomial {
  /** Never zero. */
  readonly coefficient: Rational;
  /** Sorted by the base's id, one entry per base. */
  readonly factors: readonly Factor[];
}

/** A sum of monomials with different factors. */
export type Polynomial = readonly Monomial[];

export const UNIT: Monomial = { coefficient: Rational.ONE, factors: [] };

/** What two monomials must share to be collected into one. */
export function factorKey(factors: readonly Factor[]): string {
  let key = '';
  for (const f of factors) key += f.exponent.isOne ? `${f.base.id} ` : `${f.base.id}^${f.exponent} `;
  return key;
}

export function constant(value: Rational): Polynomial {
  return value.isZero ? [] : [{ coefficient: value, factors: [] }];
}

export function atom(base: Expr, exponent = Rational.ONE): Polynomial {
  return [{ coefficient: Rational.ONE, factors: [{ base, exponent }] }];
}

export function constantValue(p: Polynomial): Rational | undefined {
  if (p.length === 0) return Rational.ZERO;
  return p.length === 1 && p[0]!.factors.length === 0 ? p[0]!.coefficient : undefined;
}

/** The factors of a product: exponents of equal bases add, and those that come to zero go. */
export function mergeFactors(a: readonly Factor[], b: readonly Factor[]): Factor[] {
  const out: Factor[] = [];
  let i = 0;
  let j = 0;
  while (i < a.length && j < b.length) {
    const x = a[i]!;
    const y = b[j]!;
    if (x.base === y.base) {
      const exponent = x.exponent.add(y.exponent);
      if (!exponent.isZero) out.push({ base: x.base, exponent });
      i++;
      j++;
    } else if (x.base.id < y.base.id) {
      out.push(x);
      i++;
    } else {
      out.push(y);
      j++;
    }
  }
  while (i < a.length) out.push(a[i++]!);
  while (j < b.length) out.push(b[j++]!);
  return out;
}

export function timesMonomial(a: Monomial, b: Monomial): Monomial {
  return { coefficient: a.coefficient.multiply(b.coefficient), factors: mergeFactors(a.factors, b.factors) };
}

export function inverse(a: Monomial): Monomial {
  return {
    coefficient: Rational.ONE.divide(a.coefficient),
    factors: a.factors.map((f) => ({ base: f.base, exponent: f.exponent.negate() })),
  };
}

export function negate(p: Polynomial): Polynomial {
  return p.map((m) => ({ coefficient: m.coefficient.negate(), factors: m.factors }));
}

/** Collects monomials as they come; what cancels goes. */
export class Collector {
  private readonly table = new Map<string, Monomial>();

  constructor(terms: Iterable<Monomial> = []) {
    for (const m of terms) this.put(m);
  }

  put(m: Monomial, key = factorKey(m.factors)): void {
    const before = this.table.get(key);
    if (!before) {
      if (!m.coefficient.isZero) this.table.set(key, m);
      return;
    }
    const coefficient = before.coefficient.add(m.coefficient);
    if (coefficient.isZero) this.table.delete(key);
    else this.table.set(key, { coefficient, factors: before.factors });
  }

  get(factors: readonly Factor[]): Monomial | undefined {
    return this.table.get(factorKey(factors));
  }

  remove(m: Monomial): void {
    this.table.delete(factorKey(m.factors));
  }

  has(m: Monomial): boolean {
    return this.table.get(factorKey(m.factors)) === m;
  }

  get size(): number {
    return this.table.size;
  }

  terms(): Monomial[] {
    return [...this.table.values()];
  }
}

/** A fixed order of terms, whatever order they were collected in. */
export function sorted(p: Polynomial): Monomial[] {
  return [...p].sort((a, b) => {
    for (let i = 0; i < a.factors.length && i < b.factors.length; i++) {
      const x = a.factors[i]!;
      const y = b.factors[i]!;
      if (x.base !== y.base) return x.base.id - y.base.id;
      const c = y.exponent.compare(x.exponent);
      if (c !== 0) return c;
    }
    return b.factors.length - a.factors.length;
  });
}
