import { describe, expect, test } from 'vitest';
import { loadFixtures, withFault } from '../support/fixtures';
import { Judge } from '../support/judge';
import { pythonMissing } from '../support/python-run';

/**
 * The Python fixtures that say how they are run are checked here, without the product: python3 runs them with random numbers
 * against Lagrange's equations by finite differences. Where there is no python3 with numpy, they are not run.
 */
const { fixtures, others } = loadFixtures('python');

describe.skipIf(pythonMissing)(`run by python3${pythonMissing ? ` (not run: ${pythonMissing})` : ''}`, () => {
  for (const fixture of fixtures) {
    for (const section of fixture.sections.filter((s) => s.run.length > 0)) {
      test(`${fixture.file} ${section.name} ${section.startLine}`, { timeout: 60_000 }, async () => {
        const judge = new Judge(fixture, section, others);
        const wrong = new Set(section.expectations.filter((e) => e.verdict === 'differs').map((e) => e.output));
        const open = new Set(section.expectations.filter((e) => e.verdict === 'unread').map((e) => e.output));
        for (const j of await judge.judgePython(fixture.text)) {
          if (!open.has(j.output)) expect(j.holds, `${j.output} = ${j.right}: ${j.worst}`).toBe(!wrong.has(j.output));
        }
        const useless: string[] = [];
        for (const fault of section.faults) {
          const worst = Math.max(...(await judge.judgePython(withFault(fixture, fault))).map((o) => o.worst));
          if (worst < 1e-4) useless.push(fault.name);
        }
        expect(useless).toEqual([]);
      });
    }
  }
});
