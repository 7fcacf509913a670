import { describe, expect, test } from 'vitest';
import { checkText } from '../support/check';
import { mismatches } from '../support/compare';
import { loadFixtures, withFault } from '../support/fixtures';
import { Judge } from '../support/judge';

/**
 * One section for every kind of mechanics that can be declared: as it stands, then with each of its faults. Where the
 * tests' own judge knows the kind, it says first that the code is right.
 */
const { fixtures } = loadFixtures('mechanics');

describe.each(fixtures)('$file', (fixture) => {
  test('as it stands', async () => {
    for (const section of fixture.sections) {
      if (section.run.length > 0) expect(new Judge(fixture, section).judge(fixture.text).filter((j) => !j.holds)).toEqual([]);
    }
    const result = await checkText(fixture.file, fixture.text);
    expect(fixture.sections.flatMap((s) => mismatches(result, fixture, s))).toEqual([]);
  });

  for (const section of fixture.sections) {
    test.each(section.faults)(`${section.name}: $name`, async (fault) => {
      const result = await checkText(fixture.file, withFault(fixture, fault));
      const inside = result.claims.filter((c) => c.line >= section.startLine && c.line < section.endLine);
      const unread = inside.filter((c) => c.verdict === 'unread').map((c) => c.findings[0]?.message);
      expect(unread).toEqual(section.expectations.filter((e) => e.verdict === 'unread').map((e) => expect.stringContaining(e.words)));
      expect(inside.some((c) => c.verdict === 'differs' && c.witness && c.findings.length > 0)).toBe(true);
    });
  }
});
