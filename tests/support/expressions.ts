import * as fc from 'fast-check';
import type { Expr, FunctionName, SymbolData } from '../../server/src/expression/node';
import { symbolText } from '../../server/src/expression/node';
import type { Graph } from '../../server/src/expression/graph';
import { Rational } from '../../server/src/expression/rational';
import { reachable } from '../../server/src/expression/reach';

/** Symbols for tests, by the way they are written: `th'` is the velocity of th. */
export class Symbols {
  constructor(readonly graph: Graph) {}

  coordinate(text: string): Expr {
    const name = text.replace(/'+$/, '');
    return this.graph.symbol({ name, role: 'coordinate', order: text.length - name.length });
  }

  parameter(name: string, positive = false): Expr {
    return this.graph.symbol({ name, role: 'parameter', order: 0, domain: positive ? { low: 0 } : undefined });
  }

  input(name: string): Expr {
    return this.graph.symbol({ name, role: 'input', order: 0 });
  }
}

/** A slow, plain evaluation in doubles, to judge rewrites by. Booleans are 1 and 0. */
export function evaluate(expr: Expr, value: (name: string) => number): number {
  const done = new Map<Expr, number | number[]>();
  for (const node of reachable([expr])) {
    const a = node.args.map((x) => done.get(x) as number);
    done.set(node, evaluateNode(node, a, done, value));
  }
  return done.get(expr) as number;
}

function evaluateNode(node: Expr, a: number[], done: Map<Expr, number | number[]>, value: (name: string) => number): number | number[] {
  switch (node.op) {
    case 'number':
      return (node.data as Rational).toNumber();
    case 'pi':
      return Math.PI;
    case 'nan':
      return NaN;
    case 'symbol':
      return value(symbolText(node.data as SymbolData));
    case 'sum':
      return a.reduce((s, x) => s + x, 0);
    case 'product':
      return a.reduce((s, x) => s * x, 1);
    case 'power':
      return Math.pow(a[0]!, a[1]!);
    case 'less':
      return Number(a[0]! < a[1]!);
    case 'lessEqual':
      return Number(a[0]! <= a[1]!);
    case 'equal':
      return Number(a[0] === a[1]);
    case 'and':
      return Number(a[0]! && a[1]!);
    case 'or':
      return Number(a[0]! || a[1]!);
    case 'not':
      return Number(!a[0]);
    case 'true':
      return 1;
    case 'false':
      return 0;
    case 'select':
      return a[0] ? a[1]! : a[2]!;
    case 'solve':
      return eliminate(a, node.data as number);
    case 'component':
      return (done.get(node.args[0]!) as number[])[node.data as number]!;
    case 'sign':
      return Math.sign(a[0]!);
    default:
      return (Math[node.op as Exclude<FunctionName, 'sign'>] as (...x: number[]) => number)(...a);
  }
}

function eliminate(values: number[], n: number): number[] {
  const rows = Array.from({ length: n }, (_, i) => [...values.slice(i * n, i * n + n), values[n * n + i]!]);
  for (let k = 0; k < n; k++) {
    const p = rows.slice(k).reduce((best, r, i) => (Math.abs(r[k]!) > Math.abs(rows[best]![k]!) ? i + k : best), k);
    [rows[k], rows[p]] = [rows[p]!, rows[k]!];
    for (let i = 0; i < n; i++) {
      if (i === k) continue;
      const f = rows[i]![k]! / rows[k]![k]!;
      for (let j = k; j <= n; j++) rows[i]![j]! -= f * rows[k]![j]!;
    }
  }
  return rows.map((r, i) => r[n]! / r[i]!);
}

/** Recipes of expressions; `build` makes one in a graph. */
export type Recipe =
  | { kind: 'number'; n: number; d: number }
  | { kind: 'symbol'; name: string }
  | { kind: 'op'; op: string; args: Recipe[] };

const NAMES = ['a', 'b', 'm', 'l', "x'", 'th', "th'"];
const ONE = ['sin', 'cos', 'tan', 'exp', 'abs', 'sqrt', 'negate', 'square', 'cube', 'inverse', 'cosh', 'sinh', 'atan'];
const TWO = ['add', 'subtract', 'multiply', 'divide', 'max', 'atan2', 'select', 'solve'];

export const recipes: fc.Arbitrary<Recipe> = fc.letrec<{ tree: Recipe }>((tie) => ({
  tree: fc.oneof(
    { maxDepth: 5, withCrossShrink: true },
    fc.record({ kind: fc.constant('symbol' as const), name: fc.constantFrom(...NAMES) }),
    fc.record({ kind: fc.constant('number' as const), n: fc.integer({ min: -4, max: 9 }), d: fc.integer({ min: 1, max: 4 }) }),
    fc.record({ kind: fc.constant('op' as const), op: fc.constantFrom(...ONE), args: fc.tuple(tie('tree')) }),
    fc.record({ kind: fc.constant('op' as const), op: fc.constantFrom(...TWO), args: fc.tuple(tie('tree'), tie('tree')) }),
  ),
})).tree;

export function build(graph: Graph, r: Recipe): Expr {
  if (r.kind === 'number') return graph.number(Rational.of(r.n, r.d));
  if (r.kind === 'symbol') {
    const s = new Symbols(graph);
    return /^[xt]/.test(r.name) ? s.coordinate(r.name) : s.parameter(r.name, r.name !== 'b');
  }
  const args = r.args.map((a) => build(graph, a));
  const [a, b] = [args[0]!, args[1]!];
  switch (r.op) {
    case 'negate':
      return graph.negate(a);
    case 'square':
      return graph.square(a);
    case 'cube':
      return graph.power(a, graph.number(3));
    case 'inverse':
      return graph.divide(graph.one, a);
    case 'sqrt':
      return graph.sqrt(a);
    case 'add':
      return graph.add(a, b);
    case 'subtract':
      return graph.subtract(a, b);
    case 'multiply':
      return graph.multiply(a, b);
    case 'divide':
      return graph.divide(a, b);
    case 'select':
      return graph.select(graph.less(a, b), graph.add(a, b), graph.multiply(a, graph.number(2)));
    case 'solve':
      return graph.solve([graph.number(3), a, graph.one, b], [a, graph.add(b, graph.one)])[0]!;
    default:
      return graph.apply(r.op as FunctionName, args);
  }
}

/** A sign-free random point for the names above; parameters are positive, b and coordinates are not. */
export function pointOf(seed: number): (name: string) => number {
  return (name) => {
    let h = seed ^ 0x9e3779b9;
    for (const c of name) h = Math.imul(h ^ c.charCodeAt(0), 0x85ebca6b) ^ (h >>> 13);
    const u = ((h ^ (h >>> 16)) >>> 0) / 2 ** 32;
    return /^[aml]$/.test(name) ? 0.3 + 1.5 * u : -1.6 + 3.2 * u;
  };
}
