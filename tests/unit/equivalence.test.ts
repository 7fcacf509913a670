import { describe, expect, test } from 'vitest';
import { compareDeclarations } from '../../server/src/comparison/equivalence';
import { systemOf } from '../support/decide-formulas';

const compare = (a: string, b: string) => compareDeclarations(systemOf(a), systemOf(b).block).kind;
const OSC = "coordinates x\nparameters m, k > 0\n";

describe('two declarations of one system', () => {
  test('points and typed energies', () => {
    const points = 'coordinates th [rad]\nparameters m, l, g > 0\npoint mass m at (l*sin(th), -l*cos(th))\ngravity (0, -g)';
    const typed = "coordinates th [rad]\nparameters m, l, g > 0\nT = 1/2*m*l^2*th'^2\nV = m*g*l*(1 - cos(th))";
    expect(compare(points, points)).toBe('same');
    expect(compare(points, typed)).toBe('constant');
    expect(compare(points, typed.replace('1/2*m', '1/3*m'))).toBe('differ');
  });

  test('a total time derivative changes nothing', () => {
    // L. D. Landau, E. M. Lifshitz, Mechanics, section 2.
    expect(compare(`${OSC}L = 1/2*m*x'^2 - 1/2*k*x^2`, `${OSC}L = 1/2*m*x'^2 - 1/2*k*x^2 + k*x*x' + m*t*x' + m*x`)).toBe('gauge');
    expect(compare(`${OSC}L = 1/2*m*x'^2 - 1/2*k*x^2`, `${OSC}L = m*x'^2 - k*x^2`)).toBe('same motion');
  });

  test('other coordinates, given by where', () => {
    const cartesian = "coordinates x, y\nparameters m, k > 0\nT = 1/2*m*(x'^2 + y'^2)\nV = 1/2*k*(x^2 + y^2)";
    const polar = "coordinates r > 0, phi\nparameters m, k > 0\nwhere x = r*cos(phi), y = r*sin(phi)\nT = 1/2*m*(r'^2 + r^2*phi'^2)\nV = 1/2*k*r^2";
    expect(compare(cartesian, polar)).toBe('same');
    expect(compare(cartesian, polar.replace('r^2*phi', 'r*phi'))).toBe('differ');
    // A radius is positive in both, though only one declares it.
    const [flat, round] = [cartesian, polar].map((d) => d.replace(/V = .*/, ''));
    expect(compare(`${flat}V = -k/sqrt(x^2 + y^2)`, `${round}V = -k/r`)).toBe('same');
    expect(compare(cartesian, polar.replace('where x = r*cos(phi), y = r*sin(phi)', ''))).toBe('undecided');
  });

  test('constraints against coordinates that meet them', () => {
    const bound =
      'coordinates x, y [m]\nparameters m, l, g > 0\npoint bob: mass m at (x, y)\ngravity (0, -g)\nconstraint x^2 + y^2 = l^2';
    const free =
      "coordinates th [rad]\nparameters m, l, g > 0\nwhere x = l*sin(th), y = -l*cos(th)\nT = 1/2*m*l^2*th'^2\nV = -m*g*l*cos(th)";
    expect(compare(bound, free)).toBe('same');
    expect(compare(bound, free.replace('V = -', 'V = '))).toBe('differ');
    expect(compare(bound, free.replace('y = -l', 'y = -2*l'))).toBe('undecided');
    expect(compare(bound, bound.replace('x^2 + y^2 = l^2', 'sqrt(x^2 + y^2) = l'))).toBe('same');
    expect(compare(bound, bound.replace('x^2 + y^2 = l^2', 'x^2 + y^2 = 4*l^2'))).toBe('undecided');
    expect(compare(bound, bound.replace('at (x, y)', 'at (x, 2*y)'))).toBe('differ');
  });
});
