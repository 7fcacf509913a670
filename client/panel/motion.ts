import type { PanelData, PanelMotion } from '@visviva/shared';
import { Solver } from 'odex';
import { Evaluator } from './tape';

/** A motion on an even grid of times; it ends early where nothing finite goes on. */
export interface Track {
  readonly times: readonly number[];
  /** Per coordinate. */
  readonly positions: readonly (readonly number[])[];
  readonly velocities: readonly (readonly number[])[];
  readonly energy: readonly number[];
}

const points = 400;
const mostSteps = 20_000;

/**
 * Integrates accelerations from a start by ODEX (E. Hairer, S. P. Norsett, G. Wanner, Solving Ordinary Differential
 * Equations I, section II.9).
 * @param start values of all symbols, in the panel's order: coordinates, velocities, then the rest
 */
export function integrate(data: PanelData, motion: PanelMotion, accelerations: readonly number[], start: readonly number[], duration: number): Track {
  const n = motion.coordinates.length;
  const evaluator = new Evaluator(data.tape);
  const symbols = Float64Array.from(start);
  const time = data.symbols.findIndex((s) => s.kind === 'time');
  const begin = time < 0 ? 0 : start[time]!;
  const at = (t: number, y: ArrayLike<number>): Float64Array => {
    for (let i = 0; i < 2 * n; i++) symbols[i] = y[i]!;
    if (time >= 0) symbols[time] = begin + t;
    return evaluator.run(symbols);
  };
  const track: { times: number[]; positions: number[][]; velocities: number[][]; energy: number[] } = {
    times: [],
    positions: Array.from({ length: n }, () => []),
    velocities: Array.from({ length: n }, () => []),
    energy: [],
  };
  const keep = (t: number, y: ArrayLike<number>): boolean => {
    const energy = at(t, y)[motion.energy]!;
    for (let i = 0; i < 2 * n; i++) if (!Number.isFinite(y[i]!)) return false;
    track.times.push(t);
    track.energy.push(energy);
    for (let i = 0; i < n; i++) {
      track.positions[i]!.push(y[i]!);
      track.velocities[i]!.push(y[n + i]!);
    }
    return true;
  };
  const solver = new Solver(2 * n);
  solver.denseOutput = true;
  solver.relativeTolerance = 1e-9;
  solver.absoluteTolerance = 1e-9;
  solver.maxSteps = mostSteps;
  const rates = (t: number, y: number[]): number[] => {
    const v = at(t, y);
    return [...y.slice(n, 2 * n), ...accelerations.map((a) => v[a]!)];
  };
  try {
    solver.solve(rates, 0, start.slice(0, 2 * n), duration, solver.grid(duration / points, (t: number, y: number[]) => keep(t, y)));
  } catch {
    // A step that can't be made: what there is so far is shown.
  }
  return track;
}
