import { Ajv } from 'ajv';
import { expect, it } from 'vitest';
import schema from '../../docs/report.schema.json';
import { Folder, RIGHT, rope, WRONG } from './support/command';

it('the JSON report and the exit statuses are as documented', () => {
  const isValid = new Ajv({ strict: false }).compile(schema);
  using f = new Folder({
    'right.ts': rope(RIGHT, 'right'),
    'wrong.ts': rope(WRONG, 'wrong'),
    'accepted.ts': rope(WRONG, 'accepted').replace('  return [', '  // visviva: accept sign because so\n  return ['),
    'unread.ts': rope('lookUp(th)', 'unread'),
    'problem.ts': rope(RIGHT, 'problem').replace('gravity (0, -g)', 'gravity (0, -h)'),
    'binary.ts': new Uint8Array([64, 0]),
  });
  const r = f.run('check', '--format', 'json', '--shard', '1/1');
  expect(r.status).toBe(1);
  expect(isValid(JSON.parse(r.out)), JSON.stringify(isValid.errors)).toBe(true);
  expect(isValid({ ...(JSON.parse(r.out) as object), schema: 2 })).toBe(false);
  expect(f.run('check', 'right.ts', 'accepted.ts').status).toBe(0);
  expect(f.run('check', '--no-such').status).toBe(2);
});
