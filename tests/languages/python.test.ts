import { describe, expect, test } from 'vitest';
import { checkText, verdictsOf } from '../support/check';
import { mismatches } from '../support/compare';
import { loadFixtures, withFault } from '../support/fixtures';

/** Every Python fixture as it stands, then with each of its faults, through the service that editor and command share. */
const { fixtures, others } = loadFixtures('python');

describe.each(fixtures)('$file', (fixture) => {
  test('as it stands', async () => {
    const result = await checkText(fixture.file, fixture.text, others);
    expect(fixture.sections.flatMap((s) => mismatches(result, fixture, s))).toEqual([]);
  });

  for (const section of fixture.sections) {
    test.each(section.faults)(`${section.name}: $name`, async (fault) => {
      const result = await verdictsOf(fixture.file, withFault(fixture, fault), others);
      const inside = result.claims.filter((c) => c.line >= section.startLine && c.line < section.endLine);
      expect(inside.filter((c) => c.verdict === 'unread').map((c) => c.findings[0]?.message)).toEqual(
        section.expectations.filter((e) => e.verdict === 'unread').map((e) => expect.stringContaining(e.words)),
      );
      expect(inside.some((c) => c.verdict === 'differs' && c.witness)).toBe(true);
    });
  }
});
