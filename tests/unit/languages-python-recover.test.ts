import { beforeAll, describe, expect, it } from 'vitest';
import { load } from '../../server/src/languages/python/language';
import type { LanguageCore } from '../../server/src/languages/language';

let core: LanguageCore;
beforeAll(async () => {
  core = await load();
});

const WHOLE = `import numpy as np

# @visviva a
def f(x):
    a = x + 1
    return a

class A:
    """doc"""
    k = 3

    @property
    def g(self):
        return self.x

    # @visviva b
    def h(self, y):
        """What it does."""
        z = y * 3
        return z

    def i(self):
        return 2

def j(y):
    return y
`;

interface Seen {
  readonly functions: readonly string[];
  readonly subjects: readonly string[];
  readonly errors: number;
}

function seen(text: string): Seen {
  const p = core.parse('a.py', text);
  const mark = (name: string, opaque: string | undefined): string => (opaque === undefined ? name : `${name}!`);
  const functions = p.body.flatMap((s) => {
    if (s.kind === 'function') return [mark(s.node.name, s.node.opaque)];
    if (s.kind !== 'class') return [];
    return s.node.members.filter((m) => m.node).map((m) => mark(`${s.node.name}.${m.name}`, m.node!.opaque));
  });
  const subjects = p.comments.map((c) => (c.subject.kind === 'function' ? mark(c.subject.path, c.subject.node.opaque) : c.subject.kind));
  return { functions, subjects, errors: p.errors.length };
}

describe('half-typed Python', () => {
  it('is whole without an error', () => {
    expect(seen(WHOLE)).toEqual({ functions: ['f', 'A.g', 'A.h', 'A.i', 'j'], subjects: ['f', 'A.h'], errors: 0 });
  });

  it.each([
    ['an open bracket', 'y * (3'],
    ['a name that is missing', 'np.'],
    ['an open list over lines', '[1,\n    2'],
    ['a word alone', 'y * 3 if'],
    ['an open string', '"abc'],
    ['an operator at the end', 'y *'],
  ])('loses only the function with %s', (_, typed) => {
    const found = seen(WHOLE.replace('y * 3', typed));
    expect(found.functions).toEqual(['f', 'A.g', 'A.h!', 'A.i', 'j']);
    expect(found.subjects).toEqual(['f', 'A.h!']);
    expect(found.errors).toBeGreaterThan(0);
  });

  it.each([
    ['at the top', `x = [1, 2\n${WHOLE}`],
    ['in a class', WHOLE.replace('k = 3', 'k = (3')],
  ])('keeps all functions of a file with an error %s', (_, text) => {
    expect(seen(text).functions.map((n) => n.replace('!', ''))).toEqual(['f', 'A.g', 'A.h', 'A.i', 'j']);
  });

  it('survives every prefix of a file, and every file without one character', () => {
    for (let k = 0; k < WHOLE.length; k += 3) {
      expect(() => core.parse('a.py', WHOLE.slice(0, k))).not.toThrow();
      expect(() => core.parse('a.py', WHOLE.slice(0, k) + WHOLE.slice(k + 1))).not.toThrow();
    }
  });

  it('gives the same program edited as parsed anew', () => {
    const long = WHOLE + '\n# a remark\n'.repeat(500);
    core.parse('edited.py', long);
    for (const [from, to] of [['x + 1', 'x + 12'], ['return 2', 'return 22\n'], ['class A', 'class AB']] as const) {
      const text = long.replace(from, to);
      expect(core.parse('edited.py', text)).toEqual(core.parse(`other-${from}.py`, text));
    }
  });
});
