import type { Expr } from '../node';
import { Rational } from '../rational';
import type { Expander } from './expand';
import {
  Collector,
  inverse,
  mergeFactors,
  sorted,
  timesMonomial,
  type Factor,
  type Monomial,
  type Polynomial,
} from './polynomial';

type Pass = (x: Expander, terms: Collector) => boolean;

/**
 * Shortens a sum by identities of trigonometric and hyperbolic functions and by cancelling whole denominators. Each
 * replacement leaves fewer terms, so the passes come to an end.
 */
export function shortenByIdentities(x: Expander, p: Polynomial): Polynomial {
  if (p.length < 2) return p;
  const terms = new Collector(sorted(p));
  if (!x.spend(p.length)) return p;
  const passes: Pass[] = [squares, angles, complements, denominators];
  let i = 0;
  while (i < passes.length && terms.size > 1 && !x.exhausted) i = passes[i]!(x, terms) ? 0 : i + 1;
  return terms.terms();
}

/** a*sin^2 + a*cos^2 = a, and a*cosh^2 - a*sinh^2 = a. */
function squares(x: Expander, terms: Collector): boolean {
  let changed = false;
  for (const t of terms.terms()) {
    for (const f of t.factors) {
      if ((f.base.op !== 'cos' && f.base.op !== 'cosh') || !atLeastTwo(f.exponent) || !terms.has(t)) continue;
      const rest = withoutSquare(t, f.base);
      const circular = f.base.op === 'cos';
      const sine = square(x.graph.apply(circular ? 'sin' : 'sinh', f.base.args));
      const partner = terms.get(mergeFactors(rest.factors, [sine]));
      if (!partner) continue;
      const c = circular ? partner.coefficient : partner.coefficient.negate();
      if (c.equals(t.coefficient)) terms.remove(t);
      // b*sin^2 + c*cos^2 + r is shorter as (b - c)*sin^2 + (r + c) only where r is there already.
      else if (terms.get(rest.factors)) terms.remove(t);
      else continue;
      terms.put({ coefficient: (circular ? t.coefficient : t.coefficient.negate()).negate(), factors: partner.factors });
      terms.put(rest);
      changed = true;
    }
  }
  return changed;
}

/** a - a*sin^2 = a*cos^2 and its likes. */
function complements(x: Expander, terms: Collector): boolean {
  let changed = false;
  for (const t of terms.terms()) {
    for (const f of t.factors) {
      const other = COMPLEMENT[f.base.op as keyof typeof COMPLEMENT];
      if (!other || !atLeastTwo(f.exponent) || !terms.has(t)) continue;
      const rest = withoutSquare(t, f.base);
      const partner = terms.get(rest.factors);
      // t = c*r*f^2, partner = p*r. p + c*f^2 = p*other^2 (up to sign) where p = -c, or p = c for 1 + sinh^2.
      const wanted = other.plus ? t.coefficient : t.coefficient.negate();
      if (!partner || !partner.coefficient.equals(wanted)) continue;
      terms.remove(t);
      terms.remove(partner);
      const coefficient = other.keepsSign ? partner.coefficient : partner.coefficient.negate();
      terms.put({
        coefficient,
        factors: mergeFactors(rest.factors, [square(x.graph.apply(other.name, f.base.args))]),
      });
      changed = true;
    }
  }
  return changed;
}

const COMPLEMENT = {
  sin: { name: 'cos', plus: false, keepsSign: true }, // 1 - sin^2 = cos^2
  cos: { name: 'sin', plus: false, keepsSign: true },
  cosh: { name: 'sinh', plus: false, keepsSign: false }, // 1 - cosh^2 = -sinh^2
  sinh: { name: 'cosh', plus: true, keepsSign: true }, // 1 + sinh^2 = cosh^2
} as const;

