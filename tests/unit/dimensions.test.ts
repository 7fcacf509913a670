import { describe, expect, test } from 'vitest';
import { checkDimensions } from '../../server/src/mechanics/dimensions';
import { block } from './notation-show';

const CRANE = [
  'coordinates x [m], th [rad]',
  'parameters M, m [kg] > 0, l [m] > 0, g [m/s^2], c [N s/m], k [N/m], J [kg m^2], u',
  'inputs F [N], tau [N m]',
];

/** What is reported about some statements below the crane's symbols: the place quoted, then the message. */
function reports(...lines: string[]): string[] {
  return raw(...CRANE, ...lines);
}

function raw(...lines: string[]): string[] {
  const b = block(...lines);
  expect(b.errors).toEqual([]);
  return checkDimensions(b).map((p) => `${b.text.slice(p.span.start, p.span.end)}: ${p.message}`);
}

describe('right', () => {
  test.each([
    ["T = 1/2*(M + m)*x'^2 + m*l*x'*th'*cos(th) + 1/2*m*l^2*th'^2"],
    ['V = -m*g*l*cos(th) + 1/2*k*x^2'],
    ["D = 1/2*c*x'^2"],
    ['Q[x] = F'],
    ['Q[th] = tau'],
    ['V = 9.81*m*x'],
    ['V = u*x + sin(u)'],
    ['V = m*g*(x + 0)'],
    ['V = m*g*sqrt(x^2 + l^2)'],
    ['V = m*g*norm((x, l))'],
    ['V = m*g*max(x, l)'],
    ['V = k*abs(x)^2*sign(x)'],
    ['V = m*g*x*exp(-x/l)'],
    ['V = m*g*l*atan2(x, l)'],
    ['V = m*g*l*(x/l)^2.5'],
    ['V = m*g*l*(x/l)^u'],
    ["where P = (x + l*sin(th), -l*cos(th)) \nT = 1/2*m*dot(P', P')"],
    ["where v = P' , P = (x, l) \nT = 1/2*m*dot(v, v)"],
    ['point a: mass m at (x, 0)'],
    ['body b: mass m, inertia J, centre (x, l), angle th'],
    ['gravity (0, -g)'],
    ['spring k between (x, 0) and (0, l)'],
    ['spring k, rest l between x and 0'],
    ['spring tau between th and 0'],
    ['damper c between x and 0'],
    ['force (F, 0) at (x, 0)'],
    ['torque tau on th'],
    ['constraint x = l*th'],
    ["constraint x' = l*th'"],
    ['ranges x in [-1, 1], th in [-pi, pi/2]'],
    ['near x = 1, th = pi'],
    ["checks a = x'' + g*sin(th), b = mass matrix, e = T + V"],
    ['T = t*F*x/t'],
  ])('%s', (line) => expect(reports(...line.split('\n'))).toEqual([]));

  test('families', () =>
    expect(
      raw(
        'coordinates q[i] [rad] over i in 1..3',
        'parameters m[i] [kg], l[i] [m] over i in 1..3',
        'parameters g [m/s^2]',
        'where r[0] = (0, 0), r[i] = r[i-1] + l[i]*(sin(q[i]), -cos(q[i])) over i in 1..3',
        "T = sum(1/2*m[i]*dot(r[i]', r[i]') over i in 1..3)",
        'V = sum(m[i]*g*r[i][1] over i in 1..3)',
      ),
    ).toEqual([]));
  test('scaled by the mass', () => expect(raw('coordinates x [m]', 'parameters g [m/s^2]', "T = 1/2*x'^2", 'V = g*x')).toEqual([]));
  test('a scaled Lagrangian', () => expect(raw('coordinates th [rad]', 'parameters w [1/s]', "L = 1/2*th'^2 + w^2*cos(th)")).toEqual([]));
  test('scaled time', () => expect(raw('coordinates th [1]', "T = 1/2*th'^2", 'V = -cos(th)')).toEqual([]));
  test('scaled time, its name used', () => expect(raw('coordinates th [1]', "V = th^2*sin(t)")).toEqual([]));
  test('no units at all', () => expect(raw('coordinates x, th', "T = x'^2 + th'", 'V = sin(x) + x^2')).toEqual([]));
});

