import { describe, expect, test } from 'vitest';
import { createService } from '../../server/src/service';
import type { Service } from '../../server/src/service/api';
import { Budget } from '../../server/src/text/budget';
import { filesOf } from '../support/check';

const crane = (ath: string) => `/**
 * @visviva crane
 * coordinates  x [m], th [rad]            th from straight down, counter-clockwise
 * parameters   M, m [kg] > 0, l [m] > 0, g [m/s^2] > 0
 * inputs       F [N]
 * point trolley: mass M at (x, 0)
 * point load: mass m at (x + l*sin(th), -l*cos(th))
 * spring 2*m between trolley and (0, 0)
 * gravity (0, -g)
 * Q[x] = F
 * reads        s = [x, th, x', th']
 * checks       return = [x', th', x'', th'']
 */
export function rates(s, p, F) {
  const sine = Math.sin(s[1]);
  const cosine = Math.cos(s[1]);
  const ax = (F - 2 * p.m * s[0] + p.m * sine * (p.l * s[3] * s[3] + p.g * cosine)) / (p.M + p.m * sine * sine);
  const ath = ${ath};
  return [s[2], s[3], ax, ath];
}
`;
const right = crane('(-ax * cosine - p.g * sine) / p.l');

const serviceOf = (text: string): Service => createService(filesOf(new Map([['a.js', text]])));
const panel = (text: string, line = 15) => serviceOf(text).panel('a.js', { line, column: 1 }, new Budget());

describe('the terms of the equations', () => {
  test('agree where the code is right', async () => {
    const data = (await panel(right))!;
    expect(data.equations.map((e) => e.coordinate)).toEqual(['x', 'th']);
    expect(data.equations.flatMap((e) => e.terms).every((t) => t.state === 'same' && t.factor === 1)).toBe(true);
  });

  test('a wrong sign is the one term that differs', async () => {
    const data = (await panel(crane('(-ax * cosine + p.g * sine) / p.l')))!;
    const wrong = data.equations.flatMap((e) => e.terms.map((t) => ({ e: e.coordinate, t }))).filter(({ t }) => t.state === 'differs');
    expect(wrong.map(({ e, t }) => [e, t.formula.text, t.factor])).toEqual([['th', 'm*g*l*sin(th)', -1]]);
  });

  test('half a term, and one that is missing', async () => {
    const half = (await panel(crane('(-ax * cosine - p.g * sine / 2) / p.l')))!;
    expect(half.equations[1]!.terms.find((t) => t.state === 'differs')).toMatchObject({ formula: { text: 'm*g*l*sin(th)' }, factor: 0.5 });
    const missing = (await panel(crane('-p.g * sine / p.l')))!;
    expect(missing.equations[1]!.terms.find((t) => t.state === 'differs')).toMatchObject({ factor: 0 });
  });

  test('what is no multiple of the terms is said to be unknown', async () => {
    const data = (await panel(crane('(-ax * cosine - p.g * sine) / p.l + s[0] * s[0]')))!;
    expect(data.equations[1]!.terms.every((t) => t.state === 'unknown')).toBe(true);
    expect(data.equations[1]!.note).toContain('no multiple');
  });
});

describe('the drawing', () => {
  test('has points, springs, rigid ties and gravity, as places on the tape', async () => {
    const data = (await panel(right))!;
    expect(data.drawing.points.map((p) => p.name)).toEqual(['trolley', 'load']);
    expect(data.drawing.rods).toEqual([[1, 0]]);
    expect(data.drawing.springs).toHaveLength(1);
    expect(data.drawing.gravity).toHaveLength(2);
    for (const at of [...data.drawing.points.flatMap((p) => p.at), ...data.drawing.gravity!]) expect(data.tape.nodes[at]).toBeDefined();
    // Arguments come before their users, so that one pass evaluates everything.
    data.tape.nodes.forEach((node, i) => expect(node.args.every((a) => a < i)).toBe(true));
  });
});

describe('the motion', () => {
  test('starts at the witness where one differs', async () => {
    const data = (await panel(crane('(-ax * cosine + p.g * sine) / p.l')))!;
    expect(data.motion).toMatchObject({ coordinates: ['x', 'th'] });
    expect(data.motion!.code).toHaveLength(2);
    const start = Object.fromEntries(data.symbols.map((s) => [s.name, s.value]));
    const claim = data.claims.find((c) => c.verdict === 'differs')!;
    expect(claim.message).toMatch(/^at .* the code gives/);
    expect(start['th']).not.toBe(0);
    expect(data.symbols.find((s) => s.name === 'F')).toMatchObject({ kind: 'input', unit: 'N' });
  });

  test('an increment is an acceleration times the step', async () => {
    const text = `class A {
/**
 * @visviva buffer
 * coordinates x [m]
 * parameters m [kg] > 0, k [N/m] > 0, dt [s] > 0
 * T = 1/2*m*x'^2
 * V = 1/2*k*x^2
 * reads this.x = x, this.v = x'
 * checks this.v += dt*x''
 */
  step(m, k, dt) { this.v += -k / m * this.x * dt; }
}
`;
    const data = (await panel(text, 12))!;
    expect(data.claims.map((c) => c.verdict)).toEqual(['holds']);
    expect(data.motion!.code).toHaveLength(1);
  });

  test('a declaration that can not be read says why', async () => {
    const data = (await panel(right.replace('mass m at', 'mass mm at')))!;
    expect(data.blocked).toContain('mm');
    expect(data.equations).toEqual([]);
  });

  test('a file without declarations has no panel', async () => {
    expect(await panel('const a = 1;', 1)).toBeUndefined();
  });
});

test('lenses say the verdict in words, inlays the derived equation', async () => {
  const service = serviceOf(crane('(-ax * cosine + p.g * sine) / p.l'));
  expect(await service.lenses('a.js', new Budget())).toMatchObject([
    { function: 'rates', system: 'crane', verdict: "1 of 4 claims differs: th''", range: { start: { line: 14 } } },
  ]);
  expect(await serviceOf(right).lenses('a.js', new Budget())).toMatchObject([{ verdict: '4 claims hold' }]);
  const pendulum = `/** @visviva swing
 * coordinates th [rad]
 * parameters  m, l, g > 0
 * point bob: mass m at (l*sin(th), -l*cos(th))
 * gravity (0, -g)
 * checks return = th''
 */
function f(th, g, l) { return -g / l * Math.sin(th); }
`;
  expect(await serviceOf(pendulum).inlays('a.js', new Budget())).toEqual([{ position: { line: 6, column: 24 }, text: "th'' = -g*sin(th)/l" }]);
});

test('a derived function for JavaScript has no types', async () => {
  const [derived] = await serviceOf(right).derive('a.js', 'javascript', new Budget());
  expect(derived!.text).toMatch(/export function craneAccelerations\(state, p\) \{/);
  expect(derived!.text).not.toContain('number');
});
