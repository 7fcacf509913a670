import type { FindingCode } from '@visviva/shared';
import { Motion } from '../comparison/motion';
import { Prober } from '../comparison/prober';
import { Sampler } from '../comparison/sampling';
import type { ClaimResult } from '../comparison/subject';
import type { Expr } from '../expression/node';
import { formatNumber } from '../expression/print/number';
import type { Derived } from '../mechanics/lagrange';

/** What a whole output has in common with what it should be. */
export interface RowPattern {
  readonly code: FindingCode;
  /** Completes "th'': the code ...". */
  readonly message: string;
}

const STATES = 24;
const FEWEST = 8;
/** Two numbers as computed along different ways. */
const CLOSE = 1e-9;

/**
 * Looks for the plainest explanation of a claim that differs: the whole output has the opposite sign, is off by a constant
 * or by a product of declared symbols, or is another claim's quantity.
 */
export function findRowPattern(derived: Derived, claims: readonly ClaimResult[], index: number): RowPattern | undefined {
  const { system } = derived;
  if (system.near) return undefined;
  const claim = claims[index]!;
  const others = claims.filter((c, i) => i !== index && c.found && c.expected);
  const known = [claim, ...others].filter((c) => c.found && c.expected);
  if (known[0] !== claim) return undefined;
  const prober = new Prober(
    new Motion(derived),
    known.map((c) => [{ found: c.found!, expected: c.expected! }]),
  );
  const drawn = new Sampler(system).draw([...new Set([...prober.symbols, ...system.parameters.map((p) => p.symbol)])], STATES);
  const { registers, columns } = prober.run(drawn, STATES);
  const values = known.map((_, k) => Array.from({ length: STATES }, (_, s) => prober.compare(registers, k, s)));
  const votes = values[0]!.map((_, s) => s).filter((s) => values[0]![s]!.votes);
  if (votes.length < FEWEST) return undefined;
  const same = (a: (s: number) => number, b: (s: number) => number): boolean =>
    votes.every((s) => Math.abs(a(s) - b(s)) <= CLOSE * (Math.abs(a(s)) + Math.abs(b(s)) + 1e-6));
  const found = (s: number) => values[0]![s]!.found;
  const expected = (s: number) => values[0]![s]!.expected;
  if (votes.every((s) => expected(s) === 0) || votes.every((s) => found(s) === 0)) return undefined;

  if (same(found, (s) => -expected(s))) {
    return { code: 'sign', message: 'gives the right value with the opposite sign' };
  }
  for (let k = 1; k < known.length; k++) {
    if (!votes.every((s) => values[k]![s]!.votes)) continue;
    if (!same(found, (s) => values[k]![s]!.expected)) continue;
    const other = known[k]!;
    const crossed = same((s) => values[k]![s]!.found, expected);
    return crossed
      ? { code: 'swapped-rows', message: `has ${claim.output} and ${other.output} exchanged: this is ${other.quantity}` }
      : { code: 'swapped-rows', message: `gives ${other.quantity} in its place` };
  }
  const ratios = votes.map((s) => found(s) / expected(s)).filter(Number.isFinite);
  if (ratios.length < FEWEST) return undefined;
  const constant = commonValue(ratios);
  // Right at all these states: it differs only in a branch that few states reach.
  if (constant !== undefined && Math.abs(constant - 1) < 1e-6) return undefined;
  if (constant !== undefined) {
    return { code: 'factor', message: `gives ${factorText(constant)} times the right value${angleText(constant)}` };
  }
  return symbolFactor(derived, columns, votes, (s) => found(s) / expected(s));
}

function commonValue(ratios: readonly number[]): number | undefined {
  const first = ratios[0]!;
  return ratios.every((r) => Math.abs(r - first) <= CLOSE * Math.abs(first)) ? first : undefined;
}

/** 2, 1/2, 4/3, -2 ... where the number is one of these; digits otherwise. */
export function factorText(x: number): string {
  for (let q = 1; q <= 12; q++) {
    const p = Math.round(x * q);
    if (p !== 0 && Math.abs(p) < 100 && Math.abs(x * q - p) < 1e-8) return q === 1 ? String(p) : `${p}/${q}`;
  }
  for (const [value, text] of [
    [Math.PI, 'pi'],
    [Math.PI / 180, 'pi/180'],
    [180 / Math.PI, '180/pi'],
  ] as const) {
    if (Math.abs(x / value - 1) < 1e-9) return text;
  }
  return formatNumber(x);
}

/** The likeliest reason for a factor between degrees and radians. */
function angleText(x: number): string {
  const is = (value: number): boolean => Math.abs(Math.abs(x) / value - 1) < 1e-9;
  if (is(Math.PI / 180)) return ': an angle in radians taken for degrees';
  if (is(180 / Math.PI)) return ': an angle in degrees where the declaration has radians';
  return '';
}

function symbolFactor(
  derived: Derived,
  columns: ReadonlyMap<Expr, { readonly values: Float64Array }>,
  votes: readonly number[],
  ratio: (s: number) => number,
): RowPattern | undefined {
  const parameters = derived.system.parameters;
  const value = (symbol: Expr, s: number) => columns.get(symbol)!.values[s]!;
  const test = (factor: (s: number) => number): number | undefined => {
    const rest = votes.map((s) => ratio(s) / factor(s));
    return rest.every(Number.isFinite) ? commonValue(rest) : undefined;
  };
  const make = (text: string, constant: number): RowPattern => ({
    code: 'factor',
    message: `gives ${Math.abs(constant - 1) < 1e-9 ? '' : `${factorText(constant)}*`}${text} times the right value`,
  });
  for (const p of parameters) {
    for (const [power, text] of [
      [1, p.name],
      [-1, `1/${p.name}`],
      [2, `${p.name}^2`],
      [-2, `1/${p.name}^2`],
    ] as const) {
      const c = test((s) => value(p.symbol, s) ** power);
      if (c !== undefined) return make(text, c);
    }
  }
  for (const p of parameters) {
    for (const q of parameters) {
      if (p === q) continue;
      const c = test((s) => value(p.symbol, s) / value(q.symbol, s));
      if (c !== undefined) return make(`${p.name}/${q.name}`, c);
      if (p.name < q.name) {
        const d = test((s) => value(p.symbol, s) * value(q.symbol, s));
        if (d !== undefined) return make(`${p.name}*${q.name}`, d);
        const e = test((s) => 1 / (value(p.symbol, s) * value(q.symbol, s)));
        if (e !== undefined) return make(`1/(${p.name}*${q.name})`, e);
      }
    }
  }
  return undefined;
}
