import type { Graph } from '../expression/graph';
import type { Expr, FunctionName } from '../expression/node';
import { ROTATION_FUNCTIONS, rotationFunction } from './rotation';
import {
  components, cross, determinant, dot, isMisfit, matrix, rowsOf, scalar, shapeText, type Misfit, type Quantity,
} from './value';

const FUNCTIONS: ReadonlyMap<string, FunctionName> = new Map(
  (['sin', 'cos', 'tan', 'asin', 'acos', 'atan', 'sinh', 'cosh', 'tanh', 'exp', 'log', 'abs', 'sign'] as const).map((n) => [n, n]),
);
const OTHER_FUNCTIONS = new Set<string>([
  ...ROTATION_FUNCTIONS,
  'sqrt', 'atan2', 'min', 'max', 'dot', 'cross', 'norm', 'transpose', 'det', 'diag', 'sum']);

/** The functions of the declaration language, in the order in which messages list them. */
export const FUNCTION_NAMES: readonly string[] = [...FUNCTIONS.keys(), ...OTHER_FUNCTIONS];

export function isFunctionName(name: string): boolean {
  return FUNCTIONS.has(name) || OTHER_FUNCTIONS.has(name);
}

/** A function of the declaration language, applied to values; a misfit where the number or shape of the arguments is wrong. */
export function applyFunction(g: Graph, name: string, args: readonly Quantity[]): Quantity | Misfit {
  const [a, b] = args;
  if ((ROTATION_FUNCTIONS as readonly string[]).includes(name)) {
    return args.length > 0 ? rotationFunction(g, name, args) : { misfit: `\`${name}\` takes an argument` };
  }
  if (name === 'diag') return diagonal(g, args);
  const arity = ['atan2', 'dot', 'cross'].includes(name) ? 2 : name === 'min' || name === 'max' ? undefined : 1;
  if (!a || (arity !== undefined && args.length !== arity)) {
    return { misfit: `\`${name}\` takes ${arity === 2 ? 'two arguments' : 'one argument'}, not ${args.length}` };
  }
  const value = scalarFunction(g, name, args) ?? vectorFunction(g, name, a, b);
  if (isMisfit(value)) return value;
  return 'op' in value ? scalar(value) : value;
}

/** `diag(a, b, c)`, or of a vector: a matrix with nothing beside its diagonal. */
function diagonal(g: Graph, args: readonly Quantity[]): Quantity | Misfit {
  const only = args.length === 1 ? components(args[0]!) : undefined;
  const entries: Expr[] = only ? [...only] : [];
  if (!only) {
    for (const q of args) {
      if (q.kind !== 'scalar') return { misfit: `\`diag\` takes numbers or one vector, not ${shapeText(q)}` };
      entries.push(q.expr);
    }
  }
  if (entries.length === 0) return { misfit: '`diag` takes the entries of the diagonal' };
  return matrix(entries.map((e, i) => entries.map((_, j) => (i === j ? e : g.zero))));
}

/** Undefined where `name` is a function of vectors or matrices. */
function scalarFunction(g: Graph, name: string, args: readonly Quantity[]): Misfit | Expr | undefined {
  const fn = FUNCTIONS.get(name);
  if (!fn && !['sqrt', 'atan2', 'min', 'max'].includes(name)) return undefined;
  const numbers: Expr[] = [];
  for (const q of args) {
    if (q.kind !== 'scalar') return { misfit: `\`${name}\` takes ${args.length === 1 ? 'a number' : 'numbers'}, not ${shapeText(q)}` };
    numbers.push(q.expr);
  }
  return name === 'sqrt' ? g.sqrt(numbers[0]!) : g.apply(fn ?? (name as 'atan2' | 'min' | 'max'), numbers);
}

function vectorFunction(g: Graph, name: string, a: Quantity, b: Quantity | undefined): Quantity | Misfit | Expr {
  const va = components(a);
  const vb = b && components(b);
  switch (name) {
    case 'dot':
      return va && vb ? dot(g, va, vb) : { misfit: '`dot` takes two vectors' };
    case 'cross':
      return va && vb ? cross(g, va, vb) : { misfit: '`cross` takes two vectors' };
    case 'norm':
      return va ? g.sqrt(g.sum(va.map((x) => g.square(x)))) : { misfit: '`norm` takes a vector' };
    case 'sum':
      return va ? g.sum(va) : { misfit: '`sum` takes a vector, or `sum(f over i in 1..n)`' };
    case 'transpose': {
      const rows = rowsOf(a);
      return rows ? matrix(rows[0]!.map((_, j) => rows.map((r) => r[j]!))) : { misfit: '`transpose` takes a matrix' };
    }
    default: {
      const rows = rowsOf(a);
      return rows ? determinant(g, rows) : { misfit: '`det` takes a matrix' };
    }
  }
}
