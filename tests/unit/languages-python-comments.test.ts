import { beforeAll, describe, expect, it } from 'vitest';
import { load } from '../../server/src/languages/python/language';
import type { LanguageCore } from '../../server/src/languages/language';

let core: LanguageCore;
beforeAll(async () => {
  core = await load();
});

const subjects = (text: string): string[] =>
  core.parse('a.py', text).comments.map(({ subject }) => (subject.kind === 'file' ? 'file' : `${subject.kind} ${subject.path}`));

describe('what a Python comment stands before or in', () => {
  it.each([
    ['# @visviva a\ndef f(): pass', 'function f'],
    ['# @visviva a\n# more\n\ndef f(): pass', 'function f'],
    ['# @visviva a\n@jit\ndef f(): pass', 'function f'],
    ['@jit\n# @visviva a\ndef f(): pass', 'function f'],
    ['# @visviva a\nclass A:\n    pass', 'class A'],
    ['class A:\n    # @visviva a\n    def f(self): pass', 'function A.f'],
    ['class A:\n    """@visviva a"""\n    def f(self): pass', 'class A'],
    ['class A:\n    def f(self):\n        """@visviva a"""', 'function A.f'],
    ['"""Module.\n\n@visviva a\n"""\ndef f(): pass', 'file'],
    ['def f():\n    # @visviva a\n    return 1', 'function f'],
    ['def f():\n    return 1\n    # @visviva a\n\ndef g(): pass', 'function f'],
    ['def f():\n    return 1\n# @visviva a\ndef g(): pass', 'function g'],
    ['# @visviva a\nf = lambda x: x', 'function f'],
    ['# @visviva a\nx = 1', 'file'],
    ['def f():\n    # @visviva a\n    def g(): pass\n    return g', 'function f.g'],
    ['x = 1\n"""@visviva a"""\ndef f(): pass', 'function f'],
    ['@visviva\ndef f(): pass', undefined],
    ['x = "@visviva a"', undefined],
  ])('%j', (text, expected) => {
    expect(subjects(text)).toEqual(expected === undefined ? [] : [expected]);
  });

  it('keeps places in the text with characters of any width', () => {
    const text = 'é = "𝜃"\n# @visviva a\ndef f(): pass';
    const [c] = core.parse('a.py', text).comments;
    expect(text.slice(c!.span.start, c!.span.end)).toBe('# @visviva a');
  });
});
