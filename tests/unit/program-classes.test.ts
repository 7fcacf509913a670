import { describe, expect, it } from 'vitest';
import { outputs, readCode } from './program-support';

const P = { coordinates: 'x th', parameters: 'm M l g c dt', inputs: 'F' };
type Ask = Parameters<typeof outputs>[2];
const one = (code: string, wanted = 'return', ask: Ask = P): string => outputs(code, [wanted], ask)[0]!;

describe('classes', () => {
  it('reads fields by name, getters, private members and statics', () => {
    const code = `class Crane {
      static readonly G = 9.81; static readonly HALF = 0.5; #m = 1.0; l = 2; readonly k = 3;
      constructor(private c: number) {}
      get inertia() { return this.#m * this.l ** 2; }
      acc(th) { return [this.inertia, Crane.HALF * th, this.k, this.c, Crane.G]; }
    }`;
    expect(one(code, 'return', { ...P, parameters: 'm l c G', subject: 'Crane.acc' })).toBe('[l^2*m, 1/2*th, 3, c, G]');
  });

  it('lets reads win over a getter', () => {
    const code = `class C { get total() { return this.m + this.M; } f() { return this.total; } }`;
    expect(one(code, 'return', { ...P, subject: 'C.f' })).toBe('(M + m)');
    expect(one(code, 'return', { ...P, subject: 'C.f', reads: { 'this.total': 'c' } })).toBe('c');
  });

  it('knows what the constructor derives', () => {
    const code = `class C { constructor(m, M, opts) { this.m = m; this.M = M; this.total = m + M; this.arm = opts.l / 2; } f() { return [this.total, this.arm, this.m]; } }`;
    const r = readCode(code, ['return'], { ...P, subject: 'C.f' });
    expect(r.text).toEqual(['[(M + m), 1/2*l, m]']);
    expect(r.reading.ambiguities).toEqual([]);
  });

  it('reads inheritance, super and overriding', () => {
    const code = `class A { constructor(m) { this.m = m; } energy() { return this.m * this.height(); } height() { return 1; } get two() { return 2; } }
      class B extends A { constructor(m, l) { super(m); this.l = l; } height() { return this.l; } energy() { return 3 * super.energy() + super.two; } }`;
    expect(one(code, 'return', { ...P, subject: 'B.energy' })).toBe('(2 + 3*l*m)');
    expect(one(`${code} function f(x) { const b = new B(x, 5); b.m += 1; return b.energy(); }`)).toBe('((1 + x)*15 + 2)');
  });

  it('reads helper instances and vectors', () => {
    const code = `class V { constructor(x = 0, y = 0) { this.x = x; this.y = y; } add(o) { return new V(this.x + o.x, this.y + o.y); } scale(k) { this.x *= k; this.y *= k; return this; } static of(a) { return new V(a, a); } }
      function f(th) { const a = new V(th, 1).add(V.of(2)).scale(3); return [a.x, a.y]; }`;
    expect(one(code)).toBe('[(2 + th)*3, 9]');
  });

  it('reads setters and static state', () => {
    expect(one(`class S { set double(v) { this.v = 2 * v; } } function f(th) { const s = new S(); s.double = th; return s.v; }`)).toBe('2*th');
    expect(one(`class S { static n = 0; static bump() { S.n += 1; return this.n; } } function f(th) { S.bump(); return S.bump() * th; }`)).toContain('th');
  });

  it('reads functions that make objects', () => {
    const code = `function make(m, l) { const k = m * l; return { k, get twice() { return 2 * k; }, f(th) { return this.k * th; } }; } function f(th, p) { const o = make(p.m, p.l); return [o.twice, o.f(th)]; }`;
    expect(one(code, 'return', { ...P, subject: 'f' })).not.toContain('unread');
  });

  it('reads a function inside another, in its surroundings', () => {
    const code = `function pendulum(g, l) { const k = g / l; return function f(th) { return -k * Math.sin(th); }; }`;
    expect(one(code)).toBe('-1*g*l^-1*sin(th)');
    expect(one(`const make = (p) => { const { g, l } = p; const f = (th) => -g / l * Math.sin(th); return f; };`)).toBe('-1*g*l^-1*sin(th)');
  });

  it('reads plain constructor functions and prototypes', () => {
    const code = `function Bob(m) { this.m = m; } Bob.prototype.weight = function (g) { return this.m * g; }; function f(p) { const b = new Bob(p.m); return b.weight(p.g); }`;
    expect(one(code)).toBe('g*m');
  });

  it('reads methods of a record', () => {
    const code = `const bob = { m: 1.0, l: 0.5, k: 4, f(th) { return this.m * this.l * this.k * th; } };`;
    expect(one(code)).toBe('4*l*m*th');
  });

  it('answers claims about several methods', () => {
    const code = `class Arm { constructor(m, l) { this.m = m; this.l = l; } M(q) { return [[this.m * this.l ** 2, 0], [0, q[0]]]; } g(q) { return [0, this.m * Math.sin(q[1])]; } }`;
    const ask = { ...P, subject: 'class Arm', reads: { q: '[x, th]' } };
    expect(one(code, 'M(q)', ask)).toBe('[[l^2*m, 0], [0, x]]');
    expect(one(code, 'g(q)[1]', ask)).toBe('m*sin(th)');
    expect(one(code, 'M.return', ask)).toBe('[[l^2*m, 0], [0, x]]');
    expect(one(code, 'M(q)[1][1] * 2 + g(q)[1]', ask)).toBe('(2*x + m*sin(th))');
  });

  it('reads formulas of outputs', () => {
    const code = `function f(q, p) { const M11 = p.m * p.l ** 2; const h = p.m * p.g * Math.sin(q); return 0; } function T(q, v, p) { return p.m * v ** 2 / 2; }`;
    const ask = { ...P, reads: { q: 'th', v: "th'" } };
    expect(one(code, "M11*th'' + h - 3", ask)).toBe("(-3 + g*m*sin(th) + l^2*m*th'')");
    expect(one(code, 'T.return', ask)).toBe("1/2*m*th'^2");
    expect(one(code, 'T(q, v, p)', ask)).toBe("1/2*m*th'^2");
    expect(one(code, 'nowhere', ask)).toContain('there is no variable');
  });
});

