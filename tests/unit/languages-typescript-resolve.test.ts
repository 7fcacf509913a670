import { describe, expect, test } from 'vitest';
import { resolveImport } from '../../server/src/languages/typescript/resolve';

function files(content: Record<string, string>) {
  return { read: (path: string) => (Object.hasOwn(content, path) ? content[path] : undefined) };
}

function among(...paths: string[]) {
  return files(Object.fromEntries(paths.map((p) => [p, ''])));
}

describe('relative imports', () => {
  test.each([
    ['./b', '/p/a.ts', ['/p/b.ts'], '/p/b.ts'],
    ['./b', '/p/a.ts', ['/p/b.js', '/p/b.ts'], '/p/b.ts'],
    ['./b', '/p/a.js', ['/p/b.js', '/p/b.ts'], '/p/b.js'],
    ['./b.js', '/p/a.ts', ['/p/b.ts'], '/p/b.ts'],
    ['./b.js', '/p/a.ts', ['/p/b.tsx'], '/p/b.tsx'],
    ['./b.js', '/p/a.js', ['/p/b.js', '/p/b.ts'], '/p/b.js'],
    ['./b.mjs', '/p/a.mts', ['/p/b.mts'], '/p/b.mts'],
    ['./b.jsx', '/p/a.tsx', ['/p/b.tsx'], '/p/b.tsx'],
    ['./b.ts', '/p/a.ts', ['/p/b.ts'], '/p/b.ts'],
    ['../q/b', '/p/r/a.ts', ['/p/q/b.mjs'], '/p/q/b.mjs'],
    ['.', '/p/a.ts', ['/p/index.ts'], '/p/index.ts'],
    ['..', '/p/q/a.ts', ['/p/index.js'], '/p/index.js'],
    ['./rig', '/p/a.ts', ['/p/rig/index.tsx'], '/p/rig/index.tsx'],
    ['./rig/', '/p/a.ts', ['/p/rig/index.ts'], '/p/rig/index.ts'],
    ['./rig', '/p/a.ts', ['/p/rig/index.ts', '/p/rig.ts'], '/p/rig.ts'],
    ['./crane.model', '/p/a.ts', ['/p/crane.model.ts'], '/p/crane.model.ts'],
    ['./b?worker', '/p/a.ts', ['/p/b.ts'], '/p/b.ts'],
    ['./b', 'src/a.ts', ['src/b.ts'], 'src/b.ts'],
    ['../b', 'src/a.ts', ['b.ts'], 'b.ts'],
    ['../../b', 'src/a.ts', ['../b.ts'], '../b.ts'],
    ['./b', 'C:\\p\\a.ts', ['C:/p/b.ts'], 'C:/p/b.ts'],
    ['./b', '/p/a.ts', [], undefined],
    ['react', '/p/a.ts', ['/p/react.ts'], undefined],
    ['node:fs', '/p/a.ts', ['/p/fs.ts'], undefined],
    ['https://x.org/b.js', '/p/a.ts', [], undefined],
    ['/b', '/p/a.ts', ['/b.ts'], undefined],
    ['', '/p/a.ts', ['/p/index.ts'], undefined],
  ])('%s from %s', (from, importer, present, expected) => {
    expect(resolveImport(from, importer, among(...present))).toBe(expected);
  });
});

describe('project files', () => {
  const config = (compilerOptions: object, more: object = {}) => JSON.stringify({ compilerOptions, ...more });

  test('paths, with comments and trailing commas', () => {
    const project = files({
      '/p/tsconfig.json': '{ // rig\n "compilerOptions": { "paths": { "@/*": ["./src/*"], "@/odd/*": ["./odd/*", "./other/*"], "rig": ["./rig/main"], }, }, }',
      '/p/src/b.ts': '',
      '/p/other/c.ts': '',
      '/p/rig/main.ts': '',
    });
    expect(resolveImport('@/b', '/p/src/deep/a.ts', project)).toBe('/p/src/b.ts');
    expect(resolveImport('@/odd/c', '/p/src/a.ts', project)).toBe('/p/other/c.ts');
    expect(resolveImport('rig', '/p/src/a.ts', project)).toBe('/p/rig/main.ts');
    expect(resolveImport('@/none', '/p/src/a.ts', project)).toBeUndefined();
  });

  test('baseUrl', () => {
    const project = files({ '/p/jsconfig.json': config({ baseUrl: 'src', paths: { '~/*': ['lib/*'] } }), '/p/src/b.js': '', '/p/src/lib/c.js': '' });
    expect(resolveImport('b', '/p/src/x/a.js', project)).toBe('/p/src/b.js');
    expect(resolveImport('~/c', '/p/src/x/a.js', project)).toBe('/p/src/lib/c.js');
  });

  test('extends, relative and as a list; the nearest file only', () => {
    const project = files({
      '/p/tsconfig.json': config({ paths: { '#/*': ['./wrong/*'] } }),
      '/p/base.json': config({ baseUrl: '.', paths: { '@/*': ['src/*'] } }),
      '/p/app/tsconfig.json': config({}, { extends: ['../base'] }),
      '/p/src/b.ts': '',
      '/p/wrong/b.ts': '',
    });
    expect(resolveImport('@/b', '/p/app/a.ts', project)).toBe('/p/src/b.ts');
    expect(resolveImport('#/b', '/p/app/a.ts', project)).toBeUndefined();
  });

  test('a file that gathers others by references', () => {
    const project = files({
      '/p/tsconfig.json': JSON.stringify({ files: [], references: [{ path: './tsconfig.app.json' }, { path: './server' }] }),
      '/p/tsconfig.app.json': config({ paths: { '@/*': ['./src/*'] } }),
      '/p/src/b.ts': '',
    });
    expect(resolveImport('@/b', '/p/src/a.ts', project)).toBe('/p/src/b.ts');
  });

  test.each(['{', '[]', 'null', '{"compilerOptions": 3}', '{"extends": "./tsconfig.json"}', '{"compilerOptions": {"paths": {"@/*": 4, "x": [5]}}}', '{"references": [1, {}]}'])(
    'nonsense is no rule: %s',
    (text) => expect(resolveImport('@/b', '/p/a.ts', files({ '/p/tsconfig.json': text }))).toBeUndefined(),
  );
});
