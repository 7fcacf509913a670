import { freeSymbol } from '../../comparison/claims';
import { Motion } from '../../comparison/motion';
import { Prober } from '../../comparison/prober';
import { Sampler } from '../../comparison/sampling';
import type { ClaimResult } from '../../comparison/subject';
import type { Expr } from '../../expression/node';
import { symbolsOf } from '../../expression/reach';
import type { Derived } from '../../mechanics/lagrange';
import type { Site } from './sites';
import type { Evaluation, TaggedReading } from './tagged';
import { TrialTape } from './trial-tape';

/** States every candidate is tried at, and copies of them run together. */
export const STATES = 20;
const BLOCKS = 2;
/** A first look takes fewer states and more candidates at a time. */
const FIRST_STATES = 4;
const FIRST_BLOCKS = 8;
const DRAWN = 64;
const FEWEST = 8;
/** Agreement of values computed along different ways, against the size of what is compared. */
const CLOSE = 1e-8;

/** A claim at the sampled states. */
export interface Target {
  readonly index: number;
  readonly found: Expr;
  readonly expected: Float64Array;
  readonly base: Float64Array;
  /** What a difference counts against, state by state. */
  readonly scale: Float64Array;
  readonly differs: boolean;
}

/** The function in numbers: its claims, the value at every place, and what becomes of the claims when a place changes. */
export class Model {
  private readonly shifts = new Map<Expr, Float64Array>();

  private constructor(
    readonly derived: Derived,
    readonly tagged: TaggedReading,
    private now: readonly Target[],
    readonly n: number,
    private readonly tape: TrialTape,
    private readonly first: TrialTape,
    private readonly values: TrialTape,
    private readonly columns: ReadonlyMap<Expr, Float64Array>,
  ) {}

  static make(derived: Derived, claims: readonly ClaimResult[], tagged: TaggedReading): Model | undefined {
    const { system } = derived;
    const known = [...tagged.found].filter(([i]) => claims[i]!.expected && claims[i]!.found);
    const tags = new Set([...tagged.evaluations.values()].flatMap((list) => list.map((e) => e.tag)));
    // Flags of the code are no symbols that could be drawn; what is assumed of them chose the branch already.
    const assumed = tagged.reading.assumed.filter((a) => !freeSymbol(a));
    const pairs = known.map(([i, found]) => ({ found, plain: claims[i]!.found!, expected: signedExpected(claims[i]!) }));
    const prober = new Prober(
      new Motion(derived),
      pairs.map((p) => [{ found: p.plain, expected: p.expected }]),
      [...assumed, ...symbolsOf(...pairs.flatMap((p) => [p.plain, p.expected]))],
    );
    const reads = [...tagged.evaluations.values()].flatMap((list) => list.map((e) => e.read));
    const wanted = new Set<Expr>([...prober.symbols, ...system.parameters.map((p) => p.symbol)]);
    const known2 = system.coordinates.flatMap((c) => [c.symbol, c.velocity]);
    for (const s of [...known2, ...system.inputs.map((u) => u.symbol)]) wanted.add(s);
    for (const s of symbolsOf(...reads, ...tagged.names.map((x) => x.expr))) if (!tags.has(s) && isDrawn(s)) wanted.add(s);
    const drawn = new Sampler(system).draw([...wanted], DRAWN);
    const { registers, columns } = prober.run(drawn, DRAWN);
    const good: number[] = [];
    for (let s = 0; s < DRAWN && good.length < STATES; s++) {
      if (!assumed.every((a) => registers.value(a, s) === 1)) continue;
      if (pairs.every((_, k) => prober.compare(registers, k, s).votes)) good.push(s);
    }
    if (good.length < FEWEST) return undefined;
    const n = good.length;
    const state = new Map<Expr, Float64Array>();
    for (const [symbol, c] of columns) state.set(symbol, Float64Array.from(good, (s) => c.values[s]!));
    // Accelerations and multipliers, where the code or the claims are about them.
    for (const symbol of prober.tape.symbols) {
      if (!state.has(symbol)) state.set(symbol, Float64Array.from(good, (s) => registers.value(symbol, s)));
    }
    const founds = pairs.map((p) => p.found);
    const tape = new TrialTape(founds, n * BLOCKS, (s) => repeated(state.get(s), n, BLOCKS));
    const first = new TrialTape(founds, FIRST_STATES * FIRST_BLOCKS, (s) => repeated(state.get(s), FIRST_STATES, FIRST_BLOCKS));
    const values = new TrialTape([...reads, ...tagged.names.map((x) => x.expr)], n, (s) => state.get(s));
    const targets: Target[] = [];
    for (let k = 0; k < pairs.length; k++) {
      const expected = Float64Array.from(good, (s) => registers.value(pairs[k]!.expected, s));
      const base = tape.baseOf(pairs[k]!.found).slice(0, n);
      const plain = Float64Array.from(good, (s) => registers.value(pairs[k]!.plain, s));
      const scale = expected.map((x, s) => Math.max(Math.abs(x), Math.abs(plain[s]!), 1e-3));
      // With tags the same must have been read.
      if (!base.every((x, s) => Math.abs(x - plain[s]!) <= CLOSE * scale[s]!)) return undefined;
      const differs = !expected.every((x, s) => Math.abs(x - plain[s]!) <= CLOSE * scale[s]!);
      targets.push({ index: known[k]![0], found: pairs[k]!.found, expected, base, scale, differs });
    }
    return new Model(derived, tagged, targets, n, tape, first, values, state);
  }

  get targets(): readonly Target[] {
    return this.now;
  }

