import { work } from '../text/budget';
import type { Expr } from './node';
import { operators, ULP } from './operators';
import { reachable } from './reach';

/** Values of one symbol over all samples, with what is known of their error (none where absent). */
export interface Column {
  readonly values: Float64Array;
  readonly errors?: Float64Array;
}

export interface TapeOptions {
  /** Keep every intermediate value, so that parts can be run again. Otherwise registers are reused once they are read. */
  readonly keepAll?: boolean;
  /** Nodes beside the roots whose values are asked for. */
  readonly keep?: readonly Expr[];
}

/**
 * A flat instruction list for some expressions, run over many samples at once: one run of doubles per register for values
 * and one for running error bounds. Linear in the graph; no code is generated.
 */
export class Tape {
  readonly nodes: readonly Expr[];
  /** Register of each instruction, and of its arguments. */
  private readonly out: Int32Array;
  private readonly args: readonly Int32Array[];
  private readonly registers: number;
  private readonly kept = new Map<Expr, number>();
  private scaledFor = 0;
  private scaled: readonly Int32Array[] = [];
  private readonly keepAll: boolean;

  constructor(
    readonly roots: readonly Expr[],
    options: TapeOptions = {},
  ) {
    this.nodes = reachable(options.keep ? [...roots, ...options.keep] : roots);
    this.keepAll = options.keepAll ?? false;
    const count = this.nodes.length;
    const position = new Int32Array(count > 0 ? this.nodes[count - 1]!.id + 1 : 0);
    this.nodes.forEach((node, i) => (position[node.id] = i));
    const lasts = this.keepAll ? undefined : lastUses(this.nodes, position);
    const wanted = new Set<Expr>([...roots, ...(options.keep ?? [])]);
    this.out = new Int32Array(count);
    const args: Int32Array[] = [];
    const free: number[] = [];
    let next = 0;
    for (let i = 0; i < count; i++) {
      const node = this.nodes[i]!;
      args.push(Int32Array.from(node.args, (a) => this.out[position[a.id]!]!));
      if (node.op === 'component') this.out[i] = this.out[position[node.args[0]!.id]!]! + (node.data as number);
      else if (node.op === 'solve') {
        this.out[i] = next;
        next += node.data as number;
      } else this.out[i] = free.length > 0 ? free.pop()! : next++;
      if (this.keepAll || wanted.has(node)) this.kept.set(node, this.out[i]!);
      if (!lasts) continue;
      // An argument read for the last time gives its register back, but never to the instruction that reads it.
      for (const arg of new Set(node.args)) {
        const at = position[arg.id]!;
        if (lasts[at] === i && !wanted.has(arg) && arg.op !== 'solve' && arg.op !== 'component') free.push(this.out[at]!);
      }
    }
    this.args = args;
    this.registers = next;
  }

  get symbols(): readonly Expr[] {
    return this.nodes.filter((n) => n.op === 'symbol');
  }

  /**
   * @param column the samples of a symbol; one that has none gives NaN everywhere
   * @param n number of samples
   */
  run(column: (symbol: Expr) => Column | undefined, n: number): Registers {
    const v = new Float64Array(this.registers * n);
    const e = new Float64Array(this.registers * n);
    const registers = new Registers(v, e, n, this.kept);
    this.step(registers, column, undefined);
    return registers;
  }

  /**
   * The same with bounds estimated instead of accumulated: the program is run a few times with every operation's rounding
   * drawn at random, and the spread taken for the error (J. Vignes, A stochastic arithmetic for reliable scientific
   * computation, Mathematics and Computers in Simulation 35, 1993). For long eliminations, where guaranteed bounds grow
   * beyond all use while the values are good.
   */
  runSampled(column: (symbol: Expr) => Column | undefined, n: number): Registers {
    const registers = this.run(column, n);
    const { v, e } = registers;
    const spread = new Float64Array(v.length);
    for (let k = 0; k < JITTERED_RUNS; k++) {
      const again = new Registers(new Float64Array(v.length), new Float64Array(v.length), n, this.kept);
      this.step(again, column, undefined, jitter(k + 1));
      for (let i = 0; i < v.length; i++) {
        const d = Math.abs(again.v[i]! - v[i]!);
        if (!(d <= spread[i]!)) spread[i] = d;
      }
    }
    for (const [node, slot] of this.kept) {
      for (let i = slot * n; i < (slot + 1) * n; i++) {
        if (isCondition(node)) e[i] = spread[i]! > 0 ? Infinity : 0;
        else {
          // Written so that a bound that is no number gives way too.
          const estimate = JITTER_SAFETY * spread[i]! + 4 * ULP * Math.abs(v[i]!);
          if (!(e[i]! < estimate)) e[i] = estimate;
        }
      }
    }
    return registers;
  }

