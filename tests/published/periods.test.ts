import { describe, expect, test } from 'vitest';
import { Model } from '../support/model';

/** Periods and frequencies of what the product derives, against published numbers and formulas. */
const PENDULUM = `coordinates th [rad]
parameters m, l, g > 0
point bob: mass m at (l*sin(th), -l*cos(th))
gravity (0, -g)`;
const UNIT = { m: 1.3, l: 1, g: 1 };

/** From rest at the amplitude, half a period goes by until it rests again on the other side. */
function pendulumPeriod(amplitude: number): number {
  const pendulum = new Model(PENDULUM, UNIT);
  return 2 * pendulum.until({ th: amplitude, "th'": 0 }, 0.02, (s) => s["th'"]!)['t']!;
}

describe('pendulum periods', () => {
  // M. Abramowitz, I. A. Stegun (editors), Handbook of Mathematical Functions, section 17.3 (complete elliptic integral of
  // the first kind) with table 17.1 (by parameter m) and table 17.2 (by modular angle), from memory: the period is
  // 4 K(sin(amplitude/2)) sqrt(l/g).
  test.each([
    ['table 17.2, 15 degrees', 30, 1.5981420021],
    ['table 17.1, m = 0.25', 60, 1.6857503548],
    ['table 17.1, m = 0.5', 90, 1.8540746773],
    ['table 17.1, m = 0.75', 120, 2.1565156475],
    ['table 17.2, 75 degrees', 150, 2.7680631454],
  ])('%s: amplitude %d degrees', (_, degrees, K) => {
    expect(pendulumPeriod((degrees * Math.PI) / 180)).toBeCloseTo(4 * K, 6);
  });

  test('the first terms of the series', () => {
    // NIST Digital Library of Mathematical Functions, section 19.5, equation 19.5.1, from memory: K = pi/2 (1 + k^2/4 + 9 k^4/64 + ...).
    const k = Math.sin(0.1);
    expect(pendulumPeriod(0.2) / (2 * Math.PI)).toBeCloseTo(1 + k ** 2 / 4 + (9 * k ** 4) / 64, 6);
  });

  test('by the arithmetic-geometric mean', () => {
    // NIST Digital Library of Mathematical Functions, section 19.8, equation 19.8.5, from memory: K = pi/(2 M(1, k')). The
    // mean is computed here.
    for (const amplitude of [0.7, 2.0, 3.0]) {
      let [a, b] = [1, Math.cos(amplitude / 2)];
      for (let i = 0; i < 8; i++) [a, b] = [(a + b) / 2, Math.sqrt(a * b)];
      expect(pendulumPeriod(amplitude)).toBeCloseTo((2 * Math.PI) / a, 6);
    }
  });

  test('a uniform rod hung by its end swings like a pendulum of two thirds of its length', () => {
    // S. P. Timoshenko, D. H. Young, Engineering Mechanics, compound pendulum, from memory.
    const rod = new Model(
      'coordinates th [rad]\nparameters m, l, g > 0\nbody rod: mass m, inertia m*l^2/12, centre (l/2*sin(th), -l/2*cos(th)), angle th\ngravity (0, -g)',
      UNIT,
    );
    const t = 2 * rod.until({ th: 0.001, "th'": 0 }, 0.02, (s) => s["th'"]!)['t']!;
    expect(t).toBeCloseTo(2 * Math.PI * Math.sqrt(2 / 3), 5);
  });

  test('the cycloid makes all swings last equally long', () => {
    // Christiaan Huygens, Horologium Oscillatorium (1673), part II, proposition 25, from memory: 2 pi sqrt(4 a/g).
    const track = new Model(
      'coordinates u [rad]\nparameters m, a, g > 0\npoint bead: mass m at (a*(u + sin(u)), -a*cos(u))\ngravity (0, -g)',
      { m: 1, a: 1, g: 1 },
    );
    for (const amplitude of [0.1, 1, 2]) {
      const t = 2 * track.until({ u: amplitude, "u'": 0 }, 0.02, (s) => s["u'"]!)['t']!;
      expect(t).toBeCloseTo(4 * Math.PI, 5);
    }
  });

  test('a quartic well', () => {
    // NIST Digital Library of Mathematical Functions, section 19.20 and 22.18 (lemniscate constant 2.622057554...), from
    // memory: x'' = -x^3 from rest at 1 has the period 2 sqrt(2) times that constant.
    const well = new Model("coordinates x\nparameters m > 0\nT = 1/2*m*x'^2\nV = 1/4*m*x^4", { m: 2 });
    expect(2 * well.until({ x: 1, "x'": 0 }, 0.02, (s) => s["x'"]!)['t']!).toBeCloseTo(2 * Math.SQRT2 * 2.622057554, 6);
  });

  test('a pendulum upside down on a fast shaking pivot', () => {
    // L. D. Landau, E. M. Lifshitz, Mechanics, section 30, problem 1, from memory: stable when a^2 w^2 > 2 g l.
    const shaken = (w: number) =>
      new Model(
        'coordinates th [rad]\nparameters m, l, g, a, w > 0\npoint bob: mass m at (l*sin(th), -l*cos(th) + a*cos(w*t))\ngravity (0, -g)',
        { m: 1, l: 1, g: 1, a: 0.05, w },
      );
    const falls = (w: number): boolean => {
      const model = shaken(w);
      let at: Record<string, number> = { th: Math.PI - 0.02, "th'": 0, t: 0 };
      for (let i = 0; i < 2400; i++) {
        at = model.step(at, 0.005) as Record<string, number>;
        if (Math.abs(at['th']! - Math.PI) > 1) return true;
      }
      return false;
    };
    const critical = Math.SQRT2 / 0.05;
    expect(falls(0.8 * critical)).toBe(true);
    expect(falls(1.3 * critical)).toBe(false);
  });
});

