import { describe, expect, it } from 'vitest';
import { resolveImport } from '../../server/src/languages/python/resolve';

const FILES = ['/p/crane/__init__.py', '/p/crane/rig.py', '/p/crane/parts/boom.py', '/p/crane/parts/__init__.py', '/p/tools.py', '/p/src/harbour/sea.py', '/p/models/a.py'];
const files = { read: (f: string) => (FILES.includes(f) ? '' : undefined) };

describe('Python imports', () => {
  it.each([
    ['.rig', '/p/crane/main.py', '/p/crane/rig.py'],
    ['.', '/p/crane/main.py', '/p/crane/__init__.py'],
    ['..rig', '/p/crane/parts/boom.py', '/p/crane/rig.py'],
    ['.parts.boom', '/p/crane/main.py', '/p/crane/parts/boom.py'],
    ['crane.rig', '/p/main.py', '/p/crane/rig.py'],
    ['crane.parts.boom', '/p/crane/parts/other.py', '/p/crane/parts/boom.py'],
    ['tools', '/p/crane/rig.py', '/p/tools.py'],
    ['harbour.sea', '/p/tests/t.py', '/p/src/harbour/sea.py'],
    ['numpy', '/p/main.py', undefined],
    ['nowhere', '/p/main.py', undefined],
    ['....x', '/p/main.py', undefined],
  ])('%s from %s', (from, importer, expected) => {
    expect(resolveImport(from, importer, files)).toBe(expected);
  });
});
