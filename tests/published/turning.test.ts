import { describe, expect, test } from 'vitest';
import { Model, type Numbers } from '../support/model';

const TOP = `coordinates phi, th, psi
parameters m, I1, I3, h, g > 0
where R = Rz(phi)*Rx(th)*Rz(psi)
where w = bodyrates(R)
body top: mass m, inertia (I1, I1, I3), centre R*(0, 0, h), rotation R
gravity (0, 0, -g)`;

describe('the symmetric top', () => {
  // F. Klein, A. Sommerfeld, Über die Theorie des Kreisels, volume II, chapter IV, from memory.
  const values = { m: 1.1, I1: 0.4, I3: 0.5, h: 0.6, g: 9.8 };
  const J = values.I1 + values.m * values.h ** 2;
  const mgh = values.m * values.g * values.h;
  const top = new Model(TOP, values);
  const steady = (th: number, spin: number): number[] => {
    // J cos(th) W^2 - I3 s W + m g h = 0
    const [a, b] = [J * Math.cos(th), -values.I3 * spin];
    const root = Math.sqrt(b * b - 4 * a * mgh);
    return [(-b - root) / (2 * a), (-b + root) / (2 * a)];
  };
  const state = (th: number, precession: number, spin: number, thDot = 0): Numbers => ({
    phi: 0, th, psi: 0, "phi'": precession, "th'": thDot, "psi'": spin - precession * Math.cos(th),
  });

  test('slow and fast steady precession', () => {
    for (const W of steady(0.7, 30)) {
      const at = state(0.7, W, 30);
      for (const q of ["phi''", "th''", "psi''"]) expect(top.value(q, at)).toBeCloseTo(0, 9);
    }
  });

  test('a fast top precesses at m g h/(I3 s)', () => {
    const [slow] = steady(0.7, 2000);
    expect(slow! / (mgh / (values.I3 * 2000))).toBeCloseTo(1, 4);
    expect(Math.abs(top.value("th''", state(0.7, mgh / (values.I3 * 2000), 2000)))).toBeLessThan(1e-4);
  });

  test('a fast top nods at I3 s/J', () => {
    const spin = 400;
    const start = state(0.7, 0, spin);
    const first = top.until(start, 2e-4, (s) => s["th'"]! * -1);
    // Let go at rest the axis falls, turns at the cusp's far side, and is back after one period.
    const back = top.until(first, 2e-4, (s) => s["th'"]!);
    expect((2 * Math.PI) / back['t']! / ((values.I3 * spin) / J)).toBeCloseTo(1, 1);
  });

  test('a sleeping top wakes below (I3 s)^2 = 4 m g h J', () => {
    // L. D. Landau, E. M. Lifshitz, Mechanics, section 35, problem 2, from memory.
    const critical = Math.sqrt(4 * mgh * J) / values.I3;
    // Angles that are not singular at the vertical.
    const upright = new Model(TOP.replace('Rz(phi)*Rx(th)*Rz(psi)', 'Rx(phi)*Ry(th)*Rz(psi)'), values);
    const rises = (spin: number): number => {
      let at: Numbers = { phi: 0.01, th: 0, psi: 0, "phi'": 0, "th'": 0, "psi'": spin };
      let most = 0;
      for (let i = 0; i < 1500; i++) {
        at = upright.step(at, 2e-3);
        most = Math.max(most, Math.hypot(at['phi']!, at['th']!));
      }
      return most;
    };
    expect(rises(1.15 * critical)).toBeLessThan(0.05);
    expect(rises(0.8 * critical)).toBeGreaterThan(0.1);
  });
});