describe('hostile', () => {
  test('a shorthand in terms of itself', () => expect(raw('coordinates x [m]', `where ${Array(60).fill('a = [a, a]').join(', ')}`)).toEqual([]));
  test('one level in another', () => expect(raw('coordinates x [m]', `where ${Array(5000).fill('a = [a]').join(', ')}`)).toEqual([]));
});

describe('wrong', () => {
  test.each([
    ["T = 1/2*m*x'^2 + 1/2*m*l*th'^2", "1/2*m*l*th'^2: the term `1/2*m*l*th'^2` is in N (kg m/s^2), but `1/2*m*x'^2`, which it is added to, in J (kg m^2/s^2)"],
    ['V = m*g*cos(th)', 'm*g*cos(th): `m*g*cos(th)` is in N (kg m/s^2), but V is an energy, in J (kg m^2/s^2)'],
    ["D = c*x'", "c*x': `c*x'` is in N (kg m/s^2), but D is half the power lost, in W (kg m^2/s^3)"],
    ['Q[x] = tau', 'tau: `tau` is in J (kg m^2/s^2), but Q[x] is energy per x, in N (kg m/s^2)'],
    ['Q[th] = F', 'F: `F` is in N (kg m/s^2), but Q[th] is energy per th, in J (kg m^2/s^2)'],
    ['V = k*x^2 + sin(x)*m*g*l', 'x: the argument of sin, `x`, is in m: it must have no unit'],
    ['V = m*g*l*(1 + x)', 'x: the term `x` is in m, but `1`, which it is added to, without a unit'],
    ['V = m*g*l*2^x', 'x: the exponent `x` is in m: an exponent has no unit'],
    ['V = m*g*min(x, th)', 'th: `th` is without a unit, but `x`, which it is compared with, in m'],
    ['V = m*g*l*atan2(x, 2)', '2: `2` is without a unit'],
    ['where P = (x + th, 0)', 'th: the term `th` is without a unit'],
    ['where P = (x, l) + (th, l)', 'component 1 of'],
    ['point a: mass l at (x, 0)', 'l: `l` is in m, but a mass is in kg'],
    ['point a: mass m at (x, cos(th))', 'cos(th): `cos(th)` is without a unit, but the component `x` of this position in m'],
    ['where P = (x, cos(th))\npoint a: mass m at P', 'P: a component of the position `P` is without a unit'],
    ['body b: mass m, inertia m, centre (x, 0)', 'm: `m` is in kg, but a moment of inertia is in kg m^2'],
    ['body b: mass m, inertia J, centre (x, 0), angle x', 'x: `x` is in m, but an angle is without a unit'],
    ['gravity (0, -m*g)', '-m*g: `-m*g` is in N (kg m/s^2), but gravity is an acceleration, in m/s^2'],
    ['spring c between x and 0', 'c: `c` is in N s/m (kg/s), but this stiffness is in N/m (kg/s^2)'],
    ['spring k, rest th between x and 0', 'th: `th` is without a unit'],
    ['spring k between x and th', 'th: `th` is without a unit'],
    ['damper k between x and 0', 'k: `k` is in N/m (kg/s^2), but this damping coefficient is in N s/m (kg/s)'],
    ['force (F, tau) at (x, 0)', 'tau: `tau` is in J (kg m^2/s^2), but a force here is in N (kg m/s^2)'],
    ['torque F on th', 'F: `F` is in N (kg m/s^2), but a torque on th is energy per th, in J (kg m^2/s^2)'],
    ['constraint x = th', 'th: `th` is without a unit'],
    ['ranges th in [0, l]', 'l: `l` is in m, but `th` without a unit'],
    ['near x = th', 'th: `th` is without a unit, but `x` in m'],
    ["checks a = x'' + g*x", "g*x: the term `g*x` is in m^2/s^2"],
    ['reads a = x + th', 'th: the term `th` is without a unit'],
    ['parameters b [m] > 2*m', '2*m: `2*m` is in kg, but `b` in m'],
  ])('%s', (line, message) => expect(reports(...line.split('\n')).join('\n')).toContain(message));

  test('the one of three that disagrees', () => expect(reports('V = k*x + k*x^2 + m*g*l').map((r) => r.split(':')[0])).toEqual(['k*x']));
  test('T and V that disagree', () => expect(raw('coordinates x [m]', 'parameters g [m/s^2]', "T = 1/2*x'^2", 'V = g').length).toBeGreaterThan(0));
  test('once each', () => expect(reports('where a = x + th', 'V = k*a^2', 'T = k*a^2')).toHaveLength(1));
});
