import { describe, expect, it } from 'vitest';
import { outputs, readCode } from './program-support';

const P = { coordinates: 'x th', parameters: 'm M l g c dt', inputs: 'F' };
type Ask = Parameters<typeof outputs>[2];
const one = (code: string, wanted = 'return', ask: Ask = P): string => outputs(code, [wanted], ask)[0]!;

describe('branches', () => {
  it('merges both sides', () => {
    expect(one(`function f(x) { let a = 1; if (x > 0) a = x; else a = 2 * x; return a; }`)).toBe('select(0 < x, x, 2*x)');
    expect(one(`function f(x) { let a = x; if (x > 0) { a = 5; } return a; }`)).toBe('select(0 < x, 5, x)');
    expect(one(`function f(x) { return x > 0 ? x : -x; }`)).toBe('select(0 < x, x, -1*x)');
    expect(one(`function f(x) { if (1 > 0) return x; return 0; }`)).toBe('x');
  });

  it('merges early returns with what they wrote', () => {
    const code = `function f(x, out) { if (x < 0) { out[0] = 1; return 7; } out[0] = x; return x; }`;
    expect(outputs(code, ['return', 'out[0]'], P)).toEqual(['select(x < 0, 7, x)', 'select(x < 0, 1, x)']);
    const two = `function f(x) { if (x < 0) { if (x < -1) return 1; x = 5; } if (x > 3) return 2; return x; }`;
    expect(one(two)).toContain('select(');
    expect(one(`function f(x) { if (x < 0) return 1; else return 2; }`)).toBe('select(x < 0, 1, 2)');
  });

  it('leaves out points where an error is thrown', () => {
    expect(one(`function f(x) { if (x <= 0) throw new Error('no'); return x; }`)).toBe('select(x <= 0, nan, x)');
    expect(one(`function f(x) { if (x <= 0) { throw new RangeError(); } else { return x; } }`)).toBe('select(x <= 0, nan, x)');
    expect(one(`function f(x) { throw new Error('never'); }`)).toContain('unread: every way');
    expect(one(`function g1(x) { if (x < 0) throw 1; return x; } function f(x) { try { return g1(x) } catch (e) { return 0; } }`)).toContain('select(');
    expect(one(`function f(x) { let a = 0; try { if (x < 0) throw 1; a = x; } catch (e) { a = 9; } finally { a += 1; } return a; }`)).toBe('(1 + select(x < 0, 9, x))');
  });

  it('keeps values of different shape apart until they are used', () => {
    expect(one(`function f(x) { let v = null; if (x > 0) v = [x, 1]; else v = [2, x]; return v[0]; }`)).toBe('select(0 < x, x, 2)');
    expect(one(`function f(x) { const h = x > 0 ? Math.sin : Math.cos; return h(x); }`)).toBe('select(0 < x, sin(x), cos(x))');
    expect(one(`function f(x) { const a = { v: 1 }, b = { v: 2 }; const t = x > 0 ? a : b; t.v = x; return [a.v, b.v]; }`)).toBe('[select(0 < x, x, 1), select(0 < x, 2, x)]');
    expect(one(`function f(x) { let v; if (x > 0) v = 1; return v; }`)).toContain('unread');
  });

  it('decides what assume says', () => {
    const code = `function f(p, x) { if (p.simple) return x; return 2 * x; }`;
    expect(one(code, 'return', { ...P, assume: ['p.simple'] })).toBe('x');
    expect(one(code, 'return', { ...P, assume: ['!p.simple'] })).toBe('2*x');
    expect(one(code)).toBe('select(1 == ?p.simple, x, 2*x)');
    const r = readCode(code, ['return'], P);
    expect([...r.reading.free.values()][0]!.reason).toContain('assume not p.simple');
    const kinds = `function f(kind, x) { switch (kind) { case 'rod': return x / 3; case 'point': return x; default: throw new Error(); } }`;
    expect(one(kinds, 'return', { ...P, assume: ["kind == 'rod'"] })).toBe('1/3*x');
    expect(one(`function f(x) { if (x > 0) return 1; return 2; }`, 'return', { ...P, assume: ['x > 0'] })).toBe('1');
    expect(one(`function f(x) { if (x <= 0) return 1; return 2; }`, 'return', { ...P, assume: ['x > 0'] })).toBe('2');
    expect(one(`function f(p, x) { const slow = Math.abs(x) < 1; if (slow) return 1; return 2; }`, 'return', { ...P, assume: ['!slow'] })).toBe('2');
    expect(one(`function f(x) { const drag = true; return drag ? 2 * x : x; }`, 'return', { ...P, assume: ['!drag'] })).toBe('x');
  });

  it('reads logical operators', () => {
    expect(one(`function f(x, th) { if (x > 0 && th > 0) return 1; return 0; }`)).toContain('select(');
    expect(one(`function f(p, x) { const on = p.a || p.b; return on ? 1 : 0; }`, 'return', { ...P, assume: ['!p.a', 'p.b'] })).toBe('1');
    expect(one(`function f(x) { const n = 0; return n && x; }`)).toBe('0');
  });

  it('reads switch with fall-through', () => {
    expect(one(`function f(x) { let a = 0; switch (2) { case 1: a += 1; case 2: a += x; case 3: a += 10; break; case 4: a += 100; } return a; }`)).toBe('(10 + x)');
    expect(one(`enum K { A, B = 5, C } function f(x) { switch (K.C) { case K.A: return 0; case 6: return x; } }`)).toBe('x');
    expect(one(`function f(x) { let a = 1; switch (9) { default: a = x; case 1: a += 1; } return a; }`)).toBe('(1 + x)');
  });

  it('passes within limits', () => {
    const ask = { ...P, withinLimits: true };
    expect(one(`function f(x) { return Math.min(Math.max(x, -3), 3); }`, 'return', ask)).toBe('x');
    expect(one(`function f(x, p) { let v = x; if (v > p.m) v = p.m; else if (v < -p.m) v = -p.m; return v; }`, 'return', ask)).toBe('x');
    expect(one(`function f(th) { let a = 2 * th; while (a > Math.PI) a -= 2 * Math.PI; return a; }`, 'return', ask)).toBe('2*th');
    expect(one(`function f(th) { return (3 * th) % (2 * Math.PI); }`, 'return', ask)).toBe('3*th');
    expect(one(`function f(x) { return x > 3 ? 3 : x < -3 ? -3 : x; }`, 'return', ask)).toBe('x');
    expect(one(`class B { step() { this.x += 2; if (this.x > 10) { this.x = 10; this.v = 0; } } }`, 'this.x', { ...ask, subject: 'B.step' })).toBe('(2 + x)');
  });

  it('records conditions with their places', () => {
    const r = readCode(`function f(x) { if (x > 0) return 1; return x < -1 ? 2 : 3; }`, ['return'], P);
    expect(r.reading.conditions.map((c) => r.source.slice(c.place.span.start, c.place.span.end))).toEqual(['x > 0', 'x < -1']);
  });
});

