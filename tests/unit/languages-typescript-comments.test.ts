import { describe, expect, test } from 'vitest';
import type { Subject } from '../../server/src/program/form';
import { parseTypeScript } from '../../server/src/languages/typescript/parse';

const MARK = '/** @visviva a */';

function subjects(text: string, file = 'a.ts'): Subject[] {
  return parseTypeScript(file, text).comments.map((c) => c.subject);
}

/** `function rates`, `class Crane`, `file`, `function Crane.step of Crane`; `$` in the text stands for the comment. */
function subject(text: string, file = 'a.ts'): string {
  const found = subjects(text.replace('$', () => MARK), file);
  expect(found).toHaveLength(1);
  const s = found[0]!;
  if (s.kind === 'file') return 'file';
  return `${s.kind} ${s.path}${s.kind === 'function' && s.owner ? ` of ${s.owner.name}` : ''}`;
}

describe('what a comment stands before', () => {
  test.each([
    ['$ function rates() {}', 'function rates'],
    ['$ export function rates() {}', 'function rates'],
    ['$ export default function rates() {}', 'function rates'],
    ['$ export default function () {}', 'function default'],
    ['$ export default (s) => s', 'function default'],
    ['$ const f = (s) => s', 'function f'],
    ['$ export const f = function (s) {}', 'function f'],
    ['$ let f: Rates = ((s) => s) as Rates', 'function f'],
    ['$ module.exports = function rates() {}', 'function rates'],
    ['$ module.exports = () => 1', 'function default'],
    ['$ exports.f = function () {}', 'function f'],
    ['$ module.exports.f = () => 1', 'function f'],
    ['$ rig.f = function () {}', 'function rig.f'],
    ['$ window.f = function () {}', 'function f'],
    ['$ Crane.prototype.step = function () {}', 'function Crane.step'],
    ['$ const f = exports.f = () => 1', 'function f'],
    ['$ const f = useCallback((s) => s, [])', 'function f'],
    ['$ const f = memo(wrap(function (s) {}))', 'function f'],
    ['$ setInterval(() => { step() }, 16)', 'function <anonymous>'],
    ['solve($ (t, y) => [y[1], -y[0]], 1)', 'function <anonymous>'],
    ['const sol = solve(\n  $\n  (t, y) => y)', 'function sol'],
    ['$ (function () { f() })()', 'function <anonymous>'],
    ['$ class Crane {}', 'class Crane'],
    ['$ export default class extends A {}', 'class default'],
    ['$ const Crane = class {}', 'class Crane'],
    ['$ @logged @sealed({ a: 1 }) export class Crane {}', 'class Crane'],
    ['class Crane { $ step() {} }', 'function Crane.step of Crane'],
    ['class Crane { $ @logged\n\n // more\n async step() {} }', 'function Crane.step of Crane'],
    ['class Crane { $ get e() { return 1 } }', 'function Crane.e of Crane'],
    ['class Crane { $ constructor() {} }', 'function Crane.constructor of Crane'],
    ['class Crane { $ static of() {} }', 'function Crane.of of Crane'],
    ['class Crane { $ #rates = (s) => s }', 'function Crane.#rates of Crane'],
    ['class Crane { constructor() { $ this.step = () => 1 } }', 'function Crane.constructor.step of Crane'],
    ['class Crane { constructor() { $ this.step = function () {} } }', 'function Crane.constructor.step of Crane'],
    ['class Crane { run() { $ const f = () => this.m } }', 'function Crane.run.f of Crane'],
    ['class Crane { run() { $ function f() {} } }', 'function Crane.run.f'],
    ['class Crane { run() { return { $ rates() {} } } }', 'function Crane.run.rates'],
    ['class Crane { $ m = 1; }', 'class Crane'],
    ['class Crane { m = 1; $ }', 'class Crane'],
    ['const api = { $ rates(s) {} }', 'function api.rates'],
    ['const api = { $ rates: (s) => s, b: 1 }', 'function api.rates'],
    ['const api = { f: { $ "g h"() {} } }', 'function api.f.g h'],
    ['export default { $ rates(s) {} }', 'function default.rates'],
    ['module.exports = { $ rates: function (s) {} }', 'function default.rates'],
    ['function makeCrane() { $ function rates() {} }', 'function makeCrane.rates'],
    ['function makeCrane() { $ return function rates() {} }', 'function makeCrane.rates'],
    ['function makeCrane() { $ return (s) => s }', 'function makeCrane.<anonymous>'],
    ['(function () { $ function rates() {} })()', 'function rates'],
    ['namespace N { $ export function rates() {} }', 'function N.rates'],
    ['function f(a: string): void; $ function f(a: any): void; function f(a) {}', 'function f'],
    ['class C { $ f(a: string): void; f(a) {} }', 'function C.f of C'],
    ['abstract class C { $ abstract f(): void; g() {} }', 'class C'],
    ['export $ function f() {}', 'function f'],
    ['export default $ function f() {}', 'function f'],
    ['const $ f = () => 1', 'function f'],
    ['const f = $ () => 1', 'function f'],
    ['function f($ s: State) {}', 'function f'],
    ['function $ f() {}', 'function f'],
    ['$ function A() {} A.prototype.f = function () {}', 'class A'],
    ['function A() {} $ A.prototype.f = function () {}', 'function A.f of A'],
    ['function A() {} A.prototype = { $ f: function () {} }', 'function A.f of A'],
    ['function A() {} A.prototype.f = function () { $ return this.m }', 'function A.f of A'],
    ['function A() { $ this.m = 1 } A.prototype.f = function () {}', 'function A of A'],
    ['function A() { $ this.f = () => this.m } A.prototype.g = function () {}', 'function A.f of A'],
  ])('%s', (text, expected) => expect(subject(text)).toBe(expected));
});

