import { describe, expect, test } from 'vitest';
import { checkText } from './check';
import { mismatches } from './compare';
import { parseFixture, withFault } from './fixtures';
import { Judge } from './judge';

/**
 * A check against the literature: code typed after a published formula beside a declaration of the system it is about,
 * in the form of a fixture. The formula must hold, and each of its faults must differ.
 * @param source author, title, section; with "from memory" where the text was not at hand
 */
export function published(source: string, system: string, text: string): void {
  describe(`${system} (${source})`, () => {
    const fixture = parseFixture(`${system.replace(/\W+/g, '-')}.js`, text);
    const judges = fixture.sections.map((s) => (s.run.length > 0 ? new Judge(fixture, s) : undefined));

    test('the formula is the published one', () => {
      const wrong = judges.flatMap((j) => j?.judge(text) ?? []).filter((j) => !j.holds);
      expect(wrong).toEqual([]);
    });

    test('the formula holds', async () => {
      const result = await checkText(fixture.file, text);
      expect(fixture.sections.flatMap((s) => mismatches(result, fixture, s))).toEqual([]);
    });

    fixture.sections.forEach((section, i) => {
      test.each(section.faults)(`${section.name} with a fault differs: $name`, async (fault) => {
        const twin = withFault(fixture, fault);
        const result = await checkText(fixture.file, twin);
        const truth = judges[i]?.judge(twin);
        if (truth) expect(truth.some((j) => !j.holds)).toBe(true);
        expect(result.claims.some((c) => c.verdict === 'differs')).toBe(true);
        if (truth) expect(mismatches(result, fixture, section, truth)).toEqual([]);
      });
    });
  });
}
