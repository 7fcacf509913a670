import { expect, test } from 'vitest';
import { checkText } from '../../support/check';
import { applied, cart, faults, findings, pendulum, RIGHT_CART } from './support';

const verdicts = async (source: string, file = 'yard/code.ts'): Promise<string[]> => (await checkText(file, source)).claims.map((c) => c.verdict);

const titleAndVerdicts = async (source: string, file = 'yard/code.ts'): Promise<{ title: string | undefined; after: string[] }> => {
  const repair = (await findings(source, file)).find((f) => f.repair)?.repair;
  return { title: repair?.title, after: repair ? await verdicts(applied(source, repair.edits), file) : [] };
};

test('a factor of two is taken out, not turned into a factor of one', async () => {
  const source = pendulum('  return (tau - 2 * b * thDot - m * g * l * Math.sin(th)) / (m * l * l);');
  expect((await faults(source))[0]!.repair).toBe('return (tau - b * thDot - m * g * l * Math.sin(th)) / (m * l * l);');
});

test('two faults, one inside the other', async () => {
  const source = pendulum('  return (tau - b * thDot - m * g * l * Math.cos(th)) * (m * l * l);');
  expect((await titleAndVerdicts(source)).after).toEqual(['holds']);
});

test('a factor that is a sum of names', async () => {
  const body = RIGHT_CART.replace('(M + m * sn * sn)', '(M + m * sn * sn) / (M + m)');
  const { after } = await titleAndVerdicts(cart(body));
  expect(after).toEqual(['holds', 'holds', 'holds', 'holds']);
});

test('a value added to a sum is a place as well', async () => {
  const source = pendulum('  let f = tau;\n  f -= b;\n  f -= m * g * l * Math.sin(th);\n  return f / (m * l * l);');
  expect(await faults(source)).toMatchObject([{ line: 2, repair: 'f -= b * thDot;' }]);
});

test('a local that the fault left without a use is known', async () => {
  const source = pendulum('  const weight = m * g * l * Math.sin(th);\n  const inertia = m * l * l;\n  return (tau - b * thDot - inertia) / inertia;');
  expect(await faults(source)).toMatchObject([{ line: 3, repair: 'return (tau - b * thDot - weight) / inertia;' }]);
});

test('an index beyond the list leaves the claim unread, with the repair', async () => {
  const source = cart(RIGHT_CART).replace('const [x, th, v, w] = s;', 'const [x, th, v] = s;\n  const w = s[4];');
  const [first] = await findings(source);
  expect(first).toMatchObject({ code: 'unread' });
  expect(first!.message).toMatch(/With `s\[3\]` for `s\[4\]` every claim holds\.$/);
  expect((await titleAndVerdicts(source)).after).toEqual(['holds', 'holds', 'holds', 'holds']);
});

test('a misspelt name', async () => {
  const source = pendulum('  return (tau - b * thDto - m * g * l * Math.sin(th)) / (m * l * l);');
  expect((await findings(source))[0]!.message).toMatch(/With `thDot` for `thDto` every claim holds\.$/);
});

test('a value written to the wrong slot', async () => {
  const source = cart(RIGHT_CART.replace(/return .*/, 'const out = [v, w, 0, 0];\n  out[2] = a;\n  out[2] = -(a * cs + g * sn) / l;\n  return out;'));
  const { title, after } = await titleAndVerdicts(source);
  expect(title).toBe('Write `out[3]` for `out[2]`');
  expect(after).toEqual(['holds', 'holds', 'holds', 'holds']);
});

const LINEAR = (acceleration: string): string => `/**
 * @visviva mast
 * coordinates th [rad]   th from straight down
 * parameters  m [kg] > 0, l [m] > 0, g [m/s^2] > 0
 * point tip: mass m at (l*sin(th), -l*cos(th))
 * gravity (0, -g)
 * near th = 0, order 3
 * checks return = th''
 */
export const mast = (th: number, l: number, g: number) => ${acceleration};
`;

test('faults in code that implements an expansion', async () => {
  const { title, after } = await titleAndVerdicts(LINEAR('(-g / l) * (th - th ** 3 / 3)'));
  expect(title).toBe('Write `6` for `3`');
  expect(after).toEqual(['holds']);
});

const SATELLITE = (rate: string): string => `import numpy as np


def rates(w, tau, J):
    """
    @visviva satellite
    coordinates phi, th, psi [rad]
    parameters A, B, C [kg m^2] > 0
    body hull: mass 1, inertia [[A,0,0],[0,B,0],[0,0,C]], centre (0,0,0), rotation Rz(phi)*Rx(th)*Rz(psi)
    where w = bodyrates(Rz(phi)*Rx(th)*Rz(psi))
    reads w = bodyrates(Rz(phi)*Rx(th)*Rz(psi)), J = [[A,0,0],[0,B,0],[0,0,C]], tau = [0,0,0]
    checks return = w'
    """
    return ${rate}
`;

test('the order of a cross product', async () => {
  const { title, after } = await titleAndVerdicts(SATELLITE('np.linalg.inv(J) @ (tau - np.cross(J @ w, w))'), 'yard/satellite.py');
  expect(title).toBe('Write `np.cross(w, J @ w)` for `np.cross(J @ w, w)`');
  expect(after).toEqual(['holds', 'holds', 'holds']);
});
