import { describe, expect, test } from 'vitest';
import { Model, type Numbers } from '../support/model';

/** Angular velocities against R' by a difference quotient, for every way a rotation can be declared. */
const AXES = ['x', 'y', 'z'];
const SEQUENCES = AXES.flatMap((a) => AXES.flatMap((b) => AXES.filter((c) => b !== a && c !== b).map((c) => a + b + c)));
const ANGLES = { a: 0.4, b: 0.9, c: -0.7, "a'": 0.3, "b'": -1.1, "c'": 0.8 };

function rates(rotation: string, at: Numbers = ANGLES, names = ['a', 'b', 'c']): void {
  const model = new Model(
    `coordinates ${names.join(', ')}\nparameters J > 0\nwhere R = ${rotation}, u = bodyrates(R), w = spacerates(R)\nT = 1/2*J*(${names.map((n) => `${n}'^2`).join(' + ')})`,
    { J: 1 },
  );
  const h = 1e-4;
  const moved = (by: number) => model.values('R', { ...at, ...Object.fromEntries(names.map((n) => [n, at[n]! + by * at[`${n}'`]!])) });
  const R = model.values('R', at);
  const rate = moved(h).map((x, i) => (x - moved(-h)[i]!) / (2 * h));
  const sum = (f: (k: number) => number) => f(0) + f(1) + f(2);
  for (let i = 0; i < 3; i++) for (let j = 0; j < 3; j++) {
    expect(sum((k) => R[3 * i + k]! * R[3 * j + k]!)).toBeCloseTo(i === j ? 1 : 0, 9);
  }
  const space = (i: number, j: number) => sum((k) => rate[3 * i + k]! * R[3 * j + k]!);
  const body = (i: number, j: number) => sum((k) => R[3 * k + i]! * rate[3 * k + j]!);
  for (const [name, entry] of [['w', space], ['u', body]] as const) {
    const found = model.values(name, at);
    [entry(2, 1), entry(0, 2), entry(1, 0)].forEach((x, i) => expect(found[i]).toBeCloseTo(x, 6));
  }
}

describe('angular velocity', () => {
  test('there are twelve sequences of Euler angles', () => expect(SEQUENCES.length).toBe(12));

  test.each(SEQUENCES)('sequence %s', (axes) => rates([...axes].map((axis, i) => `R${axis}(${'abc'[i]})`).join('*')));

  test('a rotation vector', () => rates('Rv(a, b, c)'));

  test('a unit quaternion', () => {
    const n = Math.hypot(1, 0.4, 0.9, 0.7);
    const q = [1 / n, 0.4 / n, 0.9 / n, -0.7 / n];
    // A rate that keeps the norm: across the quaternion.
    const at = { p: q[0]!, a: q[1]!, b: q[2]!, c: q[3]!, "p'": -q[1]!, "a'": q[0]!, "b'": q[3]!, "c'": -q[2]! };
    const model = new Model('coordinates p, a, b, c\nparameters J > 0\nwhere w = bodyrates(Rq(p, a, b, c))\nT = 1/2*J*(p\'^2 + a\'^2 + b\'^2 + c\'^2)', { J: 1 });
    expect(model.values('w', at)).toEqual([2, 0, 0].map((x) => expect.closeTo(x, 9)));
  });
});
