import { describe, expect, it } from 'vitest';
import { outputs, readCode } from './program-support';

const P = { coordinates: 'x th', parameters: 'm M l g c', inputs: 'F' };

describe('ways in and out', () => {
  it('reads members, parameters and a returned list', () => {
    const code = `function f(s, p, F) { const [x, th, v, w] = s; const acc = (F - p.c * v) / p.m; return [v, w, acc, -p.g / p.l * Math.sin(th)]; }`;
    const r = readCode(code, ['return', 'return[2]', 'acc'], { ...P, reads: { s: "[x, th, x', th']" } });
    expect(r.text[0]).toBe("[x', th', (-1*c*x' + F)*m^-1, -1*g*l^-1*sin(th)]");
    expect(r.text[1]).toBe("(-1*c*x' + F)*m^-1");
    expect(r.text[2]).toBe(r.text[1]);
    expect(r.placeText(1)).toBe('acc');
    expect(r.placeText(2)).toBe('(F - p.c * v) / p.m');
  });
});
