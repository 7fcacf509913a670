import type { PanelTape } from '@visviva/shared';

/** Evaluates the panel's expressions: they are data, and nothing else is ever run. */
export class Evaluator {
  readonly values: Float64Array;

  constructor(private readonly tape: PanelTape) {
    this.values = new Float64Array(tape.nodes.length);
  }

  /** All nodes for some values of the symbols, by their places in the panel's list. */
  run(symbols: ArrayLike<number>): Float64Array {
    const v = this.values;
    const solutions = new Map<number, readonly number[]>();
    this.tape.nodes.forEach(({ op, args, value }, i) => {
      switch (op) {
        case 'number':
          v[i] = value!;
          break;
        case 'symbol':
          // A rate of an input: inputs are held where they are.
          v[i] = value! < 0 ? 0 : symbols[value!]!;
          break;
        case 'solve':
          solutions.set(i, solve(args.map((a) => v[a]!), value!));
          break;
        case 'component':
          v[i] = solutions.get(args[0]!)?.[value!] ?? NaN;
          break;
        default:
          v[i] = apply(op, args, v);
      }
    });
    return v;
  }
}

const unary: Readonly<Record<string, (x: number) => number>> = {
  sin: Math.sin, cos: Math.cos, tan: Math.tan, asin: Math.asin, acos: Math.acos, atan: Math.atan,
  sinh: Math.sinh, cosh: Math.cosh, tanh: Math.tanh, exp: Math.exp, log: Math.log, abs: Math.abs, sign: Math.sign, floor: Math.floor,
};

function apply(op: string, args: readonly number[], v: Float64Array): number {
  const x = (k: number): number => v[args[k]!]!;
  const f = unary[op];
  if (f) return f(x(0));
  switch (op) {
    case 'sum':
      return args.reduce((sum, a) => sum + v[a]!, 0);
    case 'product':
      return args.reduce((product, a) => product * v[a]!, 1);
    case 'power':
      return Math.pow(x(0), x(1));
    case 'atan2':
      return Math.atan2(x(0), x(1));
    case 'min':
      return Math.min(...args.map((a) => v[a]!));
    case 'max':
      return Math.max(...args.map((a) => v[a]!));
    case 'less':
      return Number(x(0) < x(1));
    case 'lessEqual':
      return Number(x(0) <= x(1));
    case 'equal':
      return Number(x(0) === x(1));
    case 'and':
      return Number(args.every((a) => v[a] === 1));
    case 'or':
      return Number(args.some((a) => v[a] === 1));
    case 'not':
      return Number(x(0) === 0);
    case 'true':
      return 1;
    case 'false':
      return 0;
    case 'select':
      return x(0) === 1 ? x(1) : x(2);
    default:
      return NaN;
  }
}

/** A linear system by elimination with partial pivoting: the matrix by rows, then the right sides. */
function solve(all: number[], n: number): number[] {
  const rows = Array.from({ length: n }, (_, i) => [...all.slice(i * n, (i + 1) * n), all[n * n + i]!]);
  for (let c = 0; c < n; c++) {
    let pivot = c;
    for (let r = c + 1; r < n; r++) if (Math.abs(rows[r]![c]!) > Math.abs(rows[pivot]![c]!)) pivot = r;
    [rows[c], rows[pivot]] = [rows[pivot]!, rows[c]!];
    const head = rows[c]![c]!;
    if (!(Math.abs(head) > 0)) return new Array<number>(n).fill(NaN);
    for (let r = 0; r < n; r++) {
      if (r === c) continue;
      const f = rows[r]![c]! / head;
      for (let k = c; k <= n; k++) rows[r]![k] = rows[r]![k]! - f * rows[c]![k]!;
    }
  }
  return rows.map((row, i) => row[n]! / row[i]!);
}
