import type { Expr } from './node';
import { operators } from './operators';
import { reachable } from './reach';

/** Values of one symbol over all samples, with what is known of their error (none where absent). */
export interface Column {
  readonly values: Float64Array;
  readonly errors?: Float64Array;
}

/**
 * A flat instruction list for some expressions, run over many samples at once: one run of doubles per node for values and
 * one for running error bounds. Linear in the graph; no code is generated.
 */
export class Tape {
  readonly nodes: readonly Expr[];
  private readonly slot = new Map<Expr, number>();
  private readonly args: Int32Array[] = [];
  private readonly slots: number;

  constructor(readonly roots: readonly Expr[]) {
    this.nodes = reachable(roots);
    let next = 0;
    for (const node of this.nodes) {
      if (node.op === 'component') this.slot.set(node, this.slot.get(node.args[0]!)! + (node.data as number));
      else {
        this.slot.set(node, next);
        next += node.op === 'solve' ? (node.data as number) : 1;
      }
    }
    this.slots = next;
    for (const node of this.nodes) this.args.push(Int32Array.from(node.args, (a) => this.slot.get(a)!));
  }

  get symbols(): readonly Expr[] {
    return this.nodes.filter((n) => n.op === 'symbol');
  }

  /**
   * @param column the samples of a symbol; one that has none gives NaN everywhere
   * @param n number of samples
   */
  run(column: (symbol: Expr) => Column | undefined, n: number): Registers {
    const v = new Float64Array(this.slots * n);
    const e = new Float64Array(this.slots * n);
    const registers = new Registers(v, e, n, this.slot);
    this.step(registers, column, undefined);
    return registers;
  }

  /** Runs again, in place, only what depends on the given symbols. */
  rerun(registers: Registers, column: (symbol: Expr) => Column | undefined, changed: ReadonlySet<Expr>): void {
    const stale = new Set<Expr>();
    for (const node of this.nodes) {
      if (changed.has(node) || node.args.some((a) => stale.has(a))) stale.add(node);
    }
    this.step(registers, column, stale);
  }

  private step(
    registers: Registers,
    column: (symbol: Expr) => Column | undefined,
    only: ReadonlySet<Expr> | undefined,
  ): void {
    const { v, e, n } = registers;
    for (let i = 0; i < this.nodes.length; i++) {
      const node = this.nodes[i]!;
      if (node.op === 'component' || (only && !only.has(node))) continue;
      const out = this.slot.get(node)! * n;
      if (node.op === 'symbol') {
        const c = column(node);
        if (c) v.set(c.values.subarray(0, n), out);
        else v.fill(NaN, out, out + n);
        if (c?.errors) e.set(c.errors.subarray(0, n), out);
        else e.fill(0, out, out + n);
        continue;
      }
      const args = this.args[i]!;
      operators[node.op].evaluate(v, e, out, n === 1 ? args : args.map((a) => a * n), n, node.data);
    }
  }
}

/** What a run left: value and bound of every node at every sample. */
export class Registers {
  constructor(
    readonly v: Float64Array,
    readonly e: Float64Array,
    readonly n: number,
    private readonly slot: ReadonlyMap<Expr, number>,
  ) {}

  value(node: Expr, sample: number): number {
    return this.v[this.slot.get(node)! * this.n + sample]!;
  }

  error(node: Expr, sample: number): number {
    return this.e[this.slot.get(node)! * this.n + sample]!;
  }

  /** A copy of a node's values and bounds, to be another run's column. */
  column(node: Expr): Required<Column> {
    const start = this.slot.get(node)! * this.n;
    return { values: this.v.slice(start, start + this.n), errors: this.e.slice(start, start + this.n) };
  }
}
