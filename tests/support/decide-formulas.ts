import { decide } from '../../server/src/comparison/decide';
import type { Decision } from '../../server/src/comparison/pair';
import { Graph } from '../../server/src/expression/graph';
import { buildSystem } from '../../server/src/mechanics/build';
import { evaluateScalar } from '../../server/src/mechanics/formula';
import { Derived } from '../../server/src/mechanics/lagrange';
import { quantityContext } from '../../server/src/mechanics/quantities';
import type { System } from '../../server/src/mechanics/system';
import { parseBlocks, parseFormula, wholeFile } from '../../server/src/notation';
import { Budget } from '../../server/src/text/budget';

/** The system a declaration text describes. */
export function systemOf(declaration: string): System {
  const text = `@visviva test\n${declaration}\n`;
  const [block] = parseBlocks(text, [wholeFile(text)]);
  return buildSystem(block!, new Graph());
}

/** Decides formulas, standing for what code computes, against quantities of a declaration. */
export function decideFormulas(declaration: string, claims: Record<string, string>): Record<string, Decision> {
  const system = systemOf(declaration);
  if (system.problems.length > 0) throw new Error(system.problems.map((p) => p.message).join('; '));
  const derived = new Derived(system);
  const pairs = Object.entries(claims).map(([quantity, code]) => ({
    found: formula(derived, code),
    expected: formula(derived, quantity),
  }));
  const decisions = decide({ derived, pairs, assumed: [], budget: new Budget(), placeOf: () => undefined });
  return Object.fromEntries(Object.keys(claims).map((q, i) => [q, decisions[i]!]));
}

function formula(derived: Derived, text: string) {
  const parsed = parseFormula(text);
  const context = quantityContext(derived, []);
  const e = evaluateScalar(parsed.formula, context);
  const errors = [...parsed.errors, ...context.errors];
  if (!e || errors.length > 0) throw new Error(`${text}: ${errors.map((x) => x.message).join('; ')}`);
  return e;
}
