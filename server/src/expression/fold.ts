import type { Expr, FunctionName } from './node';
import type { Graph } from './graph';
import type { Rational } from './rational';

/** The exact value of a function of exact constants, where it has one of the plain kind (sin 0, exp 0, |-3|, min(2, 5)). */
export function foldFunction(graph: Graph, name: FunctionName, args: readonly Expr[]): Expr | undefined {
  const a = args[0]!;
  if ((name === 'min' || name === 'max') && args.length === 1) return a;
  if (!args.every((x) => x.op === 'number')) return undefined;
  const r = a.data as Rational;
  switch (name) {
    case 'sin':
    case 'tan':
    case 'asin':
    case 'atan':
    case 'sinh':
    case 'tanh':
      return r.isZero ? graph.zero : undefined;
    case 'cos':
    case 'cosh':
    case 'exp':
      return r.isZero ? graph.one : undefined;
    case 'acos':
    case 'log':
      return r.isOne ? graph.zero : undefined;
    case 'atan2':
      return r.isZero && (args[1]!.data as Rational).sign > 0 ? graph.zero : undefined;
    case 'abs':
      return r.sign < 0 ? graph.number(r.negate()) : a;
    case 'sign':
      return graph.number(r.sign);
    case 'floor': {
      const q = r.numerator / r.denominator;
      return graph.number(r.sign < 0 && !r.isInteger ? q - 1n : q);
    }
    case 'min':
    case 'max':
      return args.reduce((best, x) => {
        const c = (x.data as Rational).compare(best.data as Rational);
        return (name === 'min' ? c < 0 : c > 0) ? x : best;
      });
  }
}
