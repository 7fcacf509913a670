import type { Graph } from '../expression/graph';
import type { Expr } from '../expression/node';
import { Rational } from '../expression/rational';
import { reachable } from '../expression/reach';
import { substitute } from '../expression/substitute';
import type { Column } from '../expression/tape';
import type { System } from '../mechanics/system';
import type { Motion } from './motion';
import type { Pair, RoundedConstant } from './pair';
import { Prober } from './prober';
import { Sampler } from './sampling';

const TRIED_STATES = 8;
const MOST_CANDIDATES = 24;

/**
 * A decimal literal of the code that stands for something exact, such as 3.1416 for pi or 0.333 for 1/3: found when the
 * claim holds with the exact value in its place.
 */
export function findRounded(
  system: System,
  motion: Motion,
  group: readonly Pair[],
  state: ReadonlyMap<Expr, number>,
): RoundedConstant | undefined {
  return firstMeaning(system.graph, group, (exact) => {
    const prober = new Prober(motion, [exact]);
    const n = TRIED_STATES;
    const columns = new Map<Expr, Column>(new Sampler(system).draw(prober.symbols, n));
    for (const [s, c] of columns) c.values[0] = state.get(s) ?? c.values[0]!;
    const { registers } = prober.run(columns, n);
    let votes = 0;
    let agrees = true;
    for (let s = 0; s < n; s++) {
      const c = prober.compare(registers, 0, s);
      if (!c.votes) continue;
      votes++;
      if (!c.agrees && c.difference > 1e-13 * c.size) agrees = false;
    }
    return agrees && votes >= 4;
  });
}

/** The first literal of a claim's code, with what it stands for, that `holds` accepts the claim with. */
export function firstMeaning(graph: Graph, group: readonly Pair[], holds: (exact: readonly Pair[]) => boolean): RoundedConstant | undefined {
  const candidates: RoundedConstant[] = [];
  for (const node of reachable(group.map((p) => p.found))) {
    if (node.op !== 'number') continue;
    // The sign belongs to the formula around the literal.
    const r = node.data as Rational;
    for (const meant of exactMeanings(r.sign < 0 ? r.negate() : r)) {
      const exact = r.sign < 0 ? graph.negate(meant.build(graph)) : meant.build(graph);
      candidates.push({ literal: node, exact, exactText: meant.text });
    }
  }
  return candidates.slice(0, MOST_CANDIDATES).find(({ literal, exact }) => {
    const map = new Map([[literal, exact]]);
    return holds(group.map((p) => ({ found: substitute(graph, [p.found], map)[0]!, expected: p.expected })));
  });
}

interface Meaning {
  readonly text: string;
  build(graph: Graph): Expr;
}

/** Exact values that a positive decimal with this many digits would be the rounding of, likeliest first. */
function exactMeanings(r: Rational): Meaning[] {
  const digits = significantDigits(r);
  if (digits === undefined || digits < 2 || r.isZero) return [];
  const x = r.toNumber();
  const lastPlace = 10 ** (Math.floor(Math.log10(x)) + 1 - digits);
  // Rounded or cut off at its last digit.
  const fits = (y: number): boolean => Math.abs(x - y) <= (digits < 3 ? 0.6 : 1) * lastPlace;
  const out: Meaning[] = [];
  /** Adds the multiple of `base` with the smallest denominator that fits. */
  const multiples = (base: number, name: string, largest: number, build: (graph: Graph) => Expr): void => {
    for (let q = 1; q <= largest; q++) {
      const p = Math.round((x / base) * q);
      if (p === 0 || p > 400 || !fits((p / q) * base)) continue;
      const factor = Rational.of(p, q);
      // A decimal that could have been typed in full is not what another one stands for.
      if (name === '' && significantDigits(factor) !== undefined) return;
      if (name === '' && factor.isInteger) return;
      out.push({
        text: multipleText(factor, name),
        build: (graph) => graph.multiply(graph.number(factor), build(graph)),
      });
      return;
    }
  };
  multiples(1, '', 60, (g) => g.one);
  if (digits < 3) return out;
  multiples(Math.PI, 'pi', 12, (g) => g.pi);
  for (const whole of [30, 180, 360]) {
    if (fits(Math.PI / whole)) {
      out.push({ text: `pi/${whole}`, build: (g) => g.multiply(g.number(Rational.of(1, whole)), g.pi) });
    }
  }
  for (const whole of [30, 60, 180, 360]) {
    if (fits(whole / Math.PI)) out.push({ text: `${whole}/pi`, build: (g) => g.divide(g.number(whole), g.pi) });
  }
  for (const k of [2, 3, 5]) multiples(Math.sqrt(k), `sqrt(${k})`, 6, (g) => g.sqrt(g.number(k)));
  return out;
}

/** Of a decimal with a fraction; undefined for whole numbers and for rationals that are no decimal. */
function significantDigits(r: Rational): number | undefined {
  if (r.isInteger) return undefined;
  let scaled = r;
  const ten = Rational.of(10);
  for (let k = 0; k < 40 && !scaled.isInteger; k++) scaled = scaled.multiply(ten);
  if (!scaled.isInteger) return undefined;
  return scaled.numerator.toString().replace(/0+$/, '').length;
}

function multipleText(factor: Rational, name: string): string {
  if (name === '') return factor.toString();
  const n = factor.numerator;
  const top = n === 1n ? name : `${n}*${name}`;
  return factor.denominator === 1n ? top : `${top}/${factor.denominator}`;
}
