import { describe, expect, test } from 'vitest';
import { checkText } from '../support/check';

const CART = `/** @visviva cart
 * coordinates x [m], th [rad]     th from upright, clockwise
 * parameters  M, m [kg] > 0, l [m] > 0, g [m/s^2] > 0
 * inputs      u [N]
 * point cart: mass M at (x, 0)
 * point bob:  mass m at (x + l*sin(th), l*cos(th))
 * gravity (0, -g)
 * force (u, 0) at (x, 0)
 */
`;

async function check(code: string, others = new Map<string, string>()) {
  const result = await checkText('a.ts', code, others);
  return { verdicts: result.claims.map((c) => c.verdict), problems: result.problems.map((p) => p.code) };
}

describe('a block that names a system', () => {
  const linear = (sign: string) => `/** @visviva cart
 * near th = 0, order 1
 * checks return = [x'', th''] */
function lin({ th, u }, { M, m, l, g }) { return [(u - m*g*th)/M, ((M + m)*g*th ${sign} u)/(M*l)]; }
`;

  test('may say where it holds', async () => {
    expect(await check(CART + linear('-'))).toEqual({ verdicts: ['holds', 'holds'], problems: [] });
    expect((await check(CART + linear('+'))).verdicts).toEqual(['holds', 'differs']);
  });

  test('may bring symbols of its own, for itself alone', async () => {
    const step = `/** @visviva cart
 * parameters h [s] > 0
 * checks s.x = x + h*x' */
function step(s, h, xDot) { s.x += h*xDot; }
`;
    expect(await check(CART + step)).toEqual({ verdicts: ['holds'], problems: [] });
    const other = "/** @visviva cart\n * checks s.x = x + h*x' */\nfunction again(s, h, xDot) { s.x += h*xDot; }\n";
    expect((await check(CART + step + other)).verdicts).toEqual(['holds', 'unread']);
  });

  test('may not change the energies', async () => {
    const more = "/** @visviva cart\n * D = 1/2*m*x'^2\n * checks return = x' */\nfunction f(xDot) { return xDot; }\n";
    expect((await check(CART + more)).problems).toEqual(['inconsistent']);
  });

  test('may stand in another file, with additions too', async () => {
    const others = new Map([['cart.visviva', CART.replace('/** ', '').replace(/^ \* ?/gm, '').replace('/', '')]]);
    expect((await check(linear('-'), others)).verdicts).toEqual(['holds', 'holds']);
  });

  test('must name one that there is, and only one', async () => {
    expect(await check(linear('-'))).toEqual({ verdicts: ['unread', 'unread'], problems: ['undeclared'] });
    const others = new Map([
      ['b.ts', CART],
      ['c.ts', CART],
    ]);
    expect((await check(linear('-'), others)).problems).toEqual(['ambiguous']);
  });
});
