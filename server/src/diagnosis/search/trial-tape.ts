import type { Expr } from '../../expression/node';
import { operators } from '../../expression/operators';
import { reachable } from '../../expression/reach';

/**
 * Runs some expressions again and again with other values of a few unknowns. What depends on an unknown is known
 * beforehand, so that a trial costs only that.
 */
export class TrialTape {
  private readonly nodes: readonly Expr[];
  private readonly slot = new Map<Expr, number>();
  private readonly args: Int32Array[] = [];
  private readonly v: Float64Array;
  private readonly e: Float64Array;
  private readonly base: Float64Array;
  private readonly users = new Map<Expr, Int32Array>();
  private readonly reached = new Map<Expr, ReadonlySet<Expr>>();
  /** Operations done in trials so far, all states of one counted once. */
  work = 0;

  constructor(
    roots: readonly Expr[],
    /** Number of states. */
    readonly n: number,
    column: (symbol: Expr) => Float64Array | undefined,
  ) {
    this.nodes = reachable(roots);
    let next = 0;
    for (const node of this.nodes) {
      if (node.op === 'component') this.slot.set(node, this.slot.get(node.args[0]!)! + (node.data as number) * n);
      else {
        this.slot.set(node, next);
        next += n * (node.op === 'solve' ? (node.data as number) : 1);
      }
    }
    for (const node of this.nodes) this.args.push(Int32Array.from(node.args, (a) => this.slot.get(a)!));
    this.v = new Float64Array(next);
    this.e = new Float64Array(next);
    this.nodes.forEach((node, i) => {
      if (node.op !== 'symbol') return this.evaluate(i);
      const values = column(node);
      const at = this.slot.get(node)!;
      if (values) this.v.set(values.subarray(0, n), at);
      else this.v.fill(0, at, at + n);
    });
    this.base = this.v.slice();
  }

  has(node: Expr): boolean {
    return this.slot.has(node);
  }

  /** What the node is with all unknowns zero. */
  baseOf(node: Expr): Float64Array {
    const at = this.slot.get(node)!;
    return this.base.subarray(at, at + this.n);
  }

  /** Valid until the next trial. */
  valueOf(node: Expr): Float64Array {
    const at = this.slot.get(node)!;
    return this.v.subarray(at, at + this.n);
  }

  /** Runs with some unknowns set; `use` sees the values, then all is as before. */
  try<T>(settings: readonly { readonly symbol: Expr; readonly values: Float64Array }[], use: () => T): T {
    const known = settings.filter((s) => this.slot.has(s.symbol));
    for (const { symbol, values } of known) this.v.set(values, this.slot.get(symbol)!);
    const touched = known.length === 1 ? this.usersOf(known[0]!.symbol) : this.merged(known.map((k) => k.symbol));
    for (const i of touched) this.evaluate(i);
    this.work += touched.length + 1;
    const result = use();
    for (const { symbol } of known) this.restore(this.slot.get(symbol)!, this.n);
    for (const i of touched) {
      const node = this.nodes[i]!;
      if (node.op !== 'component') this.restore(this.slot.get(node)!, this.n * (node.op === 'solve' ? (node.data as number) : 1));
    }
    return result;
  }

  /** Runs `use` as if the unknowns were these from the beginning. */
  during<T>(settings: readonly { readonly symbol: Expr; readonly values: Float64Array }[], use: () => T): T {
    const known = settings.filter((s) => this.slot.has(s.symbol));
    const before = this.base.slice();
    for (const { symbol, values } of known) this.v.set(values, this.slot.get(symbol)!);
    for (const i of this.merged(known.map((k) => k.symbol))) this.evaluate(i);
    this.base.set(this.v);
    const result = use();
    this.base.set(before);
    this.v.set(before);
    return result;
  }

  /** Whether a node depends on an unknown. */
  reaches(symbol: Expr, node: Expr): boolean {
    let known = this.reached.get(symbol);
    if (!known) this.reached.set(symbol, (known = new Set(Array.from(this.usersOf(symbol), (i) => this.nodes[i]!))));
    return known.has(node);
  }

  private restore(at: number, length: number): void {
    this.v.set(this.base.subarray(at, at + length), at);
  }

  private merged(symbols: readonly Expr[]): Int32Array {
    const all = new Set<number>();
    for (const s of symbols) for (const i of this.usersOf(s)) all.add(i);
    return Int32Array.from([...all].sort((a, b) => a - b));
  }

  private usersOf(symbol: Expr): Int32Array {
    let users = this.users.get(symbol);
    if (!users) {
      const stale = new Set<Expr>([symbol]);
      const list: number[] = [];
      this.nodes.forEach((node, i) => {
        if (node.args.length === 0 || !node.args.some((a) => stale.has(a))) return;
        stale.add(node);
        list.push(i);
      });
      this.users.set(symbol, (users = Int32Array.from(list)));
    }
    return users;
  }

  private evaluate(i: number): void {
    const node = this.nodes[i]!;
    if (node.op === 'component' || node.op === 'symbol') return;
    operators[node.op].evaluate(this.v, this.e, this.slot.get(node)!, this.args[i]!, this.n, node.data);
  }
}
