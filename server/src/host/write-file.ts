import { closeSync, fsyncSync, openSync, realpathSync, renameSync, statSync, unlinkSync, writeSync, type Stats } from 'node:fs';
import { randomBytes } from 'node:crypto';
import { basename, dirname, join } from 'node:path';

/**
 * Writes a whole file or nothing: the text goes to a file beside it, which then takes its name. What is no regular file
 * (a pipe, a terminal) is written as it stands.
 * @returns why nothing was written, as the end of a sentence; undefined where it was
 */
export function writeWholeFile(name: string, text: string): string | undefined {
  let path = name;
  let beside: string | undefined;
  try {
    const before = statOf(name);
    if (before?.isDirectory()) return 'it is a folder';
    if (before && !before.isFile()) {
      // By the name it was given: what `/dev/stdout` leads to may have none of its own.
      writeAll(path, 'w', 0o666, text);
      return undefined;
    }
    // A link stays a link: what it leads to is replaced.
    if (before) path = realpathSync(name);
    // Otherwise the new file would take the place of one that was to stay as it is.
    if (before) closeSync(openSync(path, 'r+'));
    const next = join(dirname(path), `.${basename(path).slice(0, 40)}.${randomBytes(6).toString('hex')}`);
    beside = next;
    writeAll(next, 'wx', before?.mode ?? 0o666, text);
    renameSync(next, path);
    beside = undefined;
    return undefined;
  } catch (error) {
    return reason(error, path);
  } finally {
    if (beside !== undefined) remove(beside);
  }
}

function writeAll(path: string, flags: string, mode: number, text: string): void {
  const descriptor = openSync(path, flags, mode & 0o777);
  try {
    const bytes = Buffer.from(text, 'utf8');
    for (let at = 0; at < bytes.length; ) at += writeSync(descriptor, bytes, at);
    if (flags === 'wx') fsyncSync(descriptor);
  } finally {
    closeSync(descriptor);
  }
}

function statOf(path: string): Stats | undefined {
  return statSync(path, { throwIfNoEntry: false });
}

function remove(path: string): void {
  try {
    unlinkSync(path);
  } catch {
    // It was never made, or is gone.
  }
}

function reason(error: unknown, path: string): string {
  const code = (error as NodeJS.ErrnoException).code;
  switch (code) {
    case 'ENOENT':
    case 'ENOTDIR':
      return `there is no folder ${dirname(path)}; make it first`;
    case 'EACCES':
    case 'EPERM':
      return 'writing there is not permitted';
    case 'EROFS':
      return 'that place can only be read';
    case 'ENOSPC':
    case 'EDQUOT':
      return 'there is no space left there';
    case 'ENAMETOOLONG':
      return 'its name is too long';
    case 'EISDIR':
      return 'it is a folder';
    default:
      return code ?? String(error);
  }
}
