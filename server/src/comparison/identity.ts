import { Degrees } from '../expression/exact/degree';
import { eliminate } from '../expression/exact/eliminate';
import { PRIME, subtract } from '../expression/exact/field';
import { drawSymbol, Residues } from '../expression/exact/residues';
import { ExactTape, type ExactRun } from '../expression/exact/tape';
import type { Expr } from '../expression/node';
import type { Rational } from '../expression/rational';
import { dependents } from '../expression/reach';
import type { Derived } from '../mechanics/lagrange';
import type { Pair, Proof } from './pair';
import { firstMeaning } from './rounding';

/** A chance larger than this is no proof. */
const WORST_CHANCE = 1e-15;
/** Points at which values were not there are made up for by some more. */
const SPARE = 4;
const MOST_POINTS = 40;
/** Where roots are taken, half of the points have none, and at half of the others a root of the wrong sign passes. */
const POINTS_WITH_ROOTS = 100;
const MOST_DRAWN = 1024;
/** Evaluations of a node at a point; longer programs would take longer than their verdict is worth. */
const MOST_WORK = 6_000_000;
/** Symbols and angles are drawn apart: residues of one seed would tie them to each other. */
const SYMBOL_SEED = 0x1b873593;

const UNEQUAL = 'a rounded number, or a rule the exact test does not know';
const TOO_HIGH = 'the degree of its formulas';
const TOO_LARGE = 'its size';

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
  return groups.map((group, i) => together[i] ?? withLiteral(derived, group, rest[open.indexOf(i)]!));
}

/** Names the literal that keeps two sides from being the same formula, if with its exact value they are. */
function withLiteral(derived: Derived, group: readonly Pair[], proof: Proof): Proof {
  if (proof.kind === 'identity' || proof.stopped !== UNEQUAL) return proof;
  const rounded = firstMeaning(derived.system.graph, group, (exact) => proveEach(derived, [exact])[0]!.kind === 'identity');
  if (!rounded) return proof;
  return { kind: 'none', stopped: `the number ${Math.abs((rounded.literal.data as Rational).toNumber())}, which is ${rounded.exactText} rounded` };
}

/**
 * Where all accelerations are claimed: the code's put into Lagrange's equations, which must vanish. Linear in their size.
 */
function proveTogether(derived: Derived, groups: readonly (readonly Pair[])[]): (Proof | undefined)[] {
  const { system, rows } = derived;
  const nothing = groups.map(() => undefined);
  const claims = system.coordinates.map((c) => groups.findIndex((g) => g.length === 1 && g[0]!.expected === c.acceleration));
  if (claims.includes(-1)) return nothing;
  const found = claims.map((i) => groups[i]![0]!.found);
  const tape = new ExactTape([...found, ...rows]);
  if (tape.stopped !== undefined) return nothing;
  const accelerations = new Set(system.coordinates.map((c) => c.acceleration));
  const moving = dependents(tape.nodes, accelerations);
  if (found.some((f) => moving[f.id])) return nothing;
  const first = tape.nodes.filter((n) => !moving[n.id]);
  const second = tape.nodes.filter((n) => moving[n.id]);
  const degrees = new Degrees(tape.bases);
  degrees.add(first);
  system.coordinates.forEach((c, i) => degrees.set(c.acceleration, found[i]!));
  degrees.add(second);
  const zero = system.graph.zero;
  degrees.add([zero]);
  const test = new Test(tape, derived, (run) => {
    run.run(first);
    system.coordinates.forEach((c, i) => run.set(c.acceleration, run.column(found[i]!)));
    run.run(second);
  });
  const degree = rows.reduce((worst, row) => Math.max(worst, degrees.ofDifference(row, zero)), 0);
  const proof = test.decide(degree, degrees.radicands, 1, (run, p) => (rows.some((row) => run.column(row)[p] !== 0) ? 'unequal' : 'equal'), rows);
  // Claim by claim the formulas are no smaller.
  const isSettled = proof.kind === 'identity' || proof.stopped === TOO_HIGH || proof.stopped === TOO_LARGE;
  return isSettled ? groups.map((_, i) => (claims.includes(i) ? proof : undefined)) : nothing;
}

