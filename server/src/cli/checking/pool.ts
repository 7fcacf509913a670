import { Worker } from 'node:worker_threads';
import type { Checked } from './one-file';

export interface PoolData {
  readonly projects: readonly string[];
  readonly milliseconds: number;
}

export type PoolReply =
  | { readonly file: string; readonly checked: Checked }
  | { readonly file: string; readonly failure: string };

/** Beyond a file's own limit its thread gets so much more before it is given up. */
const grace = 30_000;

/**
 * Checks files in threads of their own, each as soon as a thread is free. A thread that fails or does not come back is
 * replaced; its file fails.
 */
export async function checkInThreads(files: readonly string[], threads: number, entry: URL, data: PoolData, done: (reply: PoolReply) => void): Promise<void> {
  const waiting = [...files].reverse();
  await Promise.all(
    Array.from({ length: Math.min(threads, files.length) }, async () => {
      let worker: Worker | undefined;
      for (let file = waiting.pop(); file !== undefined; file = waiting.pop()) {
        worker ??= new Worker(entry, { workerData: data });
        const reply = await ask(worker, file, data.milliseconds + grace);
        if ('lost' in reply) {
          void worker.terminate();
          worker = undefined;
        }
        done(reply);
      }
      await worker?.terminate();
    }),
  );
}

function ask(worker: Worker, file: string, milliseconds: number): Promise<PoolReply & { readonly lost?: true }> {
  return new Promise((resolve) => {
    const lost = (why: string) => finish({ file, failure: why, lost: true });
    const onMessage = (reply: PoolReply) => finish(reply);
    const onError = (error: unknown) => lost(error instanceof Error ? (error.stack ?? error.message) : String(error));
    const onExit = () => lost('The thread that checked it has ended.');
    const timer = setTimeout(() => lost(`It was not checked within ${Math.round(milliseconds / 1000)} s.`), milliseconds);
    const finish = (reply: PoolReply & { readonly lost?: true }): void => {
      clearTimeout(timer);
      worker.off('message', onMessage).off('error', onError).off('exit', onExit);
      resolve(reply);
    };
    worker.on('message', onMessage).on('error', onError).on('exit', onExit);
    worker.postMessage(file);
  });
}
