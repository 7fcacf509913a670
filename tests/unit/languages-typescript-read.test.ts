import { describe, expect, test } from 'vitest';
import { outputs } from './program-support';

/** Shapes of JavaScript and TypeScript as the executor reads them from this folder's program form. */

const P = { coordinates: 'x th', parameters: 'm M l g c', inputs: 'F' };

function one(code: string, wanted = 'return', ask: Parameters<typeof outputs>[2] = {}): string {
  return outputs(code, [wanted], { ...P, ...ask })[0]!;
}

describe('the Math object by other names', () => {
  test.each([
    ['const { sin, PI: pi } = Math; function f(th) { return sin(th) * pi }', 'pi*sin(th)'],
    ['const M = Math; function f(th) { return M.sin(th) }', 'sin(th)'],
    ['const s = Math.sin; function f(th) { return s(th) }', 'sin(th)'],
    ['function f(th) { const { cos: c0, sqrt } = Math; return c0(th) * sqrt(4) }', '2*cos(th)'],
    ['import { sin } from "mathjs"; function f(th) { return sin(th) }', 'sin(th)'],
    ['import * as math from "mathjs"; function f(th) { return math.cos(th) }', 'cos(th)'],
    ['const math = require("mathjs"); function f(th) { return math.pow(th, 2) }', 'th^2'],
    ['function f(th) { return Math["sin"](th) }', 'sin(th)'],
  ])('%s', (code, expected) => expect(one(code)).toBe(expected));
});

describe('numbers', () => {
  test('exact values, plain division', () => {
    expect(one('function f(m) { return [4/3, 0x10, 1e-3, 1_0.5, 2 ** -1, 7 % 4] }')).toBe('[4/3, 16, 1/1000, 21/2, 1/2, 3]');
  });

  test('enums and named indices', () => {
    expect(one('enum S { X, TH = 2, V } function f(m) { const s = [1, 2, 3, m]; return [s[S.V], S.TH] }')).toBe('[m, 2]');
  });
});

describe('modules', () => {
  const files = (text: string) => ({ files: { 'rig.js': text } });
  test.each([
    ['import { k } from "./rig"; function f(m) { return k(m) }', 'export const k = (a) => 2 * a'],
    ['import k from "./rig"; function f(m) { return k(m) }', 'export default (a) => 2 * a'],
    ['import k from "./rig"; function f(m) { return k(m) }', 'export default function k(a) { return 2 * a }'],
    ['import R from "./rig"; function f(m) { return R.k(m) }', 'export default { k(a) { return 2 * a } }'],
    ['import * as R from "./rig"; function f(m) { return R.k(m) }', 'export function k(a) { return 2 * a }'],
    ['const { k } = require("./rig"); function f(m) { return k(m) }', 'module.exports = { k: (a) => 2 * a }'],
    ['const { k } = require("./rig"); function f(m) { return k(m) }', 'function k(a) { return 2 * a } module.exports = { k }'],
    ['const R = require("./rig"); function f(m) { return R.k(m) }', 'exports.k = function (a) { return exports.n * a }; exports.n = 2'],
    ['const k = require("./rig"); function f(m) { return k(m) }', 'module.exports = function (a) { return 2 * a }'],
    ['const k = require("./rig").k; function f(m) { return k(m) }', 'module.exports.k = (a) => 2 * a'],
    ['import R from "./rig"; function f(m) { return R.k(m) }', 'module.exports = { k: (a) => 2 * a }'],
    ['import R from "./rig"; function f(m) { return R.k(m) }', 'exports.k = (a) => 2 * a'],
    ['import { k } from "./rig"; function f(m) { return k(m) }', 'const k = (a) => 2 * a; if (typeof module !== "undefined") { module.exports = { k } }'],
    ['import { j as k } from "./rig"; function f(m) { return k(m) }', 'const k = (a) => 2 * a; export { k as j }'],
    ['import R = require("./rig"); function f(m) { return R.k(m) }', 'exports.k = (a) => 2 * a'],
    ['import { Rig } from "./rig"; function f(m) { return new Rig(m).k() }', 'export class Rig { constructor(a) { this.a = a } k() { return 2 * this.a } }'],
  ])('%s — %s', (code, rig) => expect(one(code, 'return', files(rig))).toBe('2*m'));
});

