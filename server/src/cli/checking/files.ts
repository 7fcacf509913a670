import { existsSync, statSync } from 'node:fs';
import { availableParallelism } from 'node:os';
import { fileURLToPath } from 'node:url';
import { declarationMark, version } from '@visviva/shared';
import type { DiskFiles } from '../../host/files';
import { cacheFolder, digest, ResultStore, type Stored } from '../../host/result-store';
import { readMarkedFile } from '../../host/text-file';
import type { FileResult } from '../../service/api';
import type { Skipped } from '../inputs';
import type { Checked } from './one-file';
import { checkInThreads } from './pool';

export interface CheckFilesOptions {
  readonly disk: DiskFiles;
  readonly projects: readonly string[];
  readonly milliseconds: number;
  /** Take results from earlier runs, and leave this run's for later ones. */
  readonly useCache: boolean;
  /** Told of each file that is done, with how many there are. */
  readonly done?: (file: string, total: number) => void;
}

export interface CheckedFiles {
  /** In the order of the files. */
  readonly results: readonly FileResult[];
  readonly skipped: readonly Skipped[];
  readonly failures: readonly { readonly file: string; readonly failure: string }[];
  /** How many files could be read. */
  readonly read: number;
}

/** Fewer files than this for each thread are checked sooner without one. */
const FILES_PER_THREAD = 6;

/**
 * Checks files: those that declare nothing are told by their bytes, results of earlier runs are taken where nothing they
 * were made from has changed, and the rest is spread over the processors. What checks is loaded only when it is needed.
 */
export async function checkFiles(files: readonly string[], options: CheckFilesOptions): Promise<CheckedFiles> {
  const skipped: Skipped[] = [];
  const found = new Map<string, FileResult>();
  const failures: { file: string; failure: string }[] = [];
  const open: { file: string; subject: string }[] = [];
  const cache = options.useCache ? new Cache(options.disk) : undefined;
  let read = 0;
  for (const file of files) {
    const text = readMarkedFile(file, declarationMark);
    if ('skipped' in text) {
      skipped.push({ file, reason: text.skipped });
      continue;
    }
    read++;
    if (!('text' in text) && !file.endsWith('.visviva')) continue;
    const subject = digest(file, 'text' in text ? text.text : '', JSON.stringify(options.disk.settings(file)));
    const known = cache?.find(subject);
    if (known) found.set(file, known);
    else open.push({ file, subject });
  }
  const subjects = new Map(open.map((o) => [o.file, o.subject]));
  const keep = (file: string, checked: Checked): void => {
    found.set(file, checked.result);
    options.done?.(file, open.length);
    if (checked.isWhole) cache?.store.add(subjects.get(file)!, checked);
  };
  const threads = Math.min(availableParallelism(), Math.floor(open.length / FILES_PER_THREAD));
  const entry = poolEntry();
  if (threads > 1 && entry) {
    await checkInThreads(open.map((o) => o.file), threads, entry, { projects: options.projects, milliseconds: options.milliseconds }, (reply) => {
      if ('checked' in reply) keep(reply.file, reply.checked);
      else failures.push(reply);
    });
  } else if (open.length > 0) {
    const { checkOneFile } = await import('./one-file');
    for (const { file } of open) {
      try {
        keep(file, await checkOneFile(file, options.disk, options.milliseconds, () => performance.now()));
      } catch (error) {
        failures.push({ file, failure: error instanceof Error ? (error.stack ?? error.message) : String(error) });
      }
    }
  }
  cache?.store.prune();
  return { results: files.flatMap((f) => found.get(f) ?? []), skipped, failures, read };
}

/** The worker's program, beside the bundle or one above the chunks; undefined where nothing is bundled. */
function poolEntry(): URL | undefined {
  return ['./pool-worker.mjs', '../pool-worker.mjs'].map((path) => new URL(path, import.meta.url)).find((url) => existsSync(url));
}

/** Results of earlier runs that still hold. */
class Cache {
  readonly store = new ResultStore<FileResult>(cacheFolder(), digest(version, build()));
  private readonly contents = new Map<string, string | null>();
  private declaring: string | undefined;

  constructor(private readonly disk: DiskFiles) {}

  find(subject: string): FileResult | undefined {
    const stored = this.store.find(subject);
    return stored && this.holds(stored) ? stored.result : undefined;
  }

  private holds({ reads, declaring }: Stored<FileResult>): boolean {
    if (declaring !== null && declaring !== (this.declaring ??= digest(...this.disk.declarations()))) return false;
    return Object.entries(reads).every(([file, content]) => this.content(file) === content);
  }

  private content(file: string): string | null {
    let known = this.contents.get(file);
    if (known === undefined) {
      const text = this.disk.read(file);
      this.contents.set(file, (known = text === undefined ? null : digest(text)));
    }
    return known;
  }
}

/** Tells builds of one version apart. */
function build(): string {
  try {
    const { size, mtimeMs } = statSync(fileURLToPath(import.meta.url));
    return `${import.meta.url} ${size} ${mtimeMs}`;
  } catch {
    return import.meta.url;
  }
}
