import { describe, expect, test } from 'vitest';
import { checkText } from '../support/check';
import { decideFormulas } from '../support/decide-formulas';

/** Verdicts of a function's claims, in order. */
async function verdicts(declaration: string, code: string): Promise<string[]> {
  const result = await checkText('a.ts', `/*\n@visviva test\n${declaration}\n*/\n${code}\n`);
  expect(result.problems).toEqual([]);
  return result.claims.map((c) => c.verdict);
}

const PENDULUM = `coordinates th [rad]
parameters m, l, g > 0
point bob: mass m at (l*sin(th), -l*cos(th))
gravity (0, -g)`;

const ARM = `coordinates a, b [rad]
parameters m1, m2, l1, l2, g > 0
inputs u1, u2
where P = (l1*cos(a), l1*sin(a))
point elbow: mass m1 at P
point hand: mass m2 at P + (l2*cos(a + b), l2*sin(a + b))
gravity (0, -g)
torque u1 on a
torque u2 on b`;

describe('derived quantities', () => {
  test("Hamilton's equations in momentum form", async () => {
    // L. D. Landau, E. M. Lifshitz, Mechanics, section 40.
    const code = (sign: string) => `function hamilton(th, p, { m, l, g }) {
  return [p / (m * l * l), ${sign}m * g * l * Math.sin(th)];
}`;
    const claims = `${PENDULUM}\nreads p = p[th]\nchecks return = [th', p[th]']`;
    expect(await verdicts(claims, code('-'))).toEqual(['holds', 'holds']);
    expect(await verdicts(claims, code(''))).toEqual(['holds', 'differs']);
    const slopes = `${PENDULUM}\nreads p = p[th]\nchecks return = [dH/dp, -dH/dth]`;
    expect(await verdicts(slopes, code('-'))).toEqual(['holds', 'holds']);
    expect(await verdicts(slopes, code(''))).toEqual(['holds', 'differs']);
  });

  test('energy as code, its rate, and constants of the motion', async () => {
    const energy = (half: string) => `function energy(th, thdot, { m, l, g }) { return ${half}*m*l*l*thdot**2 - m*g*l*Math.cos(th); }`;
    expect(await verdicts(`${PENDULUM}\nchecks return = E`, energy('0.5'))).toEqual(['holds']);
    expect(await verdicts(`${PENDULUM}\nchecks return = constant`, energy('0.5'))).toEqual(['holds']);
    expect(await verdicts(`${PENDULUM}\nchecks return = constant`, energy('1'))).toEqual(['differs']);
    const power = 'function power(th, thdot, { b }) { return -b*thdot**2; }';
    const damped = `${PENDULUM.replace('m, l, g', 'm, l, g, b')}\nD = 1/2*b*th'^2\nchecks return = E'`;
    expect(await verdicts(damped, power)).toEqual(['holds']);
  });

  test('a class of matrices from one declaration', async () => {
    // M. W. Spong, S. Hutchinson, M. Vidyasagar, Robot Modeling and Control, two-link planar arm, with point masses.
    const code = (h: string) => `class Arm {
  constructor(p) { this.m1 = p.m1; this.m2 = p.m2; this.l1 = p.l1; this.l2 = p.l2; this.g = p.g; }
  H(q) {
    const [a, b] = q;
    const c = this.l1 * this.l2 * Math.cos(b);
    const d = this.m2 * (this.l2 ** 2 + c);
    return [[this.m1 * this.l1 ** 2 + this.m2 * (this.l1 ** 2 + this.l2 ** 2 + 2 * c), d], [d, this.m2 * this.l2 ** 2]];
  }
  C(q, dq) {
    const h = ${h}this.m2 * this.l1 * this.l2 * Math.sin(q[1]);
    return [[h * dq[1], h * (dq[0] + dq[1])], [-h * dq[0], 0]];
  }
  G(q) {
    const hand = this.m2 * this.l2 * this.g * Math.cos(q[0] + q[1]);
    return [(this.m1 + this.m2) * this.l1 * this.g * Math.cos(q[0]) + hand, hand];
  }
}`;
    const claims = `${ARM}
reads q = [a, b], dq = [a', b']
checks H(q) = mass matrix, C(q, dq) = coriolis matrix, C(q, dq)*q' = coriolis vector, G(q) = gravity vector`;
    expect(await verdicts(claims, code('-'))).toEqual(new Array(10).fill('holds'));
    const wrong = await verdicts(claims, code(''));
    expect(wrong.slice(0, 4)).toEqual(new Array(4).fill('holds'));
    expect(wrong.slice(4, 8)).toEqual(new Array(4).fill('differs'));
  });

  test('residuals, right sides and input matrix', async () => {
    const cart = "coordinates x\nparameters m, k, c > 0\ninputs F\nT = 1/2*m*x'^2\nV = 1/2*k*x^2\nD = 1/2*c*x'^2\nQ[x] = F";
    const code = "function res(x, xdot, xddot, F, { m, k, c }) { return m*xddot + c*xdot + k*x - F; }";
    expect(await verdicts(`${cart}\nchecks return = residual[x]`, code)).toEqual(['holds']);
    expect(await verdicts(`${cart}\nchecks return = residual[x]`, code.replace('- F', '+ F'))).toEqual(['differs']);
    const bias = 'function f(x, xdot, F, { k, c }) { return [c*xdot + k*x, F - c*xdot - k*x, 1]; }';
    expect(await verdicts(`${cart}\nchecks return[0] = bias[x], return[1] = right side[x]`, bias)).toEqual(['holds', 'holds']);
    expect(await verdicts(`${cart}\nchecks M*x'' = right side[x]`, 'function f(m) { const M = m; return M; }')).toEqual(['holds']);
  });

  test('jacobians and linearisations', async () => {
    const jac = `function jac(th, thdot, { l, g }) { return [-g/l*Math.cos(th), 0]; }`;
    expect(await verdicts(`${PENDULUM}\nchecks return = jacobian of th'' by [th, th']`, jac)).toEqual(['holds', 'holds']);
    expect(await verdicts(`${PENDULUM}\nchecks return = jacobian of th'' by [th, th']`, jac.replace('cos', 'sin'))).toEqual(['differs', 'holds']);
    const A = (s: string) => `function A({ l, g }) { return [[0, 1], [${s}g/l, 0]]; }`;
    const up = (point: string) => `${PENDULUM}\nnear th = ${point}\nchecks return = linearised A`;
    expect(await verdicts(up('pi'), A(''))).toEqual(['holds', 'holds', 'holds', 'holds']);
    expect(await verdicts(up('0'), A(''))).toEqual(['holds', 'holds', 'differs', 'holds']);
    expect(await verdicts(up('1'), A(''))).toEqual(['unread']);
  });

  test('momenta of a coupled system', () => {
    const d = decideFormulas(ARM, { 'p[b]': "m2*l2^2*(a' + b') + m2*l1*l2*cos(b)*a'", 'Q[a]': 'u1' });
    expect(Object.values(d).map((x) => x.verdict)).toEqual(['holds', 'holds']);
  });
});