describe('small oscillations: A v = w v for the published modes', () => {
  /** Checks that the linearised motion at rest has this mode: acceleration = -omega^2 times displacement. */
  function mode(model: Model, rest: Record<string, number>, shape: readonly number[], squared: number): void {
    const n = shape.length;
    const still = Object.fromEntries(Object.keys(rest).map((q) => [`${q}'`, 0]));
    const A = model.values('linearised A', { ...rest, ...still });
    for (let i = 0; i < n; i++) {
      const a = shape.reduce((sum, x, j) => sum + A[(n + i) * 2 * n + j]! * x, 0);
      expect(a).toBeCloseTo(-squared * shape[i]!, 9);
    }
  }

  test('two equal masses between three equal springs: k/m and 3 k/m', () => {
    // A. P. French, Vibrations and Waves, chapter 5, from memory.
    const pair = new Model(
      "coordinates x, y\nparameters m, k > 0\nT = 1/2*m*(x'^2 + y'^2)\nV = 1/2*k*(x^2 + (y - x)^2 + y^2)",
      { m: 2, k: 3 },
    );
    mode(pair, { x: 0, y: 0 }, [1, 1], 1.5);
    mode(pair, { x: 0, y: 0 }, [1, -1], 4.5);
  });

  test('three equal masses between four equal springs', () => {
    // Lord Rayleigh, The Theory of Sound, volume I, section 120 (string with equal loads), from memory: 4 sin^2(n pi/8).
    const chain = new Model(
      "coordinates x, y, z\nparameters m, k > 0\nT = 1/2*m*(x'^2 + y'^2 + z'^2)\nV = 1/2*k*(x^2 + (y - x)^2 + (z - y)^2 + z^2)",
      { m: 1, k: 1 },
    );
    for (const n of [1, 2, 3]) {
      mode(chain, { x: 0, y: 0, z: 0 }, [1, 2, 3].map((j) => Math.sin((j * n * Math.PI) / 4)), 4 * Math.sin((n * Math.PI) / 8) ** 2);
    }
  });

  test('the double pendulum of equal masses and lengths: (2 -+ sqrt 2) g/l', () => {
    // L. D. Landau, E. M. Lifshitz, Mechanics, section 23, problem 2, from memory.
    const double = new Model(
      'coordinates a, b [rad]\nparameters m, l, g > 0\nwhere P = (l*sin(a), -l*cos(a))\npoint p: mass m at P\npoint q: mass m at P + (l*sin(b), -l*cos(b))\ngravity (0, -g)',
      { m: 1, l: 1, g: 1 },
    );
    mode(double, { a: 0, b: 0 }, [1, Math.SQRT2], 2 - Math.SQRT2);
    mode(double, { a: 0, b: 0 }, [1, -Math.SQRT2], 2 + Math.SQRT2);
  });

  test('a linear molecule of three atoms', () => {
    // L. D. Landau, E. M. Lifshitz, Mechanics, section 24, problem 1, from memory: k/mA, and k (2 mA + mB)/(mA mB).
    const molecule = new Model(
      "coordinates x, y, z\nparameters mA, mB, k > 0\nT = 1/2*mA*(x'^2 + z'^2) + 1/2*mB*y'^2\nV = 1/2*k*((y - x)^2 + (z - y)^2)",
      { mA: 16, mB: 12, k: 1 },
    );
    mode(molecule, { x: 0, y: 0, z: 0 }, [1, 0, -1], 1 / 16);
    mode(molecule, { x: 0, y: 0, z: 0 }, [1, -32 / 12, 1], 44 / (16 * 12));
    mode(molecule, { x: 0, y: 0, z: 0 }, [1, 1, 1], 0);
  });

  test('two pendulums joined by a spring', () => {
    // L. Meirovitch, Elements of Vibration Analysis, section 4.4 (beat phenomenon), from memory: g/l and g/l + 2 k a^2/(m l^2).
    const joined = new Model(
      "coordinates p, q [rad]\nparameters m, l, g, k, a > 0\nT = 1/2*m*l^2*(p'^2 + q'^2)\nV = -m*g*l*(cos(p) + cos(q)) + 1/2*k*a^2*(q - p)^2",
      { m: 2, l: 1.5, g: 9, k: 4, a: 0.5 },
    );
    mode(joined, { p: 0, q: 0 }, [1, 1], 6);
    mode(joined, { p: 0, q: 0 }, [1, -1], 6 + 2 / 4.5);
  });

  test('a tuned absorber holds the main mass still', () => {
    // J. P. Den Hartog, Mechanical Vibrations, 4th edition, section 3.2, from memory: at w^2 = k/m the main mass rests and
    // the absorber moves by -P0/k.
    const absorber = new Model(
      "coordinates x, y\nparameters M, m, K, k, P, w > 0\nT = 1/2*M*x'^2 + 1/2*m*y'^2\nV = 1/2*K*x^2 + 1/2*k*(y - x)^2\nQ[x] = P*sin(w*t)",
      { M: 20, m: 1, K: 20, k: 1, P: 0.3, w: 1 },
    );
    const end = absorber.run({ x: 0, "x'": 0, y: 0, "y'": -0.3 }, 10, 500);
    expect(end['x']).toBeCloseTo(0, 6);
    expect(end['y']).toBeCloseTo(-0.3 * Math.sin(10), 6);
  });

  test('the inverted pole of a cart runs away at the published rate', () => {
    // A. G. Barto, R. S. Sutton, C. W. Anderson, "Neuronlike adaptive elements that can solve difficult learning control
    // problems" (1983), appendix (cart 1 kg, pole 0.1 kg, half-length 0.5 m, g = 9.8), from memory: th'' = g th/(l (4/3 - m/(M + m))).
    const pole = new Model(
      'coordinates x, th\nparameters M, m, l, g > 0\npoint cart: mass M at (x, 0)\nbody pole: mass m, inertia m*l^2/3, centre (x + l*sin(th), l*cos(th)), angle th\ngravity (0, -g)',
      { M: 1, m: 0.1, l: 0.5, g: 9.8 },
    );
    const A = pole.values('linearised A', { x: 0, "x'": 0, th: 0, "th'": 0 });
    expect(A[3 * 4 + 1]).toBeCloseTo(9.8 / (0.5 * (4 / 3 - 0.1 / 1.1)), 9);
  });
});
