import { describe, expect, test } from 'vitest';
import { checkText, verdictsOf } from './check';
import { mismatches } from './compare';
import { loadFixtures, withFault } from './fixtures';
import { Judge } from './judge';

/**
 * Tests every fixture as it stands, then with each of its faults, through the service that editor and command share.
 * @param part of how many: a file of tests is run by one process, and there are many faults
 */
export function testFixtures(folder: string, part: number, parts: number): void {
  const { fixtures, others } = loadFixtures(folder);

  describe.each(fixtures.filter((_, k) => k % parts === part))('$file', (fixture) => {
    test('as it stands', async () => {
      const result = await checkText(fixture.file, fixture.text, others);
      expect(fixture.sections.flatMap((s) => mismatches(result, fixture, s))).toEqual([]);
    });

    for (const section of fixture.sections) {
      const judge = section.run.length > 0 ? new Judge(fixture, section, others) : undefined;
      test.each(section.faults)(`${section.name}: $name`, async (fault) => {
        const text = withFault(fixture, fault);
        const result = await verdictsOf(fixture.file, text, others);
        if (judge) expect(mismatches(result, fixture, section, judge.judge(text))).toEqual([]);
        else expect(result.claims.some((c) => c.verdict === 'differs' && c.witness)).toBe(true);
      });
    }
  });
}