describe('module state', () => {
  it('takes variables that functions change as state', () => {
    const code = `let th = 0.5, thdot = 0; const p = { g: 9.81, l: 1, dt: 0.1 }; function f() { thdot += -p.g / p.l * Math.sin(th) * p.dt; th += thdot * p.dt; }`;
    expect(one(code, 'thdot', { ...P, increment: true })).toBe('-1*dt*g*l^-1*sin(th)');
    const rec = `const state = { th: 0.5, thdot: 0, k: 2 }; function f() { state.thdot += state.k * state.th; state.k = 3; }`;
    expect(one(rec, 'state.thdot')).toContain('th');
    const arr = `let y = [0.1, 0]; function f() { y[1] += 2 * y[0]; y = [y[1], y[0]]; return y; }`;
    expect(one(arr, 'return', { ...P, reads: { y: "[th, th']" } })).toBe("[(2*th + th'), th]");
  });

  it('reads a script from a generic pass of its loop', () => {
    const code = `const g = 9.81, l = 1; let th = 1, thdot = 0; const h = 0.001; for (let i = 0; i < 10000; i++) { const a = -g / l * Math.sin(th); thdot += a * h; th += thdot * h; }`;
    expect(one(code, 'a', { ...P, subject: '' })).toBe('-1*g*l^-1*sin(th)');
    expect(one(code, 'thdot', { ...P, subject: '', increment: true })).toBe('-1/1000*g*l^-1*sin(th)');
  });
});

describe('other files', () => {
  const files = {
    'physics.ts': `export const g = 9.81; export const half = 0.5; export function weight(m) { return m * g; } export default function dflt(x) { return 2 * x; } export class Q { static k = 3; }`,
    'index.ts': `export * from './physics'; export { weight as w2 } from './physics'; export * as all from './physics';`,
    'old.js': `const k = 7; function twice(x) { return 2 * x; } module.exports = { twice, k };`,
    'older.js': `exports.thrice = function (x) { return 3 * x; };`,
  };
  const ask = { ...P, files };
  it('reads imports of every kind', () => {
    expect(one(`import { weight, half as h } from './physics'; function f(p) { return h * weight(p.m); }`, 'return', ask)).toBe('1/2*g*m');
    expect(one(`import d, * as ph from './physics'; function f(x) { return d(x) + ph.half + ph.Q.k; }`, 'return', ask)).toBe('(1/2 + 2*x + 3)');
    expect(one(`import { weight, w2, all } from './index'; function f(p) { return weight(p.m) + w2(p.m) + all.half; }`, 'return', ask)).toBe('(1/2 + 2*g*m)');
    expect(one(`const { twice, k } = require('./old'); const o = require('./older'); function f(x) { return twice(x) + k + o.thrice(x); }`, 'return', ask)).toBe('(2*x + 3*x + 7)');
    const r = readCode(`import { weight } from './physics'; function f(p) { return weight(p.m); }`, ['return'], ask);
    expect(r.reading.files).toEqual(['physics.ts']);
  });

  it('does not guess what it cannot find', () => {
    expect(one(`import { weight } from 'elsewhere'; function f(p) { return weight(p.m); }`, 'return', ask)).toContain('unread');
  });
});

describe('solving', () => {
  it('reads elimination and inverses written by hand', () => {
    const code = `function f(x, th) { const A = [[2, x], [0, 4]]; const b = [th, 8]; const y = b[1] / A[1][1]; return [(b[0] - A[0][1] * y) / A[0][0], y]; }`;
    expect(one(code)).toBe('[(-2*x + th)*1/2, 2]');
  });
});