describe('namespaces and classes', () => {
  test('a namespace', () => {
    const code = 'namespace N { const k = 2; export function h(a: number) { return k * a } } function f(m: number) { return N.h(m) }';
    expect(one(code)).toBe('2*m');
  });

  test('parameter properties, private fields, getters, static members', () => {
    const code = `class Rig { static readonly k = 2; #n = 3; constructor(private a: number) {} get n() { return this.#n * Rig.k * this.a } }
      function f(m: number) { return new Rig(m).n }`;
    expect(one(code)).toBe('6*m');
  });

  test('classes written with prototypes', () => {
    const rig = 'function Rig(a) { this.a = a } Rig.prototype.k = function () { return 2 * this.a };';
    expect(one(`${rig} function f(m) { return new Rig(m).k() }`)).toBe('2*m');
    const code = `${rig} function Crane(a) { Rig.call(this, a); } Crane.prototype = Object.create(Rig.prototype);
      Crane.prototype.k = function () { return 3 * Rig.prototype.k.call(this) }; function f(m) { return new Crane(m).k() }`;
    expect(one(code)).toBe('6*m');
    expect(one('function Rig() { this.g = 1 } Rig.prototype = { acc: function (th) { return this.half() * Math.sin(th) }, half: function () { return this.g / 2 } }', 'return', { subject: 'Rig.acc' })).toMatch(/sin\(th\)/);
  });

  test('functions called at once, and what they hold', () => {
    expect(one('const R = (function () { const k = 2; return { h: (a) => k * a } })(); function f(m) { return R.h(m) }')).toBe('2*m');
    expect(one('const R = (() => { function Rig(a) { this.a = a } Rig.prototype.k = function () { return 2 * this.a }; return Rig })(); function f(m) { return new R(m).k() }')).toBe('2*m');
  });
});

describe('statements', () => {
  test.each([
    ['function f(m) { let a = m, b; [a, b] = [1, a]; return b }', 'm'],
    ['function f({ m, l: len = 3 }, [a = m] = []) { return m * len }', 'l*m'],
    ['function f(m) { let t = 0; for (let i = 0; i < 3; i++) t += m; return t }', '3*m'],
    ['function f(m) { let t = 0; outer: for (const a of [1, 2]) { for (const b of [1, 2]) { if (b == 2) continue outer; t += b * m } } return t }', '2*m'],
    ['function f(m) { const p = { [`a${1}`]: m }; return p.a1 + p["a" + 1] }', '2*m'],
    ['function f(m) { let a; a ??= m; return (a, a) }', 'm'],
    ['function f(m) { switch ("b") { case "a": return 1; case "b": case "c": return m } }', 'm'],
    ['function f(m) { const [a, ...r] = [1, m, 3]; return r[0] }', 'm'],
    ['function f(m) { let i = 0; const s = [1, m]; i++; return s[i] }', 'm'],
    ['function f(m) { try { return m } catch (e) { return 0 } }', 'm'],
    ['function f(m) { const o = { m, get e() { return 2 * this.m } }; return o.e }', '2*m'],
    ['function f(m) { const a = [1, 2, 3].map((k) => k * m); return a.reduce((s, v) => s + v, 0) }', '6*m'],
    ['function f(m) { const { a, ...r } = { a: 1, b: m }; return r.b }', 'm'],
    ['function f(m) { const g = (...xs) => xs[1]; return g(...[1, m]) }', 'm'],
    ['function f(m) { return <number>(m as any)! }', 'm'],
  ])('%s', (code, expected) => expect(one(code)).toBe(expected));

  test.each([
    ['async function f(m) { return m }'],
    ['function f(m) { return m * }'],
    ['function* f(m) { return m }'],
    ['function f(m) { return m | 0 }'],
    ['function f(m) { return /a/.test(m) }'],
    ['function f(m) { return 10n * m }'],
    ['function f(m) { const o = { a: m }; delete o.a; return o.a }'],
  ])('is unread: %s', (code) => expect(one(code)).toMatch(/unread/));
});
