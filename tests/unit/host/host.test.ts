import { mkdirSync, mkdtempSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import { execFileSync } from 'node:child_process';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { createDiskFiles } from '../../../server/src/host/files';
import { absolute, pathOf, shown, uriOf } from '../../../server/src/host/paths';
import { readTextFile, sizeLimit } from '../../../server/src/host/text-file';
import { walk } from '../../../server/src/host/walk';

let root: string;
beforeEach(() => {
  root = mkdtempSync(join(tmpdir(), 'visviva-host-'));
});
afterEach(() => rmSync(root, { recursive: true, force: true }));

function put(file: string, content: string | Uint8Array = ''): string {
  const path = join(root, file);
  mkdirSync(join(path, '..'), { recursive: true });
  writeFileSync(path, content);
  return path;
}

describe('reading a file', () => {
  test('keeps a byte order mark as a character', () =>
    expect(readTextFile(put('a.ts', '\ufeffconst θ = 1;'))).toEqual({ text: '\ufeffconst θ = 1;' }));

  test('gives one character for each byte that is not UTF-8', () => {
    const read = readTextFile(put('a.ts', Uint8Array.from([0x2f, 0x2f, 0xe9, 0x20, 0x78])));
    expect(read).toEqual({ text: '//\ufffd x' });
  });

  test('reads UTF-16 with a byte order mark', () =>
    expect(readTextFile(put('a.ts', Buffer.from('\ufeffx = 1', 'utf16le')))).toEqual({ text: '\ufeffx = 1' }));

  test.each([
    ['a missing file', () => join(root, 'none.ts'), /no such file/],
    ['a folder', () => root, /not a regular file/],
    ['a binary file', () => put('a.ts', Uint8Array.from([1, 0, 2])), /binary/],
    ['a huge file', () => put('a.ts', Buffer.alloc(sizeLimit + 1, 32)), /above 8 MB are not read/],
    [
      'a link to itself',
      () => {
        symlinkSync('loop.ts', join(root, 'loop.ts'));
        return join(root, 'loop.ts');
      },
      /leads to itself/,
    ],
    ['a path with a zero in it', () => 'a\0.ts', /cannot be read/],
  ])('says why %s is left out', (_, make, reason) => {
    const read = readTextFile(make());
    expect('skipped' in read && read.skipped).toMatch(reason);
  });

  test.skipIf(process.platform === 'win32')('does not wait for a pipe', () => {
    const pipe = join(root, 'pipe.ts');
    execFileSync('mkfifo', [pipe]);
    expect(readTextFile(pipe)).toEqual({ skipped: 'it is not a regular file' });
  });
});

describe('walking a folder', () => {
  const typescript = (file: string): boolean => file.endsWith('.ts');
  const names = (): string[] => walk(root, typescript).files.map((file) => file.slice(root.length + 1));

  test('finds wanted files in order, outside of foreign folders', () => {
    for (const file of ['b/z.ts', 'a.ts', 'b/a.ts', 'c.js', 'node_modules/p/i.ts', '.git/x.ts']) put(file);
    expect(names()).toEqual(['a.ts', 'b/a.ts', 'b/z.ts']);
  });

  test('follows .gitignore files, the inner one first', () => {
    put('.gitignore', '/out\n*.gen.ts\n');
    put('kept/.gitignore', '!a.gen.ts\n');
    for (const file of ['out/a.ts', 'a.gen.ts', 'kept/a.gen.ts', 'kept/b.gen.ts', 'kept/out/b.ts']) put(file);
    expect(names()).toEqual(['kept/a.gen.ts', 'kept/out/b.ts']);
  });

  test('survives links that lead back, and reports dead ones', () => {
    put('a/b.ts');
    symlinkSync('..', join(root, 'a/up'));
    symlinkSync('nowhere.ts', join(root, 'a/dead.ts'));
    const found = walk(root, typescript);
    expect(found.files).toEqual([join(root, 'a/b.ts')]);
    expect(found.skipped).toEqual([{ file: join(root, 'a/dead.ts'), reason: expect.stringContaining('ENOENT') }]);
  });

  test('stops at the limit', () => {
    for (let i = 0; i < 5; i++) put(`${i}.ts`);
    expect(walk(root, typescript, 3).files).toHaveLength(3);
  });
});

test('files that declare something are found, and found again after a change', () => {
  const files = createDiskFiles(
    () => [root],
    (file) => /\.(ts|visviva)$/.test(file),
  );
  const declaring = put('a.ts', '// @visviva crane');
  const alone = put('b.visviva', 'coordinates x');
  const plain = put('c.ts', 'nothing');
  expect(files.declarations()).toEqual([declaring, alone]);
  writeFileSync(plain, '/* @visviva hoist */');
  writeFileSync(declaring, '');
  expect(files.declarations()).toEqual([declaring, alone]);
  files.changed(plain);
  files.changed(declaring);
  expect(files.declarations()).toEqual([alone, plain]);
});

test('paths and addresses', () => {
  expect(pathOf('file:///tmp/a%20b/%C3%A9.ts')).toBe('/tmp/a b/é.ts');
  expect(pathOf('untitled:Untitled-1')).toBeUndefined();
  expect(pathOf('file://host%zz/')).toBeUndefined();
  expect(uriOf('/tmp/a b.ts')).toBe('file:///tmp/a%20b.ts');
  expect(absolute('b.ts', '/tmp/a')).toBe('/tmp/a/b.ts');
  expect(shown('/tmp/a/b.ts', '/tmp/a')).toBe('b.ts');
  expect(shown('/tmp/c.ts', '/tmp/a')).toBe('/tmp/c.ts');
});
