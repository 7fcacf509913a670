import { closeSync, openSync, readSync, statSync } from 'node:fs';

/** Files above this are not source code that a person wrote. */
export const sizeLimit = 8 * 1024 * 1024;

export type TextFile = { readonly text: string } | { readonly skipped: string };

/**
 * Reads a source file, or says why it is left out. UTF-8 with a byte order mark keeps the mark as its first character,
 * so that offsets are those of the file; bytes that are not UTF-8 become one replacement character each.
 */
export function readTextFile(path: string): TextFile {
  let descriptor: number | undefined;
  try {
    // Asked before opening: to open a pipe would wait for its other end.
    const stat = statSync(path);
    if (!stat.isFile()) return { skipped: 'it is not a regular file' };
    if (stat.size > sizeLimit) {
      return { skipped: `it has ${megabytes(stat.size)} MB; files above ${megabytes(sizeLimit)} MB are not read` };
    }
    descriptor = openSync(path, 'r');
    return decode(readAll(descriptor, stat.size));
  } catch (error) {
    return { skipped: reason(error) };
  } finally {
    if (descriptor !== undefined) closeSync(descriptor);
  }
}

function readAll(descriptor: number, size: number): Buffer {
  const bytes = Buffer.alloc(size);
  let at = 0;
  while (at < size) {
    const read = readSync(descriptor, bytes, at, size - at, at);
    if (read === 0) break;
    at += read;
  }
  return bytes.subarray(0, at);
}

function decode(bytes: Buffer): TextFile {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return { text: bytes.toString('utf16le') };
  if (bytes.includes(0)) return { skipped: 'it is a binary file' };
  return { text: bytes.toString('utf8') };
}

function megabytes(bytes: number): string {
  const value = bytes / (1024 * 1024);
  return value >= 10 ? value.toFixed(0) : value.toFixed(1).replace(/\.0$/, '');
}

function reason(error: unknown): string {
  const code = (error as NodeJS.ErrnoException).code;
  if (code === 'ENOENT') return 'there is no such file';
  if (code === 'EACCES' || code === 'EPERM') return 'reading it is not permitted';
  if (code === 'ELOOP') return 'it is a symbolic link that leads to itself';
  if (code === 'EISDIR') return 'it is a folder';
  if (code === 'ENAMETOOLONG') return 'its path is too long';
  return `it cannot be read (${code ?? String(error)})`;
}
