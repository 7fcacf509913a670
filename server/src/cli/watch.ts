import { watch as watchFiles } from 'chokidar';
import { toSlashes } from '../host/paths';
import { handlesFile } from '../service/handles';
import { checkSession, type CheckOptions, type Outcome } from './check';
import { UsageError, type Io, type Status } from './io';
import { openSession } from './session';

/** So long after the last change the check begins: an editor that saves writes more than once. */
const PAUSE = 120;
const NEVER = /[\\/](node_modules|\.git|\.hg|\.svn|__pycache__|\.venv)([\\/]|$)/;

/** Checks, and checks again after each change, until it is interrupted. */
export async function watch(paths: readonly string[], options: CheckOptions, write: (outcome: Outcome) => Promise<Status>, io: Io): Promise<Status> {
  const session = openSession(paths, io);
  const { disk } = session;
  let running = false;
  let again = false;

  const run = async (): Promise<void> => {
    if (running) {
      again = true;
      return;
    }
    running = true;
    do {
      again = false;
      try {
        await write(await checkSession(session, options, io));
      } catch (error) {
        // A half-written configuration is a state to wait through.
        if (!(error instanceof UsageError)) throw error;
        io.log(error.message);
      }
      io.log('Waiting for changes; interrupt to end.');
    } while (again);
    running = false;
  };

  const watcher = watchFiles([...session.inputs().projects], { ignored: (path) => NEVER.test(path), ignoreInitial: true });
  let timer: NodeJS.Timeout | undefined;
  watcher.on('all', (_event, path) => {
    const file = toSlashes(path);
    if (!handlesFile(file) && !/\.(json|toml)$|ignore$/.test(file)) return;
    disk.changed(file);
    clearTimeout(timer);
    timer = setTimeout(() => void run(), PAUSE);
  });
  await new Promise<void>((done, fail) => watcher.once('ready', done).once('error', fail));
  await run();
  await new Promise<void>((done) => {
    process.once('SIGINT', done);
    process.once('SIGTERM', done);
  });
  clearTimeout(timer);
  await watcher.close();
  return 0;
}
