import { describe, expect, test } from 'vitest';
import { createService } from '../../server/src/service';
import { Budget, BudgetSpent, work } from '../../server/src/text/budget';
import { chainSource } from '../bench/chain-source';

/** A clock that goes on by a millisecond whenever it is read: what runs out of time does so at the same place always. */
function readings(): () => number {
  let t = 0;
  return () => t++;
}

const text = chainSource(6);

async function checkWithin(milliseconds: number) {
  const service = createService({ read: () => text, declarations: () => [] });
  const budget = new Budget({ milliseconds }, readings());
  return { service, budget, claims: (await service.check('chain.ts', budget)).claims };
}

describe('a check that runs out of time', () => {
  test('leaves its claims unread, and says where the time went', async () => {
    for (const milliseconds of [2, 8, 14]) {
      const { claims } = await checkWithin(milliseconds);
      expect(claims.length).toBeGreaterThan(0);
      for (const c of claims) {
        expect(c.verdict).toBe('unread');
        expect(c.findings[0]!.message).toMatch(/budget: the 0\.0\d+ s for this check ran out before it was decided, most of it in (the declaration|reading the code|comparing at states)/);
      }
    }
  });

  test('never decides otherwise than with all the time there is', async () => {
    let held = 0;
    for (let milliseconds = 1; milliseconds < 100; milliseconds += 7) {
      const { claims } = await checkWithin(milliseconds);
      expect(claims.every((c) => c.verdict === 'unread' || c.verdict === 'holds')).toBe(true);
      held += claims.filter((c) => c.verdict === 'holds').length;
    }
    expect(held).toBeGreaterThan(0);
  });

  test('is not remembered', async () => {
    const { service, claims } = await checkWithin(8);
    expect(claims.every((c) => c.verdict === 'unread')).toBe(true);
    const again = await service.check('chain.ts', new Budget());
    expect(again.claims.map((c) => c.verdict)).toEqual(new Array(6).fill('holds'));
  });
});

describe('cancellation', () => {
  test('reaches reading, comparing and proving', async () => {
    for (let after = 1; after < 40; after += 3) {
      let looks = 0;
      const service = createService({ read: () => text, declarations: () => [] });
      const budget = new Budget({}, () => 0, () => ++looks > after);
      const { claims } = await service.check('chain.ts', budget);
      if (budget.why !== 'cancelled') continue;
      expect(looks).toBeLessThanOrEqual(after + 1);
      for (const c of claims) expect(c.verdict === 'holds' || /cancelled/.test(c.findings[0]!.message)).toBe(true);
    }
  });

  test('leaves a piece of work, and the one around it keeps its own budget', () => {
    const outer = new Budget({}, () => 0);
    const inner = new Budget({}, () => 0, () => true);
    outer.run('outer', () => {
      expect(() => inner.run('inner', () => work(1e9))).toThrow(BudgetSpent);
      work(1e9);
    });
    expect(() => work(1e9)).not.toThrow();
  });
});
