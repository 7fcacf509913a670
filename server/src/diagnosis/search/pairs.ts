import type { Budget } from '../../text/budget';
import type { Candidate } from './candidates/candidate';
import { overlap } from './edits';
import type { Change, Model } from './model';

/** Two edits that together make all claims right. */
export interface CandidatePair {
  readonly first: Candidate;
  readonly second: Candidate;
  readonly cost: number;
}

const MOST_CANDIDATES = 6000;
const MOST_JOINED = 400;
const MOST_CHECKED = 60;
const CLOSE = 1e-6;

/**
 * Searches for two faults at once. Changes of two terms add up, changes of two factors multiply; so the change that the
 * second edit must make follows from the first, and is looked up among those of all edits (a meeting in the middle).
 */
export function findPairs(model: Model, all: readonly Candidate[], changeOf: (c: Candidate) => Change, budget: Budget): CandidatePair[] {
  const candidates = distinct(all.filter((c) => c.values)).slice(0, MOST_CANDIDATES);
  const targets = model.targets;
  const width = targets.length * model.firstStates;
  const outcomes: Float64Array[] = [];
  const kept: Candidate[] = [];
  const base = Float64Array.from({ length: width }, (_, i) => at(model, i, (t) => t.base));
  const expected = Float64Array.from({ length: width }, (_, i) => at(model, i, (t) => t.expected));
  const scale = Float64Array.from({ length: width }, (_, i) => at(model, i, (t) => t.scale));
  if (!budget.look()) return [];
  model.firstLook(candidates.map(changeOf), (k, found) => {
    const vector = new Float64Array(width);
    let moves = false;
    let isFinite = true;
    targets.forEach((t, j) => {
      const f = found(t);
      for (let s = 0; s < model.firstStates; s++) {
        const i = j * model.firstStates + s;
        vector[i] = f[s]!;
        if (!Number.isFinite(f[s]!)) isFinite = false;
        if (Math.abs(f[s]! - base[i]!) > 1e-9 * scale[i]!) moves = true;
      }
    });
    if (!moves || !isFinite) return;
    outcomes.push(vector);
    kept.push(candidates[k]!);
  });
  if (!budget.look()) return [];
  const sums = join(kept, outcomes.map((v) => v.map((x, i) => x - base[i]!)), expected.map((x, i) => x - base[i]!), scale);
  const products = join(
    kept,
    outcomes.map((v) => v.map((x, i) => (Math.abs(base[i]!) > 1e-9 ? x / base[i]! - 1 : 0))),
    expected.map((x, i) => (Math.abs(base[i]!) > 1e-9 ? x / base[i]! - 1 : 0)),
    scale.map(() => 1),
    true,
  );
  const found = [...sums, ...products].sort((a, b) => a.cost - b.cost).slice(0, MOST_CHECKED);
  const right = model.successes(found.map((p) => [...changeOf(p.first), ...changeOf(p.second)]));
  return right.map((k) => found[k]!);
}

function at(model: Model, i: number, column: (t: Model['targets'][number]) => Float64Array): number {
  return column(model.targets[Math.floor(i / model.firstStates)]!)[i % model.firstStates]!;
}

/** Pairs whose effects make up the whole effect wanted: a + b, or (1 + a) (1 + b) - 1. */
function join(
  candidates: readonly Candidate[],
  effects: readonly Float64Array[],
  wanted: Float64Array,
  scale: Float64Array,
  multiply = false,
): CandidatePair[] {
  // The entry to look up by: one that is wrong.
  let entry = -1;
  for (let i = 0; i < wanted.length; i++) if (Math.abs(wanted[i]!) > 1e-3 * scale[i]! && (entry < 0 || Math.abs(wanted[i]!) / scale[i]! > Math.abs(wanted[entry]!) / scale[entry]!)) entry = i;
  if (entry < 0) return [];
  const order = candidates.map((_, k) => k).sort((a, b) => effects[a]![entry]! - effects[b]![entry]!);
  const keys = order.map((k) => effects[k]![entry]!);
  const rest = (a: number, i: number): number => (multiply ? (1 + wanted[i]!) / (1 + a) - 1 : wanted[i]! - a);
  const out: CandidatePair[] = [];
  for (let k = 0; k < candidates.length && out.length < MOST_JOINED; k++) {
    const a = effects[k]!;
    const need = rest(a[entry]!, entry);
    if (!Number.isFinite(need)) continue;
    const tolerance = CLOSE * (Math.abs(need) + scale[entry]!);
    for (let p = lower(keys, need - tolerance); p < keys.length && keys[p]! <= need + tolerance; p++) {
      const j = order[p]!;
      if (j <= k) continue;
      const b = effects[j]!;
      let fits = true;
      for (let i = 0; i < wanted.length && fits; i++) {
        const r = rest(a[i]!, i);
        if (!(Math.abs(b[i]! - r) <= CLOSE * (Math.abs(r) + scale[i]!))) fits = false;
      }
      const [first, second] = [candidates[k]!, candidates[j]!];
      if (!fits || overlap(first.edits, second.edits) || first.site === second.site) continue;
      out.push({ first, second, cost: first.cost + second.cost });
    }
  }
  return out;
}

function lower(keys: readonly number[], x: number): number {
  let low = 0;
  let high = keys.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (keys[middle]! < x) low = middle + 1;
    else high = middle;
  }
  return low;
}

function distinct(candidates: readonly Candidate[]): Candidate[] {
  const seen = new Set<string>();
  return candidates.filter((c) => {
    const key = c.edits.map((e) => `${e.span.start} ${e.span.end} ${e.text}`).join('|');
    if (seen.has(key)) return false;
    seen.add(key);
    return true;
  });
}
