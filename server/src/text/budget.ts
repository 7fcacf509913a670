/**
 * How much work a check may still do. Searches ask `spend` as they go and stop, keeping what they have, when it says no;
 * `why` then says what ran out. Long calculations that have nothing to keep call `work` and are left by `BudgetSpent`.
 */
export class Budget {
  private steps = 0;
  private stopped: 'cancelled' | 'time' | 'steps' | undefined;
  private readonly times = new Map<string, number>();
  private stage: string | undefined;
  private entered = 0;

  constructor(
    private readonly limits: { readonly milliseconds?: number; readonly steps?: number } = {},
    private readonly clock: () => number = () => performance.now(),
    private readonly cancelled: () => boolean = () => false,
    private readonly start = clock(),
  ) {}

  /** Takes `n` steps; false when nothing may go on. The clock is read every 256 steps only. */
  spend(n = 1): boolean {
    if (this.stopped) return false;
    const before = this.steps;
    this.steps += n;
    if (this.limits.steps !== undefined && this.steps > this.limits.steps) this.stopped = 'steps';
    else if (before >> 8 !== this.steps >> 8) this.look();
    return !this.stopped;
  }

  /** Reads clock and cancellation now. */
  look(): boolean {
    if (this.stopped) return false;
    if (this.cancelled()) this.stopped = 'cancelled';
    else if (this.limits.milliseconds !== undefined && this.clock() - this.start > this.limits.milliseconds) {
      this.stopped = 'time';
    }
    return !this.stopped;
  }

  get why(): 'cancelled' | 'time' | 'steps' | undefined {
    return this.stopped;
  }

  /** Milliseconds that are left; undefined without a limit. */
  get remaining(): number | undefined {
    const { milliseconds } = this.limits;
    return milliseconds === undefined ? undefined : Math.max(1, milliseconds - (this.clock() - this.start));
  }

  /** Nothing may go on: what was done for this budget elsewhere ran out. */
  stop(why: 'cancelled' | 'time' | 'steps'): void {
    this.stopped ??= why;
  }

  /**
   * Does a piece of work that is left, by `BudgetSpent`, when this budget is spent on the way.
   * @param stage what the time goes into, in words that complete "went into"
   */
  run<T>(stage: string, piece: () => T): T {
    const [outer, before] = [current, this.stage];
    this.account();
    this.stage = stage;
    current = this;
    try {
      return piece();
    } finally {
      this.account();
      this.stage = before;
      current = outer;
    }
  }

  private account(): void {
    const now = this.clock();
    if (this.stage !== undefined) this.times.set(this.stage, (this.times.get(this.stage) ?? 0) + now - this.entered);
    this.entered = now;
  }

  /** Why nothing was decided, and what most of the time went into. */
  get reason(): string {
    if (this.stopped === 'cancelled') return 'budget: the check was cancelled';
    const limit = this.limits.milliseconds;
    const what = this.stopped === 'time' && limit !== undefined ? `the ${seconds(limit)} for this check` : 'the work for this check';
    const [most] = [...this.times].sort((a, b) => b[1] - a[1]);
    return `budget: ${what} ran out before it was decided${most ? `, most of it in ${most[0]}` : ''}`;
  }
}

function seconds(milliseconds: number): string {
  return `${Number((milliseconds / 1000).toPrecision(2))} s`;
}

/** Thrown out of a piece of work whose budget is spent; `Budget.run` begins such a piece. */
export class BudgetSpent extends Error {
  constructor() {
    super('the budget is spent');
  }
}

/** Between two looks at the clock: about a millisecond. */
const UNITS = 100_000;

/** The budget of the piece of work at hand. Pieces never wait for anything, so that there is one at a time. */
let current: Budget | undefined;
let units = 0;

/**
 * Counts work, in units of about ten nanoseconds.
 * @throws BudgetSpent when the budget of the piece of work at hand is spent
 */
export function work(n: number): void {
  units += n;
  if (units < UNITS) return;
  units = 0;
  if (current && !current.look()) throw new BudgetSpent();
}
