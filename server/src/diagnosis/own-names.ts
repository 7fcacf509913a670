import type { Reading } from '../program/reading';
import type { ClaimResult } from '../comparison/subject';
import { symbolText, type SymbolData } from '../expression/node';
import { code, python, typescript, type CodeStyle } from '../expression/print';
import { solvedAccelerations, tidy } from '../mechanics/equations';
import type { Derived } from '../mechanics/lagrange';

const LONGEST = 240;

/** What a claim should compute, in the code's own names; undefined where that would be too long to read. */
export function expectedInCode(derived: Derived, claim: ClaimResult, reading: Reading | undefined, language: string): string | undefined {
  const { expected } = claim;
  if (!expected || derived.system.near || derived.system.constraints.length > 0) return undefined;
  const solved = solvedAccelerations(derived)?.find((s) => s.coordinate.acceleration === expected)?.expr;
  if (expected.op === 'symbol' && !solved) return undefined;
  const expr = solved ?? tidy(derived.system.graph, expected);
  const names = new Map<string, string>();
  for (const b of reading?.bindings ?? []) {
    if (b.meaning.op !== 'symbol') continue;
    const key = symbolText(b.meaning.data as SymbolData);
    const known = names.get(key);
    if (known === undefined || b.code.length < known.length) names.set(key, b.code);
  }
  const style: CodeStyle = language === 'python' ? python : typescript;
  const text = code(style, [expr], { names, limit: Infinity }).values[0]!;
  return text.length <= LONGEST ? text : undefined;
}