describe('loops', () => {
  it('unrolls known bounds', () => {
    expect(one(`function f(x) { let a = 0; for (let i = 0; i < 4; i++) { if (i === 1) continue; if (i === 3) break; a += i * x; } return a; }`)).toBe('2*x');
    expect(one(`function f(x) { let a = x, n = 3; while (n-- > 0) a *= 2; return a; }`)).toBe('8*x');
    expect(one(`function f(x) { let n = 0; do { n++; } while (n < 3); return n * x; }`)).toBe('3*x');
    expect(one(`function f(x) { let s = 0; for (const v of [x, 2, 3]) s += v; return s; }`)).toBe('(2 + 3 + x)');
    expect(one(`function f(x) { let s = 0; const o = { a: x, b: 2 * x }; for (const k in o) s += o[k]; for (const i in [5, 5]) s += 1; return s; }`)).toBe('(1 + 1 + 3*x)');
    expect(one(`function f(x) { let s = 0; outer: for (let i = 0; i < 3; i++) { for (let j = 0; j < 3; j++) { if (j > i) continue outer; if (i === 2) break outer; s += 1; } } return s; }`)).toBe('3');
    expect(one(`function f(x) { for (let i = 0; i < 5; i++) { if (i === 2) return i * x; } return 0; }`)).toBe('2*x');
  });

  it('merges breaks and continues that depend on the state', () => {
    expect(one(`function f(x) { let n = 0; for (let i = 0; i < 2; i++) { if (x > i) break; n += 1; } return n; }`)).toBe('select(0 < x, 0, select(1 < x, 1, 2))');
    expect(one(`function f(x) { let n = 0; for (let i = 0; i < 2; i++) { if (x > 0) continue; n += 1; } return n; }`)).toContain('select(0 < x, ');
    expect(one(`function f(x, th) { for (let i = 0; i < 2; i++) { if (x > i) break; if (th > i) return 9; } return 5; }`)).toContain('9');
  });

  it('takes one pass from a generic state where the passes are not known', () => {
    const code = `function f(p, n) { let th = 0.5, thdot = 0; let t = 0; for (let i = 0; i < n; i++) { const a = -p.g / p.l * Math.sin(th); thdot += a * p.dt; th += thdot * p.dt; t += p.dt; } return th; }`;
    expect(one(code, 'a')).toBe('-1*g*l^-1*sin(th)');
    expect(one(code, 'thdot', { ...P, increment: true })).toBe('-1*dt*g*l^-1*sin(th)');
    expect(one(code, 't')).toContain('?t');
    const known = code.replace('i < n', 'i < 5000');
    expect(one(known, 'a')).toBe('-1*g*l^-1*sin(th)');
    expect(one(code.replace('i < n', 'i < 10'), 'a')).toBe('-1*g*l^-1*sin(th)');
  });

  it('reads the usual ways of lists', () => {
    expect(one(`function f(x) { return Array.from({ length: 3 }, (_, i) => i * x); }`)).toBe('[0, x, 2*x]');
    expect(one(`function f(x) { return [1, 2, 3].map((v, i) => v * i).filter((v) => v > 0).concat([x]).reverse(); }`)).toBe('[x, 6, 2]');
    expect(one(`function f(x) { const a = new Float64Array(3); a[1] = x; a.fill(2, 2); return a; }`)).toBe('[0, x, 2]');
    expect(one(`function f(x) { const A = [[1, x], [2, 3]]; return A.map((r) => r.reduce((a, b) => a + b)); }`)).toBe('[(1 + x), 5]');
    expect(one(`function f(x) { let s = 0; [x, x].forEach((v, i) => { s += v * (i + 1); }); return s; }`)).toBe('3*x');
    expect(one(`function f(x) { return Object.entries({ a: x, b: 2 }).map(([k, v]) => (k === 'a' ? v : 0)); }`)).toBe('[x, 0]');
    expect(one(`function f(x) { const a = [1]; a.push(x, 2); a.shift(); return [a.length, ...a, a.indexOf(2), a.includes(5) ? 1 : 0, a.at(-1)]; }`)).toBe('[2, x, 2, 1, 0, 2]');
  });
});

