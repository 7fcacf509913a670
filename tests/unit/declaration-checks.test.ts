import { describe, expect, test } from 'vitest';
import { checkDeclaration } from '../../server/src/comparison/declaration';
import { findEquilibria } from '../../server/src/comparison/equilibria';
import { text } from '../../server/src/expression/print';
import { conserved } from '../../server/src/mechanics/equations';
import { Derived } from '../../server/src/mechanics/lagrange';
import { systemOf } from '../support/decide-formulas';

const codes = (declaration: string) => checkDeclaration(new Derived(systemOf(declaration))).map((p) => p.code);
const PENDULUM = `coordinates th [rad]
parameters m, l, g > 0
point bob: mass m at (l*sin(th), -l*cos(th))
gravity (0, -g)`;

describe('a declaration by itself', () => {
  test.each([
    [PENDULUM, []],
    ["coordinates x, y\nparameters m > 0\nT = 1/2*m*x'^2", ['singular']],
    [`${PENDULUM}\nT = 1/2*m*l^2*th'^2`, ['inconsistent']],
    [`${PENDULUM}\nT = 1/24*m*l^2*th'^2`, []],
    [`${PENDULUM}\nV = -m*g*l*cos(th)`, ['inconsistent']],
    ['coordinates x\nparameters m, k > 0\npoint a: mass m at (x, 0)\nspring k between (0, 0) and (x, 0)\nV = 1/2*k*x^2', ['inconsistent']],
    ["coordinates x, y\nparameters m > 0\nT = 1/2*m*(x' + y')^2", ['singular']],
    ["coordinates x\nparameters m > 0\nT = -1/2*m*x'^2", ['not-quadratic']],
    ["coordinates x\nparameters m > 0\nT = 1/2*m*x'^3", ['not-quadratic']],
    ["coordinates x\nparameters m > 0\nT = 1/2*m*x'", ['singular', 'not-quadratic']],
    ["coordinates x\ninputs u\nparameters m > 0\nT = 1/2*m*(x' + u')^2", []],
    ["coordinates x, y\nparameters m > 0, l > 0\nT = 1/2*m*(x'^2 + y'^2)\nconstraint x^2 + y^2 = l^2\nconstraint 2*x^2 + 2*y^2 = 2*l^2", ['singular']],
    ["coordinates x, y\nparameters m > 0, l > 0\nT = 1/2*m*(x'^2 + y'^2)\nconstraint x^2 + y^2 = -l^2", ['inconsistent']],
  ])('%s: %j', (declaration, expected) => expect(codes(declaration)).toEqual(expected));
});

describe('what follows from a declaration', () => {
  const equilibria = (declaration: string) =>
    findEquilibria(new Derived(systemOf(declaration))).map((e) => `${e.point.map((p) => text(p)).join(',')} ${e.stability} ${e.squaredFrequency ? text(e.squaredFrequency) : ''}`.trim());

  test('equilibria of a pendulum', () => {
    expect(equilibria(PENDULUM)).toEqual(['0 stable g/l', 'pi unstable -g/l']);
  });

  test('a bead on a turning hoop: which of its equilibria is stable depends on the rate', () => {
    // L. N. Hand, J. D. Finch, Analytical Mechanics, chapter 3 (bead on a rotating hoop), from memory.
    const hoop = `coordinates th [rad]
parameters m, R, g, w > 0
T = 1/2*m*R^2*(th'^2 + w^2*sin(th)^2)
V = -m*g*R*cos(th)`;
    expect(equilibria(hoop)[0]).toMatch(/^0 depends on the parameters/);
    expect(equilibria(hoop)[1]).toMatch(/^pi unstable/);
  });

  test('what turning holds up is not called unstable', () => {
    const turning = "coordinates x, y\nparameters m, w > 0\nL = 1/2*m*((x' - w*y)^2 + (y' + w*x)^2) - 1/4*m*w^2*(x^2 + y^2)";
    expect(equilibria(turning)[0]).toMatch(/ undecided/);
    expect(equilibria("coordinates x\nparameters m, k, b > 0\nT = 1/2*m*x'^2\nV = 1/2*k*x^2\nQ[x] = b*x'")[0]).toMatch(/ undecided/);
  });

  test('conserved quantities', () => {
    const kepler = "coordinates r > 0, phi [rad]\nparameters m, k > 0\nT = 1/2*m*(r'^2 + r^2*phi'^2)\nV = -k/r";
    expect(conserved(new Derived(systemOf(kepler))).map((c) => c.name)).toEqual(['p[phi]', 'E']);
    // Not T + V where a motor keeps the hoop turning, or where V depends on velocities.
    const names = (d: string) => conserved(new Derived(systemOf(d))).map((c) => `${c.name} ${text(c.expr)}`);
    expect(names("coordinates th\nparameters m, w > 0\nT = 1/2*m*(th'^2 + w^2*sin(th)^2)")).toEqual(["H 1/2*m*th'^2 - 1/2*m*w^2*sin(th)^2"]);
    expect(names("coordinates x, y\nparameters m, B > 0\nT = 1/2*m*(x'^2 + y'^2)\nV = B*y*x' + x^2")).toEqual([
      expect.stringMatching(/^p\[y\]|^H/),
    ]);
    expect(conserved(new Derived(systemOf(`${kepler}\nD = 1/2*m*r'^2`))).map((c) => c.name)).toEqual(['p[phi]']);
  });
});
