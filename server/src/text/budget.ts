/**
 * How much work a check may still do. Searches ask `spend` as they go and stop, keeping what they have, when it says no;
 * `why` then says what ran out.
 */
export class Budget {
  private steps = 0;
  private stopped: 'cancelled' | 'time' | 'steps' | undefined;

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
    if (this.cancelled()) this.stopped = 'cancelled';
    else if (this.limits.milliseconds !== undefined && this.clock() - this.start > this.limits.milliseconds) {
      this.stopped = 'time';
    }
    return !this.stopped;
  }

  get why(): 'cancelled' | 'time' | 'steps' | undefined {
    return this.stopped;
  }
}