describe('what is not read', () => {
  it('says so, and only where it matters', () => {
    const r = readCode(`function f(x) { const a = lookup(x, 1); const b = 2 * x; return [a, b]; }`, ['return[0]', 'return[1]'], P);
    expect(r.text[0]).toContain("unread: can't read the call `lookup(...)`");
    expect(r.placeText(0)).toBe('lookup(x, 1)');
    expect(r.text[1]).toBe('2*x');
  });

  it('does not trust things that an unknown call was given', () => {
    expect(one(`function f(x) { const v = [x]; mutate(v); return v[0]; }`)).toContain('unread');
    expect(one(`function f(x) { const v = [x]; console.log(v); return v[0]; }`)).toBe('x');
    expect(one(`function f(x) { let n = x; run(() => { n = 2; }); return n; }`)).toContain('unread');
  });

  it('stops recursion and depth', () => {
    expect(one(`function f(x) { return f(x) + 1; }`)).toContain('recursion');
    expect(one(`function h(n) { return n <= 0 ? 0 : 1 + h(n - 1); } function f(x) { return h(5) * x; }`)).toBe('5*x');
    expect(one(`function f(x) { return ${'-(1+'.repeat(200)}x${')'.repeat(200)}; }`)).not.toContain('unread');
    expect(one(`function f(x) { return ${Array.from({ length: 4000 }, () => 'x').join(' + ')}; }`)).not.toContain('unread');
  });

  it('stops at the budget', () => {
    const code = `function f(x) { let a = 0; for (let i = 0; i < 1500; i++) for (let j = 0; j < 1500; j++) a += x; return a; }`;
    expect(one(code, 'return', { ...P, steps: 20_000 })).toContain('budget');
  });

  it('does not read async functions, generators and eval', () => {
    expect(one(`async function g1(x) { return x; } function f(x) { return g1(x); }`)).toContain('unread');
    expect(one(`function f(x) { return Math.random() * x; }`)).toContain('unread');
    expect(one(`function f(x) { return eval('x'); }`)).toContain('unread');
  });
});

describe('override and trace', () => {
  it('puts a value in the stead of a sub-expression', () => {
    const code = `function f(x, th) { const a = x * th; return a + Math.sin(th); }`;
    const r = readCode(code, ['return'], { ...P, override: { text: 'Math.sin(th)', value: (g, e) => g.negate(e) } });
    expect(r.text[0]).toBe('(-1*sin(th) + th*x)');
  });

  it('traces every number with its place', () => {
    const r = readCode(`function f(x) { return 2 * x + 1; }`, ['return'], P);
    expect(r.reading.trace.map((t) => r.source.slice(t.place.span.start, t.place.span.end))).toEqual(['2', '2 * x', '1', '2 * x + 1']);
  });
});