function proveEach(derived: Derived, groups: readonly (readonly Pair[])[]): Proof[] {
  if (groups.length === 0) return [];
  const { unknowns, rows } = derived;
  const sides = groups.flat().flatMap((p) => [p.found, p.expected]);
  const own = new ExactTape(sides);
  const moves = own.symbols.some((s) => unknowns.includes(s));
  // One program holds claims and equations, so that an angle is the same point of the circle in both.
  const tape = moves ? new ExactTape([...sides, ...rows]) : own;
  if (tape.stopped !== undefined) {
    // One odd claim must not keep the others from their proof.
    return groups.length === 1 ? [{ kind: 'none', stopped: tape.stopped }] : groups.flatMap((g) => proveEach(derived, [g]));
  }
  const motion = moves ? new ExactMotion(derived, tape) : undefined;
  const test = new Test(tape, derived, (run) => {
    motion?.solve(run);
    run.run(tape.nodes);
  });
  const degrees = new Degrees(tape.bases);
  degrees.add(tape.nodes);
  const cramer = moves ? 1 + 2 * rows.reduce((s, r) => s + degrees.ofNode(r), 0) : 1;
  return groups.map((group) => {
    const degree = group.reduce((worst, x) => Math.max(worst, degrees.ofDifference(x.found, x.expected, cramer)), 0);
    const values = group.flatMap((x) => [x.found, x.expected]);
    const compare = (run: ExactRun, p: number) => (group.some((x) => run.column(x.found)[p] !== run.column(x.expected)[p]) ? 'unequal' : 'equal');
    return test.decide(degree, degrees.radicands, motion ? unknowns.length + 2 : 1, compare, values);
  });
}

/** Evaluates a tape at random points until those that have values are enough. */
class Test {
  private readonly runs: ExactRun[] = [];
  private drawn = 0;
  private readonly residues = new Residues();
  private readonly symbols = new Residues(SYMBOL_SEED);

  constructor(
    private readonly tape: ExactTape,
    private readonly derived: Derived,
    private readonly evaluate: (run: ExactRun) => void,
  ) {}

  decide(degree: number, radicands: number, passes: number, compare: (run: ExactRun, p: number) => 'equal' | 'unequal', values: readonly Expr[]): Proof {
    const none = (stopped: string): Proof => ({ kind: 'none', stopped });
    const { hasRoots, nodes } = this.tape;
    const wanted = pointsFor(degree, hasRoots);
    if (wanted === undefined) return none(TOO_HIGH);
    const most = hasRoots ? MOST_DRAWN : wanted + SPARE + 8;
    let valid = 0;
    let seen = 0;
    for (let k = 0; valid < wanted; k++) {
      if (k >= this.runs.length) {
        const points = hasRoots ? 128 : k === 0 ? wanted : SPARE;
        if (this.drawn + points > most) break;
        if (nodes.length * passes * (this.drawn + points) > MOST_WORK) return none(TOO_LARGE);
        this.draw(points);
      }
      const run = this.runs[k]!;
      for (let p = 0; p < run.points && valid < wanted; p++) {
        seen++;
        if (values.some((x) => Number.isNaN(run.column(x)[p]))) continue;
        if (compare(run, p) === 'unequal') return none(UNEQUAL);
        valid++;
      }
    }
    if (valid < wanted) return none('roots or quotients without a value at the random points');
    const chance = chanceOf(degree, hasRoots ? radicands : undefined, valid, seen);
    return chance <= WORST_CHANCE ? { kind: 'identity', chance } : none(TOO_HIGH);
  }

