import type { Expr, SymbolData } from '../expression/node';
import { symbolText } from '../expression/node';
import { formatNumber } from '../expression/print/number';
import type { ClaimResult } from '../comparison/subject';
import type { WitnessState } from '../comparison/pair';
import type { Declared, System } from '../mechanics/system';

/** `th = 30°, th' = 1`: what moves first, then parameters; zeros and ones that say nothing are summed up at the end. */
export function stateText(system: System, witness: WitnessState): string {
  const parts: string[] = [];
  let zeros = 0;
  let ones = 0;
  for (const [symbol, value] of inOrder(system, witness)) {
    const data = symbol.data as SymbolData;
    if (value === 0) zeros++;
    else if (data.role === 'parameter' && value === 1) ones++;
    else parts.push(`${symbolText(data)} = ${valueText(system, symbol, value)}`);
  }
  const rest: string[] = [];
  if (zeros > 0 && parts.length === 0) rest.push('all coordinates and velocities zero');
  else if (zeros > 0) rest.push('the rest zero');
  if (ones > 0) rest.push(ones === 1 ? 'one parameter 1' : 'all other parameters 1');
  return [...parts, ...rest].join(', ');
}

/** Coordinates, their velocities, inputs, time, parameters; each in the order of declaration. */
export function inOrder(system: System, witness: WitnessState): [Expr, number][] {
  const order = new Map<string, number>();
  [...system.coordinates, ...system.inputs, ...system.parameters].forEach((d, i) => order.set(d.name, i));
  const rank = (e: Expr): number => {
    const { role, order: n, name } = e.data as SymbolData;
    const group = role === 'coordinate' ? (n === 0 ? 0 : 1) : role === 'input' ? 2 : role === 'time' ? 3 : 4;
    return group * 1000 + (order.get(name) ?? 0) + n / 8;
  };
  return [...witness.values].sort((a, b) => rank(a[0]) - rank(b[0]));
}

function valueText(system: System, symbol: Expr, value: number): string {
  const data = symbol.data as SymbolData;
  if (data.role === 'coordinate' && data.order === 0) {
    const c = system.coordinates.find((d) => d.symbol === symbol);
    if (c?.unit === 'rad') {
      const degrees = (value * 180) / Math.PI;
      if (Math.abs(degrees - Math.round(degrees)) < 1e-9) return `${Math.round(degrees)}°`;
    }
  }
  return formatNumber(value);
}

/** ` (th from straight down, counter-clockwise)`: the conventions that the claim rests on. */
export function conventionText(system: System, claim: ClaimResult): string {
  const remarks = new Set<string>();
  const touched = (d: Declared): boolean =>
    claim.decision.verdict === 'differs' && claim.decision.witness.values.has(d.symbol) && d.remark !== undefined;
  for (const c of system.coordinates) if (touched(c)) remarks.add(c.remark!);
  return remarks.size > 0 ? ` Convention: ${[...remarks].join('; ')}.` : '';
}
