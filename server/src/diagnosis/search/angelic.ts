import type { Model, Target } from './model';
import type { Site } from './sites';
import type { Evaluation } from './tagged';

/**
 * The values a place would need for all claims to be right at every state (S. Chandra, E. Torlak, S. Barman, R. Bodik,
 * "Angelic Debugging", ICSE 2011: a place where such values exist may hold the fault, others may not).
 */
export type Needed =
  /** These values, and no others, do it; NaN at states where the claims don't depend on the place. */
  | { readonly kind: 'values'; readonly need: Float64Array }
  /**
   * The claims depend on the place in a way that was not solved, or that several values solve, `guess` among them:
   * candidates have to be tried.
   */
  | { readonly kind: 'open'; readonly guess?: Float64Array }
  /** No value does it; `fixes` are claims that would be right with the values `need`, while no other gets worse. */
  | { readonly kind: 'none'; readonly partial: { readonly need: Float64Array; readonly fixes: readonly Target[] } | undefined };

const NEWTON = 10;

export function solvePlace(model: Model, site: Site, evaluations: readonly Evaluation[]): Needed {
  if (evaluations.length !== 1) return { kind: 'open' };
  const evaluation = evaluations[0]!;
  const value = model.value(evaluation.read);
  if (!value || site.node.kind === 'conditional') return { kind: 'open' };
  const { n } = model;
  const step = stepOf(value);
  const shifted = [1, 2].map((k) => [{ evaluation, value: value.map((x, s) => x + k * step[s]!) }]);
  const probes: Map<Target, Float64Array>[] = [new Map(), new Map()];
  model.outcomes(shifted, (k, found) => {
    for (const t of model.targets) probes[k]!.set(t, found(t).slice());
  });
  const touched = model.targets.filter((t) => depends(t, probes[0]!.get(t)!) || depends(t, probes[1]!.get(t)!));
  const wrong = model.targets.filter((t) => t.differs);
  if (touched.length === 0) return { kind: 'none', partial: undefined };
  const reachable = wrong.filter((t) => touched.includes(t));
  if (reachable.length === 0) return { kind: 'none', partial: undefined };
  let partial: { need: Float64Array; fixes: readonly Target[] } | undefined;
  let isOpen = false;
  for (const target of reachable.slice(0, 3)) {
    const need = new Float64Array(n);
    let possible = true;
    for (let s = 0; s < n; s++) {
      const u = moebius(target.base[s]!, probes[0]!.get(target)![s]!, probes[1]!.get(target)![s]!, target.expected[s]!, target.scale[s]!);
      if (u === undefined) possible = false;
      need[s] = value[s]! + (u ?? 0) * step[s]!;
    }
    if (!possible) {
      isOpen = true;
      continue;
    }
    let exact = polish(model, target, evaluation, need);
    if (exact === 'unsolved') {
      const from = value.slice();
      exact = newton(model, target, evaluation, from, step);
      if (exact !== 'unsolved') need.set(from);
    }
    if (exact === 'unsolved') {
      isOpen = true;
      continue;
    }
    const fixes: Target[] = [];
    let harm = false;
    model.outcomes([[{ evaluation, value: need }]], (_, found) => {
      for (const t of model.targets) {
        if (model.holds(t, found(t), 1e-7)) {
          if (t.differs) fixes.push(t);
        } else if (!t.differs) harm = true;
      }
    });
    if (fixes.length === wrong.length && !harm) {
      for (let s = 0; s < n; s++) {
        if (touched.every((t) => isSame(t, probes[0]!.get(t)!, s) && isSame(t, probes[1]!.get(t)!, s))) need[s] = NaN;
      }
      return exact === 'several' ? { kind: 'open', guess: need } : { kind: 'values', need };
    }
    if (exact === 'several') isOpen = true;
    if (!harm && fixes.length > (partial?.fixes.length ?? 0)) partial = { need, fixes };
  }
  // A claim that the place cannot touch stays wrong whatever stands there.
  if (isOpen && reachable.length === wrong.length) return { kind: 'open' };
  return { kind: 'none', partial };
}

function stepOf(value: Float64Array): Float64Array {
  return value.map((x) => 0.25 + 0.5 * Math.abs(x));
}

function depends(t: Target, probe: Float64Array): boolean {
  return probe.some((_, s) => !isSame(t, probe, s));
}

function isSame(t: Target, probe: Float64Array, s: number): boolean {
  return Math.abs(probe[s]! - t.base[s]!) <= 1e-12 * t.scale[s]!;
}

/**
 * Where a function through three points at 0, 1, 2 takes the value wanted, supposing it is a quotient of two affine
 * functions, as claims mostly are of a place: those keep the cross-ratio of four points.
 */
function moebius(f0: number, f1: number, f2: number, f: number, scale: number): number | undefined {
  if (Math.abs(f - f0) <= 1e-10 * scale) return 0;
  if (![f0, f1, f2].every(Number.isFinite)) return undefined;
  const top = (f - f0) * (f1 - f2);
  const bottom = (f - f2) * (f1 - f0);
  if (bottom === 0) return top === 0 ? undefined : 2;
  const ratio = top / bottom;
  const u = (2 * ratio) / (1 + ratio);
  return Number.isFinite(u) ? u : undefined;
}

/** One secant step from a guess, to take the rounding of the guess away; tells whether the guess was right at all. */
function polish(model: Model, target: Target, evaluation: Evaluation, need: Float64Array): 'unique' | 'several' | 'unsolved' {
  let worst = 0;
  const near = need.map((x) => x + 1e-5 * (1e-3 + Math.abs(x)));
  const outcome: Float64Array[] = [];
  model.outcomes([[{ evaluation, value: need }], [{ evaluation, value: near }]], (k, found) => {
    outcome[k] = found(target).slice();
  });
  for (let s = 0; s < model.n; s++) {
    const d = outcome[0]![s]! - target.expected[s]!;
    worst = Math.max(worst, Math.abs(d) / target.scale[s]!);
    const slope = (outcome[1]![s]! - outcome[0]![s]!) / (near[s]! - need[s]!);
    const by = d / slope;
    if (Number.isFinite(by) && Math.abs(by) < 1e-4 * (1e-3 + Math.abs(need[s]!))) need[s] = need[s]! - by;
  }
  return worst < 1e-5 ? 'unique' : 'unsolved';
}

/** A few Newton steps; several values may do where a place is inside a sine. */
function newton(model: Model, target: Target, evaluation: Evaluation, value: Float64Array, step: Float64Array): 'several' | 'unsolved' {
  for (let k = 0; k < NEWTON; k++) {
    const near = value.map((x, s) => x + 1e-6 * step[s]!);
    const outcome: Float64Array[] = [];
    model.outcomes([[{ evaluation, value }], [{ evaluation, value: near }]], (i, found) => {
      outcome[i] = found(target).slice();
    });
    let worst = 0;
    for (let s = 0; s < model.n; s++) {
      const d = outcome[0]![s]! - target.expected[s]!;
      worst = Math.max(worst, Math.abs(d) / target.scale[s]!);
      const slope = (outcome[1]![s]! - outcome[0]![s]!) / (near[s]! - value[s]!);
      const by = d / slope;
      if (Number.isFinite(by)) value[s] = value[s]! - Math.max(-4 * step[s]!, Math.min(4 * step[s]!, by));
    }
    if (!Number.isFinite(worst)) return 'unsolved';
    if (worst < 1e-9) return 'several';
  }
  return 'unsolved';
}
