/** The package has its TypeScript source beside it, which does not pass a strict compiler: these stand for it. */
export class Solver {
  constructor(n: number);
  denseOutput: boolean;
  relativeTolerance: number;
  absoluteTolerance: number;
  maxSteps: number;
  grid(step: number, out: (t: number, y: number[]) => boolean | void): unknown;
  solve(rates: (t: number, y: number[]) => number[], from: number, start: readonly number[], to: number, out?: unknown): unknown;
}
