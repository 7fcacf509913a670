import { readFileSync, writeFileSync } from 'node:fs';

/**
 * Puts a new text in a file, in the encoding it has (UTF-8 or UTF-16 with a byte order mark, which is the text's first
 * character).
 * @param before the text that the new one was made from
 * @returns why nothing was written; undefined where it was
 */
export function rewriteTextFile(path: string, before: string, after: string): string | undefined {
  try {
    const bytes = readFileSync(path);
    const encoding = bytes[0] === 0xff && bytes[1] === 0xfe ? 'utf16le' : 'utf8';
    const now = bytes.toString(encoding);
    if (now !== before) return 'it changed since it was checked';
    if (!Buffer.from(now, encoding).equals(bytes)) return 'it is not valid in its encoding';
    writeFileSync(path, Buffer.from(after, encoding));
    return undefined;
  } catch (error) {
    return `it cannot be written (${(error as NodeJS.ErrnoException).code ?? String(error)})`;
  }
}
