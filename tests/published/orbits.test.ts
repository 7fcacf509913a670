import { describe, expect, test } from 'vitest';
import { Model, type Numbers } from '../support/model';

const KEPLER = "coordinates r > 0, phi\nparameters m, k > 0, c\nT = 1/2*m*(r'^2 + r^2*phi'^2)\nV = -k/r";

/** Angle run through from one smallest distance to the next. */
function apsidalAngle(model: Model, r: number, phiDot: number): number {
  return model.until({ r, "r'": 0, phi: 0, "phi'": phiDot }, 0.01, (s) => s["r'"]!)['phi']!;
}

describe('one attracting centre', () => {
  test("Kepler's third law", () => {
    // L. D. Landau, E. M. Lifshitz, Mechanics, section 15, from memory: 2 pi a^(3/2) sqrt(m/k).
    const model = new Model(KEPLER, { m: 2, k: 2, c: 0 });
    const [a, e] = [1.7, 0.4];
    const r = a * (1 - e);
    const at = model.until({ r, "r'": 0, phi: 0, "phi'": Math.sqrt((1 + e) / r) / r }, 0.01, (s) => s["r'"]!);
    expect(at['t']).toBeCloseTo(2 * Math.PI * a ** 1.5, 6);
    expect(at['phi']).toBeCloseTo(2 * Math.PI, 6);
  });

  test('precession with a further potential in 1/r^2', () => {
    // E. T. Whittaker, A Treatise on the Analytical Dynamics of Particles and Rigid Bodies, chapter IV (revolving orbits,
    // after Newton), from memory: V = -k/r + c/r^2 turns by 2 pi/sqrt(1 + 2 m c/M^2) between smallest distances.
    const model = new Model(`${KEPLER} + c/r^2`, { m: 1, k: 1, c: 0.05 });
    const M = 1.2;
    expect(apsidalAngle(model, 1, M)).toBeCloseTo((2 * Math.PI) / Math.sqrt(1 + 0.1 / M ** 2), 6);
  });

  test('precession with a further potential in 1/r^3', () => {
    // L. D. Landau, E. M. Lifshitz, Mechanics, section 15, problem 3b, from memory: -6 pi k c m^2/M^4 for V = -k/r + c/r^3.
    const c = 1e-4;
    const model = new Model(`${KEPLER} + c/r^3`, { m: 1, k: 1, c });
    const M = 1.2;
    expect((apsidalAngle(model, 1, M) - 2 * Math.PI) / ((-6 * Math.PI * c) / M ** 4)).toBeCloseTo(1, 2);
  });

  test('the perihelion of Mercury', () => {
    // C. M. Will, Theory and Experiment in Gravitational Physics, section 7.3, from memory: 42.98 seconds of arc in a
    // century. In the orbit's size as unit of length the relativistic potential is -h^2 k/(c^2 r^3); exaggerated 1000 times
    // here, as the angle grows in proportion.
    const [a, e, GM, light] = [5.790905e10, 0.205630, 1.32712440018e20, 299792458];
    const factor = (1000 * GM) / (light ** 2 * a);
    const h2 = 1 - e * e;
    const model = new Model(`${KEPLER} - c/r^3`, { m: 1, k: 1, c: factor * h2 });
    const angle = apsidalAngle(model, 1 - e, Math.sqrt(h2) / (1 - e) ** 2) - 2 * Math.PI;
    const orbits = (100 * 365.25) / 87.9691;
    expect(((angle / 1000) * orbits * 180 * 3600) / Math.PI).toBeCloseTo(42.98, 1);
  });

  test('an isotropic spring closes after half a turn', () => {
    // J. Bertrand, "Théorème relatif au mouvement d'un point attiré vers un centre fixe", Comptes rendus 77 (1873), from memory.
    const model = new Model("coordinates r > 0, phi\nparameters m, k > 0\nT = 1/2*m*(r'^2 + r^2*phi'^2)\nV = 1/2*k*r^2", { m: 1, k: 1 });
    expect(apsidalAngle(model, 1, 1.5)).toBeCloseTo(Math.PI, 6);
  });

  test('the geostationary radius and the speed of escape', () => {
    // World Geodetic System 1984, defining parameters (GM, rate of rotation), with the radius of 42164 km and the escape
    // speed of 11.18 km/s, common knowledge in the trade, from memory.
    const model = new Model(KEPLER, { m: 1, k: 3.986004418e14, c: 0 });
    const pull = model.value("r''", { r: 42_164_000, "r'": 0, phi: 0, "phi'": 7.292115e-5 });
    expect(Math.abs(pull)).toBeLessThan(1e-5);
    expect(model.value('E', { r: 6_378_137, "r'": 11_180, phi: 0, "phi'": 0 }) / (0.5 * 11_180 ** 2)).toBeCloseTo(0, 3);
  });

  test('the node of a sun-synchronous orbit', () => {
    // D. A. Vallado, Fundamentals of Astrodynamics and Applications, section 9.6 (secular effects of J2), from memory: the
    // node turns by -3/2 J2 (R/p)^2 n cos(i); near 0.9856 degrees a day at 800 km and 98.6 degrees.
    const [mu, J2, Re, a, i] = [398600.4418, 1.08263e-3, 6378.137, 7178.137, (98.6 * Math.PI) / 180];
    const model = new Model(
      "coordinates x, y, z\nparameters mu, J2, Re > 0\nwhere r = sqrt(x^2 + y^2 + z^2)\nT = 1/2*(x'^2 + y'^2 + z'^2)\nV = -mu/r*(1 - J2/2*(Re/r)^2*(3*z^2/r^2 - 1))",
      { mu, J2, Re },
    );
    const v = Math.sqrt(mu / a);
    const crossing = (s: Numbers) => s['z']!;
    let at: Numbers = { x: a, "x'": 0, y: 0, "y'": v * Math.cos(i), z: 0, "z'": v * Math.sin(i), t: 0 };
    for (let turn = 0; turn < 4; turn++) at = model.until(at, 30, crossing);
    const perDay = ((Math.atan2(at['y']!, at['x']!) / at['t']!) * 86400 * 180) / Math.PI;
    const formula = ((-1.5 * J2 * (Re / a) ** 2 * Math.sqrt(mu / a ** 3) * Math.cos(i)) * 86400 * 180) / Math.PI;
    expect(formula).toBeCloseTo(0.9856, 1);
    expect(perDay / formula).toBeCloseTo(1, 1);
  });

  test('through the earth and back', () => {
    // P. W. Cooper, "Through the Earth in Forty Minutes", American Journal of Physics 34 (1966), from memory: 42.2 minutes one way.
    const tube = new Model("coordinates x\nparameters m, g, R > 0\nT = 1/2*m*x'^2\nV = 1/2*m*g/R*x^2", { m: 1, g: 9.81, R: 6.371e6 });
    const t = tube.until({ x: 6e6, "x'": 0 }, 20, (s) => s["x'"]!)['t']!;
    expect(t / 60).toBeCloseTo(42.2, 1);
  });
});

