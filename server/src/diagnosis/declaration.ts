import { Motion } from '../comparison/motion';
import { Prober } from '../comparison/prober';
import { Sampler } from '../comparison/sampling';
import type { ClaimResult } from '../comparison/subject';
import type { Expr, SymbolData } from '../expression/node';
import { monomialExpr, normalForm } from '../expression/normal-form';
import { text } from '../expression/print';
import { symbolsOf } from '../expression/reach';
import { Rational } from '../expression/rational';
import { substitute } from '../expression/substitute';
import { Derived } from '../mechanics/lagrange';
import type { Coordinate, System } from '../mechanics/system';

/** A declaration that the code would agree with. */
interface Variant {
  /** Completes "every claim holds with ...". */
  readonly words: string;
  make(): System;
}

const STATES = 24;
const FEWEST = 10;
const CLOSE = 1e-9;
const MOST_VARIANTS = 60;

/**
 * A small change of the declaration that makes all claims hold with the code as it is: another zero or sense of an angle,
 * an angle measured from the link before, a rod for a point mass, a potential with the other sign.
 */
export function findDeclarationChange(derived: Derived, claims: readonly ClaimResult[]): string | undefined {
  const { system } = derived;
  if (system.near || system.constraints.length > 0 || system.blocked) return undefined;
  const plain = new Set<Expr>(system.coordinates.flatMap((c) => [c.symbol, c.velocity, c.acceleration]));
  if (!claims.every((c) => c.found && c.expected && plain.has(c.expected))) return undefined;
  for (const variant of variants(system).slice(0, MOST_VARIANTS)) {
    if (holdsWith(new Derived(variant.make()), claims)) return variant.words;
  }
  return undefined;
}

const ENERGIES: ReadonlySet<string> = new Set(['E', 'V', 'L', 'H']);

/** Another zero of the potential: all that differs are energies, by what does not depend on the motion. */
export function findShift(derived: Derived, claims: readonly ClaimResult[]): string | undefined {
  const wrong = claims.filter((c) => c.decision.verdict === 'differs');
  const { graph } = derived.system;
  const moving = (e: Expr): boolean => symbolsOf(e).some((s) => (s.data as SymbolData).role !== 'parameter');
  let words: string | undefined;
  for (const c of wrong) {
    if (!ENERGIES.has(c.quantity) || !c.found || !c.expected) return undefined;
    const gap = normalForm(graph, graph.subtract(c.found, c.expected), 40);
    if (!gap || gap.terms.length === 0) return undefined;
    const shift = graph.sum(gap.terms.map((m) => monomialExpr(graph, m)));
    if (moving(shift)) return undefined;
    const own = `V larger by ${text(c.quantity === 'L' ? graph.negate(shift) : shift)} (its zero elsewhere; the motion is the same)`;
    if (words !== undefined && words !== own) return undefined;
    words = own;
  }
  return words;
}

function holdsWith(derived: Derived, claims: readonly ClaimResult[]): boolean {
  const prober = new Prober(new Motion(derived), claims.map((c) => [{ found: c.found!, expected: c.expected! }]));
  const { registers } = prober.run(new Sampler(derived.system).draw(prober.symbols, STATES), STATES);
  let votes = 0;
  for (let s = 0; s < STATES; s++) {
    const compared = claims.map((_, k) => prober.compare(registers, k, s));
    if (!compared.every((c) => c.votes)) continue;
    if (!compared.every((c) => c.difference <= CLOSE * Math.max(c.size, 1e-3))) return false;
    votes++;
  }
  return votes >= FEWEST;
}

function variants(system: System): Variant[] {
  const { graph: g, coordinates, parameters } = system;
  const out: Variant[] = [];
  const changed = (words: string, map: ReadonlyMap<Expr, Expr>): void => {
    out.push({ words, make: () => withSymbols(system, map) });
  };
  const angles = coordinates.filter((c) => c.unit === 'rad' || c.unit === undefined);
  for (const c of angles) {
    changed(`${c.name} counted in the other sense`, new Map([[c.symbol, g.negate(c.symbol)], [c.velocity, g.negate(c.velocity)]]));
    changed(`${c.name} measured from the opposite direction`, new Map([[c.symbol, g.add(c.symbol, g.pi)]]));
    const quarter = g.multiply(g.number(Rational.HALF), g.pi);
    changed(`the zero of ${c.name} a quarter turn away`, new Map([[c.symbol, g.add(c.symbol, quarter)]]));
    changed(`the zero of ${c.name} a quarter turn away`, new Map([[c.symbol, g.subtract(c.symbol, quarter)]]));
    changed(`${c.name} a quarter turn away and counted in the other sense`, new Map([[c.symbol, g.subtract(quarter, c.symbol)], [c.velocity, g.negate(c.velocity)]]));
    for (const d of angles) {
      if (c === d) continue;
      changed(`${c.name} measured from ${d.name} instead of a fixed direction`, relative(g, c, d, 1));
      changed(`${c.name} measured from a fixed direction instead of ${d.name}`, relative(g, c, d, -1));
    }
  }
  if (system.V) {
    const V = g.negate(system.V);
    out.push({ words: 'the potential energy of the opposite sign', make: () => ({ ...system, V, L: g.subtract(g.add(system.L, system.V!), V) }) });
  }
  const masses = parameters.filter((p) => p.unit === 'kg' || /^m/i.test(p.name));
  const lengths = parameters.filter((p) => p.unit === 'm' || /^[lr]/i.test(p.name));
  for (const c of coordinates.filter((x) => x.unit === 'rad')) {
    for (const m of masses) {
      for (const l of lengths) {
        for (const [k, words] of [
          [Rational.of(1, 12), `${m.name} a uniform rod of length ${l.name}`],
          [Rational.of(1, 3), `${m.name} a uniform rod of half length ${l.name}`],
        ] as const) {
          const spin = g.multiply(g.number(k.multiply(Rational.HALF)), m.symbol, g.square(l.symbol), g.square(c.velocity));
          const terms = `${k.multiply(Rational.HALF)}*${m.name}*${l.name}^2*${c.name}'^2`;
          out.push({ words: `${terms} added to T (${words})`, make: () => withKinetic(system, spin) });
          out.push({ words: `${terms} taken from T (${m.name} a point mass, not ${words.slice(words.indexOf('a uniform'))})`, make: () => withKinetic(system, g.negate(spin)) });
        }
      }
    }
  }
  return out;
}

function relative(g: System['graph'], c: Coordinate, d: Coordinate, sign: 1 | -1): Map<Expr, Expr> {
  const join = (a: Expr, b: Expr) => (sign > 0 ? g.add(a, b) : g.subtract(a, b));
  return new Map([
    [c.symbol, join(c.symbol, d.symbol)],
    [c.velocity, join(c.velocity, d.velocity)],
  ]);
}

function withKinetic(system: System, more: Expr): System {
  const { graph: g } = system;
  return { ...system, T: system.T && g.add(system.T, more), L: g.add(system.L, more) };
}

function withSymbols(system: System, map: ReadonlyMap<Expr, Expr>): System {
  const { graph, T, V, L, D } = system;
  const put = (e: Expr): Expr => substitute(graph, [e], map)[0]!;
  return { ...system, T: T && put(T), V: V && put(V), L: put(L), D: put(D) };
}