describe('free bodies', () => {
  const FREE = `coordinates a, b, c
parameters A, B, C > 0
where R = Rz(a)*Ry(b)*Rx(c)
where w = bodyrates(R)
body crate: inertia (A, B, C), rotation R`;

  test("Euler's free precession", () => {
    // L. D. Landau, E. M. Lifshitz, Mechanics, section 36, from memory: the rates turn by w3 (C - A)/A about the axis.
    const body = new Model(FREE, { A: 2, B: 2, C: 3 });
    const start = { a: 0, b: 0, c: 0, "a'": 1, "b'": 0, "c'": 0.2 };
    const time = (0.5 * Math.PI) / 0.5;
    const end = body.run(start, time, 600);
    const w = body.values('w', end);
    expect(body.values('w', start)).toEqual([0.2, 0, 1]);
    expect(w[0]).toBeCloseTo(0, 6);
    expect(w[1]).toBeCloseTo(0.2, 6);
    expect(w[2]).toBeCloseTo(1, 8);
  });

  test("the earth's pole would go round in 305 days", () => {
    // L. Euler, after W. H. Munk, G. J. F. MacDonald, The Rotation of the Earth, chapter 6, (C - A)/A = 1/305, from memory.
    const earth = new Model(FREE, { A: 305, B: 305, C: 306 });
    const at = { a: 0, b: 0, c: 0, "a'": 1, "b'": 0, "c'": 1e-3 };
    expect(earth.values("w'", at)[1]! / 1e-3).toBeCloseTo(1 / 305, 9);
  });

  test('the middle axis is unstable', () => {
    // L. Poinsot, Théorie nouvelle de la rotation des corps, from memory: grows at s sqrt((B - A)(C - B)/(A C)).
    const body = new Model(FREE, { A: 1, B: 2, C: 3 });
    const rate = Math.sqrt(1 / 3);
    // On the growing direction p : r = rate : -(B - A)/C about w = (p, s, r), s = 1.
    const p = 1e-5;
    const r = (-rate * p * 1) / 1;
    const start = { a: 0, b: 0, c: 0, "a'": r, "b'": 1, "c'": p };
    const slopes = body.values("w'", start);
    expect(slopes[0]! / p).toBeCloseTo(rate, 6);
    expect(slopes[2]! / r).toBeCloseTo(rate, 6);
  });

  test('energy and angular momentum stay', () => {
    const body = new Model(`${FREE}\nwhere H = R*(A*w.x, B*w.y, C*w.z)`, { A: 1, B: 2, C: 3 });
    const start = { a: 0.1, b: 0.2, c: 0.3, "a'": 0.4, "b'": -0.5, "c'": 0.6 };
    const end = body.run(start, 2, 800);
    expect(body.value('T', end)).toBeCloseTo(body.value('T', start), 8);
    const [before, after] = [body.values('H', start), body.values('H', end)];
    before.forEach((x, i) => expect(after[i]).toBeCloseTo(x, 8));
  });
});

describe('on the turning earth', () => {
  const om = 7.292115e-5;

  test.each([
    ['Paris, 48.85 degrees', 48.85, 31.78],
    ['the pole', 90, 23.93],
  ])('the plane of swing goes round in hours: %s', (_, latitude, hours) => {
    // L. Foucault, "Démonstration physique du mouvement de rotation de la terre au moyen du pendule", Comptes rendus 32
    // (1851), from memory: one sidereal day divided by the sine of the latitude.
    const pendulum = new Model(
      "coordinates x, y\nparameters om, lat, w > 0\nL = 1/2*(x'^2 + y'^2) + om*sin(lat)*(x*y' - y*x') - 1/2*w^2*(x^2 + y^2)",
      { om, lat: (latitude * Math.PI) / 180, w: Math.sqrt(9.81 / 67) },
    );
    const turn = om * Math.sin((latitude * Math.PI) / 180);
    const w = Math.sqrt(9.81 / 67 + turn ** 2);
    const time = (2 * Math.PI * 20) / w;
    const end = pendulum.run({ x: 1, y: 0, "x'": 0, "y'": -turn }, time, 4000);
    const rate = -Math.atan2(end['y']!, end['x']!) / time;
    expect((2 * Math.PI) / rate / 3600).toBeCloseTo(hours, 1);
  });

  test('a stone falls east of the plumb line', () => {
    // L. D. Landau, E. M. Lifshitz, Mechanics, section 39, problem 1, from memory: w cos(lat)/3 sqrt(8 h^3/g).
    const stone = new Model(
      "coordinates x, y, z\nparameters om, lat, g > 0\nwhere W = (0, om*cos(lat), om*sin(lat))\nT = 1/2*(x'^2 + y'^2 + z'^2)\nV = g*z - dot((x', y', z'), cross(W, (x, y, z)))",
      { om, lat: Math.PI / 4, g: 9.81 },
    );
    const end = stone.run({ x: 0, y: 0, z: 100, "x'": 0, "y'": 0, "z'": 0 }, Math.sqrt(200 / 9.81), 200);
    expect(end['x']! / ((om * Math.cos(Math.PI / 4)) / 3 * Math.sqrt(8e6 / 9.81))).toBeCloseTo(1, 4);
  });
});