/** cos a cos b + sin a sin b = cos(a - b), sin a cos b - cos a sin b = sin(a - b), and with the other sign a + b. */
function angles(x: Expander, terms: Collector): boolean {
  let changed = false;
  for (const t of terms.terms()) {
    const circular = t.factors.filter((f) => isCircular(f.base) && f.exponent.isInteger && f.exponent.sign > 0);
    for (const f of circular) {
      for (const g of circular) {
        if (f.base.args[0] === g.base.args[0] || !terms.has(t)) continue;
        if (!x.spend(t.factors.length)) return changed;
        // Each pair is met from one side only: cos cos in id order, sin cos with the sine first.
        const same = f.base.op === g.base.op;
        if (same ? f.base.op !== 'cos' || f.base.id > g.base.id : f.base.op !== 'sin') continue;
        changed = mergeAngles(x, terms, t, f.base, g.base) || changed;
      }
    }
  }
  return changed;
}

function mergeAngles(x: Expander, terms: Collector, t: Monomial, f: Expr, g: Expr): boolean {
  const cofactor = without(without(t.factors, f), g);
  const [a, b] = [f.args[0]!, g.args[0]!];
  const partnerFactors = mergeFactors(cofactor, one(swapped(x, f)));
  const partner = terms.get(mergeFactors(partnerFactors, one(swapped(x, g))));
  if (!partner || partner === t) return false;
  const equal = partner.coefficient.equals(t.coefficient);
  if (!equal && !partner.coefficient.equals(t.coefficient.negate())) return false;
  const name = f.op === 'cos' ? 'cos' : 'sin';
  const minus = name === 'cos' ? equal : !equal;
  const [p, q] = [x.meaning(a), x.meaning(b)];
  const angle = x.add([p, minus ? q.map((m) => ({ ...m, coefficient: m.coefficient.negate() })) : q]);
  const merged = angle && x.multiply([{ coefficient: t.coefficient, factors: cofactor }], x.call(name, [angle]));
  if (!merged) return false;
  terms.remove(t);
  terms.remove(partner);
  for (const m of merged) terms.put(m);
  return true;
}

/** a*s/(s + u) + a*u/(s + u) = a. */
function denominators(x: Expander, terms: Collector): boolean {
  let changed = false;
  for (const t of terms.terms()) {
    for (const f of t.factors) {
      if (f.base.op !== 'sum' || f.exponent.sign > 0 || !terms.has(t)) continue;
      const sum = sorted(x.meaning(f.base));
      if (sum.length < 2 || sum.length > terms.size || !x.spend(sum.length)) continue;
      const cofactor = timesMonomial(t, inverse(sum[0]!));
      const whole: Monomial[] = [];
      for (const s of sum) {
        const wanted = timesMonomial(cofactor, s);
        const found = terms.get(wanted.factors);
        if (!found?.coefficient.equals(wanted.coefficient)) break;
        whole.push(found);
      }
      if (whole.length < sum.length) continue;
      for (const m of whole) terms.remove(m);
      const one = { coefficient: Rational.ONE, factors: [{ base: f.base, exponent: Rational.ONE }] };
      terms.put(timesMonomial(cofactor, one));
      changed = true;
    }
  }
  return changed;
}

const TWO = Rational.of(2);

function square(base: Expr): Factor {
  return { base, exponent: TWO };
}

function one(base: Expr): Factor[] {
  return [{ base, exponent: Rational.ONE }];
}

function atLeastTwo(e: Rational): boolean {
  return e.isInteger && e.numerator >= 2n;
}

function withoutSquare(m: Monomial, base: Expr): Monomial {
  return { coefficient: m.coefficient, factors: mergeFactors(m.factors, [{ base, exponent: TWO.negate() }]) };
}

function without(factors: readonly Factor[], base: Expr): Factor[] {
  return mergeFactors(factors, [{ base, exponent: Rational.MINUS_ONE }]);
}

function isCircular(e: Expr): boolean {
  return e.op === 'sin' || e.op === 'cos';
}

function swapped(x: Expander, e: Expr): Expr {
  return x.graph.apply(e.op === 'sin' ? 'cos' : 'sin', e.args);
}

