import type { Clock } from '../host/clock';

/** One run of one file's check; `cancelled` turns true as soon as its result is no longer wanted. */
export interface Run {
  readonly key: string;
  readonly cancelled: () => boolean;
}

/** A check that took less than this is repeated at every keystroke. */
const quick = 30;
const longestWait = 300;
const nothing = (): void => undefined;

interface Entry {
  /** Takes back the wish that still waits for its time. */
  unschedule: () => void;
  lastMilliseconds: number;
  run: { cancelled: boolean } | undefined;
}

/**
 * Decides when a file is checked: at once where its last check was quick, otherwise after a pause in typing that grows
 * with the time a check takes. One check runs at a time; what is in view comes first, of that the file asked for last, and a run whose file is
 * asked for again is cancelled.
 */
export class CheckQueue {
  private readonly entries = new Map<string, Entry>();
  private readonly ready = new Set<string>();
  private busy = false;

  constructor(
    private readonly work: (run: Run) => Promise<void>,
    private readonly clock: Clock,
    private readonly isVisible: (key: string) => boolean = () => false,
  ) {}

  /** Asks for a check of a file, not before `atLeast` milliseconds from now. */
  request(key: string, atLeast = 0): void {
    const entry = this.entries.get(key) ?? { unschedule: nothing, lastMilliseconds: 0, run: undefined };
    this.entries.set(key, entry);
    this.stop(key, entry);
    const wait = entry.lastMilliseconds < quick ? 0 : Math.min(longestWait, entry.lastMilliseconds);
    const fire = (): void => {
      entry.unschedule = nothing;
      this.ready.add(key);
      void this.pump();
    };
    const delay = Math.max(wait, atLeast);
    if (delay > 0) {
      const timer = setTimeout(fire, delay);
      entry.unschedule = () => clearTimeout(timer);
    } else {
      const timer = setImmediate(fire);
      entry.unschedule = () => clearImmediate(timer);
    }
  }

  forget(key: string): void {
    const entry = this.entries.get(key);
    if (entry) this.stop(key, entry);
    this.entries.delete(key);
  }

  private stop(key: string, entry: Entry): void {
    entry.unschedule();
    entry.unschedule = nothing;
    if (entry.run) entry.run.cancelled = true;
    this.ready.delete(key);
  }

  private async pump(): Promise<void> {
    if (this.busy) return;
    const key = [...this.ready].filter((k) => this.isVisible(k)).pop() ?? [...this.ready].pop();
    const entry = key === undefined ? undefined : this.entries.get(key);
    if (key === undefined || !entry) return;
    this.ready.delete(key);
    this.busy = true;
    const run = { cancelled: false };
    entry.run = run;
    const start = this.clock();
    try {
      await this.work({ key, cancelled: () => run.cancelled });
    } finally {
      const took = this.clock() - start;
      entry.lastMilliseconds = run.cancelled ? Math.max(entry.lastMilliseconds, took) : took;
      if (entry.run === run) entry.run = undefined;
      this.busy = false;
      // Messages that came in meanwhile go first: they may make the next check needless.
      setImmediate(() => void this.pump());
    }
  }
}
