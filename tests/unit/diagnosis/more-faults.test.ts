import { expect, test } from 'vitest';
import { checkText } from '../../support/check';
import { applied, cart, faults, findings, pendulum, RIGHT_CART } from './support';

const repairedClaims = async (source: string): Promise<(string | undefined)[]> => {
  const repair = (await findings(source)).find((f) => f.repair)?.repair;
  if (!repair) return ['no repair'];
  return (await checkText('yard/code.ts', applied(source, repair.edits))).claims.map((c) => c.verdict);
};

test('two faults in one sum', async () => {
  const source = pendulum('  return (tau + b * thDot + m * g * l * Math.sin(th)) / (m * l * l);');
  expect((await faults(source)).map((f) => f.code)).toEqual(['sign']);
  expect(await repairedClaims(source)).toEqual(['holds']);
});

test('two faults of different kinds', async () => {
  const source = pendulum('  return (tau - b * th - m * g * l * Math.cos(th)) / (m * l * l);');
  expect(await repairedClaims(source)).toEqual(['holds']);
});

test('two faults that different claims show', async () => {
  const wrong = RIGHT_CART.replace('[v, w, a,', '[v, v, a,').replace('(a * cs + g * sn)', '(a * cs - g * sn)');
  expect(await repairedClaims(cart(wrong))).toEqual(['holds', 'holds', 'holds', 'holds']);
});

const message = async (source: string): Promise<string> => (await findings(source))[0]!.message;

test('the term of the equation is named, with its kind', async () => {
  expect(await message(pendulum('  return (tau - b * thDot + m * g * l * Math.sin(th)) / (m * l * l);'))).toMatch(
    /^th'': the gravity term m\*g\*l\*sin\(th\) in the equation of th has the wrong sign: write /,
  );
  expect(await message(cart(RIGHT_CART.replace('l * w * w', 'l * w')))).toMatch(/^x'': the centrifugal term m\*l\*th'\^2\*sin\(th\) in the equation of x /);
});

test('a declaration that counts an angle from above', async () => {
  const upright = pendulum('  const s = -Math.sin(th);\n  const f = tau - b * thDot - m * g * l * s;\n  const J = m * l * l;\n  return 2 * f / J - f / J;');
  const all = (await findings(upright)).map((f) => f.message).join(' ');
  expect(all).toMatch(/has the wrong sign|Or the declaration is wrong/);
});

test('where nothing small mends it, no repair is offered', async () => {
  const source = pendulum('  return Math.exp(th) + l * thDot ** 3;');
  const [fault] = await findings(source);
  expect(fault).toMatchObject({ code: 'differs' });
  expect(fault!.repair).toBeUndefined();
  expect(fault!.message).toMatch(/The energies give .*Math\.sin\(th\)/);
});

test('a repair that would make another claim of the file wrong is not offered', async () => {
  const shared = `const torque = (th: number, m: number, g: number, l: number) => -m * g * l * Math.sin(th);
/**
 * @visviva one
 * coordinates th [rad]
 * parameters m [kg] > 0, l [m] > 0, g [m/s^2] > 0
 * point bob: mass m at (l*sin(th), -l*cos(th))
 * gravity (0, -g)
 * checks return = th''
 */
export const one = (th: number, m: number, g: number, l: number) => torque(th, m, g, l) / (m * l * l);
/**
 * @visviva two
 * coordinates th [rad]
 * parameters m [kg] > 0, l [m] > 0, g [m/s^2] > 0
 * point bob: mass m at (l*sin(th), l*cos(th))
 * gravity (0, -g)
 * checks return = th''
 */
export const two = (th: number, m: number, g: number, l: number) => torque(th, m, g, l) / (m * l * l);
`;
  const result = await checkText('yard/code.ts', shared);
  expect(result.claims.map((c) => c.verdict)).toEqual(['holds', 'differs']);
  const repair = result.claims[1]!.findings[0]!.repair!;
  const after = await checkText('yard/code.ts', applied(shared, repair.edits));
  expect(after.claims.map((c) => c.verdict)).toEqual(['holds', 'holds']);
});
