import { beforeAll, describe, expect, it } from 'vitest';
import { load } from '../../server/src/languages/python/language';
import type { LanguageCore } from '../../server/src/languages/language';
import { showAll } from './languages-typescript-show';

let core: LanguageCore;
beforeAll(async () => {
  core = await load();
});

const form = (text: string): string => showAll(core.parse('a.py', text).body);

/** The body of a function whose text this is. */
function inside(text: string): string {
  const lines = text.split('\n').map((l) => `    ${l}`);
  const [f] = core.parse('a.py', `def f(x, y):\n${lines.join('\n')}\n`).body;
  return f?.kind === 'function' ? showAll(f.node.body) : 'no function';
}

describe('Python expressions', () => {
  it.each([
    ['a + b * -c ** 2', '(a + (b * -((c ** 2))))'],
    ['a @ b // c % d', '(((a matmul b) floor-divide c) remainder-floor d)'],
    ['a < b <= c', '((a < b) and (b <= c))'],
    ['a is not None', '(a != #nothing)'],
    ['a not in b', 'not((a in b))'],
    ['not a and b or c', '((not(a) and b) or c)'],
    ['a if b else c', '(b ? a : c)'],
    ['p["m"]', 'p["m"]'],
    ['p.get("m", 1.5)', '(p?.["m"] coalesce 3/2)'],
    ['y[1:-1, 0]', 'y[:, 0]'],
    ['f(*a, b=1, **c)', 'f(...a, 1, ...c)'],
    ['dict(a=1, b=x)', '{a: 1, b: x}'],
    ['{"a": 1, **c}', '{a: 1, ...c}'],
    ['1_000.5e-1', '2001/20'],
    ['0x1F', '31'],
    ['2j', '‹a complex number›'],
    ['"a" "b"', '"ab"'],
    ['f"m{i}"', '(("" + "m") + i)'],
    ['np.r_[a, 0]', 'np.r_([a, 0])'],
    ['sum(x for x in xs)', 'sum(comprehension)'],
    ['isinstance(a, B)', '(a instanceof B)'],
    ['(a)', 'a'],
    ['(a,)', '[a]'],
    ['a & 1', '(a bit-and 1)'],
    ['await a', '‹a value that is awaited›'],
  ])('%s', (text, expected) => {
    expect(inside(`return ${text}`)).toBe(`return ${expected};`);
  });
});

describe('Python statements', () => {
  it('declares a name at its first assignment', () => {
    expect(inside('a = 1\na = a + x\nx = 2')).toBe('var a = 1; (a = (a + x)); (x = 2);');
  });
  it('takes tuples apart', () => {
    expect(inside('a, (b, *c) = x')).toBe('var [a, [b, ...c]] = x;');
  });
  it('writes to places and names together', () => {
    expect(inside('self.a, b = x')).toContain('= x)');
  });
  it('knows several targets', () => {
    expect(inside('a = b = 1')).toContain('(a = (b = 1))');
  });
  it('leaves global names to the file', () => {
    expect(inside('global G\nG = 1')).toBe('(G = 1);');
  });
  it('leaves out what only runs as a script', () => {
    expect(form('if __name__ == "__main__":\n    run()')).toBe('');
  });
  it('leaves out assertions, types and docstrings', () => {
    expect(inside('"""doc"""\nassert x > 0, "no"\na: float\npass')).toBe('');
  });
  it('divides integers in Python 2 as Python 2 does', () => {
    const divides = (text: string): boolean => core.parse('a.py', text).dividesIntegers === true;
    expect(divides('#!/usr/bin/env python2\na = 4 / 3')).toBe(true);
    expect(divides('#!/usr/bin/env python2\nfrom __future__ import division\na = 4 / 3')).toBe(false);
    expect(divides('a = 4 / 3')).toBe(false);
    expect(divides('a = 4 / 3\nprint "a"')).toBe(true);
  });
  it('matches literals', () => {
    const text = inside('match x:\n    case 1 | 2:\n        a = 1\n    case "s":\n        a = 2\n    case _:\n        a = 3');
    expect(text).toContain(' == 1)');
    expect(text).toContain(' == "s")');
  });
  it('never nests without end', () => {
    expect(() => form(`x = ${'('.repeat(4000)}1${')'.repeat(4000)}`)).not.toThrow();
    expect(() => form(`x = ${'-'.repeat(4000)}1`)).not.toThrow();
    expect(() => form(`x = ${'['.repeat(4000)}`)).not.toThrow();
    expect(() => form(`x = ${Array(3000).fill('a').join(' + ')}`)).not.toThrow();
  });
});

