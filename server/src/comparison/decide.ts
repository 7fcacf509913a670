import type { Expr } from '../expression/node';
import { Tape, type Column } from '../expression/tape';
import type { Derived } from '../mechanics/lagrange';
import { BudgetSpent, type Budget } from '../text/budget';
import type { Place } from '../text/span';
import { choicesOf, choicesOfEach, Visits } from './branches';
import { prove } from './identity';
import { Motion } from './motion';
import { expand } from './near';
import type { Decision, Pair, Proof, Unvisited } from './pair';
import { Prober, SAFETY, type Comparison } from './prober';
import { findRounded } from './rounding';
import { Sampler } from './sampling';
import { shrinkWitness } from './witness';

const STATES = 64;
/** Fewer voting states than this decide nothing. */
const FEWEST = 16;
const MOST_BATCHES = 12;
/** Below this relative size a difference is too small to name a fault, and no claim is said to differ for it. */
const FAINT = 1e-10;
/** A relative difference that no rounding explains where states vote at all. */
const PLAIN = 1e-5;

export interface DecideRequest {
  readonly derived: Derived;
  readonly pairs: readonly Pair[];
  /** Conditions that the states must satisfy. */
  readonly assumed: readonly Expr[];
  readonly budget: Budget;
  /** Where a condition was read, for the reason of an unread claim. */
  placeOf(condition: Expr): Place | undefined;
  /** Leaves out the exact test, where only the verdict is wanted. */
  readonly withoutProof?: boolean;
}

/** Decides every pair, by states; the same states every time. */
export function decide(request: DecideRequest): Decision[] {
  const { derived, pairs } = request;
  const motion = new Motion(derived);
  const decisions = new Array<Decision | undefined>(pairs.length);
  decideTogether(request, motion, decisions);
  const rest = pairs.map((_, i) => i).filter((i) => !decisions[i]);
  if (rest.length > 0) {
    const groups = expand(derived, rest.map((i) => pairs[i]!));
    decideEach(request, motion, groups).forEach((d, k) => (decisions[rest[k]!] = d));
  }
  return withProofs(request, decisions as Decision[]);
}

/** What holds at all states is put to the exact test. */
function withProofs(request: DecideRequest, decisions: Decision[]): Decision[] {
  const { derived, pairs, budget } = request;
  const held = decisions.flatMap((d, i) => (d.verdict === 'holds' && !d.rounded ? [i] : []));
  if (request.withoutProof || held.length === 0) return decisions;
  const proofs = proofsOf(budget, () => prove(derived, expand(derived, held.map((i) => pairs[i]!))), held.length);
  held.forEach((i, k) => (decisions[i] = { ...decisions[i]!, proof: proofs[k]! } as Decision));
  return decisions;
}

function proofsOf(budget: Budget, prove: () => Proof[], n: number): Proof[] {
  try {
    return budget.run('the exact test', prove);
  } catch (error) {
    if (!(error instanceof BudgetSpent)) throw error;
    return new Array<Proof>(n).fill({ kind: 'none', stopped: 'the time for it ran out' });
  }
}

/**
 * The common case at linear cost: every coordinate's acceleration is claimed. The code's accelerations go into Lagrange's
 * residuals; where all vanish at all states, all hold. Anything else is left to be decided claim by claim.
 */
function decideTogether(request: DecideRequest, motion: Motion, decisions: (Decision | undefined)[]): void {
  const { derived, pairs, assumed } = request;
  const { system } = derived;
  if (system.near || motion.isConstrained) return;
  const claims = system.coordinates.map((c) => pairs.findIndex((p) => p.expected === c.acceleration));
  if (claims.length === 0 || claims.includes(-1)) return;
  const found = claims.map((i) => pairs[i]!.found);
  const visits = new Visits(choicesOf(system.graph, found), system.domains);
  const tape = new Tape([...found, ...assumed, ...visits.conditions]);
  const accelerations = new Set(system.coordinates.map((c) => c.acceleration));
  if (tape.symbols.some((s) => accelerations.has(s))) return;
  const symbols = [...new Set([...tape.symbols, ...motion.symbols])];
  const sampler = new Sampler(system);
  let votes = 0;
  let worst = 0;
  let sampled = false;
  for (let batch = 0; batch < 3 && votes < STATES; batch++) {
    if (!request.budget.look()) return;
    const columns = new Map<Expr, Column>(sampler.draw(symbols, STATES));
    const column = (s: Expr) => columns.get(s);
    const registers = sampled ? tape.runSampled(column, STATES) : tape.run(column, STATES);
    const before = votes;
    system.coordinates.forEach((c, i) => columns.set(c.acceleration, registers.column(found[i]!)));
    const residuals = motion.residual(columns, STATES);
    for (let s = 0; s < STATES; s++) {
      if (!assumed.every((a) => registers.value(a, s) === 1 && registers.error(a, s) === 0)) continue;
      let clear = true;
      let share = 0;
      for (const { value, error, scale } of residuals) {
        const r = Math.abs(value[s]!);
        const bound = SAFETY * error[s]!;
        if (!Number.isFinite(r) || !Number.isFinite(bound) || bound > 1e-6 * Math.max(scale[s]!, 1e-3)) clear = false;
        else if (r > bound) return;
        else if (scale[s]! > 0) share = Math.max(share, r / scale[s]!);
      }
      if (!clear) continue;
      votes++;
      worst = Math.max(worst, share);
      visits.note(registers, s);
    }
    // Values are there, but guaranteed bounds say nothing of them: estimate the bounds from here on.
    if (votes - before < STATES / 2) sampled = true;
  }
  if (votes < FEWEST || visits.wanted > 0 || singular(motion, symbols, sampler)) return;
  for (const i of claims) decisions[i] = { verdict: 'holds', states: votes, worst };
}

