import type { Graph } from '../graph';
import type { Expr, FunctionName } from '../node';
import { Rational } from '../rational';
import { ULP, type Operator } from './operator';

/**
 * A function of one argument. `slope` bounds |f'| between x - ex and x + ex well enough for first-order analysis; math
 * libraries keep these functions within one or two units in the last place.
 */
function unary(
  f: (x: number) => number,
  slope: (x: number, fx: number, ex: number) => number,
  partial: (graph: Graph, x: Expr, node: Expr) => Expr,
): Operator {
  return {
    evaluate(v, e, out, args, n) {
      const a = args[0]!;
      for (let s = 0; s < n; s++) {
        const x = v[a + s]!;
        const ex = e[a + s]!;
        const y = f(x);
        v[out + s] = y;
        e[out + s] = (ex === 0 ? 0 : slope(x, y, ex) * ex) + 2 * ULP * Math.abs(y);
      }
    },
    partial: (graph, node) => partial(graph, node.args[0]!, node),
  };
}

const oneMinusSquare = (g: Graph, x: Expr) => g.subtract(g.one, g.square(x));
const onePlusSquare = (g: Graph, x: Expr) => g.add(g.one, g.square(x));
const inverse = (g: Graph, x: Expr) => g.power(x, g.minusOne);
const inverseRoot = (g: Graph, x: Expr) => g.power(x, g.number(Rational.of(-1, 2)));

/** asin and acos lose half the digits at the ends of their interval. */
const arcSlope = (x: number, _y: number, ex: number) => 1 / Math.sqrt(Math.max(1 - x * x - 2 * ex, ex));

const atan2: Operator = {
  evaluate(v, e, out, args, n) {
    const a = args[0]!;
    const b = args[1]!;
    for (let s = 0; s < n; s++) {
      const y = v[a + s]!;
      const x = v[b + s]!;
      const r = Math.hypot(x, y);
      const z = Math.atan2(y, x);
      const error = e[a + s]! + e[b + s]!;
      // On the cut (negative x axis) rounding may add a whole turn.
      const cut = error > 0 && x < 0 && Math.abs(y) <= e[a + s]!;
      v[out + s] = z;
      e[out + s] = cut || r <= 2 * error ? (error > 0 ? Infinity : 0) : error / (r - error) + 2 * ULP * Math.abs(z);
    }
  },
  partial(g, node, k) {
    const [y, x] = node.args as [Expr, Expr];
    const d = inverse(g, g.add(g.square(x), g.square(y)));
    return k === 0 ? g.multiply(x, d) : g.negate(g.multiply(y, d));
  },
};

export const functions: Partial<Record<FunctionName, Operator>> = {
  sin: unary(Math.sin, (x, _y, ex) => Math.min(1, Math.abs(Math.cos(x)) + ex), (g, x) => g.apply('cos', [x])),
  cos: unary(Math.cos, (x, _y, ex) => Math.min(1, Math.abs(Math.sin(x)) + ex), (g, x) => g.negate(g.apply('sin', [x]))),
  tan: unary(Math.tan, (_x, y, ex) => 1 + (Math.abs(y) + ex * (1 + y * y)) ** 2, (g, _x, t) => onePlusSquare(g, t)),
  asin: unary(Math.asin, arcSlope, (g, x) => inverseRoot(g, oneMinusSquare(g, x))),
  acos: unary(Math.acos, arcSlope, (g, x) => g.negate(inverseRoot(g, oneMinusSquare(g, x)))),
  atan: unary(Math.atan, () => 1, (g, x) => inverse(g, onePlusSquare(g, x))),
  atan2,
  sinh: unary(Math.sinh, (x, _y, ex) => Math.cosh(Math.abs(x) + ex), (g, x) => g.apply('cosh', [x])),
  cosh: unary(Math.cosh, (x, _y, ex) => Math.sinh(Math.abs(x) + ex), (g, x) => g.apply('sinh', [x])),
  tanh: unary(Math.tanh, () => 1, (g, _x, t) => oneMinusSquare(g, t)),
  exp: unary(Math.exp, (x, _y, ex) => Math.exp(x + ex), (_g, _x, y) => y),
  log: unary(Math.log, (x, _y, ex) => (x > ex ? 1 / (x - ex) : Infinity), (g, x) => inverse(g, x)),
};
