import { parentPort, workerData } from 'node:worker_threads';
import { clock } from '../../host/clock';
import { createDiskFiles } from '../../host/files';
import { createService } from '../../service/index';
import { Budget } from '../../text/budget';
import type { FromWorker, ToWorker, Work, WorkerData } from './messages';

/** The thread that checks: the same service as in the server's own thread, asked by messages, one call at a time. */
const port = parentPort!;
const flag = new Int32Array((workerData as WorkerData).flag);
let folders: readonly string[] = [];
const disk = createDiskFiles(
  () => folders,
  (file) => service.handles(file),
);
const service = createService(disk);

port.on('message', (message: ToWorker) => {
  switch (message.kind) {
    case 'folders':
      folders = message.folders;
      disk.reset();
      break;
    case 'update':
      service.update(message.file, message.text);
      break;
    case 'close':
      service.close(message.file);
      break;
    case 'invalidate':
      service.invalidate(message.file);
      disk.changed(message.file);
      break;
    case 'call':
      void answer(message);
  }
});

async function answer({ id, work, args, milliseconds }: ToWorker & { kind: 'call' }): Promise<void> {
  const budget = new Budget(milliseconds === undefined ? {} : { milliseconds }, clock, () => Atomics.load(flag, 0) === id);
  const reply = (rest: Omit<FromWorker, 'id'>): void => port.postMessage({ id, ...rest, ...(budget.why ? { why: budget.why } : {}) });
  try {
    const method = service[work] as (...all: readonly unknown[]) => Promise<unknown>;
    reply({ value: await method(...args.slice(0, place(work, args)), budget, ...args.slice(place(work, args))) });
  } catch (error) {
    reply({ failure: error instanceof Error ? (error.stack ?? error.message) : String(error) });
  }
}

/** Where the budget stands among a method's arguments: last, but for the depth of a check. */
function place(work: Work, args: readonly unknown[]): number {
  return work === 'check' ? 1 : args.length;
}