  /** Runs `use` as if a change had been made. */
  during<T>(change: Change, use: () => T): T {
    const columns = change.map(({ evaluation, value }) => {
      const read = this.value(evaluation.read)!;
      return { symbol: evaluation.tag, values: value.map((x, s) => x - read[s]!) };
    });
    const wide = (n: number, blocks: number) => columns.map(({ symbol, values }) => ({ symbol, values: repeated(values, n, blocks)! }));
    const before = this.now;
    return this.tape.during(wide(this.n, BLOCKS), () =>
      this.first.during(wide(FIRST_STATES, FIRST_BLOCKS), () =>
        this.values.during(columns, () => {
          this.now = before.map((t) => {
            const base = this.tape.baseOf(t.found).slice(0, this.n);
            return { ...t, base, differs: !base.every((x, s) => Math.abs(x - t.expected[s]!) <= CLOSE * t.scale[s]!) };
          });
          for (const c of columns) this.shifts.set(c.symbol, c.values);
          const result = use();
          this.shifts.clear();
          this.now = before;
          return result;
        }),
      ),
    );
  }

  /** Whether a place can make a difference to a claim. */
  reaches(site: Site, target: Target): boolean {
    return this.evaluations(site).some((e) => this.tape.reaches(e.tag, target.found));
  }

  /** The value at a place, with the change that is being supposed. */
  valueAt(e: Evaluation): Float64Array | undefined {
    const read = this.value(e.read);
    const shift = this.shifts.get(e.tag);
    return read && shift ? read.map((x, s) => x + shift[s]!) : read;
  }

  /** Evaluations of a place that some claim depends on; empty where none does. */
  evaluations(site: Site): readonly Evaluation[] {
    const all = this.tagged.evaluations.get(site) ?? [];
    return all.some((e) => this.tape.has(e.tag)) ? all : [];
  }

  value(e: Expr): Float64Array | undefined {
    if (e.op === 'symbol' && this.columns.has(e)) return this.columns.get(e)!;
    return this.values.has(e) ? this.values.baseOf(e) : undefined;
  }

  column(symbol: Expr): Float64Array | undefined {
    return this.columns.get(symbol);
  }

  /**
   * Tries changes, a few at a time. Each gives the new values of some evaluations.
   * @param use is given the claims' values for each change
   */
  outcomes(changes: readonly Change[], use: (change: number, found: (target: Target) => Float64Array) => void): void {
    this.run(this.tape, this.n, BLOCKS, changes, use);
  }

  readonly firstStates = FIRST_STATES;

  /** What the search has cost so far, the same on every machine. */
  get work(): number {
    return this.tape.work + this.first.work;
  }

  /** The same at the first few states only. */
  firstLook(changes: readonly Change[], use: (change: number, found: (target: Target) => Float64Array) => void): void {
    this.run(this.first, FIRST_STATES, FIRST_BLOCKS, changes, use);
  }

  /** Those of many changes that make every claim right. */
  successes(changes: readonly Change[]): number[] {
    const promising: number[] = [];
    this.run(this.first, FIRST_STATES, FIRST_BLOCKS, changes, (k, found) => {
      if (this.targets.every((t) => this.agrees(t, found(t), FIRST_STATES, CLOSE))) promising.push(k);
    });
    const out: number[] = [];
    this.outcomes(promising.map((k) => changes[k]!), (k, found) => {
      if (this.targets.every((t) => this.holds(t, found(t)))) out.push(promising[k]!);
    });
    return out;
  }

  private run(
    tape: TrialTape,
    n: number,
    blocks: number,
    changes: readonly Change[],
    use: (change: number, found: (target: Target) => Float64Array) => void,
  ): void {
    for (let from = 0; from < changes.length; from += blocks) {
      const group = changes.slice(from, from + blocks);
      const settings = new Map<Expr, Float64Array>();
      group.forEach((change, b) => {
        for (const { evaluation, value } of change) {
          if (!tape.has(evaluation.tag)) continue;
          let column = settings.get(evaluation.tag);
          if (!column) settings.set(evaluation.tag, (column = new Float64Array(n * blocks)));
          const read = this.value(evaluation.read)!;
          for (let s = 0; s < n; s++) column[b * n + s] = value[s]! - read[s]!;
        }
      });
      tape.try([...settings].map(([symbol, values]) => ({ symbol, values })), () => {
        group.forEach((_, b) => use(from + b, (t) => tape.valueOf(t.found).subarray(b * n, (b + 1) * n)));
      });
    }
  }

  holds(target: Target, found: Float64Array, tolerance = CLOSE): boolean {
    return this.agrees(target, found, this.n, tolerance);
  }

  private agrees(target: Target, found: Float64Array, n: number, tolerance: number): boolean {
    for (let s = 0; s < n; s++) {
      if (!(Math.abs(found[s]! - target.expected[s]!) <= tolerance * target.scale[s]!)) return false;
    }
    return true;
  }
}

function repeated(values: Float64Array | undefined, n: number, blocks: number): Float64Array | undefined {
  if (!values) return undefined;
  const out = new Float64Array(n * blocks);
  for (let b = 0; b < blocks; b++) out.set(values.subarray(0, n), b * n);
  return out;
}

/** New values of some evaluations, state by state. */
export type Change = readonly { readonly evaluation: Evaluation; readonly value: Float64Array }[];

function signedExpected(claim: ClaimResult): Expr {
  return claim.expected!;
}

function isDrawn(s: Expr): boolean {
  const { role, order } = s.data as { role: string; order: number };
  return role !== 'free' && role !== 'auxiliary' && !(role === 'coordinate' && order === 2);
}
