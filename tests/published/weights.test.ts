import { describe, expect, test } from 'vitest';
import { createService } from '../../server/src/service';
import { Budget } from '../../server/src/text/budget';
import { filesOf } from '../support/check';
import { Model, type Numbers } from '../support/model';

describe('weights, rolling and contact', () => {
  test("two weights over a pulley are slower than free fall by (m1 - m2)/(m1 + m2)", () => {
    // G. Atwood, A Treatise on the Rectilinear Motion and Rotation of Bodies (1784), from memory.
    const machine = new Model(
      'coordinates up, down\nparameters m1, m2, L, g > 0\npoint a: mass m1 at (0, -up)\npoint b: mass m2 at (0, -down)\ngravity (0, -g)\nconstraint up + down = L with rope',
      { m1: 3, m2: 2, L: 4, g: 9.8 },
    );
    const at = { up: 1, down: 3, "up'": 0.5, "down'": -0.5 };
    expect(machine.value("up''", at)).toBeCloseTo(9.8 / 5, 9);
    expect(machine.value('-rope', at)).toBeCloseTo((2 * 3 * 2 * 9.8) / 5, 9);
  });

  test.each([
    ['hoop', 1, 1 / 2],
    ['drum', 1 / 2, 2 / 3],
    ['ball', 2 / 5, 5 / 7],
    ['hollow ball', 2 / 3, 3 / 5],
  ])('a %s of inertia %d m r^2 rolls down at %d g sin(slope)', (_, inertia, share) => {
    // S. P. Timoshenko, D. H. Young, Engineering Mechanics, rolling without slipping, from memory.
    const roll = new Model(
      'coordinates x, turn\nparameters m, r, c, g, s > 0\nT = 1/2*m*x\'^2 + 1/2*c*m*r^2*turn\'^2\nV = -m*g*sin(s)*x\nconstraint x = r*turn',
      { m: 2, r: 0.3, c: inertia, g: 9.81, s: 0.4 },
    );
    expect(roll.value("x''", { x: 0, turn: 0, "x'": 0.3, "turn'": 1 })).toBeCloseTo(share * 9.81 * Math.sin(0.4), 9);
  });

  test('a wheel unrolling from its thread', () => {
    // R. W. Pohl, Einführung in die Physik, volume I (Maxwell's wheel), from memory: g/(1 + J/(m r^2)).
    const wheel = new Model('coordinates y, turn\nparameters m, J, r, g > 0\nbody wheel: mass m, inertia J, centre (r, -y), angle turn\ngravity (0, -g)\nconstraint y = r*turn with thread', { m: 1, J: 0.02, r: 0.1, g: 9.81 });
    expect(wheel.value("y''", { y: 1, turn: 10, "y'": 0, "turn'": 0 })).toBeCloseTo(9.81 / 3, 9);
  });

  test('a particle leaves a smooth ball two thirds up', () => {
    // J. L. Meriam, L. G. Kraige, Engineering Mechanics: Dynamics, chapter 3 (work and energy), from memory: where cos = 2/3.
    const ball = new Model('coordinates x, y\nparameters m, R, g > 0\npoint bead: mass m at (x, y)\ngravity (0, -g)\nconstraint x^2 + y^2 = R^2 with push', { m: 1, R: 1, g: 1 });
    const start = { x: 1e-4, "x'": 0, y: Math.sqrt(1 - 1e-8), "y'": 0 };
    const off = ball.until(start, 0.01, (s) => -ball.value('push', s));
    expect(off['y']).toBeCloseTo(2 / 3, 4);
  });

  test('a ladder leaves the wall at two thirds of its first height', () => {
    // S. Kapranidis, R. Koo, "Variations of the sliding ladder problem", The College Mathematics Journal 39 (2008), from memory.
    const ladder = new Model(
      'coordinates x, y, a\nparameters m, l, g > 0\nbody ladder: mass m, inertia m*l^2/12, centre (x, y), angle a\ngravity (0, -g)\nconstraint x = l/2*sin(a) with wall\nconstraint y = l/2*cos(a) with floor',
      { m: 1, l: 2, g: 1 },
    );
    const a = 0.5;
    const start = { x: Math.sin(a), y: Math.cos(a), a, "x'": 0, "y'": 0, "a'": 0 };
    const off = ladder.until(start, 0.01, (s) => -ladder.value('wall', s));
    expect(off['y']! / Math.cos(a)).toBeCloseTo(2 / 3, 6);
  });

  test('a ball on a turntable goes round at two sevenths of its rate', () => {
    // K. Weltner, "Stable circular orbits of freely moving balls on rotating discs", American Journal of Physics 47 (1979), from memory.
    const ball = new Model(
      `coordinates x, y, a, b, c
parameters m, r, om > 0
where R = Rz(a)*Rx(b)*Rz(c), w = spacerates(R)
T = 1/2*m*(x'^2 + y'^2)
body ball: inertia 2/5*m*r^2, rotation R
constraint x' - r*w.y = -om*y
constraint y' + r*w.x = om*x`,
      { m: 1, r: 0.2, om: 3 },
    );
    const [vx, vy] = [0.4, -0.7];
    const at = { x: 0.3, y: 0.5, a: 0.2, b: 1.1, c: 0.4, "x'": vx, "y'": vy, "a'": 0, "b'": 0, "c'": 0 };
    // The turning rates that roll: w.y = (x' + om y)/r, w.x = (om x - y')/r, w.z = 0, by b', c' and a' of these angles.
    const [wx, wy] = [(3 * 0.3 - vy) / 0.2, (vx + 3 * 0.5) / 0.2];
    const bRate = wx * Math.cos(0.2) + wy * Math.sin(0.2);
    const cRate = (wx * Math.sin(0.2) - wy * Math.cos(0.2)) / Math.sin(1.1);
    const rolling = { ...at, "b'": bRate, "c'": cRate, "a'": -cRate * Math.cos(1.1) };
    expect(ball.values('w', rolling)).toEqual([wx, wy, 0].map((x) => expect.closeTo(x, 9)));
    expect(ball.value("x''", rolling)).toBeCloseTo(((-2 * 3) / 7) * vy, 8);
    expect(ball.value("y''", rolling)).toBeCloseTo(((2 * 3) / 7) * vx, 8);
  });

  test('a disc rolls upright above v^2 = g r/3, a hoop above g r/4', () => {
    // J. I. Neimark, N. A. Fufaev, Dynamics of Nonholonomic Systems, chapter II (rolling disk), from memory.
    const decl = `coordinates x, y, a, b, c
parameters m, r, A, C, g > 0
where R = Rz(a)*Rx(b)*Ry(c), w = spacerates(R)
where P = (x, y, r*cos(b))
body disc: mass m, inertia (A, C, A), centre P, rotation R
gravity (0, 0, -g)
where arm = (r*sin(a)*sin(b), -r*cos(a)*sin(b), r*cos(b))
where slip = P' - cross(w, arm)
constraint slip.x = 0
constraint slip.y = 0`;
    const leans = (A: number, C: number, speed: number): number => {
      const disc = new Model(decl, { m: 1, r: 1, A, C, g: 1 });
      let at: Numbers = { x: 0, y: 0, a: 0, b: 0.002, c: 0, "x'": speed, "y'": 0, "a'": 0, "b'": 0, "c'": speed, t: 0 };
      let most = 0;
      for (let i = 0; i < 600; i++) {
        at = disc.step(at, 0.02);
        most = Math.max(most, Math.abs(at['b']!));
      }
      return most;
    };
    expect(leans(1 / 4, 1 / 2, 1.3 * Math.sqrt(1 / 3))).toBeLessThan(0.02);
    expect(leans(1 / 4, 1 / 2, 0.8 * Math.sqrt(1 / 3))).toBeGreaterThan(0.03);
    expect(leans(1 / 2, 1, 1.3 * Math.sqrt(1 / 4))).toBeLessThan(0.02);
    expect(leans(1 / 2, 1, 0.8 * Math.sqrt(1 / 4))).toBeGreaterThan(0.03);
  });

  test('a sleigh ends up going straight', () => {
    // S. A. Chaplygin, "On the theory of motion of nonholonomic systems. The reducing-multiplier theorem" (1911), from
    // memory: its energy stays while its turning dies out, blade behind.
    const sleigh = new Model(
      'coordinates x, y, phi\nparameters m, J, d > 0\nbody sleigh: mass m, inertia J, centre (x + d*cos(phi), y + d*sin(phi)), angle phi\nconstraint y\'*cos(phi) = x\'*sin(phi)',
      { m: 1, J: 0.5, d: 0.7 },
    );
    const start = { x: 0, y: 0, phi: 0, "x'": 0, "y'": 0, "phi'": 2 };
    const end = sleigh.run(start, 20, 2000);
    expect(sleigh.value('T', end)).toBeCloseTo(sleigh.value('T', start), 6);
    expect(Math.abs(end["phi'"]!)).toBeLessThan(1e-3);
    expect(Math.hypot(end["x'"]!, end["y'"]!)).toBeCloseTo(Math.sqrt(2 * sleigh.value('T', start)), 4);
  });

  test('falling against quadratic drag', () => {
    // H. Lamb, Dynamics, chapter on resisting media, from memory: v = V tanh(g t/V), V^2 = m g/c.
    const stone = new Model("coordinates y\nparameters m, g, c > 0\nT = 1/2*m*y'^2\nV = -m*g*y\nQ[y] = -c*y'*abs(y')", { m: 2, g: 9.81, c: 0.3 });
    const V = Math.sqrt((2 * 9.81) / 0.3);
    expect(stone.run({ y: 0, "y'": 0 }, 1.2, 400)["y'"]).toBeCloseTo(V * Math.tanh((9.81 * 1.2) / V), 8);
  });

  test('a damped spring loses the same share in every swing', () => {
    // W. T. Thomson, Theory of Vibration with Applications, section 2.7 (logarithmic decrement), from memory.
    const [m, k, c] = [1, 4, 0.3];
    const spring = new Model("coordinates x\nparameters m, k, c > 0\nT = 1/2*m*x'^2\nV = 1/2*k*x^2\nD = 1/2*c*x'^2", { m, k, c });
    const zeta = c / (2 * Math.sqrt(k * m));
    const top = spring.until({ x: 1, "x'": 0 }, 0.02, (s) => -s["x'"]!);
    expect(-Math.log(top['x']!)).toBeCloseTo((2 * Math.PI * zeta) / Math.sqrt(1 - zeta ** 2), 6);
  });

  test('dry friction takes 4 F/k from every swing', () => {
    // J. P. Den Hartog, Mechanical Vibrations, 4th edition, section 8.5, from memory.
    const slider = new Model("coordinates x\nparameters m, k, F > 0\nT = 1/2*m*x'^2\nV = 1/2*k*x^2\nQ[x] = -F*tanh(1e4*x')", { m: 1, k: 1, F: 0.02 });
    const half = slider.until({ x: 1, "x'": -1e-6 }, 2e-3, (s) => s["x'"]!);
    expect(-half['x']!).toBeCloseTo(1 - 2 * 0.02, 3);
  });
});

