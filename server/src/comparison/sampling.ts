import type { Domain, Expr, SymbolData } from '../expression/node';
import type { Column } from '../expression/tape';
import type { System } from '../mechanics/system';

/** A small seeded generator (Mulberry32, public domain, T. Ettinger): the same states in every run and on every machine. */
export class Random {
  constructor(private state: number) {}

  /** In [0, 1). */
  next(): number {
    this.state = (this.state + 0x6d2b79f5) | 0;
    let t = Math.imul(this.state ^ (this.state >>> 15), 1 | this.state);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  }

  between(low: number, high: number): number {
    return low + (high - low) * this.next();
  }

  /** Between low and high, both positive, evenly by ratio. */
  ratio(low: number, high: number): number {
    return low * Math.pow(high / low, this.next());
  }
}

/**
 * Draws generic states: never the file's own defaults, never round numbers, over the declared ranges. `wide` leaves the
 * usual sizes (to reach branches): large, tiny and zero values, negative parameters where no sign is declared.
 */
export class Sampler {
  private readonly random = new Random(0x5eed);
  private readonly angles: ReadonlySet<Expr>;

  constructor(private readonly system: System) {
    this.angles = new Set(system.coordinates.filter((c) => c.unit === 'rad').map((c) => c.symbol));
  }

  /** One column per symbol, `n` states each. */
  draw(symbols: readonly Expr[], n: number, wide = false): Map<Expr, Column> {
    const out = new Map<Expr, Column>();
    for (const s of symbols) out.set(s, { values: new Float64Array(n) });
    for (let k = 0; k < n; k++) for (const s of symbols) out.get(s)!.values[k] = this.one(s, wide);
    return out;
  }

  private one(symbol: Expr, wide: boolean): number {
    const r = this.random;
    const { role, order } = symbol.data as SymbolData;
    const domain: Domain = this.system.domains.get(symbol) ?? {};
    const { low, high } = domain;
    const stretch = wide ? this.stretch() : 1;
    if (low !== undefined && high !== undefined) {
      if (low === high) return low;
      return wide && r.next() < 0.2 ? (r.next() < 0.5 ? low + (high - low) * 1e-3 : high - (high - low) * 1e-3) : r.between(low, high);
    }
    if (low !== undefined) return low + r.ratio(0.3, 3) * Math.max(1, Math.abs(low) / 3) * stretch;
    if (high !== undefined) return high - r.ratio(0.3, 3) * Math.max(1, Math.abs(high) / 3) * stretch;
    if (role === 'parameter') return r.ratio(0.3, 3) * stretch * (wide && r.next() < 0.3 ? -1 : 1);
    if (role === 'time') return r.between(0.1, 4) * stretch;
    if (wide && !domain.nonzero && r.next() < 0.05) return 0;
    if (role === 'coordinate' && order === 0 && this.angles.has(symbol)) return r.between(-3.1, 3.1) * Math.min(stretch, 4);
    const x = r.between(-3, 3);
    return (domain.nonzero && Math.abs(x) < 0.1 ? 0.5 : x) * stretch;
  }

  private stretch(): number {
    const r = this.random.next();
    if (r < 0.5) return 1;
    if (r < 0.7) return this.random.ratio(3, 30);
    if (r < 0.8) return this.random.ratio(30, 1000);
    return this.random.ratio(1e-3, 0.3);
  }
}
