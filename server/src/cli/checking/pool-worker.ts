import { parentPort, workerData } from 'node:worker_threads';
import { createDiskFiles } from '../../host/files';
import { handlesFile } from '../../service/handles';
import { checkOneFile } from './one-file';
import type { PoolData, PoolReply } from './pool';

/** Checks files, one after the other, as the command's own thread asks. */
const { projects, milliseconds } = workerData as PoolData;
const disk = createDiskFiles(() => projects, handlesFile);

parentPort!.on('message', (file: string) => {
  checkOneFile(file, disk, milliseconds, () => performance.now()).then(
    (checked) => send({ file, checked }),
    (error: unknown) => send({ file, failure: error instanceof Error ? (error.stack ?? error.message) : String(error) }),
  );
});

function send(reply: PoolReply): void {
  parentPort!.postMessage(reply);
}
