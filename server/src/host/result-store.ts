import { createHash } from 'node:crypto';
import { mkdirSync, readdirSync, readFileSync, renameSync, rmSync, statSync, utimesSync, writeFileSync } from 'node:fs';
import { homedir } from 'node:os';
import { join } from 'node:path';

/** What one result was made from beside the text it is about: contents by file, or that there was no such file. */
export type Reads = Readonly<Record<string, string | null>>;

export interface Stored<Result> {
  readonly reads: Reads;
  /** The list of files that declare something, where it was asked for. */
  readonly declaring: string | null;
  readonly result: Result;
}

/** Entries beyond this are deleted, the longest unused first. */
const mostEntries = 20_000;
const mostBytes = 256 * 1024 * 1024;
/** An entry that was used is marked so once a day. */
const day = 24 * 60 * 60 * 1000;

export function digest(...parts: readonly (string | Uint8Array)[]): string {
  const hash = createHash('sha256');
  for (const part of parts) hash.update(String(part.length)).update(':').update(part);
  return hash.digest('base64url');
}

/** The folder for what can be made again, by the XDG Base Directory Specification; on Windows and macOS where theirs are. */
export function cacheFolder(environment: NodeJS.ProcessEnv = process.env): string {
  const named = environment['XDG_CACHE_HOME'];
  if (named) return join(named, 'visviva');
  if (process.platform === 'win32') return join(environment['LOCALAPPDATA'] ?? homedir(), 'visviva', 'cache');
  if (process.platform === 'darwin') return join(homedir(), 'Library', 'Caches', 'visviva');
  return join(homedir(), '.cache', 'visviva');
}

function remove(path: string): void {
  try {
    rmSync(path, { force: true });
  } catch {
    // It stays until it is the longest unused.
  }
}

/**
 * Results on disk, one file each, by the hash of what they are about. An entry takes its place whole or not at all and
 * carries its own hash, so that a crash, another process or a damaged disk cost no more than a result made again.
 */
export class ResultStore<Result> {
  private written = 0;

  /** @param maker what the results depend on beyond files: version and build of the program */
  constructor(
    private readonly folder: string,
    private readonly maker: string,
  ) {}

  find(subject: string): Stored<Result> | undefined {
    const path = this.pathOf(subject);
    try {
      const text = readFileSync(path, 'utf8');
      const end = text.indexOf('\n');
      const body = text.slice(end + 1);
      if (text.slice(0, end) !== digest(this.maker, subject, body)) return undefined;
      const now = Date.now();
      if (now - statSync(path).mtimeMs > day) utimesSync(path, now / 1000, now / 1000);
      return JSON.parse(body) as Stored<Result>;
    } catch {
      return undefined;
    }
  }

  /** Keeps a result; where that is not possible, nothing is kept. */
  add(subject: string, stored: Stored<Result>): void {
    const path = this.pathOf(subject);
    const beside = `${path}.${process.pid}`;
    try {
      const body = JSON.stringify(stored);
      mkdirSync(this.folder, { recursive: true });
      writeFileSync(beside, `${digest(this.maker, subject, body)}\n${body}`);
      renameSync(beside, path);
      this.written++;
    } catch {
      remove(beside);
    }
  }

  /** Deletes what is beyond the bounds; call after results were added. */
  prune(entries = mostEntries, bytes = mostBytes): void {
    if (this.written === 0) return;
    try {
      const files = readdirSync(this.folder).flatMap((name) => {
        try {
          const stat = statSync(join(this.folder, name));
          return [{ path: join(this.folder, name), size: stat.size, used: stat.mtimeMs }];
        } catch {
          return [];
        }
      });
      files.sort((a, b) => b.used - a.used);
      let size = 0;
      files.forEach((file, i) => {
        size += file.size;
        if (i >= entries || size > bytes) remove(file.path);
      });
    } catch {
      // Another process may be at it.
    }
  }

  private pathOf(subject: string): string {
    return join(this.folder, digest(this.maker, subject));
  }
}
