import { expect, test } from 'vitest';
import { createService } from '../../../server/src/service';
import { applyRepairs, repairDocument } from '../../../server/src/service/repairs';
import { unifiedDiff } from '../../../server/src/service/unified-diff';
import { Budget } from '../../../server/src/text/budget';
import { checkText, filesOf } from '../../support/check';
import { findings, pendulum } from './support';

const WRONG = pendulum('  return (tau - b * thDot + m * g * l * Math.sin(th)) / (m * l * l);');
const RIGHT = WRONG.replace('thDot + m', 'thDot - m');

const repaired = async (text: string): Promise<string> => applyRepairs(text, (await checkText('yard/a.ts', text)).claims).text;

test('a repair is verified, and made', async () => {
  expect((await findings(WRONG))[0]!.repair).toMatchObject({ verified: true });
  expect(await repaired(WRONG)).toBe(RIGHT);
});

test('line ends and byte order mark stay', async () => {
  const windows = '\ufeff' + WRONG.replace(/\n/g, '\r\n');
  expect(await repaired(windows)).toBe('\ufeff' + RIGHT.replace(/\n/g, '\r\n'));
});

test('a document is repaired until nothing is left', async () => {
  const two = WRONG + WRONG.replace('@visviva bob', '@visviva ball').replace('function f', 'function h').replace('thDot + m', 'thDot - 2 * m');
  const service = createService(filesOf(new Map([['yard/a.ts', two]])));
  const { text, titles } = await repairDocument(service, 'yard/a.ts', two, () => new Budget());
  expect(titles).toHaveLength(2);
  expect((await checkText('yard/a.ts', text)).claims.every((c) => c.verdict === 'holds')).toBe(true);
});

test('a diff that patch reads', () => {
  expect(unifiedDiff('a.ts', 'a\nb\nc\nd\ne\nf\n', 'a\nb\nc\nD\ne\nf\n')).toBe('--- a/a.ts\n+++ b/a.ts\n@@ -1,6 +1,6 @@\n a\n b\n c\n-d\n+D\n e\n f\n');
  expect(unifiedDiff('a.ts', 'a', 'b')).toBe('--- a/a.ts\n+++ b/a.ts\n@@ -1 +1 @@\n-a\n\\ No newline at end of file\n+b\n\\ No newline at end of file\n');
  expect(unifiedDiff('a.ts', 'a\n', 'a\n')).toBe('');
});