const ROTATING = `coordinates x, y
parameters mu > 0
where r1 = sqrt((x + mu)^2 + y^2), r2 = sqrt((x - 1 + mu)^2 + y^2)
L = 1/2*((x' - y)^2 + (y' + x)^2) + (1 - mu)/r1 + mu/r2`;

describe('the restricted problem of three bodies', () => {
  // V. Szebehely, Theory of Orbits (1967), chapter 4 and appendix (equilibrium points for the earth and the moon, mu =
  // 0.0121505856), from memory.
  const mu = 0.0121505856;
  const system = new Model(ROTATING, { mu });
  const still = (x: number, y = 0) => ({ x, y, "x'": 0, "y'": 0 });

  test.each([
    ['L1', 0.836915],
    ['L2', 1.155682],
    ['L3', -1.005063],
  ])('%s lies at %d', (_, x) => {
    const pull = (at: number): number => system.value("x''", still(at));
    expect(pull(x - 2e-6) * pull(x + 2e-6)).toBeLessThan(0);
  });

  test('L4 and L5 make equilateral triangles', () => {
    // J. L. Lagrange, Essai sur le problème des trois corps (1772), from memory.
    for (const side of [1, -1]) {
      const at = still(0.5 - mu, (side * Math.sqrt(3)) / 2);
      expect(Math.hypot(system.value("x''", at), system.value("y''", at))).toBeLessThan(1e-12);
    }
  });

  test("Routh's critical mass ratio 0.03852", () => {
    // C. D. Murray, S. F. Dermott, Solar System Dynamics, section 3.7, from memory: 27 mu (1 - mu) < 1.
    const stays = (mass: number): boolean => {
      const model = new Model(ROTATING, { mu: mass });
      // Characteristic polynomial s^4 + b s^2 + c of the linearised motion: stable while s^2 is real and negative.
      const A = model.values('linearised A', still(0.5 - mass, Math.sqrt(3) / 2));
      const [xx, xy, yx, yy, xv, yv] = [A[8]!, A[9]!, A[12]!, A[13]!, A[11]!, A[14]!];
      const b = -xx - yy - xv * yv;
      const c = xx * yy - xy * yx;
      return b > 0 && c > 0 && b * b > 4 * c;
    };
    expect(stays(0.0385)).toBe(true);
    expect(stays(0.0386)).toBe(false);
  });

  test('periods about L4', () => {
    // V. Szebehely, Theory of Orbits, section 5.4, from memory: 0.29821 and 0.95450 for the earth and the moon.
    const A = system.values('linearised A', still(0.5 - mu, Math.sqrt(3) / 2));
    const b = -A[8]! - A[13]! - A[11]! * A[14]!;
    const c = A[8]! * A[13]! - A[9]! * A[12]!;
    const root = Math.sqrt(b * b - 4 * c);
    expect(Math.sqrt((b - root) / 2)).toBeCloseTo(0.29821, 4);
    expect(Math.sqrt((b + root) / 2)).toBeCloseTo(0.9545, 4);
  });

  test("Jacobi's integral stays", () => {
    // C. G. J. Jacobi, "Sur le mouvement d'un point et sur un cas particulier du problème des trois corps" (1836), from memory.
    const start = { x: 0.5, y: 0, "x'": 0, "y'": 0.9 };
    const end = system.run(start, 1.5, 3000);
    expect(system.value('H', end)).toBeCloseTo(system.value('H', start), 8);
  });
});