  /** Runs again, in place, only what depends on the given symbols; of tapes that keep everything. */
  rerun(registers: Registers, column: (symbol: Expr) => Column | undefined, changed: ReadonlySet<Expr>): void {
    if (!this.keepAll) throw new Error('a tape that reuses registers can not be run in part');
    this.step(registers, column, this.dependents(changed));
  }

  private dependents(changed: ReadonlySet<Expr>): Uint8Array {
    const stale = new Uint8Array(this.nodes.length > 0 ? this.nodes[this.nodes.length - 1]!.id + 1 : 0);
    for (const node of this.nodes) {
      if (node.op === 'symbol') {
        if (changed.has(node)) stale[node.id] = 1;
        continue;
      }
      for (const a of node.args) {
        if (stale[a.id]) {
          stale[node.id] = 1;
          break;
        }
      }
    }
    return stale;
  }

  private step(
    registers: Registers,
    column: (symbol: Expr) => Column | undefined,
    only: Uint8Array | undefined,
    disturb?: (v: Float64Array, from: number, to: number) => void,
  ): void {
    const { v, e, n } = registers;
    const args = this.argsFor(n);
    for (let i = 0; i < this.nodes.length; i++) {
      const node = this.nodes[i]!;
      if (node.op === 'component' || (only && !only[node.id])) continue;
      const out = this.out[i]! * n;
      if (node.op === 'symbol') {
        const c = column(node);
        if (c) v.set(c.values.subarray(0, n), out);
        else v.fill(NaN, out, out + n);
        if (c?.errors) e.set(c.errors.subarray(0, n), out);
        else e.fill(0, out, out + n);
        continue;
      }
      work(node.op === 'solve' ? 4 * n * args[i]!.length * (node.data as number) : n * args[i]!.length);
      operators[node.op].evaluate(v, e, out, args[i]!, n, node.data);
      if (disturb && !isCondition(node)) disturb(v, out, out + n * (node.op === 'solve' ? (node.data as number) : 1));
    }
  }

  /** Arguments as offsets for runs of `n` samples. */
  private argsFor(n: number): readonly Int32Array[] {
    if (n === 1) return this.args;
    if (this.scaledFor !== n) {
      this.scaled = this.args.map((a) => a.map((slot) => slot * n));
      this.scaledFor = n;
    }
    return this.scaled;
  }
}

const JITTERED_RUNS = 3;
/** Three runs show most of the spread; this makes up for what they do not. */
const JITTER_SAFETY = 16;

const CONDITIONS = new Set(['less', 'lessEqual', 'equal', 'and', 'or', 'not', 'true', 'false']);

function isCondition(node: Expr): boolean {
  return CONDITIONS.has(node.op);
}

/** Moves every value by up to a unit in the last place, the same way in every process. */
function jitter(seed: number): (v: Float64Array, from: number, to: number) => void {
  let state = seed * 0x9e3779b9;
  return (v, from, to) => {
    for (let i = from; i < to; i++) {
      state = (Math.imul(state, 1664525) + 1013904223) | 0;
      v[i] = v[i]! * (1 + (state / 2147483648) * ULP);
    }
  };
}

/** The instruction that reads each node last. */
function lastUses(nodes: readonly Expr[], position: Int32Array): Int32Array {
  const last = new Int32Array(nodes.length).fill(-1);
  nodes.forEach((node, i) => {
    for (const arg of node.args) last[position[arg.id]!] = i;
  });
  return last;
}

/** What a run left: value and bound of the roots and of every node kept, at every sample. */
export class Registers {
  constructor(
    readonly v: Float64Array,
    readonly e: Float64Array,
    readonly n: number,
    private readonly slot: ReadonlyMap<Expr, number>,
  ) {}

  value(node: Expr, sample: number): number {
    return this.v[this.at(node) + sample]!;
  }

  error(node: Expr, sample: number): number {
    return this.e[this.at(node) + sample]!;
  }

  /** A copy of a node's values and bounds, to be another run's column. */
  column(node: Expr): Required<Column> {
    const start = this.at(node);
    return { values: this.v.slice(start, start + this.n), errors: this.e.slice(start, start + this.n) };
  }

  private at(node: Expr): number {
    const slot = this.slot.get(node);
    if (slot === undefined) throw new Error(`the value of a node (${node.op}) was not kept`);
    return slot * this.n;
  }
}
