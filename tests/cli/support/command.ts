import { spawnSync } from 'node:child_process';
import { mkdirSync, mkdtempSync, readFileSync, realpathSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { vi } from 'vitest';

// Every run is a process of its own, and the machine may be busy.
vi.setConfig({ testTimeout: 120_000 });

/** The built command. */
export const command = fileURLToPath(new URL('../../../dist/visviva.mjs', import.meta.url));

export interface Result {
  readonly status: number | null;
  readonly out: string;
  readonly log: string;
}

/** Runs the built command as a process of its own. */
export function visviva(folder: string, ...args: string[]): Result {
  return visvivaWith({}, folder, ...args);
}

/** Results of earlier runs are not those of this person's own. */
const cache = join(tmpdir(), `visviva-cache-${process.pid}`);
process.on('exit', () => rmSync(cache, { recursive: true, force: true }));

/** What a test runs must not take this machine for a hosted one. */
const HOSTED = { GITHUB_ACTIONS: '', TF_BUILD: '', TEAMCITY_VERSION: '', GITLAB_CI: '' };

export function visvivaWith(environment: Readonly<Record<string, string>>, folder: string, ...args: string[]): Result {
  return started({ env: environment }, folder, args);
}

function started(given: { readonly env?: Readonly<Record<string, string>>; readonly input?: string }, folder: string, args: readonly string[]): Result {
  const r = spawnSync(process.execPath, [command, ...args], {
    cwd: folder,
    encoding: 'utf8',
    env: { ...process.env, NO_COLOR: '1', XDG_CACHE_HOME: cache, ...HOSTED, ...given.env },
    ...(given.input === undefined ? {} : { input: given.input }),
    maxBuffer: 1 << 26,
  });
  return { status: r.status, out: r.stdout, log: r.stderr };
}

/** A folder with these files, gone when the test is over. */
export class Folder {
  readonly path: string;

  constructor(files: Readonly<Record<string, string | Uint8Array>> = {}, path?: string) {
    this.path = path ?? realpathSync(mkdtempSync(join(tmpdir(), 'visviva-')));
    for (const [name, text] of Object.entries(files)) this.write(name, text);
  }

  write(name: string, text: string | Uint8Array): void {
    const file = join(this.path, name);
    mkdirSync(dirname(file), { recursive: true });
    writeFileSync(file, text);
  }

  read(name: string): string {
    return readFileSync(join(this.path, name), 'utf8');
  }

  run(...args: string[]): Result {
    return visviva(this.path, ...args);
  }

  runWith(environment: Readonly<Record<string, string>>, ...args: string[]): Result {
    return visvivaWith(environment, this.path, ...args);
  }

  /** With a text on standard input. */
  runTyped(input: string, ...args: string[]): Result {
    return started({ input }, this.path, args);
  }

  /** A folder inside this one, to run in. */
  inside(name: string): Folder {
    return new Folder({}, join(this.path, name));
  }

  [Symbol.dispose](): void {
    rmSync(this.path, { recursive: true, force: true });
  }
}

/** A weight on a rope; `force` is what the code computes for th''. */
export function rope(force: string, name = 'rope-weight'): string {
  return `/**
 * @visviva ${name}
 * coordinates  th [rad]              from straight down, counter-clockwise
 * parameters   m [kg] > 0, l [m] > 0, g [m/s^2] > 0
 * point weight: mass m at (l*sin(th), -l*cos(th))
 * gravity (0, -g)
 * checks return = [th', th'']
 */
export function rates(th: number, thd: number, l: number, g: number) {
  return [thd, ${force}];
}
`;
}

export const RIGHT = '-(g / l) * Math.sin(th)';
export const WRONG = '(g / l) * Math.sin(th)';
