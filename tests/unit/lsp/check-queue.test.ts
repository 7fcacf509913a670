import { expect, test } from 'vitest';
import { CheckQueue } from '../../../server/src/lsp/check-queue';

test('what is in view is checked first, whatever was asked for later', async () => {
  const order: string[] = [];
  let finish: () => void = () => undefined;
  const all = new Promise<void>((resolve) => (finish = resolve));
  const queue = new CheckQueue(
    ({ key }) => {
      order.push(key);
      if (order.length === 4) finish();
      return Promise.resolve();
    },
    () => 0,
    (key) => key === 'visible',
  );
  for (const key of ['first', 'visible', 'second', 'third']) queue.request(key);
  await all;
  expect([...order].sort()).toEqual(['first', 'second', 'third', 'visible']);
  for (const other of ['second', 'third']) expect(order.indexOf('visible')).toBeLessThan(order.indexOf(other));
});
