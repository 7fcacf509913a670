import { describe, expect, test } from 'vitest';
import { decideFormulas, systemOf } from '../support/decide-formulas';

const PENDULUM = `
coordinates x, y [m]
parameters  m [kg] > 0, l [m] > 0, g [m/s^2] > 0
point bob: mass m at (x, y)
gravity (0, -g)
constraint x^2 + y^2 = l^2 with lam`;
// L. D. Landau, E. M. Lifshitz, Mechanics, section 38 (constraints with multipliers), worked out for a pendulum.
const LAM = "-m*(x'^2 + y'^2 - g*y)/(2*l^2)";

function verdict(declaration: string, quantity: string, code: string): string {
  return decideFormulas(declaration, { [quantity]: code })[quantity]!.verdict;
}

describe('constraints', () => {
  test('accelerations and multiplier of a pendulum in the plane', () => {
    expect(systemOf(PENDULUM).problems).toEqual([]);
    const all = decideFormulas(PENDULUM, {
      "x''": `2*x*${LAM}/m`,
      "y''": `2*y*${LAM}/m - g`,
      'multiplier lam': LAM,
      'lam*2*l': `-m*(x'^2 + y'^2 - g*y)/l`,
    });
    for (const d of Object.values(all)) expect(d.verdict).toBe('holds');
  });

  test('faults differ', () => {
    expect(verdict(PENDULUM, "x''", `-2*x*${LAM}/m`)).toBe('differs');
    expect(verdict(PENDULUM, "y''", `2*y*${LAM}/m + g`)).toBe('differs');
    expect(verdict(PENDULUM, 'lam', `-${LAM}`)).toBe('differs');
  });

  test('stabilising terms vanish on the constraint', () => {
    const stabilised = `2*x*(${LAM} - m*(20*(x*x' + y*y') + 50*(x^2 + y^2 - l^2))/(2*l^2))/m`;
    expect(verdict(PENDULUM, "x''", stabilised)).toBe('holds');
    expect(verdict(PENDULUM, "x''", stabilised.replace('x^2 + y^2 - l^2', 'x^2 + y^2 - 2*l^2'))).toBe('differs');
  });

  test('a moving constraint', () => {
    const driven = PENDULUM.replace('parameters', 'inputs      s\nparameters').replace('constraint x^2', 'constraint (x - s)^2');
    // th'' = -(g*sin(th) + s''*cos(th))/l with x = s + l*sin(th), y = -l*cos(th)
    expect(verdict(driven, "(x'' - s'')*(-y) + (x - s)*y''", "-(g*(x - s) + s''*(-y))")).toBe('holds');
    expect(verdict(driven, "(x'' - s'')*(-y) + (x - s)*y''", "-(g*(x - s) - s''*(-y))")).toBe('differs');
  });

  test('an ice skate: velocities across the blade vanish', () => {
    // J. I. Neimark, N. A. Fufaev, Dynamics of Nonholonomic Systems, chapter I (knife edge on a plane), from memory.
    const skate = `
coordinates x, y, a
parameters  m, J > 0
T = 1/2*m*(x'^2 + y'^2) + 1/2*J*a'^2
constraint x'*sin(a) = y'*cos(a) with side`;
    const all = decideFormulas(skate, {
      "a''": '0',
      "x''": "-a'*sin(a)*(x'*cos(a) + y'*sin(a))",
      "y''": "a'*cos(a)*(x'*cos(a) + y'*sin(a))",
      'multiplier side': "-m*a'*(x'*cos(a) + y'*sin(a))",
    });
    for (const d of Object.values(all)) expect(d.verdict).toBe('holds');
  });

  test('what no constraint can be', () => {
    const with_ = (c: string) => systemOf(`coordinates x, y\nparameters m > 0\nT = 1/2*m*(x'^2 + y'^2)\nconstraint ${c}`).problems;
    expect(with_("x'^2 = y'")[0]!.message).toContain('linear');
    expect(with_('m = 2')[0]!.message).toContain('no coordinate');
    expect(with_("x'' = 0")[0]!.message).toContain('no accelerations');
  });
});

describe('bodies', () => {
  test('a rod as a planar body has its inertia about the pivot', () => {
    const rod = `
coordinates th [rad]
parameters  m, l, g > 0
body rod: mass m, inertia m*l^2/12, centre (l/2*sin(th), -l/2*cos(th)), angle th
gravity (0, -g)`;
    expect(systemOf(rod).problems).toEqual([]);
    expect(verdict(rod, "th''", '-3*g/(2*l)*sin(th)')).toBe('holds');
    expect(verdict(rod, "th''", '-g/l*sin(th)')).toBe('differs');
  });

  // L. D. Landau, E. M. Lifshitz, Mechanics, section 35 (Euler angles) and section 36 (Euler's equations).
  const TOP = `
coordinates phi, th, psi [rad]
parameters  A, B, C > 0
where R = Rz(phi)*Rx(th)*Rz(psi)
where w = bodyrates(R)
body top: inertia (A, B, C), rotation R`;

  test('angular velocity from Euler angles', () => {
    expect(systemOf(TOP).problems).toEqual([]);
    expect(verdict(TOP, 'w.x', "phi'*sin(th)*sin(psi) + th'*cos(psi)")).toBe('holds');
    expect(verdict(TOP, 'w.y', "phi'*sin(th)*cos(psi) - th'*sin(psi)")).toBe('holds');
    expect(verdict(TOP, 'w.z', "phi'*cos(th) + psi'")).toBe('holds');
  });

  test("Euler's equations in body rates", () => {
    expect(verdict(TOP, "w.x'", '(B - C)*w.y*w.z/A')).toBe('holds');
    expect(verdict(TOP, "w.z'", '(A - B)*w.x*w.y/C')).toBe('holds');
    expect(verdict(TOP, "w.z'", '(B - A)*w.x*w.y/C')).toBe('differs');
  });

  test('a unit quaternion with its norm as constraint', () => {
    const free = `
coordinates qw, qx, qy, qz
parameters  A, B, C > 0
where R = Rq(qw, qx, qy, qz)
where w = bodyrates(R)
body sat: inertia [[A, 0, 0], [0, B, 0], [0, 0, C]], rotation R
constraint qw^2 + qx^2 + qy^2 + qz^2 = 1`;
    expect(systemOf(free).problems).toEqual([]);
    expect(verdict(free, 'w.x', "2*(qw*qx' - qx*qw' - qy*qz' + qz*qy')")).toBe('holds');
    expect(verdict(free, "2*(qw*qx'' - qx*qw'' - qy*qz'' + qz*qy'')", '(B - C)*w.y*w.z/A')).toBe('holds');
  });
});