describe('hidden constants of the motion', () => {
  const drift = (model: Model, quantity: string, start: Numbers, time: number): number =>
    model.value(quantity, model.run(start, time, 3000)) - model.value(quantity, start);

  test('three particles on a ring with exponential springs', () => {
    // M. Hénon, "Integrals of the Toda lattice", Physical Review B 9 (1974), from memory: the third integral.
    const ring = new Model(
      "coordinates x, y, z\nparameters m > 0\nT = 1/2*m*(x'^2 + y'^2 + z'^2)\nV = exp(x - y) + exp(y - z) + exp(z - x)",
      { m: 1 },
    );
    const third = "x'*y'*z' - x'*exp(y - z) - y'*exp(z - x) - z'*exp(x - y)";
    const start = { x: 0.3, y: -0.2, z: 0.1, "x'": 0.4, "y'": -0.9, "z'": 0.2 };
    expect(drift(ring, third, start, 5)).toBeCloseTo(0, 7);
    expect(Math.abs(drift(ring, "x'*y'*z'", start, 5))).toBeGreaterThan(1e-2);
  });

  test('the swinging machine of masses 3 to 1', () => {
    // N. B. Tufillaro, "Integrable motion of a swinging Atwood's machine", American Journal of Physics 54 (1986), from memory.
    const machine = new Model(
      "coordinates r > 0, th\nparameters M, m, g > 0\nT = 1/2*(M + m)*r'^2 + 1/2*m*r^2*th'^2\nV = M*g*r - m*g*r*cos(th)",
      { M: 3, m: 1, g: 1 },
    );
    const hidden = 'p[th]/4*(p[r]*cos(th/2) - 2*p[th]/r*sin(th/2)) + g*r^2*sin(th/2)*cos(th/2)^2';
    expect(drift(machine, hidden, { r: 1, th: 0.9, "r'": 0.1, "th'": 0.2 }, 1.5)).toBeCloseTo(0, 7);
  });

  test('the axis of an orbit', () => {
    // C. Runge, Vektoranalysis (1919), and W. Lenz (1924), from memory: p x L - m k r/|r|.
    const orbit = new Model("coordinates x, y\nparameters m, k > 0\nT = 1/2*m*(x'^2 + y'^2)\nV = -k/sqrt(x^2 + y^2)", { m: 2, k: 3 });
    const start = { x: 1, y: 0.2, "x'": -0.3, "y'": 1.1 };
    expect(drift(orbit, "p[y]*(x*p[y] - y*p[x]) - m*k*x/sqrt(x^2 + y^2)", start, 4)).toBeCloseTo(0, 6);
    expect(drift(orbit, "-p[x]*(x*p[y] - y*p[x]) - m*k*y/sqrt(x^2 + y^2)", start, 4)).toBeCloseTo(0, 6);
  });
});