describe('Python functions and classes', () => {
  const only = (text: string) => core.parse('a.py', text).body.find((s) => s.kind === 'function' || s.kind === 'class');

  it('turns the receiver into self', () => {
    const c = only('class A:\n    def f(this, m):\n        return [this.m for k in m]');
    expect(c?.kind === 'class' && showAll(c.node.members[0]!.node!.body)).toContain('comprehension');
    expect(c?.kind === 'class' && c.node.members[0]!.node!.selfParameter).toBe(true);
  });
  it('knows what decorators make of methods', () => {
    const c = only(
      'class A:\n    @property\n    def a(self): return 1\n    @a.setter\n    def a(self, v): pass\n    @staticmethod\n    def b(x): return x\n    @classmethod\n    def c(cls): return cls',
    );
    const members = c?.kind === 'class' ? c.node.members.map((m) => `${m.isStatic ? 'static ' : ''}${m.kind} ${m.name}`) : [];
    expect(members).toEqual(['getter a', 'setter a', 'static method b', 'method b', 'static method c', 'method c']);
  });
  it('gives dataclasses and named tuples their constructor', () => {
    const c = only('@dataclass\nclass A:\n    m: float\n    l: float = 2.0\n    def __post_init__(self): self.k = 1');
    const init = c?.kind === 'class' ? c.node.members.find((m) => m.kind === 'constructor')?.node : undefined;
    expect(init?.parameters.map((p) => (p.pattern.kind === 'name' ? p.pattern.name : ''))).toEqual(['self', 'm', 'l']);
    expect(showAll(init?.body ?? [])).toBe('#self.__post_init__();');
    const t = only('class P(NamedTuple):\n    m: float\n    l: float');
    expect(t?.kind === 'class' && t.node.members.filter((m) => m.kind === 'getter').map((m) => m.name)).toEqual(['0', '1']);
  });
  it.each([
    ['@njit\ndef f(x): return x', undefined, undefined],
    ['@partial(jax.jit, static_argnums=0)\ndef f(x): return x', undefined, undefined],
    ['@memo.something\ndef f(x): return x', undefined, 'it is decorated with `@memo.something`, which is not known'],
    ['async def f(x): return x', 'an async function', undefined],
    ['def f(x): yield x', 'a generator', undefined],
  ])('%s', (text, opaque, wrapped) => {
    const f = only(text);
    expect(f?.kind === 'function' && f.node.opaque).toBe(opaque);
    expect(f?.kind === 'function' && f.node.wrapped).toBe(wrapped);
  });
});

describe('Python imports', () => {
  it('names modules and what is taken from them', () => {
    const { body } = core.parse('a.py', 'import numpy as np, scipy.linalg\nfrom .rig import Crane as C\nfrom math import *\n');
    expect(body.map((s) => (s.kind === 'import' ? [s.from, s.namespace, s.all, s.names.map((n) => `${n.imported}:${n.local}`)] : s.kind))).toEqual([
      ['numpy', 'np', undefined, []],
      ['scipy', 'scipy', undefined, []],
      ['.rig', undefined, undefined, ['Crane:C']],
      ['math', undefined, true, []],
    ]);
  });
  it('brings imports inside functions to the top', () => {
    const [first] = core.parse('a.py', 'def f():\n    import numpy as np\n    return np.pi').body;
    expect(first?.kind === 'import' && first.namespace).toBe('np');
  });
});