/** A singular mass matrix lets wrong accelerations pass through the residuals. */
function singular(motion: Motion, symbols: readonly Expr[], sampler: Sampler): boolean {
  const n = 4;
  const solution = motion.solve(sampler.draw(symbols, n), n);
  return [...solution.values()].some((c) => c.values.every((x, s) => !Number.isFinite(x) || !(c.errors[s]! < 1e-3 * (1 + Math.abs(x)))));
}

interface Tally {
  votes: number;
  missing: number;
  agrees: boolean;
  worst: number;
  /** The state that shows the difference best. */
  best: { comparison: Comparison; state: Map<Expr, number>; relative: number } | undefined;
  readonly visits: Visits;
}

function decideEach(request: DecideRequest, motion: Motion, groups: readonly (readonly Pair[])[]): Decision[] {
  const { derived, assumed, budget } = request;
  const choices = choicesOfEach(derived.system.graph, groups.map((group) => group.flatMap((p) => [p.found, p.expected])));
  const tallies: Tally[] = groups.map((_, i) => ({
    votes: 0,
    missing: 0,
    agrees: true,
    worst: 0,
    best: undefined,
    visits: new Visits(choices[i]!, derived.system.domains),
  }));
  const conditions = [...new Set(tallies.flatMap((t) => t.visits.conditions))];
  const prober = new Prober(motion, groups, [...assumed, ...conditions]);
  const symbols = prober.symbols;
  const sampler = new Sampler(derived.system);
  let tried = 0;
  let bounds: 'guaranteed' | 'sampled' = 'guaranteed';
  for (let batch = 0; batch < MOST_BATCHES; batch++) {
    // Usual states first; unusual ones only to fill branches not reached and votes not given.
    const wide = batch >= 3;
    const open = tallies.filter((t) => t.votes < STATES || t.visits.wanted > 0);
    if (open.length === 0 || (wide && tallies.every((t) => t.votes >= FEWEST && t.visits.wanted === 0))) break;
    if (!budget.look()) break;
    const { registers, columns } = prober.run(sampler.draw(symbols, STATES, wide), STATES, bounds);
    tried += STATES;
    let blurred = 0;
    for (let s = 0; s < STATES; s++) {
      const allowed = assumed.every((a) => registers.value(a, s) === 1 && registers.error(a, s) === 0);
      if (!allowed) continue;
      tallies.forEach((t, claim) => {
        const c = prober.compare(registers, claim, s);
        if (!c.votes) {
          t.missing++;
          if (c.blurred) blurred++;
          return;
        }
        // An estimated bound may be too small by far: only a plain difference at a usual state counts against the code then.
        if (bounds === 'sampled' && !c.agrees && (wide || c.difference < PLAIN * Math.max(c.size, 1e-3))) {
          t.missing++;
          return;
        }
        if (t.visits.isGuarded(registers, s)) return;
        const fresh = t.visits.note(registers, s);
        if (wide && !fresh && t.votes >= FEWEST) return;
        t.votes++;
        const relative = c.size > 0 ? c.difference / Math.max(c.size, 1e-3) : 0;
        t.worst = Math.max(t.worst, relative);
        if (c.agrees) return;
        t.agrees = false;
        if (!t.best || (relative > t.best.relative && !wide)) {
          t.best = { comparison: c, relative, state: new Map(symbols.map((x) => [x, columns.get(x)!.values[s]!])) };
        }
      });
    }
    // Values are there, but guaranteed bounds say nothing of them: estimate the bounds from here on.
    if (blurred > (STATES * tallies.length) / 2) bounds = 'sampled';
  }
  return tallies.map((t, claim) => conclude(request, motion, groups[claim]!, t, tried));
}

function conclude(request: DecideRequest, motion: Motion, group: readonly Pair[], t: Tally, tried: number): Decision {
  const { budget, placeOf, derived } = request;
  if (budget.why === 'cancelled') return { verdict: 'unread', reason: budget.reason };
  if (!t.agrees && t.best) {
    const rounded = t.worst < 0.05 ? findRounded(derived.system, motion, group, t.best.state) : undefined;
    // A literal with so many digits is meant as its exact value; it is named, but nothing is wrong with the physics.
    if (rounded && t.worst < 1e-9) return { verdict: 'holds', states: t.votes, worst: t.worst, rounded };
    if (t.worst < FAINT) {
      return {
        verdict: 'unread',
        reason: `code and physics differ by ${t.worst.toExponential(0)} of their size: too little to tell from rounding`,
      };
    }
    const witness = shrinkWitness(derived.system, motion, group, t.best.state, request.assumed);
    return { verdict: 'differs', states: t.votes, worst: t.worst, witness, ...(rounded ? { rounded } : {}) };
  }
  if (budget.why) return { verdict: 'unread', reason: budget.reason };
  if (t.votes < FEWEST) {
    const reason =
      t.votes === 0
        ? `no state gave finite numbers on both sides (${tried} tried): check the ranges, or whether the mass matrix is singular`
        : `only ${t.votes} of ${tried} states gave finite numbers on both sides: give narrower \`ranges\``;
    return { verdict: 'unread', reason };
  }
  const missing = t.visits.missingForGood[0];
  if (missing) return { verdict: 'unread', reason: unvisitedReason(missing), place: placeOf(missing.condition) };
  return { verdict: 'holds', states: t.votes, worst: t.worst };
}

function unvisitedReason(u: Unvisited): string {
  return `no state reached the branch where this condition is ${u.side}: give \`ranges\` that reach it, or say which branch is meant with \`assume\``;
}
