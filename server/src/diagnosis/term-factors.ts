import { Motion } from '../comparison/motion';
import { Prober } from '../comparison/prober';
import { Sampler } from '../comparison/sampling';
import type { ClaimResult } from '../comparison/subject';
import type { Expr } from '../expression/node';
import { monomialExpr, normalForm } from '../expression/normal-form';
import { symbolsOf } from '../expression/reach';
import { Tape } from '../expression/tape';
import type { Derived } from '../mechanics/lagrange';

/** One of Lagrange's equations, everything on one side, and what the code has of each term. */
export interface TermFactors {
  readonly terms: readonly Expr[];
  /** Multiples of the terms that the code's accelerations obey; undefined where they can't be told. */
  readonly factors: readonly number[] | undefined;
}

const MOST_TERMS = 24;
const DRAWN = 96;
const CLOSE = 1e-7;

/**
 * The code's accelerations go into the equation of a coordinate. Its own inertia term is taken as it is; the multiples of
 * all others with which the equation is then fulfilled at every state are what the code has. Undefined where there are
 * none (a term too many, or no sum at all) or more than one such set.
 */
export function termFactors(derived: Derived, claims: readonly ClaimResult[], coordinate: number): TermFactors | undefined {
  const { system } = derived;
  const { graph } = system;
  const form = normalForm(graph, derived.residuals[coordinate]!, MOST_TERMS);
  if (!form || form.terms.length === 0) return undefined;
  const terms = form.terms.map((m) => monomialExpr(graph, m));
  const accelerations = system.coordinates.map((c) => c.acceleration);
  const known = claims.filter((c) => c.found && c.expected && accelerations.includes(c.expected) && c.decision.verdict !== 'unread');
  const needed = accelerations.filter((a) => terms.some((t) => symbolsOf(t).includes(a)));
  const own = terms.findIndex((t) => symbolsOf(t).includes(accelerations[coordinate]!));
  if (own < 0 || system.constraints.length > 0 || system.near || !needed.every((a) => known.some((c) => c.expected === a))) return { terms, factors: undefined };

  const prober = new Prober(new Motion(derived), known.map((c) => [{ found: c.found!, expected: c.expected! }]), [...symbolsOf(...terms)]);
  const wanted = [...new Set([...prober.symbols, ...symbolsOf(...terms)])].filter((s) => !accelerations.includes(s));
  const { registers, columns } = prober.run(new Sampler(system).draw(wanted, DRAWN), DRAWN);
  const good: number[] = [];
  for (let s = 0; s < DRAWN; s++) if (known.every((_, k) => prober.compare(registers, k, s).votes)) good.push(s);
  const at = (symbol: Expr): Float64Array => {
    const claim = known.find((c) => c.expected === symbol);
    if (claim) return Float64Array.from(good, (s) => registers.value(claim.found!, s));
    const given = columns.get(symbol);
    return Float64Array.from(good, (s) => (given ? given.values[s]! : registers.value(symbol, s)));
  };
  const tape = new Tape(terms);
  const run = tape.run((s) => ({ values: at(s) }), good.length);
  const values = terms.map((t) => run.column(t).values);
  return { terms, factors: fitted(values, own, good.length) };
}

/** Least squares by Householder reflections, each state scaled by its largest term; then it must fit every state. */
function fitted(values: readonly Float64Array[], own: number, states: number): readonly number[] | undefined {
  const others = values.map((_, k) => k).filter((k) => k !== own);
  if (states < 2 * others.length + 4) return undefined;
  const scale = Float64Array.from({ length: states }, (_, s) => Math.max(...values.map((v) => Math.abs(v[s]!)), 1e-300));
  if (scale.some((x) => !Number.isFinite(x))) return undefined;
  if (rest(values.map(() => 1)) < CLOSE) return values.map(() => 1);
  const a = others.map((k) => Float64Array.from({ length: states }, (_, s) => values[k]![s]! / scale[s]!));
  const b = Float64Array.from({ length: states }, (_, s) => -values[own]![s]! / scale[s]!);
  const solution = leastSquares(a, b, states);
  if (!solution) return undefined;
  const factors = values.map(() => 1);
  others.forEach((k, i) => (factors[k] = rounded(solution[i]!)));
  return rest(factors) < CLOSE ? factors : undefined;

  function rest(factors: readonly number[]): number {
    let worst = 0;
    for (let s = 0; s < states; s++) {
      let sum = 0;
      values.forEach((v, k) => (sum += factors[k]! * v[s]!));
      worst = Math.max(worst, Math.abs(sum) / scale[s]!);
    }
    return worst;
  }
}

function rounded(x: number): number {
  const near = Math.round(x * 24) / 24;
  return Math.abs(x - near) < 1e-6 ? near : Number(x.toPrecision(6));
}

/** Solves columns * x = b; undefined where the columns depend on each other. */
function leastSquares(columns: Float64Array[], b: Float64Array, rows: number): number[] | undefined {
  const n = columns.length;
  const diagonal = new Float64Array(n);
  for (let j = 0; j < n; j++) {
    const c = columns[j]!;
    let norm = 0;
    for (let s = j; s < rows; s++) norm = Math.hypot(norm, c[s]!);
    let whole = 0;
    for (let s = 0; s < rows; s++) whole = Math.hypot(whole, c[s]!);
    if (!(norm > 1e-9 * whole)) return undefined;
    const alpha = c[j]! > 0 ? -norm : norm;
    c[j] = c[j]! - alpha;
    diagonal[j] = alpha;
    let square = 0;
    for (let s = j; s < rows; s++) square += c[s]! * c[s]!;
    for (const other of [...columns.slice(j + 1), b]) {
      let dot = 0;
      for (let s = j; s < rows; s++) dot += c[s]! * other[s]!;
      const f = (2 * dot) / square;
      for (let s = j; s < rows; s++) other[s] = other[s]! - f * c[s]!;
    }
  }
  const x = new Array<number>(n).fill(0);
  for (let j = n - 1; j >= 0; j--) {
    let sum = b[j]!;
    for (let k = j + 1; k < n; k++) sum -= columns[k]![j]! * x[k]!;
    x[j] = sum / diagonal[j]!;
  }
  return x;
}