  private draw(points: number): void {
    const { system, unknowns } = this.derived;
    const run = this.tape.at(points, this.residues);
    for (const s of this.tape.symbols) {
      if (unknowns.includes(s)) continue;
      const low = system.domains.get(s)?.low;
      run.set(s, drawSymbol(s, low !== undefined && low >= 0, points, this.symbols));
    }
    this.evaluate(run);
    this.runs.push(run);
    this.drawn += points;
  }
}

/**
 * The chance that different functions agree at one point. Values are drawn from at least a third of the residues (squares
 * of such where a symbol is never negative).
 */
function perPoint(degree: number): number {
  return degree / (PRIME / 3);
}

/** Undefined where no number of points would do. */
function pointsFor(degree: number, hasRoots: boolean): number | undefined {
  const q = perPoint(degree);
  if (hasRoots) return q < 1e-3 ? POINTS_WITH_ROOTS : undefined;
  if (!(q < 0.5)) return undefined;
  const points = Math.max(3, Math.ceil(Math.log(WORST_CHANCE / 100) / Math.log(q)));
  return points > MOST_POINTS ? undefined : points;
}

/**
 * Each choice of `valid` points out of those seen may have been the accident. Where roots are taken, a function that only
 * differs by the sign of a root agrees at about every second point (of the values of a polynomial half are squares, but for
 * half its degree over the root of the field's size: A. Weil, On some exponential sums, 1948).
 * @param radicands the degrees of all that roots are taken of, together
 */
function chanceOf(degree: number, radicands: number | undefined, valid: number, seen: number): number {
  const accident = Math.pow(perPoint(degree), valid) * choices(seen, valid);
  return radicands === undefined ? accident : Math.max(accident, Math.pow(0.5 + radicands / (2 * Math.sqrt(PRIME)), valid));
}

function choices(n: number, k: number): number {
  let c = 1;
  for (let i = 1; i <= k; i++) c *= (n - k + i) / i;
  return c;
}

/** The accelerations at the points of a run: rows at zero and at each unit give matrix and right sides. */
class ExactMotion {
  private readonly rows: ExactTape;
  private readonly moving: readonly Expr[];
  private readonly still: readonly Expr[];

  constructor(
    private readonly derived: Derived,
    private readonly whole: ExactTape,
  ) {
    this.rows = new ExactTape(derived.rows);
    const depends = dependents(this.rows.nodes, new Set(derived.unknowns));
    this.still = this.rows.nodes.filter((n) => !depends[n.id]);
    this.moving = this.rows.nodes.filter((n) => depends[n.id]);
  }

  /** Runs the rows on the run of the whole program, whose angles they share, and leaves the accelerations in it. */
  solve(run: ExactRun): void {
    const { unknowns, rows } = this.derived;
    const { points } = run;
    const n = unknowns.length;
    const zero = new Float64Array(points);
    const one = new Float64Array(points).fill(1);
    run.run(this.still);
    for (const u of unknowns) if (this.has(u)) run.set(u, zero);
    run.run(this.moving);
    const rest = rows.map((r) => run.column(r).slice());
    const columns: Float64Array[][] = [];
    for (const u of unknowns) {
      if (this.has(u)) run.set(u, one);
      run.run(this.moving);
      columns.push(rows.map((r) => run.column(r).slice()));
      if (this.has(u)) run.set(u, zero);
    }
    const a = new Float64Array(n * (n + 1));
    const x = new Float64Array(n);
    const solution = unknowns.map(() => new Float64Array(points));
    for (let p = 0; p < points; p++) {
      for (let i = 0; i < n; i++) {
        const r = rest[i]![p]!;
        for (let j = 0; j < n; j++) a[i * (n + 1) + j] = subtract(columns[j]![i]![p]!, r);
        a[i * (n + 1) + n] = subtract(0, r);
      }
      eliminate(a, n, x);
      for (let i = 0; i < n; i++) solution[i]![p] = x[i]!;
    }
    unknowns.forEach((u, i) => this.has(u) && run.set(u, solution[i]!));
  }

  private has(symbol: Expr): boolean {
    return this.whole.symbols.includes(symbol);
  }
}
