import type { Expr, SymbolData } from '../node';
import { multiply, PRIME } from './field';

/** Draws residues; the same in every run. */
export class Residues {
  /** @param state not zero; another one gives other residues */
  constructor(private state = 0x2545f491) {}

  next(): number {
    // xorshift32 (G. Marsaglia, Xorshift RNGs, Journal of Statistical Software 8, 2003)
    let x = this.state;
    x ^= x << 13;
    x ^= x >>> 17;
    x ^= x << 5;
    this.state = x;
    return (x >>> 0) % PRIME;
  }

  square(): number {
    const x = this.next();
    return multiply(x, x);
  }

  column(points: number): Float64Array {
    const out = new Float64Array(points);
    for (let p = 0; p < points; p++) out[p] = this.next();
    return out;
  }
}

/** A symbol's random column: squares for symbols that are never negative, so that their roots behave. */
export function drawSymbol(symbol: Expr, nonNegative: boolean, points: number, residues: Residues): Float64Array {
  const { role } = symbol.data as SymbolData;
  if (!nonNegative && role !== 'time') return residues.column(points);
  const out = new Float64Array(points);
  for (let p = 0; p < points; p++) out[p] = residues.square();
  return out;
}
