import { Decimal } from 'decimal.js';
import type { Expr } from '../../expression/node';
import { reachable } from '../../expression/reach';
import type { Rational } from '../../expression/rational';

/** Digits of the two evaluations, and how many of them must agree. */
const DIGITS = [120, 150] as const;
const AGREE = 100;

/** A double as the number that it is, bit by bit. */
function exact(D: typeof Decimal, x: number): Decimal {
  return new D(x < 0 ? `-0b${(-x).toString(2)}` : `0b${x.toString(2)}`);
}

/**
 * The values of expressions to double precision, from two evaluations of 120 and 150 digits that agree to 100 (or are both
 * below 1e-100). Undefined where they do not, or where there is no value.
 * @param states values of the symbols
 */
export function exactValues(exprs: readonly Expr[], states: (symbol: Expr) => number | undefined): (number | undefined)[] {
  const [few, many] = DIGITS.map((precision) => evaluate(Decimal.clone({ precision, defaults: true }), exprs, states)) as [(Decimal | undefined)[], (Decimal | undefined)[]];
  return exprs.map((_, i) => {
    const [a, b] = [few[i], many[i]];
    if (!a || !b || !a.isFinite() || !b.isFinite()) return undefined;
    const difference = a.minus(b).abs();
    const allowed = Decimal.max(b.abs().times(new Decimal(10).pow(-AGREE)), new Decimal(10).pow(-AGREE));
    return difference.lessThanOrEqualTo(allowed) ? Number(b.toPrecision(40)) : undefined;
  });
}

function evaluate(D: typeof Decimal, exprs: readonly Expr[], states: (symbol: Expr) => number | undefined): (Decimal | undefined)[] {
  const values = new Map<Expr, Decimal | undefined>();
  const solved = new Map<Expr, readonly Decimal[] | undefined>();
  for (const node of reachable(exprs)) {
    if (node.op === 'solve') solved.set(node, solve(node.args.map((a) => values.get(a)), node.data as number));
    else values.set(node, node.op === 'component' ? solved.get(node.args[0]!)?.[node.data as number] : value(D, node, values, states));
  }
  return exprs.map((e) => values.get(e));
}

function value(D: typeof Decimal, node: Expr, values: ReadonlyMap<Expr, Decimal | undefined>, states: (symbol: Expr) => number | undefined): Decimal | undefined {
  const args: Decimal[] = [];
  for (const a of node.args) {
    const x = values.get(a);
    if (!x && node.op !== 'select') return undefined;
    args.push(x!);
  }
  const [a, b] = args as [Decimal, Decimal];
  const truth = (yes: boolean) => new D(yes ? 1 : 0);
  switch (node.op) {
    case 'number': {
      const r = node.data as Rational;
      return new D(r.numerator.toString()).dividedBy(r.denominator.toString());
    }
    case 'pi':
      return D.acos(-1);
    case 'symbol': {
      const x = states(node);
      return x === undefined ? undefined : exact(D, x);
    }
    case 'sum':
      return args.reduce((s, x) => s.plus(x), new D(0));
    case 'product':
      return args.reduce((s, x) => s.times(x), new D(1));
    case 'power':
      return a.pow(b);
    case 'sin':
    case 'cos':
    case 'tan':
    case 'asin':
    case 'acos':
    case 'atan':
    case 'sinh':
    case 'cosh':
    case 'tanh':
    case 'exp':
    case 'abs':
    case 'floor':
      return D[node.op](a);
    case 'log':
      return D.ln(a);
    case 'sign':
      return new D(D.sign(a));
    case 'atan2':
      return D.atan2(a, b);
    case 'min':
      return D.min(...args);
    case 'max':
      return D.max(...args);
    case 'less':
      return truth(a.lessThan(b));
    case 'lessEqual':
      return truth(a.lessThanOrEqualTo(b));
    case 'equal':
      return truth(a.equals(b));
    case 'and':
      return truth(args.every((x) => !x.isZero()));
    case 'or':
      return truth(args.some((x) => !x.isZero()));
    case 'not':
      return truth(a.isZero());
    case 'true':
      return truth(true);
    case 'false':
      return truth(false);
    case 'select':
      return a && (a.isZero() ? args[2] : b);
    default:
      return undefined;
  }
}

/** Gaussian elimination with the largest pivot of each column. */
function solve(args: readonly (Decimal | undefined)[], n: number): readonly Decimal[] | undefined {
  if (args.some((a) => !a)) return undefined;
  const rows = Array.from({ length: n }, (_, i) => [...(args.slice(i * n, i * n + n) as Decimal[]), args[n * n + i]!]);
  for (let k = 0; k < n; k++) {
    let pivot = k;
    for (let i = k + 1; i < n; i++) if (rows[i]![k]!.abs().greaterThan(rows[pivot]![k]!.abs())) pivot = i;
    [rows[k], rows[pivot]] = [rows[pivot]!, rows[k]!];
    if (rows[k]![k]!.isZero()) return undefined;
    for (let i = k + 1; i < n; i++) {
      const factor = rows[i]![k]!.dividedBy(rows[k]![k]!);
      for (let j = k; j <= n; j++) rows[i]![j] = rows[i]![j]!.minus(factor.times(rows[k]![j]!));
    }
  }
  const x = new Array<Decimal>(n);
  for (let i = n - 1; i >= 0; i--) {
    let rest = rows[i]![n]!;
    for (let j = i + 1; j < n; j++) rest = rest.minus(rows[i]![j]!.times(x[j]!));
    x[i] = rest.dividedBy(rows[i]![i]!);
  }
  return x;
}
