import { describe, expect, test } from 'vitest';
import { verdictsOf } from '../support/check';
import { claimsOf } from '../support/compare';
import { loadFixtures } from '../support/fixtures';
import { Judge } from '../support/judge';
import { mutantsOf, type Mutant } from '../support/mutants';

/**
 * Slips that nobody chose: a few mechanical changes per fixture. Whatever they do, the verdict must be the one that the
 * judge comes to by running the code, or `unread`. MUTANTS=50 tries more of them.
 */
const EACH = Number(process.env['MUTANTS'] ?? 3);
const { fixtures, others } = loadFixtures('typescript');

// The traps are slips themselves, and many.
const runnable = fixtures.filter((f) => !f.file.includes('/traps/') && !f.file.endsWith('.html') && f.sections.some((s) => s.run.length > 0));

describe.each(runnable)('$file', (fixture) => {
  for (const section of fixture.sections.filter((s) => s.run.length > 0)) {
    test(`${section.name}: no slip gets a wrong verdict`, { timeout: 20_000 * EACH }, async () => {
      const judge = new Judge(fixture, section, others);
      const wrong: string[] = [];
      for (const mutant of sample(mutantsOf(fixture, section), EACH)) {
        const truth = attempt(() => judge.judge(mutant.text));
        if (!truth) continue;
        const result = await verdictsOf(fixture.file, mutant.text, others);
        for (const claim of claimsOf(result, section)) {
          const j = truth.find((x) => x.output === claim.output);
          if (!j || !Number.isFinite(j.worst) || claim.verdict === 'unread') continue;
          if ((claim.verdict === 'holds') !== j.holds) wrong.push(`${mutant.what}: ${claim.output} ${claim.verdict}, but ${j.worst}`);
        }
      }
      expect(wrong).toEqual([]);
    });
  }
});

/** Evenly spread over all of them. */
function sample(mutants: readonly Mutant[], n: number): Mutant[] {
  const count = Math.min(n, mutants.length);
  return Array.from({ length: count }, (_, i) => mutants[Math.floor(((i + 0.5) * mutants.length) / count)]!);
}

/** Some slips are no program at all. */
function attempt<T>(run: () => T): T | undefined {
  try {
    return run();
  } catch {
    return undefined;
  }
}
