import { describe, expect, test } from 'vitest';
import { decideFormulas, systemOf } from '../support/decide-formulas';

const PENDULUM = `
coordinates th [rad]
parameters  m [kg] > 0, l [m] > 0, g [m/s^2] > 0
point bob: mass m at (l*sin(th), -l*cos(th))
gravity (0, -g)`;

const CRANE = `
coordinates x [m], th [rad]
parameters  M, m [kg] > 0, l [m] > 0, g [m/s^2] > 0, c [N s/m] >= 0
inputs      F [N]
point trolley: mass M at (x, 0)
point load:    mass m at (x + l*sin(th), -l*cos(th))
gravity (0, -g)
D = 1/2*c*x'^2
Q[x] = F`;
const X = `(F - c*x' + m*l*th'^2*sin(th) + m*g*sin(th)*cos(th))/(M + m*sin(th)^2)`;
const TH = `-(cos(th)*${X} + g*sin(th))/l`;

function verdict(declaration: string, quantity: string, code: string): string {
  return decideFormulas(declaration, { [quantity]: code })[quantity]!.verdict;
}

describe('verdicts', () => {
  test('all accelerations right', () => {
    const d = decideFormulas(CRANE, { "x''": X, "th''": TH });
    expect(d["x''"]).toMatchObject({ verdict: 'holds', states: 64 });
    expect(d["th''"]).toMatchObject({ verdict: 'holds', states: 64 });
  });

  test('only the wrong one differs', () => {
    const d = decideFormulas(CRANE, { "x''": X, "th''": TH.replace('+ g', '- g') });
    expect(d["x''"]!.verdict).toBe('holds');
    expect(d["th''"]!.verdict).toBe('differs');
  });

  test('a single claim of a coupled system', () => {
    expect(verdict(CRANE, "th''", TH)).toBe('holds');
    expect(verdict(CRANE, "th''", TH.replace('m*l*', 'm*'))).toBe('differs');
  });

  test('other spellings of the same physics hold', () => {
    expect(verdict(PENDULUM, "th''", '-g*2*sin(th/2)*cos(th/2)/l')).toBe('holds');
    expect(verdict(PENDULUM, "th''", '-(g/l)*sqrt(1 - cos(th)^2)*sign(sin(th))')).toBe('holds');
    expect(verdict(PENDULUM, "m*l^2*th''", '-m*g*l*sin(th)')).toBe('holds');
  });

  test('energies and other quantities', () => {
    expect(verdict(PENDULUM, 'E', "1/2*m*l^2*th'^2 - m*g*l*cos(th)")).toBe('holds');
    expect(verdict(PENDULUM, 'E', "1/2*m*l*th'^2 - m*g*l*cos(th)")).toBe('differs');
    expect(verdict(PENDULUM, 'p[th]', "m*l^2*th'")).toBe('holds');
    expect(verdict(CRANE, 'mass matrix[x, th]', 'm*l*cos(th)')).toBe('holds');
    expect(verdict(CRANE, 'bias[x]', "c*x' - m*l*th'^2*sin(th)")).toBe('holds');
    expect(verdict(CRANE, 'right side[th]', '-m*g*l*sin(th)')).toBe('holds');
  });

  test('a difference of one part in ten million differs, one in 10^12 is not said to', () => {
    expect(verdict(PENDULUM, "th''", '-1.00000013*g/l*sin(th)')).toBe('differs');
    expect(verdict(PENDULUM, "th''", '-(1 + 1e-12)*g/l*sin(th)')).not.toBe('differs');
  });

  test('rounded constants are named', () => {
    const wheel = 'coordinates x\nparameters m, k > 0\nT = 1/2*m*x\'^2\nV = 1/3*k*x^2';
    const d = decideFormulas(wheel, { "x''": '-0.6667*k*x/m' })["x''"]!;
    expect(d).toMatchObject({ verdict: 'differs', rounded: { exactText: '2/3' } });
    const turn = 'coordinates x\nparameters m, k > 0\nT = 1/2*m*x\'^2\nV = pi*k*x^2/360';
    expect(decideFormulas(turn, { "x''": '-0.01745*k*x/m' })["x''"]).toMatchObject({ rounded: { exactText: 'pi/180' } });
  });

  test('many digits of pi hold, and are named', () => {
    const d = decideFormulas("coordinates x\nparameters m, k > 0\nT = 1/2*m*x'^2\nV = pi*k*x^2/2", { "x''": '-3.14159265359*k*x/m' });
    expect(d["x''"]).toMatchObject({ verdict: 'holds', rounded: { exactText: 'pi' } });
  });

  test('the witness is round, and shows the difference', () => {
    const d = decideFormulas(PENDULUM, { "th''": 'g/l*sin(th)' })["th''"]!;
    if (d.verdict !== 'differs') throw new Error(d.verdict);
    const values = Object.fromEntries([...d.witness.values].map(([s, x]) => [(s.data as { name: string }).name, x]));
    expect(values).toMatchObject({ l: 1, g: 1 });
    expect(d.witness.found).toBeCloseTo(-d.witness.expected, 12);
    expect(Math.abs(d.witness.expected)).toBeGreaterThan(0.1);
  });

  test('points without a value do not vote; too few of them decide nothing', () => {
    expect(verdict(PENDULUM, "th''", '-g/l*sin(th) + 0*log(th)')).toBe('holds');
    expect(verdict(PENDULUM, "th''", '-g/l*sin(th)*sqrt(-1 - th^2)/sqrt(-1 - th^2)')).toBe('unread');
  });

  test('a coordinate without kinetic energy can not be decided', () => {
    expect(verdict("coordinates x, y\nparameters m > 0\nT = 1/2*m*x'^2", "y''", '0')).toBe('unread');
  });

  test('near a point the expansion is what counts', () => {
    const near = `${PENDULUM}\nnear th = 0, order 1`;
    expect(verdict(near, "th''", '-g/l*th')).toBe('holds');
    expect(verdict(near, "th''", '-g/l*sin(th)')).toBe('holds');
    expect(verdict(near, "th''", '-2*g/l*th')).toBe('differs');
    const upright = `${PENDULUM}\nnear th = pi, order 1`;
    expect(verdict(upright, "th''", 'g/l*(th - pi)')).toBe('holds');
    expect(verdict(upright, "th''", '-g/l*(th - pi)')).toBe('differs');
    expect(verdict(`${PENDULUM}\nnear th = 0, order 3`, "th''", '-g/l*(th - th^3/6)')).toBe('holds');
    expect(verdict(`${PENDULUM}\nnear th = 0, order 3`, "th''", '-g/l*(th - th^3/3)')).toBe('differs');
  });
});

