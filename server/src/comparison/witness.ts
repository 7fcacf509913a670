import type { Expr, SymbolData } from '../expression/node';
import type { Column } from '../expression/tape';
import type { System } from '../mechanics/system';
import type { Motion } from './motion';
import type { Pair, WitnessState } from './pair';
import { Prober } from './prober';

/** Plain numbers to try, in the order a reader likes them. */
const PLAIN = [0, 1, 2, 0.5, -1, 3, 4, -2];
const ANGLES = [0, Math.PI / 6, Math.PI / 4, Math.PI / 3, Math.PI / 2, 1, -Math.PI / 6, 2];
const POSITIVE = [1, 2, 0.5, 3, 4, 5, 10, 1.5, 0.1];

/**
 * A state that a person can check by hand: symbol by symbol, zero where that keeps the difference, else a round value.
 * @param start a state at which the claim differs; returned as it is when nothing rounder shows the difference
 */
export function shrinkWitness(
  system: System,
  motion: Motion,
  group: readonly Pair[],
  start: ReadonlyMap<Expr, number>,
  assumed: readonly Expr[],
): WitnessState {
  const prober = new Prober(motion, [group], assumed);
  const symbols = [...prober.symbols].sort((a, b) => rank(a) - rank(b));
  const state = new Map(symbols.map((s) => [s, start.get(s) ?? 1]));
  const first = probe(prober, state, symbols[0], [symbols[0] ? state.get(symbols[0])! : 0], assumed)[0]!;
  // Most of the difference must stay visible, or a reader sees two numbers alike.
  let floor = Math.min(0.02, first.relative / 4);
  for (const symbol of symbols) {
    const candidates = candidatesFor(system, symbol, state.get(symbol)!);
    if (candidates.length === 0) continue;
    const results = probe(prober, state, symbol, candidates, assumed);
    const k = results.findIndex((r) => r.differs && r.relative >= floor);
    if (k >= 0) state.set(symbol, candidates[k]!);
    else floor = Math.min(floor, first.relative / 4);
  }
  const last = probe(prober, state, symbols[0], [symbols[0] ? state.get(symbols[0])! : 0], assumed)[0]!;
  const used = last.differs ? { state, result: last } : { state: new Map(start), result: first };
  // Moved onto the constraints, a state is less round, but it is the one that was compared.
  const columns = motion.onConstraints(asColumns(used.state, 1), 1);
  const values = new Map([...used.state.keys()].map((s) => [s, columns.get(s)!.values[0]!]));
  return { values, expected: used.result.expected, found: used.result.found };
}

/** Velocities and coordinates first, so that they become zero where they can; then inputs, time and parameters. */
function rank(symbol: Expr): number {
  const { role, order } = symbol.data as SymbolData;
  return (role === 'coordinate' ? 0 : role === 'input' ? 4 : role === 'parameter' ? 12 : 8) - order;
}

function candidatesFor(system: System, symbol: Expr, now: number): number[] {
  const { role, order } = symbol.data as SymbolData;
  const domain = system.domains.get(symbol) ?? {};
  const all = [...system.coordinates, ...system.parameters, ...system.inputs];
  const declared = all.find((d) => d.symbol === symbol);
  const typical = declared?.typical;
  let values: readonly number[];
  if (role === 'parameter') values = typical !== undefined ? [typical, ...POSITIVE] : POSITIVE;
  else if (order === 0 && declared?.unit === 'rad') values = ANGLES;
  else values = PLAIN;
  const { low, high } = domain;
  if (low !== undefined || high !== undefined) {
    const middle = low !== undefined && high !== undefined ? (low + high) / 2 : undefined;
    const rounded = [Number(now.toPrecision(1)), Number(now.toPrecision(2)), ...(middle !== undefined ? [middle] : [])];
    values = [...values, ...rounded];
  } else values = [...values, Number(now.toPrecision(1)), Number(now.toPrecision(2))];
  return values.filter((x) => {
    if (low !== undefined && (x < low || (x === low && x === 0))) return false;
    if (high !== undefined && x > high) return false;
    return !(domain.nonzero && x === 0);
  });
}

function asColumns(state: ReadonlyMap<Expr, number>, n: number): Map<Expr, Column> {
  return new Map([...state].map(([s, x]) => [s, { values: new Float64Array(n).fill(x) }]));
}

interface Probe {
  readonly differs: boolean;
  readonly relative: number;
  readonly found: number;
  readonly expected: number;
}

function probe(
  prober: Prober,
  state: ReadonlyMap<Expr, number>,
  symbol: Expr | undefined,
  values: readonly number[],
  assumed: readonly Expr[],
): Probe[] {
  const n = values.length;
  const columns = asColumns(state, n);
  if (symbol) columns.set(symbol, { values: Float64Array.from(values) });
  const { registers } = prober.run(columns, n);
  return values.map((_, k) => {
    const c = prober.compare(registers, 0, k);
    const allowed = assumed.every((a) => registers.value(a, k) === 1);
    const relative = c.difference / Math.max(c.size, 1e-300);
    // Far beyond rounding, so that nobody has to take the bound on trust.
    const differs = allowed && c.votes && !c.agrees && c.difference > 100 * c.bound;
    return { differs, relative, found: c.found, expected: c.expected };
  });
}