describe('turning wires and hoops', () => {
  test('a bead is thrown outward as cosh(w t)', () => {
    // E. T. Whittaker, A Treatise on the Analytical Dynamics of Particles and Rigid Bodies, chapter III (bead in a turning
    // tube), from memory: r'' = w^2 r.
    const wire = new Model('coordinates r\nparameters m, w > 0\npoint bead: mass m at (r*cos(w*t), r*sin(w*t))', { m: 1, w: 1.7 });
    expect(wire.value("r''", { r: 2, "r'": 5, t: 0.3 })).toBeCloseTo(1.7 ** 2 * 2, 9);
    expect(wire.run({ r: 1, "r'": 0 }, 1, 200)['r']).toBeCloseTo(Math.cosh(1.7), 7);
  });

  test('a bead on a hoop leaves the bottom above w^2 = g/R', () => {
    // J. E. Marsden, T. S. Ratiu, Introduction to Mechanics and Symmetry, section 2.8 (particle in a rotating hoop), from memory.
    const hoop = (w: number) =>
      new Model(
        "coordinates th\nparameters m, R, g, w > 0\npoint bead: mass m at (R*sin(th)*cos(w*t), R*sin(th)*sin(w*t), -R*cos(th))\ngravity (0, 0, -g)",
        { m: 1, R: 2, g: 8, w },
      );
    const stiffness = (model: Model, th: number) => -model.value("jacobian of th'' by th", { th, "th'": 0, t: 0 });
    expect(stiffness(hoop(1.99), 0)).toBeGreaterThan(0);
    expect(stiffness(hoop(2.01), 0)).toBeLessThan(0);
    const w = 3;
    const th = Math.acos(8 / (2 * w * w));
    expect(hoop(w).value("th''", { th, "th'": 0, t: 0 })).toBeCloseTo(0, 9);
    expect(stiffness(hoop(w), th)).toBeCloseTo(w ** 2 * Math.sin(th) ** 2, 6);
  });

  test('the conical pendulum turns at sqrt(g/(l cos th))', () => {
    // Christiaan Huygens, De vi centrifuga (1703), from memory.
    const pendulum = new Model(
      'coordinates th, phi\nparameters m, l, g > 0\npoint bob: mass m at (l*sin(th)*cos(phi), l*sin(th)*sin(phi), -l*cos(th))\ngravity (0, 0, -g)',
      { m: 1, l: 1.5, g: 9.81 },
    );
    expect(pendulum.value("th''", { th: 0.8, phi: 0, "th'": 0, "phi'": Math.sqrt(9.81 / (1.5 * Math.cos(0.8))) })).toBeCloseTo(0, 9);
  });

  test('the ellipse of a spherical pendulum advances', () => {
    // M. G. Olsson, "The precessing spherical pendulum", American Journal of Physics 46 (1978), from memory: 3 a b/(8 l^2) of the swing's rate.
    const pendulum = new Model(
      'coordinates x, y, z\nparameters m, l, g > 0\npoint bob: mass m at (x, y, z)\ngravity (0, 0, -g)\nconstraint x^2 + y^2 + z^2 = l^2',
      { m: 1, l: 1, g: 1 },
    );
    const [a, b] = [0.2, 0.1];
    let at: Numbers = { x: a, "x'": 0, y: 0, "y'": b, z: -Math.sqrt(1 - a * a), "z'": 0, t: 0 };
    const outward = (s: Numbers) => -(s['x']! * s["x'"]! + s['y']! * s["y'"]!);
    for (let half = 0; half < 20; half++) at = pendulum.until(at, 0.02, outward);
    const turned = Math.atan2(at['y']!, at['x']!) / at['t']!;
    expect(turned / ((3 * a * b) / 8)).toBeCloseTo(1, 1);
  });
});
