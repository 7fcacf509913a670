import { describe, expect, test } from 'vitest';
import { loadFixtures, withFault } from '../support/fixtures';
import { Judge } from '../support/judge';

/**
 * The fixtures themselves are checked here, without the product: the code of each is run with random numbers against
 * Lagrange's equations by finite differences. Correct code must be correct, and every fault must be one.
 */
const { fixtures, others } = loadFixtures('typescript');

describe.each(fixtures)('$file', (fixture) => {
  for (const section of fixture.sections) {
    if (section.run.length === 0) {
      const claiming = /\bchecks\b/.test(fixture.text.slice(section.start, section.end));
      const needed = claiming && (section.expectations.length === 0 || section.faults.length > 0);
      test.skipIf(!needed)(`${section.name} says why it is not run`, () => {
        expect(section.notRun, 'add "//= CALL" or "//= none: why"').toBeTruthy();
      });
      continue;
    }
    let made: Judge | undefined;
    const judge = (): Judge => (made ??= new Judge(fixture, section, others));
    test(`${section.name} is correct as it stands`, () => {
      const wrong = new Set(section.expectations.filter((e) => e.verdict === 'differs').map((e) => e.output));
      for (const j of judge().judge(fixture.text)) {
        expect(j.holds, `${j.output} = ${j.right}: ${j.worst}`).toBe(!wrong.has(j.output));
      }
    });
    if (section.faults.length === 0) continue;
    test(`${section.name}: each fault changes a claim`, () => {
      const j = judge();
      const useless = section.faults.filter((fault) => {
        try {
          return Math.max(...j.judge(withFault(fixture, fault)).map((o) => o.worst)) < 1e-4;
        } catch (error) {
          throw new Error(`fault ${fault.name}: ${String(error)}`, { cause: error });
        }
      });
      expect(useless.map((f) => f.name)).toEqual([]);
    });
  }
});