describe('what a comment stands in', () => {
  test.each([
    ['function f() { $ const a = 1; return a }', 'function f'],
    ['function f() { const a = 1; $ }', 'function f'],
    ['function f() { $ }', 'function f'],
    ['function f() { $ return 1 }', 'function f'],
    ['function f() { if (a) { $ b = 1 } }', 'function f'],
    ['function f() { $ const total = ms.reduce((a, b) => a + b, 0); return total }', 'function f'],
    ['function f() { $ ms.forEach((m) => { t += m }) }', 'function f'],
    ['const f = () => { $ return 1 }', 'function f'],
    ['class C { f() { for (;;) { a = 1; $ } } }', 'function C.f of C'],
    ['setInterval(() => { $ v += dt * a }, 1)', 'function <anonymous>'],
    ['useEffect(() => { $ const a = 1 })', 'function <anonymous>'],
    ['$ const g = 9.81; function f() {}', 'file'],
    ['$ interface State {} function f() {}', 'file'],
    ['const g = 9.81; $', 'file'],
    ['$', 'file'],
    ['$ for (;;) { v += dt * a }', 'file'],
    ['for (;;) { $ v += dt * a }', 'file'],
    ['$ const api = { rates() {} }', 'file'],
    ['namespace N { $ const g = 1 }', 'function N'],
  ])('%s', (text, expected) => expect(subject(text)).toBe(expected));

  test('the node is the one in the program', () => {
    const text = `${MARK} function f() {} class C { ${MARK} g() {} }`;
    const program = parseTypeScript('a.ts', text);
    const [f, g] = program.comments.map((c) => c.subject);
    const [first, second] = program.body;
    expect(f).toMatchObject({ kind: 'function' });
    expect(f!.kind === 'function' && first!.kind === 'function' && f!.node === first!.node).toBe(true);
    expect(g!.kind === 'function' && second!.kind === 'class' && g!.node === second!.node.members[0]!.node).toBe(true);
    expect(g!.kind === 'function' && second!.kind === 'class' && g!.owner === second!.node).toBe(true);
  });
});

describe('which comments there are', () => {
  const spans = (text: string, file = 'a.ts') => parseTypeScript(file, text).comments.map((c) => text.slice(c.span.start, c.span.end));

  test('blocks and runs of line comments', () => {
    expect(spans('/* @visviva a */ /** b */ f() /*\n * @visviva c */')).toEqual(['/* @visviva a */', '/*\n * @visviva c */']);
    const lines = '// head\n  // @visviva a\n\t// T = 1\r\n// V = 2';
    expect(spans(`${lines}\n\n// @visviva b\nf()\n// after`)).toEqual([lines, '// @visviva b']);
    expect(spans('f(); // @visviva a\n// checks b = c\n/* x */')).toEqual(['// @visviva a\n// checks b = c']);
    expect(spans('// @visviva a\n/* b */\n// c')).toEqual(['// @visviva a']);
    expect(spans('// @visviva a @visviva b\n// @visviva c')).toHaveLength(1);
  });

  test('marks of lines', () => {
    const [a, b] = parseTypeScript('a.ts', '/** @visviva a */\nf();\n// @visviva b').comments;
    expect(a!.lineMarks).toContain('*');
    expect(b!.lineMarks).toContain('//');
  });

  test('texts that only look like comments are none', () => {
    expect(spans('const a = "// @visviva a", b = `/* @visviva b */ ${c} // @visviva d`, e = /\\/\\* @visviva/; f("@visviva")')).toEqual([]);
    expect(spans('const a = <p>// @visviva a</p>', 'a.tsx')).toEqual([]);
    expect(spans('const a = <p>{/* @visviva a */}</p>', 'a.tsx')).toEqual(['/* @visviva a */']);
    expect(spans('a = b // @visviva a', 'a.tsx')).toEqual(['// @visviva a']);
    expect(spans('#!/usr/bin/env node // @visviva\n// @visviva a')).toEqual(['// @visviva a']);
  });

  test('comments in odd places', () => {
    expect(spans('f(a, /* @visviva a */ )')).toHaveLength(1);
    expect(spans('function f() { return [ // @visviva a\n 1 ] }')).toHaveLength(1);
    expect(spans('const a = b ? /* @visviva a */ c : d')).toHaveLength(1);
    expect(spans('if (a) {} // @visviva a\nelse {}')).toHaveLength(1);
    expect(spans('/* @visviva unclosed')).toHaveLength(1);
    expect(spans('`${ /* @visviva a */ b }`')).toHaveLength(1);
  });

  test('positions are right after a byte order mark, tabs, Greek and emoji, with \\r\\n', () => {
    const text = '\uFEFFconst θ = "🎡🎠";\r\n\t/** @visviva ω\r\n\t * T = 1 */\r\n\tfunction ẋ(φ) { return -φ }\r\n';
    const program = parseTypeScript('a.ts', text);
    const [comment] = program.comments;
    expect(text.slice(comment!.span.start, comment!.span.end)).toBe('/** @visviva ω\r\n\t * T = 1 */');
    const s = comment!.subject;
    if (s.kind !== 'function') throw new Error('no function');
    expect(text.slice(s.node.span.start, s.node.span.end)).toBe('function ẋ(φ) { return -φ }');
    expect(text.slice(s.node.nameSpan.start, s.node.nameSpan.end)).toBe('ẋ');
    expect(text.slice(s.node.bodySpan.start, s.node.bodySpan.end)).toBe('{ return -φ }');
    const [first] = s.node.body;
    expect(text.slice(first!.span.start, first!.span.end)).toBe('return -φ');
  });
});
