import { describe, expect, it } from 'vitest';
import { outputs, readCode } from './program-support';
import { Graph } from '../../server/src/expression/graph';
import type { Expression } from '../../server/src/program/form';
import { read } from '../../server/src/program/read';
import { typescriptLibrary } from '../../server/src/languages/typescript/library';
import { parseTypeScript } from '../../server/src/languages/typescript/parse';
import { Budget } from '../../server/src/text/budget';

const P = { coordinates: 'x th', parameters: 'm M l g c dt', inputs: 'F' };
type Ask = Parameters<typeof outputs>[2];
const one = (code: string, wanted = 'return', ask: Ask = P): string => outputs(code, [wanted], ask)[0]!;

describe('styles of real code', () => {
  it('reads elimination with pivoting', () => {
    const code = `function solve(A, b) { const n = b.length; for (let i = 0; i < n; i++) { let p = i; for (let k = i + 1; k < n; k++) if (Math.abs(A[k][i]) > Math.abs(A[p][i])) p = k;
      [A[i], A[p]] = [A[p], A[i]]; [b[i], b[p]] = [b[p], b[i]]; for (let k = i + 1; k < n; k++) { const q = A[k][i] / A[i][i]; for (let j = i; j < n; j++) A[k][j] -= q * A[i][j]; b[k] -= q * b[i]; } }
      const x = new Array(n).fill(0); for (let i = n - 1; i >= 0; i--) { let s = b[i]; for (let j = i + 1; j < n; j++) s -= A[i][j] * x[j]; x[i] = s / A[i][i]; } return x; }
      function f(th, p) { return solve([[1, 0], [0, p.m]], [th, 2]); }`;
    const text = one(code);
    expect(text).not.toContain('unread');
    const pivot = one(code.replace('[[1, 0], [0, p.m]]', '[[p.m, 1], [1, p.M]]'));
    expect(pivot).not.toContain('unread');
  });

  it('reads families of bodies', () => {
    const ask = { ...P, parameters: 'm1 m2 G', families: { m: '[m1, m2]' } };
    expect(one(`function f(bodies) { return bodies[0].m + 2 * bodies[1].m; }`, 'return', ask)).toBe('(2*m2 + m1)');
  });

  it('reads N bodies with softening', () => {
    const code = `function f(s, p) { const n = 2; const a = new Float64Array(n); for (let i = 0; i < n; i++) { for (let j = 0; j < n; j++) { if (i === j) continue; const d = s[j] - s[i]; a[i] += p.m * d / Math.pow(d * d + 1, 1.5); } } return a; }`;
    expect(one(code, 'return', { ...P, reads: { s: '[x, th]' } })).not.toContain('unread');
  });

  it('reads Runge-Kutta steps over a helper', () => {
    const code = `function rates([q, w], p) { return [w, -p.g / p.l * Math.sin(q)]; }
      function f(s, p) { const h = p.dt; const k1 = rates(s, p); const k2 = rates(s.map((v, i) => v + h / 2 * k1[i]), p); return s.map((v, i) => v + h * k2[i]); }`;
    expect(one(code, 'return', { ...P, reads: { s: "[th, th']" } })).not.toContain('unread');
  });

  it('reads state with named parts through destructuring in loops', () => {
    expect(one(`function f(s) { let e = 0; for (const { m, v } of [{ m: 2, v: s.x }, { m: 3, v: s.th }]) e += m * v; return e; }`)).toBe('(2*x + 3*th)');
    expect(one(`function f(s) { let e = 0; for (const [i, v] of [s.x, s.th].entries()) e += i * v; return e; }`)).toBe('th');
  });

  it('does not let the name of a part stand for a computed thing', () => {
    expect(one(`function f(pos) { return pos.normalized().x; }`)).toContain('?');
    expect(one(`function f(s) { const t = s.clone(); t.x += 1; return [s.x, t.x]; }`)).toBe('[x, (1 + x)]');
    expect(one(`function f(p) { function sq(x) { return x * x; } return sq(p.k); }`)).toBe('?p.k^2');
  });

  it('keeps literals of a result that is named like the state', () => {
    expect(one(`function f(s) { const d = { x: 0, th: 0 }; return [d.x, d.th]; }`)).toBe('[0, 0]');
  });

  it('reads facts of a branch inside it', () => {
    expect(one(`function f(x) { if (x > 0) { return x > 0 ? 1 : 2; } return 3; }`)).toBe('select(0 < x, 1, 3)');
  });

  it('stands hand-made depth', () => {
    const span = { start: 0, end: 0 };
    let e: Expression = { kind: 'name', name: 'x', span };
    for (let k = 0; k < 30_000; k++) e = { kind: 'unary', op: '-', operand: e, span };
    const r = read({
      graph: new Graph(),
      file: 'a.ts',
      program: parseTypeScript('a.ts', ''),
      library: typescriptLibrary,
      subject: { kind: 'file' },
      meanings: { reads: [], byName: () => [], familyByName: () => undefined, isDeclared: () => false },
      assumptions: [],
      withinLimits: false,
      outputs: [{ expression: e }],
      importFile: () => undefined,
      budget: new Budget(),
    });
    expect(r.outputs[0]!.kind).toBe('unread');
  });

  it('reads a nest of calls and expressions', () => {
    const nest = (k: number): string => (k === 0 ? 'x' : `g1(${nest(k - 1)})`);
    const r = readCode(`function g1(v) { if (v) { { { return 1 + v; } } } return v; } function f(x) { return ${nest(50)}; }`, ['return'], P);
    expect(r.reading.outputs[0]!.kind).toBe('scalar');
  });

  it('is fast', () => {
    const body = Array.from({ length: 300 }, (_, k) => `const a${k} = Math.sin(th + ${k}) * ${k === 0 ? 'x' : `a${k - 1}`} + p.m * p.l;`).join('\n');
    const code = `function f(x, th, p) { ${body} return a299; }`;
    const start = performance.now();
    const r = readCode(code, ['return'], P);
    expect(r.reading.outputs[0]!.kind).toBe('scalar');
    expect(performance.now() - start).toBeLessThan(2000);
  });
});
