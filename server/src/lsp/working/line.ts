import { Worker } from 'node:worker_threads';
import type { Budget } from '../../text/budget';
import type { FromWorker, ToWorker, Work, WorkerData } from './messages';

/** Beyond its own limit a call gets so much more before its thread is given up. */
const grace = 10_000;
const withoutLimit = 120_000;
/** So often a running call is asked whether it is still wanted. */
const watchInterval = 4;

interface Call {
  readonly work: Work;
  readonly args: readonly unknown[];
  readonly budget: Budget | undefined;
  readonly urgency: number;
  readonly resolve: (value: unknown) => void;
  readonly reject: (error: Error) => void;
}

/**
 * The line to the thread that checks. One call runs at a time, the most urgent of those that wait comes next; what is no
 * longer wanted is left at once. A thread that does not come back is stopped and another one started.
 */
export class Line {
  private worker: Worker | undefined;
  private flag = new Int32Array(new SharedArrayBuffer(4));
  private running: { readonly id: number; readonly call: Call; readonly done: () => void } | undefined;
  private readonly waiting: Call[] = [];
  private lastId = 0;

  /**
   * @param entry address of the worker's program
   * @param state what a new thread has to be told before its first call
   */
  constructor(
    private readonly entry: URL,
    private readonly state: () => readonly ToWorker[],
  ) {}

  get isBusy(): boolean {
    return this.running !== undefined && this.running.call.urgency >= 0;
  }

  /** Tells the thread of a change; one that is not there yet hears of it when it starts. */
  tell(message: ToWorker): void {
    this.worker?.postMessage(message);
  }

  /**
   * @param urgency larger comes first
   * @returns what the service in the other thread returns
   */
  call(work: Work, args: readonly unknown[], budget: Budget | undefined, urgency: number): Promise<unknown> {
    return new Promise((resolve, reject) => {
      this.waiting.push({ work, args, budget, urgency, resolve, reject });
      // What only prepares for later makes way.
      if (this.running && this.running.call.urgency < 0 && urgency > this.running.call.urgency) this.leave();
      this.next();
    });
  }

  /** Takes back the calls that wait and that `unwanted` accepts. */
  drop(unwanted: (work: Work, args: readonly unknown[]) => boolean): void {
    for (let i = this.waiting.length - 1; i >= 0; i--) {
      const call = this.waiting[i]!;
      if (!unwanted(call.work, call.args)) continue;
      this.waiting.splice(i, 1);
      call.resolve(undefined);
    }
    if (this.running && unwanted(this.running.call.work, this.running.call.args)) this.leave();
  }

  async stop(): Promise<void> {
    await this.worker?.terminate();
  }

  private leave(): void {
    if (this.running) Atomics.store(this.flag, 0, this.running.id);
  }

  private next(): void {
    if (this.running || this.waiting.length === 0) return;
    let best = 0;
    this.waiting.forEach((c, i) => {
      if (c.urgency > this.waiting[best]!.urgency) best = i;
    });
    const [call] = this.waiting.splice(best, 1) as [Call];
    const worker = this.thread();
    const id = ++this.lastId;
    const milliseconds = call.budget?.remaining;
    const deadline = setTimeout(() => this.giveUp(new Error(`The thread that checks did not come back from ${call.work}; it was stopped.`)), (milliseconds ?? withoutLimit) * 2 + grace);
    deadline.unref();
    const watch = setInterval(() => {
      if (call.budget && !call.budget.look() && call.budget.why === 'cancelled') this.leave();
    }, watchInterval);
    watch.unref();
    this.running = {
      id,
      call,
      done: () => {
        clearTimeout(deadline);
        clearInterval(watch);
        this.running = undefined;
      },
    };
    const message: ToWorker = { kind: 'call', id, work: call.work, args: call.args, milliseconds };
    worker.postMessage(message);
  }

  private thread(): Worker {
    if (this.worker) return this.worker;
    const workerData: WorkerData = { flag: this.flag.buffer as SharedArrayBuffer };
    const worker = new Worker(this.entry, { workerData });
    worker.unref();
    worker.on('message', (reply: FromWorker) => this.answered(reply));
    worker.on('error', (error) => worker === this.worker && this.giveUp(error));
    worker.on('exit', () => worker === this.worker && this.giveUp(new Error('The thread that checks has ended.')));
    this.worker = worker;
    for (const message of this.state()) worker.postMessage(message);
    return worker;
  }

  private answered(reply: FromWorker): void {
    if (this.running?.id !== reply.id) return;
    const { call, done } = this.running;
    done();
    if (reply.why) call.budget?.stop(reply.why);
    if (reply.failure !== undefined) call.reject(new Error(reply.failure));
    else call.resolve(reply.value);
    this.next();
  }

  private giveUp(error: Error): void {
    const { worker, running } = this;
    this.worker = undefined;
    this.flag = new Int32Array(new SharedArrayBuffer(4));
    void worker?.terminate();
    running?.done();
    running?.call.reject(error);
    this.next();
  }
}
