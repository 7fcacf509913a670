import type { Reading } from '../program/reading';
import type { ClaimResult } from '../comparison/subject';
import { symbolText, type Expr, type SymbolData } from '../expression/node';
import { symbolsOf } from '../expression/reach';
import { code, python, pythonStyle, typescript, type CodeStyle } from '../expression/print';
import { solvedAccelerations, tidy } from '../mechanics/equations';
import type { Derived } from '../mechanics/lagrange';

const LONGEST = 240;
const LONGEST_VALUE = 2000;

/** What a claim should compute, as code. */
export interface OwnCode {
  /** Definitions of common parts, to stand before. */
  readonly statements: readonly string[];
  readonly value: string;
}

/** What a claim should compute, in the code's own names; undefined where that would be too long to read. */
export function expectedInCode(derived: Derived, claim: ClaimResult, reading: Reading | undefined, language: string): string | undefined {
  const text = inOwnNames(derived, claim, namesOf(reading), language, { source: '', limit: Infinity })?.value;
  return text !== undefined && text.length <= LONGEST ? text : undefined;
}

/**
 * What a claim should compute, in the code's own names and language; undefined where there is no closed form.
 * @param names by the declaration's way to write a symbol
 * @param source the text around, whose names are not to be taken again
 * @param limit common parts get names where the value is longer than this
 */
export function inOwnNames(
  derived: Derived,
  claim: ClaimResult,
  names: ReadonlyMap<string, string>,
  language: string,
  { source, limit }: { readonly source: string; readonly limit: number },
): OwnCode | undefined {
  const expr = closedForm(derived, claim);
  if (!expr) return undefined;
  const printed = code(styleOf(language, source), [expr], { names, limit, prefix: freePrefix(source) });
  const value = printed.values[0]!;
  if (printed.helpers.length > 0 || value.length > LONGEST_VALUE) return undefined;
  return { statements: printed.statements, value };
}

/** The symbols that the code must have names for. */
export function symbolsExpected(derived: Derived, claim: ClaimResult): readonly string[] {
  const expr = closedForm(derived, claim);
  return expr ? symbolNames(expr) : [];
}

/** The symbols of an expression, as the declaration writes them. */
export function symbolNames(expr: Expr): string[] {
  return symbolsOf(expr).map((s) => symbolText(s.data as SymbolData));
}

/** An expression as code, in one piece. */
export function inCode(expr: Expr, names: ReadonlyMap<string, string>, language: string, source: string): string | undefined {
  const printed = code(styleOf(language, source), [expr], { names, limit: Infinity });
  return printed.statements.length > 0 ? undefined : printed.values[0];
}

/** What a claim should compute, accelerations solved for; undefined where there is no closed form. */
export function closedForm(derived: Derived, { expected }: ClaimResult): Expr | undefined {
  if (!expected || derived.system.near || derived.system.constraints.length > 0) return undefined;
  const solved = solvedAccelerations(derived)?.find((s) => s.coordinate.acceleration === expected)?.expr;
  if (solved) return solved;
  return derived.system.coordinates.some((c) => c.acceleration === expected) ? undefined : tidy(derived.system.graph, expected);
}

function namesOf(reading: Reading | undefined): Map<string, string> {
  const names = new Map<string, string>();
  for (const b of reading?.bindings ?? []) {
    if (b.meaning.op !== 'symbol') continue;
    const key = symbolText(b.meaning.data as SymbolData);
    const known = names.get(key);
    if (known === undefined || b.code.length < known.length) names.set(key, b.code);
  }
  return names;
}

function styleOf(language: string, source: string): CodeStyle {
  if (language !== 'python') return typescript;
  const numpy = /^\s*import\s+numpy(?:\s+as\s+(\w+))?/m.exec(source);
  if (numpy) return pythonStyle({ prefix: `${numpy[1] ?? 'numpy'}.`, isNumpy: true, arrays: `${numpy[1] ?? 'numpy'}.` });
  if (/^\s*import\s+math\s*$/m.test(source)) return pythonStyle({ prefix: 'math.', isNumpy: false, arrays: 'np.' });
  const from = /^\s*from\s+(math|numpy)\s+import\b/m.exec(source);
  return from ? pythonStyle({ prefix: '', isNumpy: from[1] === 'numpy', arrays: 'np.' }) : python;
}

/** The beginning of names that the text does not have. */
function freePrefix(source: string): string {
  return ['s', 'part', 'common', 'shared'].find((p) => !new RegExp(`(?<![\\w$])${p}\\d+(?![\\w$])`).test(source)) ?? 'derived';
}
