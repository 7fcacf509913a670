import { describe, expect, test } from 'vitest';
import type { Expression, Program, Statement } from '../../server/src/program/form';
import { parseTypeScript } from '../../server/src/languages/typescript/parse';
import { show, showAll } from './languages-typescript-show';

function form(text: string, file = 'a.ts'): string {
  const program = parseTypeScript(file, text);
  expect(program.errors).toEqual([]);
  return showAll(program.body);
}

/** The form of `x = EXPRESSION`. */
function value(text: string, file = 'a.ts'): string {
  const [first] = parseTypeScript(file, `x = ${text}`).body;
  if (first?.kind !== 'expression' || first.value.kind !== 'assign') throw new Error('no assignment');
  return show(first.value.value);
}

describe('expressions', () => {
  test.each([
    ['1 + 2 * a', '(1 + (2 * a))'],
    ['(a - b) / (c % d) ** 2', '((a - b) / ((c % d) ** 2))'],
    ['-a + +b', '(-(a) + +(b))'],
    ['!a && b || c', '((not(a) and b) or c)'],
    ['a ?? b', '(a coalesce b)'],
    ['a === b', '(a == b)'],
    ['a !== b', '(a != b)'],
    ['a >= b', '(a >= b)'],
    ['a ? b : c', '(a ? b : c)'],
    ['(x as number)! + <number>y', '(x + y)'],
    ['(s satisfies State)[0]', 's[0]'],
    ['p.m', 'p.m'],
    ['p?.m?.[0]?.(1)', 'p?.m?.[0]?.(1)'],
    ['p["m"]', 'p["m"]'],
    ['this.#m', '#self.#m'],
    ['super.f(1)', '#super.f(1)'],
    ['new Vec(1, ...xs)', 'new Vec(1, ...xs)'],
    ['new Vec', 'new Vec()'],
    ['f<number>(1)', 'f(1)'],
    ['[1, , ...b]', '[1, #nothing, ...b]'],
    ['{ a, "b-c": 1, 2: d, [k]: e, ...r }', '{a: a, b-c: 1, 2: d, [k]: e, ...r}'],
    ['{ f(t) { return t }, get m() { return 1 }, set m(v) {} }', '{f: f(t) {return t;}, getter m: m() {return 1;}, setter m: m(v) {}}'],
    ['{ f: (t) => t, async g() {}, *h() {} }', '{f: => f(t) {return t;}, g: ‹an async function› g() {}, h: ‹a generator function› h() {}}'],
    ['(a, b, c)', '(a, b, c)'],
    ['`text`', '"text"'],
    ['`a${b}c${d}`', '((("a" + b) + "c") + d)'],
    ['`${a}`', '("" + a)'],
    ['tag`a${b}`', '(tag(b), ‹a tagged template string›)'],
    ['/a+/g', '‹a regular expression›'],
    ['10n', '‹a big integer (its division drops the remainder)›'],
    ['void 0', '#nothing'],
    ['void f()', '(f(), #nothing)'],
    ['undefined', '#nothing'],
    ['null', '#nothing'],
    ['true', 'true'],
    ['typeof a === "number"', '(typeof(a) == "number")'],
    ['"m" in p', '("m" in p)'],
    ['p instanceof Crane', '(p instanceof Crane)'],
    ['delete p.m', '(p.m = ‹a property that was deleted›)'],
    ['import("./a")', '‹an import while the program runs›'],
    ['import.meta.url', '‹a property of the running program›.url'],
    ['a | 0', '(a bit 0)'],
    ['~~a', '(a bit 0)'],
    ['a >> 0', '(a bit 0)'],
    ['~a', 'bit(a)'],
    ['i++', '(i += 1 old)'],
    ['--i', '(i -= 1)'],
    ['a.b[i]++', '(a.b[i] += 1 old)'],
    ['y += 2', '(y += 2)'],
    ['y **= 2', '(y **= 2)'],
    ['y |= 0', '(y bit= 0)'],
    ['p.m ??= 1', '(p.m = (p.m coalesce 1))'],
    ['y ||= 1', '(y = (y or 1))'],
    ['y &&= 1', '(y = (y and 1))'],
    ['p[i++] ||= 1', '(p[(i += 1 old)] = ‹a logical assignment whose place is computed with a side effect›)'],
    ['y = z = 1', '(y = (z = 1))'],
    ['(a as any) = 1', '(a = 1)'],
    ['[a, b] = [b, a]', '([a, b] = [b, a])'],
    ['[p.x, , q[0] = 1, ...r] = s', '([p.x, , q[0] = 1, ...r] = s)'],
    ['({ a, b: p.x, c = 2, d: [e] = [], ...r } = s)', '({a: a, b: p.x, c: c = 2, d: [e] = [], ...r} = s)'],
    ['(s) => [s[1], -g]', '=> <anonymous>(s) {return [s[1], -(g)];}'],
    ['() => ({ a: 1 })', '=> <anonymous>() {return {a: 1};}'],
    ['function f(a, b = 2, ...c) {}', 'f(a, b = 2, ...c) {}'],
    ['async () => { await a }', '‹an async function› => <anonymous>() {a; ‹a value that is awaited›;}'],
    ['class { a = 1 }', 'class <anonymous> {field a = 1}'],
  ])('%s', (text, expected) => expect(value(text).replace(/^=> x\(/, '=> <anonymous>(').replace(/^class x/, 'class <anonymous>').replace('› => x(', '› => <anonymous>(')).toBe(expected));

  test('JSX is opaque', () => {
    expect(value('<p>{a}</p>', 'a.tsx')).toBe('‹JSX markup›');
    expect(value('<></>', 'a.js')).toBe('‹JSX markup›');
    expect(value('<number>a', 'a.ts')).toBe('a');
  });

  test.each([
    ['4/3', '(4 / 3)'],
    ['0.75', '3/4'],
    ['.5', '1/2'],
    ['2.', '2'],
    ['1e-3', '1/1000'],
    ['1_000.5', '2001/2'],
    ['0x1F', '31'],
    ['0b101', '5'],
    ['0o17', '15'],
    ['1e400', '‹a number too large for a double›'],
    ['3.14159265359', '314159265359/100000000000'],
  ])('number %s', (text, expected) => expect(value(text)).toBe(expected));

  test('numbers keep their text and are no integers', () => {
    const [s] = parseTypeScript('a.js', '1_0.50').body;
    expect(s).toMatchObject({ value: { kind: 'number', text: '1_0.50', integer: false } });
  });

  test('names are kept in NFC', () => {
    expect(value('q\u0307 + e\u0301')).toBe('(q\u0307 + \u00e9)'.normalize('NFC'));
  });
});

describe('statements', () => {
  test.each([
    ['const a = 1, b = 2;', 'const a = 1; const b = 2;'],
    ['let a; var b;', 'let a; var b;'],
    ['const [x, th = 1, ...v] = s', 'const [x, th = 1, ...v] = s;'],
    ['const { m, l: { a: len = 2 }, ...r } = p', 'const {m: m, l: {a: len = 2}, ...r} = p;'],
    ['const { [k]: v, a: [b] } = p', 'const v = ‹a pattern with a computed name›; const b = ‹a pattern with a computed name›;'],
    ['const f = (t) => t', 'const f = => f(t) {return t;};'],
    ['function f({ m, l = 1 }, [a, b]) {}', 'f({m: m, l: l = 1}, [a, b]) {}'],
    ['if (a) b = 1; else if (c) { d = 1 } else e = 1', 'if a {(b = 1);} else {if c {(d = 1);} else {(e = 1);}}'],
    ['for (let i = 0, n = 3; i < n; i++, j--) f(i)', 'loop (let i = 0; let n = 3; (i < n); (i += 1 old); (j -= 1 old);) {f(i);}'],
    ['for (;;) break', 'loop ( ; ) {break;}'],
    ['while (a) continue', 'loop ( a; ) {continue;}'],
    ['do a++; while (b)', 'loop ( b after; ) {(a += 1 old);}'],
    ['for (const [i, x] of xs.entries()) f(x)', 'for new [i, x] of xs.entries() {f(x);}'],
    ['for (k in p) f(k)', 'for k in p {f(k);}'],
    ['switch (k) { case "a": f(); break; default: g() }', 'switch k {"a": f(); break; | default: g();}'],
    ['outer: for (const a of b) { break outer }', 'outer: for new a of b {break outer;}'],
    ['try { a() } catch (e) { b() } finally { c() }', 'try {a();} catch e {b();} finally {c();}'],
    ['try { a() } catch { b() }', 'try {a();} catch  {b();} finally {}'],
    ['throw new Error("no")', 'throw new Error("no");'],
    ['{ a = 1 }', '{(a = 1);}'],
    ['a = 1, b = 2', '(a = 1); (b = 2);'],
    ['interface A {} type B = 1; declare const c: number; declare function f(): void; ;debugger', ''],
    ['function f(a: string): void; function f(a: any) {}', 'f(a) {}'],
    ['function f(this: Crane, a) {}', 'f(a) {}'],
    ['async function* f() { yield 1 }', '‹an async generator function› f() {1; ‹a yield›;}'],
    ['enum S { X, TH = 4, V, L = "l" }', 'enum S {X = 0, TH = 4, V = 5, L = "l"}'],
    ['const enum S { A = 1 << 2, B = A | 1, C }', 'enum S {A = 4, B = 5, C = 6}'],
    ['enum S { A = f(), B }', 'enum S {A = f(), B = ‹an enum member counted on from a value that is not known›}'],
  ])('%s', (text, expected) => expect(form(text)).toBe(expected));

  test('a with statement is opaque', () => {
    expect(showAll(parseTypeScript('a.js', 'with (Math) { a = sin(x) }').body)).toBe('‹a with statement›');
  });
});

describe('classes', () => {
  test('members of every kind', () => {
    const text = `abstract class Crane extends Machine<State> implements Rig {
      static readonly g = 9.81; #m = 1; l!: number; declare k: number; 'q r' = 2; [index: string]: number;
      constructor(private readonly load: number, public x = 1, plain?: number) { super(); }
      @logged get mass() { return this.#m } set mass(v) { this.#m = v }
      step(dt: number): void; step(dt: any) { this.x += dt }
      abstract area(): number; static of() { return new Crane() } async load() {} [Symbol.iterator]() {}
      rates = (s) => s; static { this.k = 2 }
    }`;
    expect(form(text)).toBe(
      'class Crane of Machine {static constant field g = 981/100; field #m = 1; field l; field q r = 2; ' +
        'constructor constructor: constructor(field load, field x = 1, plain) {#super();}; ' +
        'getter mass: mass() {return #self.#m;}; setter mass: mass(v) {(#self.#m = v);}; ' +
        'method step: step(dt) {(#self.x += dt);}; static method of: of() {return new Crane();}; ' +
        'method load: ‹an async function› load() {}; method [Symbol.iterator]: [Symbol.iterator]() {}; ' +
        'field rates = => rates(s) {return s;}; static field  = => <anonymous>() {(#self.k = 2);}()}',
    );
  });
});

describe('classes written with prototypes', () => {
  test('assignments, one by one', () => {
    const text = `function Rig(m) { this.m = m }
      Rig.prototype.step = function (dt) { this.v += dt };
      Rig.prototype.g = 9.81;
      Rig.prototype.constructor = Rig;
      Rig.of = function () { return new Rig(1) };
      Object.defineProperty(Rig.prototype, 'e', { get: function () { return 1 }, enumerable: true });
      const r = new Rig(2)`;
    expect(form(text, 'a.js')).toBe(
      'class Rig {constructor constructor: Rig(m) {(#self.m = m);}; method step: step(dt) {(#self.v += dt);}; ' +
        'field g = 981/100; static method of: of() {return new Rig(1);}; getter e: e() {return 1;}} const r = new Rig(2);',
    );
  });

  test('a whole prototype, inheritance and calls of the base', () => {
    const text = `var Crane = function (m) { Rig.call(this, m); };
      Crane.prototype = Object.create(Rig.prototype);
      Object.assign(Crane.prototype, { step(dt) { Rig.prototype.step.call(this, dt) }, get e() { return 1 } });`;
    expect(form(text, 'a.js')).toBe(
      'class Crane of Rig {constructor constructor: Crane(m) {#super(m);}; method step: step(dt) {#super.step(dt);}; getter e: e() {return 1;}}',
    );
    expect(form('function A() {} A.prototype = { f: function () {}, g: 1 }', 'a.js')).toBe(
      'class A {constructor constructor: A() {}; method f: f() {}; field g = 1}',
    );
    expect(form('(function () { function A() {} A.prototype.f = function () {}; return A })()', 'a.js')).toBe(
      '<anonymous>() {class A {constructor constructor: A() {}; method f: f() {}} return A;}();',
    );
  });

  test('a function that is called without new stays one', () => {
    expect(form('function A() {} A.prototype.f = function () {}; A()', 'a.js')).toBe('A() {} (A.prototype.f = f() {}); A();');
    expect(form('function A() {} A.g = 1; A.f = () => 1', 'a.js')).toBe('A() {} (A.g = 1); (A.f = => f() {return 1;});');
    expect(form('B.prototype.f = function () {}', 'a.js')).toBe('(B.prototype.f = f() {});');
  });
});

describe('modules', () => {
  test.each([
    ["import a, { b as c, type D, e } from './x'", 'import default as a, b as c, e as e from ./x;'],
    ["import * as X from 'x'", 'import  * as X from x;'],
    ["import './side'", 'import  from ./side;'],
    ["import type { A } from './x'; import { type B } from './x'", ''],
    ["import X = require('./x')", 'const X = require("./x");'],
    ['import sin = Trig.fast.sin', 'const sin = Trig.fast.sin;'],
    ["const { a } = require('./x')", 'const {a: a} = require("./x");'],
    ['export const a = 1, [b, { c }] = d', 'const a = 1; const [b, {c: c}] = d; export a as a, b as b, c as c;'],
    ['export function f() {}', 'f() {} export f as f;'],
    ['export default function f() {}', 'f() {} export f as default;'],
    ['export default function (s) { return s }', 'default(s) {return s;} export default as default;'],
    ['export default class {}', 'class default {} export default as default;'],
    ['export default (s) => s', 'var default = => default(s) {return s;}; export default as default;'],
    ['const f = 1; export default f', 'const f = 1; export f as default;'],
    ["export { a as b, c }; export { d } from './x'", 'export a as b, c as c; export d as d from ./x;'],
    ["export * from './x'; export * as N from './y'", 'export * from ./x; export * as N* from ./y;'],
    ["export type { A } from './x'; export type B = 1", ''],
    ['export enum S { A }', 'enum S {A = 0} export S as S;'],
    ['export = Crane', 'export = Crane;'],
    ['module.exports = Crane', 'export = Crane;'],
    ['module.exports = { a, b: c }', 'export a as a, c as b; export = {a: a, b: c};'],
    ['module.exports = { a, b: () => 1 }', 'export a as a; export = {a: a, b: => b() {return 1;}};'],
    ['exports.f = (s) => s', 'var exports.f = => f(s) {return s;}; export exports.f as f; export = {f: exports.f};'],
    ['exports.a = 2; exports.b = exports.a * 2', 'var exports.a = 2; export exports.a as a; var exports.b = (exports.a * 2); export exports.b as b; export = {a: exports.a, b: exports.b};'],
    ['module.exports.f = function () {}', 'var exports.f = f() {}; export exports.f as f; export = {f: exports.f};'],
    ['const f = exports.f = () => 1', 'var exports.f = => f() {return 1;}; export exports.f as f; const f = exports.f; export = {f: exports.f};'],
    ["if (typeof module !== 'undefined') { module.exports = { a } }", 'export a as a; export = {a: a};'],
    ["if (typeof exports === 'undefined') { window.a = a } else exports.a = a", 'var exports.a = a; export exports.a as a; export = {a: exports.a};'],
  ])('%s', (text, expected) => expect(form(text)).toBe(expected));

  test('namespaces are functions called at once', () => {
    const text = 'namespace N { const a = 1; export function f() { return a } export namespace M { export const b = 2 } }';
    expect(form(text)).toBe(
      'const N = => N() {const a = 1; f() {return a;} const M = => M() {const b = 2; return {b: b};}(); return {f: f, M: M};}();',
    );
    expect(form('export namespace N { export const a = 1 } namespace N { export const b = a }')).toBe(
      'const N = => N() {const a = 1; const b = a; return {a: a, b: b};}(); export N as N;',
    );
    expect(form('namespace A.B { export const c = 1 }')).toBe('const A = => A() {const B = => B() {const c = 1; return {c: c};}(); return {B: B};}();');
    expect(form('namespace T { export interface A {} } class C {} namespace C { export const d = 1 }')).toBe('class C {}');
  });
});

/** How often one can go to the left operand, object or callee. */
function leftDepth(text: string): number {
  const [s] = parseTypeScript('a.ts', text).body;
  let depth = 0;
  let at = s?.kind === 'expression' ? s.value : undefined;
  for (; at; depth++) {
    const next: Expression | undefined =
      at.kind === 'binary' ? at.left : at.kind === 'member' ? at.object : at.kind === 'call' ? at.callee : undefined;
    if (!next) break;
    at = next;
  }
  return depth;
}

describe('bad input', () => {
  const named = (p: Program, name: string) =>
    p.body.some((s: Statement) => s.kind === 'function' && s.node.name === name);

  test('half-typed code gives errors and what can be read', () => {
    const program = parseTypeScript('a.ts', 'function f(s) { return s. }\nfunction g() { return 1 + }\nconst = ;');
    expect(program.errors.length).toBeGreaterThan(0);
    expect(named(program, 'f') && named(program, 'g')).toBe(true);
    expect(program.errors[0]!.span.start).toBe(26);
  });

  test('functions with an error in them are opaque, others are not', () => {
    const text = 'function f(s) { return s. }\nfunction g(s) { return s }\nconst o = { h() { return ) }, k: (s) => s };\nfunction last() { return 1';
    const broken = (t: string) => [...showAll(parseTypeScript('a.ts', t).body).matchAll(/‹a function with a syntax error in it› (?:=> )?(\w+)/g)].map((m) => m[1]);
    expect(broken(text)).toEqual(['f', 'h', 'last']);
    expect(broken('class C { f() { if (a) { return 1 } g() { return 2 } }')).toContain('f');
  });

  test.each(['', '{', ')))', 'class', 'class {', '`${', 'x = <', '/*', '"', '@', 'enum', 'import', 'export {', 'a?.', '\u0000\u0001', 'for(', 'const {a', '...', 'namespace', 'new', '#', 'export default', 'switch(a){case'])(
    'never throws: %s',
    (text) => {
      for (const file of ['a.ts', 'a.tsx', 'a.js', 'a.html']) expect(parseTypeScript(file, text).language).toBeTruthy();
    },
  );

  test('names of Object.prototype are ordinary names', () => {
    expect(form('const { __proto__: a, constructor: b } = p; a.hasOwnProperty = toString')).toBe(
      'const {__proto__: a, constructor: b} = p; (a.hasOwnProperty = toString);',
    );
  });

  test.each(['(', '[', '-', '!', 'f(', '{a:'])('%s nested 500 deep is read', (open) => {
    const close = { '(': ')', '[': ']', 'f(': ')', '{a:': '}' }[open] ?? '';
    const program = parseTypeScript('a.ts', `x = ${`${open} `.repeat(500)}1${close.repeat(500)}`);
    expect(program.errors).toEqual([]);
    expect(program.body).toHaveLength(1);
  });

  test('nesting without measure is an error, and the next file is read as if nothing had been', () => {
    const program = parseTypeScript('a.ts', `x = ${'('.repeat(200_000)}1${')'.repeat(200_000)}`);
    expect(program.errors[0]?.message).toMatch(/nest too deeply/);
    expect(form('const a = 1')).toBe('const a = 1;');
  });

  test('sums of 20000 terms, chains of calls and long else-ifs are read', () => {
    expect(leftDepth(`${'a + '.repeat(20_000)}a`)).toBe(20_000);
    expect(leftDepth(`a${'.b(1)'.repeat(5000)}`)).toBe(10_000);
    expect(leftDepth(`(${'a, '.repeat(5000)}a)`)).toBe(0);
    expect(parseTypeScript('a.ts', `${'if (a) b(); else '.repeat(300)}c()`).body).toHaveLength(1);
  });
});