describe('degrees of freedom', () => {
  const shown = async (declaration: string): Promise<string> => {
    const service = createService(filesOf(new Map([['a.visviva', `@visviva a\n${declaration}\n`]])));
    const [system] = await service.derive('a.visviva', 'text', new Budget());
    return system!.text.split('\n').at(-1)!;
  };
  const POINT = 'coordinates x, y, z\nparameters m, l, g > 0\npoint bob: mass m at (x, y, z)\ngravity (0, 0, -g)';

  test('one fewer for every independent constraint', async () => {
    // L. D. Landau, E. M. Lifshitz, Mechanics, section 38, from memory.
    expect(await shown(POINT)).toBe('3 degrees of freedom');
    expect(await shown(`${POINT}\nconstraint x^2 + y^2 + z^2 = l^2`)).toBe('2 degrees of freedom: 3 coordinates less 1 constraint');
    const plane = `${POINT}\nconstraint x^2 + y^2 + z^2 = l^2\nconstraint y = 2*x`;
    expect(await shown(plane)).toBe('1 degree of freedom: 3 coordinates less 2 constraints');
    expect(await shown(`${plane}\nconstraint 2*y = 4*x`)).toContain('not independent');
    const rolling = "coordinates x, turn\nparameters m, J, r > 0\nT = 1/2*m*x'^2 + 1/2*J*turn'^2\nconstraint x' = r*turn'";
    expect(await shown(rolling)).toBe('1 degree of freedom: 2 coordinates less 1 constraint on velocities');
  });
});
