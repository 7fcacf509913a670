import { expect, test } from 'vitest';
import { cart, faults, pendulum, RIGHT_CART } from './support';

test('nothing is found in right code', async () => {
  expect(await faults(pendulum('  return (tau - b * thDot - m * g * l * Math.sin(th)) / (m * l * l);'))).toEqual([]);
  expect(await faults(cart(RIGHT_CART))).toEqual([]);
});

const right = 'return (tau - b * thDot - m * g * l * Math.sin(th)) / (m * l * l);';

/** What stands there, the code of the finding, and what the repair makes of it where that is not the line above. */
test.each([
  ['a sign', 'return (tau - b * thDot + m * g * l * Math.sin(th)) / (m * l * l);', 'sign', right],
  ['a sign that is lost', 'return (tau - b * thDot - m * g * l * Math.sin(th)) / -(m * l * l);', 'sign', right],
  ['a function', 'return (tau - b * thDot - m * g * l * Math.cos(th)) / (m * l * l);', 'wrong-function', right],
  ['a name', 'return (tau - b * thDot - m * g * m * Math.sin(th)) / (m * l * l);', 'swapped-symbol', undefined],
  ['an angle for its rate', 'return (tau - b * th - m * g * l * Math.sin(th)) / (m * l * l);', 'swapped-symbol', right],
  ['a term too few', 'return (tau - m * g * l * Math.sin(th)) / (m * l * l);', 'missing-term', undefined],
  ['a term too many', 'return (tau - b * thDot - m * g * l * Math.sin(th) - th) / (m * l * l);', 'extra-term', right],
  ['brackets too few', 'return (tau - b * thDot - m * g * l * Math.sin(th)) / m * l * l;', 'grouping', right],
  ['brackets that end early', 'return tau - (b * thDot - m * g * l * Math.sin(th)) / (m * l * l);', undefined, undefined],
  ['an operator', 'return (tau - b * thDot - m / g * l * Math.sin(th)) / (m * l * l);', 'wrong-operator', right],
  ['a factor', 'return (tau - b * thDot - 2 * m * g * l * Math.sin(th)) / (m * l * l);', 'factor', undefined],
  ['a length too few', 'return (tau - b * thDot - m * g * Math.sin(th)) / (m * l * l);', 'factor', undefined],
  ['a power', 'return (tau - b * thDot - m * g * l * Math.sin(th)) / (m * l ** 3);', 'wrong-power', right.replace('(m * l * l)', '(m * l ** 2)')],
])('%s', async (_, line, code, repaired) => {
  const [fault, ...rest] = await faults(pendulum(`  ${line}`));
  expect(rest).toEqual([]);
  expect(fault).toMatchObject({ line: 1, repair: repaired ?? expect.any(String) as string, ...(code ? { code } : {}) });
});

const cartFault = (old: string, wrong: string) => faults(cart(RIGHT_CART.replace(old, wrong)));

test('in one place for all claims that it makes wrong', async () => {
  expect(await cartFault('+ g * cs))', '- g * cs))')).toEqual([{ code: 'sign', line: 5, repair: RIGHT_CART.split('\n')[2]!.trim() }]);
});

test('a square that is lost', async () => {
  expect(await cartFault('l * w * w', 'l * w')).toMatchObject([{ line: 5 }]);
});

test('rows exchanged', async () => {
  expect(await cartFault('[v, w, a, -(a * cs + g * sn) / l]', '[v, w, -(a * cs + g * sn) / l, a]')).toMatchObject([
    { code: 'swapped-rows', line: 6, repair: 'return [v, w, a, -(a * cs + g * sn) / l];' },
  ]);
});

test('the same name wrong at two places', async () => {
  expect(await cartFault('(M + m * sn * sn)', '(M + m * cs * cs)')).toMatchObject([{ line: 5, repair: expect.any(String) as string }]);
});

test('an assignment that overwrites', async () => {
  const body = ['  let torque = tau;', '  torque = -b * thDot;', '  torque -= m * g * l * Math.sin(th);', '  return torque / (m * l * l);'];
  expect(await faults(pendulum(body.join('\n')))).toMatchObject([{ line: 2, repair: 'torque += -b * thDot;' }]);
});
