import { describe, expect, test } from 'vitest';
import { checkText } from '../support/check';
import { mismatches } from '../support/compare';
import { loadFixtures, withFault } from '../support/fixtures';
import { Judge } from '../support/judge';

/** Every fixture as it stands, then with each of its faults, through the service that editor and command share. */
const { fixtures, others } = loadFixtures('typescript');

describe.each(fixtures)('$file', (fixture) => {
  test('as it stands', async () => {
    const result = await checkText(fixture.file, fixture.text, others);
    expect(fixture.sections.flatMap((s) => mismatches(result, fixture, s))).toEqual([]);
  });

  for (const section of fixture.sections) {
    const judge = section.run.length > 0 ? new Judge(fixture, section, others) : undefined;
    test.each(section.faults)(`${section.name}: $name`, async (fault) => {
      const text = withFault(fixture, fault);
      const result = await checkText(fixture.file, text, others);
      if (judge) expect(mismatches(result, fixture, section, judge.judge(text))).toEqual([]);
      else expect(result.claims.some((c) => c.verdict === 'differs' && c.witness)).toBe(true);
    });
  }
});
