import { degreeBound } from '../expression/exact/degree';
import { PRIME } from '../expression/exact/field';
import { drawSymbol, ExactTape, Residues, solveAll } from '../expression/exact/tape';
import type { Expr } from '../expression/node';
import { reachable, symbolsOf } from '../expression/reach';
import { substitute } from '../expression/substitute';
import type { Derived } from '../mechanics/lagrange';
import type { Pair, Proof } from './pair';

const POINTS = 12;
const FEWEST = 6;
/** A chance larger than this is no proof. */
const WORST_CHANCE = 1e-15;
/** Evaluations of a node; longer programs would take longer than their verdict is worth. */
const MOST_WORK = 150_000;
/** Symbols and angles are drawn apart: residues of one seed would tie them to each other. */
const SYMBOL_SEED = 0x1b873593;

/**
 * Tries to prove claims that hold at states: both sides are evaluated modulo a prime at random points, where equality of
 * different functions is an accident of known chance. Accelerations are solved for by elimination modulo the prime.
 * @param groups the pairs of each claim; all of them must agree
 */
export function prove(derived: Derived, groups: readonly (readonly Pair[])[]): Proof[] {
  const { system } = derived;
  if (system.constraints.length > 0) return groups.map(() => ({ kind: 'none', stopped: 'states on a constraint' }));
  const together = proveTogether(derived, groups);
  const open = groups.map((_, i) => i).filter((i) => !together[i]);
  const rest = proveEach(derived, open.map((i) => groups[i]!));
  return groups.map((_, i) => together[i] ?? rest[open.indexOf(i)]!);
}

/**
 * Where all accelerations are claimed: the code's put into Lagrange's equations, which must vanish. Linear in their size.
 */
function proveTogether(derived: Derived, groups: readonly (readonly Pair[])[]): (Proof | undefined)[] {
  const { graph, coordinates } = derived.system;
  const nothing = groups.map(() => undefined);
  const claims = coordinates.map((c) => groups.findIndex((g) => g.length === 1 && g[0]!.expected === c.acceleration));
  if (claims.includes(-1)) return nothing;
  const found = new Map(coordinates.map((c, i): [Expr, Expr] => [c.acceleration, groups[claims[i]!]![0]!.found]));
  const zero = substitute(graph, derived.rows, found).map((row) => ({ found: row, expected: graph.zero }));
  const proof = proveEach(derived, [zero])[0]!;
  return groups.map((_, i) => (claims.includes(i) && proof.kind === 'identity' ? proof : undefined));
}

function proveEach(derived: Derived, groups: readonly (readonly Pair[])[]): Proof[] {
  if (groups.length === 0) return [];
  const { system } = derived;
  const none = (stopped: string): Proof[] => groups.map(() => ({ kind: 'none', stopped }));
  const sides = groups.flat().flatMap((p) => [p.found, p.expected]);
  const { unknowns } = derived;
  const moves = symbolsOf(...sides).some((s) => unknowns.includes(s));
  // One program holds claims and equations, so that an angle is the same point of the circle in both.
  const tape = new ExactTape(moves ? [...sides, ...derived.rows] : sides);
  if (tape.nodes.length * (moves ? unknowns.length + 2 : 1) > MOST_WORK) return none('its size');
  if (tape.stopped !== undefined) {
    // One odd claim must not keep the others from their proof.
    return groups.length === 1 ? none(tape.stopped) : groups.flatMap((g) => proveEach(derived, [g]));
  }
  const residues = new Residues(SYMBOL_SEED);
  const columns = new Map<Expr, Float64Array>();
  for (const s of tape.symbols) {
    if (unknowns.includes(s)) continue;
    const low = system.domains.get(s)?.low;
    columns.set(s, drawSymbol(s, low !== undefined && low >= 0, POINTS, residues));
  }
  if (moves) solveMotion(derived, tape, columns);
  const values = tape.run((s) => columns.get(s), POINTS, new Residues());
  return groups.map((group): Proof => {
    let valid = 0;
    for (let p = 0; p < POINTS; p++) {
      const pairs = group.map((x) => [values.get(x.found)![p]!, values.get(x.expected)![p]!] as const);
      if (pairs.some(([f, e]) => Number.isNaN(f) || Number.isNaN(e))) continue;
      if (pairs.some(([f, e]) => f !== e)) return { kind: 'none', stopped: 'a rounded number, or a rule the exact test does not know' };
      valid++;
    }
    if (valid < FEWEST) return { kind: 'none', stopped: 'roots or quotients without a value at the random points' };
    const chance = group.reduce((worst, x) => Math.max(worst, chanceOf(derived, tape, x, valid)), 0);
    return chance <= WORST_CHANCE ? { kind: 'identity', chance } : { kind: 'none', stopped: 'the degree of its formulas' };
  });
}

/** Adds the columns of the accelerations: rows at zero and at each unit give matrix and right sides. */
function solveMotion(derived: Derived, tape: ExactTape, columns: Map<Expr, Float64Array>): void {
  const { unknowns, rows } = derived;
  const n = unknowns.length;
  const zero = new Float64Array(POINTS);
  const one = new Float64Array(POINTS).fill(1);
  const at = (k: number): Map<Expr, Float64Array> => {
    const column = new Map(columns);
    unknowns.forEach((u, i) => column.set(u, i === k ? one : zero));
    return tape.run((s) => column.get(s), POINTS, new Residues());
  };
  const rest = at(-1);
  const entries: Float64Array[] = new Array<Float64Array>(n * n + n);
  const minus = (a: Float64Array, b: Float64Array) => a.map((x, s) => (x - b[s]! + PRIME) % PRIME);
  rows.forEach((row, i) => (entries[n * n + i] = minus(zero, rest.get(row)!)));
  for (let j = 0; j < n; j++) {
    const unit = at(j);
    rows.forEach((row, i) => (entries[i * n + j] = minus(unit.get(row)!, rest.get(row)!)));
  }
  const solution = solveAll(entries, n, POINTS);
  unknowns.forEach((u, i) => columns.set(u, solution.slice(i * POINTS, (i + 1) * POINTS)));
}

function chanceOf(derived: Derived, tape: ExactTape, pair: Pair, points: number): number {
  const nodes = reachable([pair.found, pair.expected]);
  let degree = degreeBound(nodes, tape.bases, pair.found) + degreeBound(nodes, tape.bases, pair.expected);
  if (nodes.some((n) => derived.unknowns.includes(n))) {
    // The accelerations by Cramer's rule on top of what they enter.
    const rows = reachable(derived.rows);
    const row = derived.rows.reduce((s, r) => s + degreeBound(rows, tape.bases, r), 0);
    degree *= 2 * row + 1;
  }
  return Math.pow(Math.min(1, degree / (PRIME / 4)), points);
}