describe('three bodies', () => {
  const THREE = `coordinates x1, y1, x2, y2, x3, y3
parameters a, b, c > 0
T = 1/2*a*(x1'^2 + y1'^2) + 1/2*b*(x2'^2 + y2'^2) + 1/2*c*(x3'^2 + y3'^2)
V = -a*b/norm((x1 - x2, y1 - y2)) - a*c/norm((x1 - x3, y1 - y3)) - b*c/norm((x2 - x3, y2 - y3))`;
  const free = new Model(THREE, { a: 1, b: 1, c: 1 });

  test('the eight', () => {
    // A. Chenciner, R. Montgomery, "A remarkable periodic solution of the three-body problem in the case of equal masses",
    // Annals of Mathematics 152 (2000), initial state after C. Simó, from memory; period 6.32591398.
    const [u, v] = [-0.93240737, -0.86473146];
    const start: Numbers = {
      x1: 0.97000436, y1: -0.24308753, "x1'": -u / 2, "y1'": -v / 2,
      x2: -0.97000436, y2: 0.24308753, "x2'": -u / 2, "y2'": -v / 2,
      x3: 0, y3: 0, "x3'": u, "y3'": v,
    };
    const end = free.run(start, 6.32591398, 2000);
    for (const name of Object.keys(start)) expect(end[name]).toBeCloseTo(start[name]!, 4);
  });

  test('three masses at the corners of a triangle', () => {
    // J. L. Lagrange, Essai sur le problème des trois corps (1772), from memory: w^2 = (a + b + c)/d^3, whatever the masses.
    const uneven = new Model(THREE, { a: 1, b: 2, c: 3 });
    const corners = [[0, 0], [1, 0], [0.5, Math.sqrt(3) / 2]] as const;
    const masses = [1, 2, 3];
    const [cx, cy] = [0, 1].map((k) => corners.reduce((s, p, i) => s + masses[i]! * p[k]!, 0) / 6) as [number, number];
    const at: Record<string, number> = {};
    corners.forEach(([x, y], i) => Object.assign(at, { [`x${i + 1}`]: x, [`y${i + 1}`]: y, [`x${i + 1}'`]: 0, [`y${i + 1}'`]: 0 }));
    corners.forEach(([x, y], i) => {
      expect(uneven.value(`x${i + 1}''`, at)).toBeCloseTo(-6 * (x - cx), 9);
      expect(uneven.value(`y${i + 1}''`, at)).toBeCloseTo(-6 * (y - cy), 9);
    });
  });
});

describe('particles in fields', () => {
  test('the cyclotron frequency of an electron', () => {
    // CODATA recommended values (2018), electron charge to mass quotient 1.75882001076e11 C/kg, from memory: one turn in 2 pi/(1.7588e11) s at 1 T.
    const electron = new Model("coordinates x, y\nparameters q, B\nT = 1/2*(x'^2 + y'^2)\nV = -q*B*(x*y' - y*x')/2", { q: 1.75882001076, B: 1 });
    const end = electron.run({ x: 0, y: 0, "x'": 1, "y'": 0 }, (2 * Math.PI) / 1.75882001076, 400);
    expect(Math.hypot(end['x']!, end['y']!)).toBeLessThan(1e-6);
  });

  test('drift across crossed fields', () => {
    // F. F. Chen, Introduction to Plasma Physics and Controlled Fusion, section 2.2.2, from memory: E/B, whatever charge and mass.
    const ion = new Model("coordinates x, y\nparameters m, q, B, F > 0\nT = 1/2*m*(x'^2 + y'^2)\nV = -q*F*x - q*B*x*y'", { m: 3, q: 2, B: 1.5, F: 0.4 });
    const period = (2 * Math.PI * 3) / (2 * 1.5);
    const end = ion.run({ x: 0, y: 0, "x'": 0, "y'": 0 }, 5 * period, 2000);
    expect(end['x']).toBeCloseTo(0, 6);
    expect(end['y']! / (5 * period)).toBeCloseTo(-0.4 / 1.5, 6);
  });

  test('Larmor turns a spring-bound charge at half the cyclotron rate', () => {
    // J. Larmor, Aether and Matter (1900), from memory: the plane of swing turns by q B/(2 m).
    const bound = new Model("coordinates x, y\nparameters q, B, k > 0\nT = 1/2*(x'^2 + y'^2)\nV = -q*B*(x*y' - y*x')/2 + 1/2*k*(x^2 + y^2)", { q: 1, B: 0.02, k: 1 });
    const rate = -0.01;
    const w = Math.sqrt(1 + 0.01 ** 2);
    const time = (2 * Math.PI * 8) / w;
    const end = bound.run({ x: 1, y: 0, "x'": 0, "y'": rate }, time, 3000);
    expect(Math.atan2(end['y']!, end['x']!)).toBeCloseTo(rate * time, 5);
  });
});
