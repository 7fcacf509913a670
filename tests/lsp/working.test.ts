import { readFileSync } from 'node:fs';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { inAnotherThread } from '../../server/src/lsp/working/service';
import { createService } from '../../server/src/service';
import type { Files } from '../../server/src/service/api';
import { Budget } from '../../server/src/text/budget';
import { chainSource } from '../bench/chain-source';

const entry = new URL('../../dist/check-worker.mjs', import.meta.url);
const crane = readFileSync(new URL('../editor/workspace/crane.ts', import.meta.url), 'utf8');
const files: Files = { read: () => undefined, declarations: () => [] };
const slow = chainSource(30);

let service: ReturnType<typeof inAnotherThread>;
beforeEach(() => {
  service = inAnotherThread(createService(files), () => [], entry);
});
afterEach(() => service.stop());

const onBlock = { line: 18, column: 8 };

/** Checks a file and waits until its hovers have come over: what is least urgent comes last. */
async function settled(file: string): Promise<void> {
  await service.check(file, new Budget());
  await service.settled();
}

describe('checks in a thread of their own', () => {
  test('say the same as in this thread', async () => {
    const here = createService(files);
    for (const s of [here, service]) s.update('crane.ts', crane);
    expect(await service.check('crane.ts', new Budget())).toEqual(JSON.parse(JSON.stringify(await here.check('crane.ts', new Budget()))));
    expect(await service.hover('crane.ts', onBlock, new Budget())).toEqual(await here.hover('crane.ts', onBlock, new Budget()));
  });

  test('let hovers and completions through while one runs, and end at once when cancelled', async () => {
    service.update('crane.ts', crane);
    await settled('crane.ts');
    service.update('slow.ts', slow);
    let cancelled = false;
    let ended = false;
    const budget = new Budget({}, undefined, () => cancelled);
    const running = service.check('slow.ts', budget).then((r) => {
      ended = true;
      return r;
    });
    expect((await service.hover('crane.ts', onBlock, new Budget()))?.markdown).toContain('Equations of motion');
    expect(await service.complete('crane.ts', onBlock)).toBeDefined();
    expect(ended).toBe(false);
    cancelled = true;
    const result = await running;
    expect(budget.why).toBe('cancelled');
    expect(result.claims.every((c) => c.verdict === 'unread')).toBe(true);
  });

  test('run out of time there too', async () => {
    service.update('slow.ts', slow);
    const budget = new Budget({ milliseconds: 1 });
    expect((await service.check('slow.ts', budget)).claims.every((c) => c.verdict === 'unread')).toBe(true);
    expect(budget.why).toBe('time');
  });

  test('know the open documents again after their thread was lost', async () => {
    service.update('crane.ts', crane);
    const before = await service.check('crane.ts', new Budget());
    await service.stop();
    expect(await service.check('crane.ts', new Budget())).toEqual(before);
  });
});