describe('declarations', () => {
  test('virtual work of a force and a torque', () => {
    const arm = `
coordinates th1, th2 [rad]
parameters  m, l > 0
inputs      F, tau
point tip: mass m at (l*sin(th1) + l*sin(th2), -l*cos(th1) - l*cos(th2))
force (F, 0) at (l*sin(th1) + l*sin(th2), -l*cos(th1) - l*cos(th2))
torque tau on th2 - th1`;
    const system = systemOf(arm);
    expect(system.problems).toEqual([]);
    expect(verdict(arm, 'Q[th1]', 'F*l*cos(th1) - tau')).toBe('holds');
    expect(verdict(arm, 'Q[th2]', 'F*l*cos(th2) + tau')).toBe('holds');
  });

  test('springs with and without rest length, dampers', () => {
    const line = `
coordinates x, y
parameters  m, k, c > 0, L0 > 0
point a: mass m at (x, y)
spring k, rest L0 between (0, 0) and a
damper c between a and (0, 0)`;
    expect(verdict(line, "x''", "(-k*(sqrt(x^2 + y^2) - L0)*x/sqrt(x^2 + y^2) - c*(x*x' + y*y')*x/(x^2 + y^2))/m")).toBe('holds');
    const row = "coordinates x1, x2\nparameters m, k, c > 0\nT = 1/2*m*(x1'^2 + x2'^2)\nspring k between x1 and x2\ndamper c between x1 and x2";
    expect(verdict(row, "x1''", "(k*(x2 - x1) + c*(x2' - x1'))/m")).toBe('holds');
  });

  test('L by itself, and L = T - V, count every energy once', () => {
    const parts = "coordinates x\nparameters m, k > 0\nT = 1/2*m*x'^2\nV = 1/2*k*x^2\nL = T - V";
    expect(verdict(parts, "x''", '-k*x/m')).toBe('holds');
    expect(verdict("coordinates x\nparameters m, k > 0\nL = 1/2*m*x'^2 - 1/2*k*x^2", "x''", '-k*x/m')).toBe('holds');
  });

  test('families, vectors and shorthands', () => {
    const chain = `
coordinates th[i] [rad] over i in 1..2
parameters  m[i], l[i] > 0 over i in 1..2
parameters  g > 0
where P[0] = (0, 0)
where P[i] = P[i-1] + (l[i]*sin(th[i]), -l[i]*cos(th[i])) over i in 1..2
T = sum(1/2*m[i]*P[i]'^2 over i in 1..2)
V = sum(m[i]*g*P[i].y over i in 1..2)`;
    expect(systemOf(chain).problems).toEqual([]);
    expect(verdict(chain, 'mass matrix[th[1], th[2]]', 'm[2]*l[1]*l[2]*cos(th[1] - th[2])')).toBe('holds');
  });

  test.each([
    ['coordinates x\nT = 1/2*m*x\'^2', 'undeclared'],
    ['coordinates x\ncoordinates x', 'ambiguous'],
    ['coordinates x\nparameters m\nT = m*x\'\'', 'syntax'],
    ['coordinates x\nwhere a = b, b = a\nT = a', 'syntax'],
    ['coordinates x\nparameters m\nT = m\'*x', 'undeclared'],
  ])('%s is %s', (text, code) => {
    expect(systemOf(text).problems.map((p) => p.code)).toContain(code);
  });
});
