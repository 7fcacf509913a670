import { closeSync, constants, fstatSync, openSync, readSync } from 'node:fs';

/** Files above this are not source code that a person wrote. */
export const sizeLimit = 8 * 1024 * 1024;

export type TextFile = { readonly text: string } | { readonly skipped: string };

/**
 * Reads a source file, or says why it is left out. UTF-8 with a byte order mark keeps the mark as its first character,
 * so that offsets are those of the file; bytes that are not UTF-8 become one replacement character each.
 */
export function readTextFile(path: string): TextFile {
  const read = readBytes(path);
  return 'skipped' in read ? read : decode(read.bytes);
}

/** The same for files that hold a mark (of ASCII characters); of others only that they can be read, told by their bytes. */
export function readMarkedFile(path: string, mark: string): TextFile | { readonly plain: true } {
  const read = readBytes(path);
  if ('skipped' in read) return read;
  const { bytes } = read;
  const isWide = bytes[0] === 0xff && bytes[1] === 0xfe;
  if (!isWide && !bytes.includes(mark, 0, 'latin1')) return bytes.includes(0) ? decode(bytes) : { plain: true };
  const decoded = decode(bytes);
  return 'text' in decoded && !decoded.text.includes(mark) ? { plain: true } : decoded;
}

/** Most files fit into it; what is read stays only until the next file. */
let shared = Buffer.allocUnsafeSlow(1 << 16);

function readBytes(path: string): { readonly bytes: Buffer } | { readonly skipped: string } {
  let descriptor: number | undefined;
  try {
    // Not blocking: to open a pipe would wait for its other end.
    descriptor = openSync(path, constants.O_RDONLY | (constants.O_NONBLOCK ?? 0));
    const stat = fstatSync(descriptor);
    if (!stat.isFile()) return { skipped: 'it is not a regular file' };
    if (stat.size > sizeLimit) {
      return { skipped: `it has ${megabytes(stat.size)} MB; files above ${megabytes(sizeLimit)} MB are not read` };
    }
    if (stat.size > shared.length) shared = Buffer.allocUnsafeSlow(stat.size);
    let at = 0;
    while (at < stat.size) {
      const n = readSync(descriptor, shared, at, stat.size - at, at);
      if (n === 0) break;
      at += n;
    }
    return { bytes: shared.subarray(0, at) };
  } catch (error) {
    return { skipped: reason(error) };
  } finally {
    if (descriptor !== undefined) closeSync(descriptor);
  }
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
