import { describe, expect, it } from 'vitest';
import { outputs, readCode } from './program-support';

const P = { coordinates: 'x th', parameters: 'm M l g c', inputs: 'F' };
const S = { ...P, reads: { s: "[x, th, x', th']" } };
const one = (code: string, wanted = 'return', ask: Parameters<typeof outputs>[2] = P): string => outputs(code, [wanted], ask)[0]!;

describe('ways in and out', () => {
  it('reads members, parameters and a returned list, each with its place', () => {
    const code = `function f(s, p, F) { const [x, th, v, w] = s; const acc = (F - p.c * v) / p.m; return [v, w, acc, -p.g / p.l * Math.sin(th)]; }`;
    const r = readCode(code, ['return', 'return[2]', 'acc'], S);
    expect(r.text[0]).toBe("[x', th', (-1*c*x' + F)*m^-1, -1*g*l^-1*sin(th)]");
    expect(r.text[1]).toBe("(-1*c*x' + F)*m^-1");
    expect(r.text[2]).toBe(r.text[1]);
    expect(r.placeText(1)).toBe('acc');
    expect(r.placeText(2)).toBe('(F - p.c * v) / p.m');
  });

  it('reads a returned record by its fields', () => {
    expect(outputs(`function f(p, th) { return { th: 1, acc: -p.g * Math.sin(th) / p.l }; }`, ['return.acc'], P)).toEqual(['-1*g*l^-1*sin(th)']);
  });

  it('reads output slots, also through an alias and named indices', () => {
    const code = `const V = 0, A = 1; function f(s, out, p) { const o = out; o[V] = s[2]; out[A] = -p.g; }`;
    expect(outputs(code, ['out[0]', 'out[1]', 'out'], S)).toEqual(["x'", '-1*g', "[x', -1*g]"]);
  });

  it('reads a step in place, with increments', () => {
    const code = `class C { step(dt) { const a = -this.g / this.l * Math.sin(this.th); this.thdot += dt * a; this.th += dt * this.thdot; } }`;
    const ask = { ...P, parameters: 'g l dt', subject: 'C.step' };
    expect(one(code, 'a', ask)).toBe('-1*g*l^-1*sin(th)');
    expect(one(code, 'this.thdot', ask)).toBe("(-1*dt*g*l^-1*sin(th) + th')");
    expect(one(code, 'this.thdot', { ...ask, increment: true })).toBe('-1*dt*g*l^-1*sin(th)');
  });

  it('reads an alias of state that is written through', () => {
    const code = `class C { step() { const s = this.state; s.x += s.v; s.v = 3 * s.x; } }`;
    const ask = { ...P, subject: 'C.step', reads: { 'this.state.v': "x'" } };
    expect(one(code, 'this.state.x', ask)).toBe("(x + x')");
    expect(one(code, 'this.state.v', ask)).toBe("(x + x')*3");
  });

  it('reads a state that reads binds as a list', () => {
    const code = `function f(y) { const q = y.slice(0, 2); const [a, ...rest] = y; return [q[1], y.length, rest[2], ...y].map((v) => 2 * v); }`;
    expect(one(code, 'return', { ...P, reads: { y: "[x, th, x', th']" } })).toBe("[2*th, 8, 2*th', 2*x, 2*th, 2*x', 2*th']");
  });

  it('reads calls, members and indices that reads binds', () => {
    const code = `function f(p, q) { return [p.getMass(), p.load.k, q[2], p['len'], p.rate(1)]; }`;
    const reads = { 'p.getMass()': 'm', 'p.load.k': 'c', 'q[2]': "x'", 'p.len': 'l', 'p.rate(1)': 'g' };
    expect(one(code, 'return', { ...P, reads })).toBe("[m, c, x', l, g]");
  });

  it('strips getters and marks from names', () => {
    expect(one(`function f(p) { return [p.getM(), p.get_l(), p._g, p.c_, p.m()]; }`)).toMatch(/^\[unread|^\[/);
    expect(one(`function f(p) { return [p.get_l(), p._g, p.c_]; }`)).toBe('[l, g, c]');
  });

  it('says what is free', () => {
    const r = readCode(`function f(p) { return p.k * p.m; }`, ['return'], P);
    expect(r.text[0]).toBe('?p.k*m');
    expect([...r.reading.free.values()][0]).toMatchObject({ code: 'p.k' });
    expect([...r.reading.free.values()][0]!.reason).toContain('reads p.k = ...');
  });

  it('lists bindings', () => {
    const r = readCode(`function f(s, p) { return p.m * s[0]; }`, ['return'], S);
    expect(r.reading.bindings.map((b) => `${b.code} ${b.how}`)).toContain('p.m name');
    expect(r.reading.bindings.map((b) => `${b.code} ${b.how}`)).toContain('s[0] reads');
  });
});

describe('names and constants', () => {
  it('lets declared names stand for their symbols', () => {
    expect(one(`const g = 9.81; const l = 1.0; function f(th) { return -g / l * Math.sin(th); }`)).toBe('-1*g*l^-1*sin(th)');
    expect(one(`function f(th) { const g = 9.81; const dt = 0.01; return g * dt; }`)).toBe('1/100*g');
    expect(one(`function f(p) { const { m = 1, k = 2 } = p; return m; }`)).toBe('m');
    expect(one(`function f(p, c = 0.1) { return c * (p.m || 1) * (p.g ?? 9.81); }`)).toBe('c*g*m');
    expect(one(`function f({ m, l: length, g = 9 }) { return m * length * g; }`)).toBe('g*l*m');
    expect(one(`const P = { m: 1.0, l: 0.5 }; function f() { return P.m * P.l; }`)).toBe('l*m');
  });

  it('gives a local the meaning of its name where it holds no declared symbol', () => {
    expect(one(`function f(w) { const m = w.heaviness; return 2 * m; }`)).toBe('2*m');
    expect(one(`function f(w) { const m = w.x; return 2 * m; }`)).toBe('2*x');
  });

  it('keeps what an accumulator sums up', () => {
    expect(one(`function f(th) { let F = 0; F += 3 * th; return F; }`)).toBe('3*th');
    expect(one(`function f(th) { let x = 0; for (let i = 0; i < 3; i++) { x += i * th; } return x; }`)).toBe('3*th');
    expect(one(`function f(th) { const a = { x: 0 }; a.x += th; return a.x; }`)).toBe('th');
  });

  it('lets re-assigned locals be what they are', () => {
    expect(one(`function f(th) { let a = th; a = a * a; a -= 1; const b = a; a = 0; return b; }`)).toBe('(-1 + th^2)');
  });

  it('reports paths that agree with one symbol', () => {
    const r = readCode(`function f(cart, pole) { return cart.m + 2 * pole.m; }`, ['return'], P);
    expect(r.text[0]).toBe('(2*?pole.m + ?cart.m)');
    expect(r.reading.ambiguities[0]!.message).toContain('`cart.m` and `pole.m`');
    expect(one(`function f(cart, pole) { return cart.m + 2 * pole.m; }`, 'return', { ...P, reads: { 'cart.m': 'M' } })).toBe('(2*m + M)');
  });

  it('does not mistake an alias for another thing', () => {
    const r = readCode(`function f(p) { const q = p; const { m } = p; const k = q.m; return m + k + p.m; }`, ['return'], P);
    expect(r.text[0]).toBe('3*m');
    expect(r.reading.ambiguities).toEqual([]);
  });

  it('reads families', () => {
    const ask = { ...P, parameters: 'm1 m2 m3', families: { m: '[m1, m2, m3]' } };
    expect(one(`function f(m) { let t = 0; for (let i = 0; i < m.length; i++) t += m[i]; return t; }`, 'return', ask)).toBe('(m1 + m2 + m3)');
    expect(one(`function f(p) { return p.m.reduce((a, b) => a + b, 0); }`, 'return', ask)).toBe('(m1 + m2 + m3)');
  });

  it('is safe with names of the language', () => {
    expect(one(`function f(p) { const __proto__ = p.m; const constructor = p.constructor; return __proto__ + p.toString + p.hasOwnProperty; }`)).toBe('(?p.hasOwnProperty + ?p.toString + m)');
  });
});

describe('evaluation', () => {
  it('keeps the order of effects', () => {
    expect(one(`function f(th) { let i = 0; const a = [10, 20, 30]; const b = a[i++] + a[i++]; return [b, i, a[--i]]; }`)).toBe('[30, 2, 20]');
    expect(one(`function f(th) { let i = 0; const a = [1, 1, 1]; a[i++] += th; a[i++] *= 5; return [...a, i]; }`)).toBe('[(1 + th), 5, 1, 2]');
    expect(one(`function f(th) { let a, b; a = b = th; b += 1; return [a, b]; }`)).toBe('[th, (1 + th)]');
    expect(one(`function f(th, x) { let a = th, b = x; [a, b] = [b, a]; return [a, b]; }`)).toBe('[x, th]');
    expect(one(`function f(th, x) { const v = [th, x]; [v[0], v[1]] = [v[1], v[0]]; return v; }`)).toBe('[x, th]');
  });

  it('knows scopes', () => {
    expect(one(`function f(th) { let a = th; { let a = 5; a++; } return a; }`)).toBe('th');
    expect(one(`function f(th) { var a = th; { var a = 5; } return a; }`)).toBe('5');
    expect(one(`function f(th) { a = th; var a; return a; }`)).toBe('th');
    expect(one(`let q = 1; function set(v) { q = v; } function f(th) { set(th); return q; }`)).toBe('th');
    expect(one(`function f(th) { let n = 0; const inc = () => { n += th; }; inc(); inc(); return n; }`)).toBe('2*th');
    expect(one(`function f(th) { const fs = []; for (let i = 0; i < 3; i++) fs.push(() => i * th); return fs.map((h) => h()); }`)).toBe('[0, th, 2*th]');
    expect(one(`function f(th) { const fs = []; for (var i = 0; i < 3; i++) fs.push(() => i * th); return fs.map((h) => h()); }`)).toBe('[3*th, 3*th, 3*th]');
    expect(one(`function f(th, x) { const g1 = (th) => 2 * th; return g1(x) + th; }`)).toBe('(2*x + th)');
  });

  it('follows aliases of lists and records', () => {
    expect(one(`function f(th) { const a = [1, 2]; const b = a; b[0] = th; return a; }`)).toBe('[th, 2]');
    expect(one(`function f(th) { const a = [1, 2]; const b = [...a]; b[0] = th; return a; }`)).toBe('[1, 2]');
    expect(one(`function f(th) { const o = { a: 1 }; const p = { ...o, b: th }; p.a = 7; return [o.a, p.a, p.b]; }`)).toBe('[1, 7, th]');
    expect(one(`function g1(v) { v[0] += 1; } function f(th) { const a = [th]; g1(a); g1(a); return a[0]; }`)).toBe('(1 + 1 + th)');
  });

  it('reads exact numbers and operators', () => {
    expect(one(`function f(th) { return [4 / 3, 0.1 + 0.2, 2 ** 3, 7 % 4, -7 % 4, 1e-3, 5 / 0]; }`)).toBe('[4/3, 3/10, 8, 3, -3, 1/1000, nan]');
    expect(one(`function f(th) { return -(th ** 2) + Math.pow(th, 3) - Math.sqrt(th) ; }`)).toBe('(-1*th^1/2 + -1*th^2 + th^3)');
    expect(one(`const { sin: s, cos } = Math; const M2 = Math; function f(th) { const q = Math.sin; return s(th) + cos(th) + q(th) + M2.sin(th); }`)).toBe('(cos(th) + sin(th) + sin(th) + sin(th))');
  });

  it('evaluates typeof, optional chains and nullish values plainly', () => {
    expect(one(`function f(p, th) { if (typeof th !== 'number') return 0; if (!p) throw new Error('x'); return p?.m * th; }`)).toBe('m*th');
    expect(one(`function f(th, out) { out = out || []; out[0] = th; return out; }`)).toBe('[th]');
    expect(one(`function f(th, out) { if (!out) out = new Array(2); out[0] = th; return out[0]; }`)).toBe('th');
    expect(one(`function f(th, p) { if (p == null) return 0; if (p.m === undefined) return 1; return th; }`)).toBe('th');
  });
});
