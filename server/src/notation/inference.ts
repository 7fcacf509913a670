import { Rational } from '../expression/rational';
import type { Span } from '../text/span';
import { printFormula } from './print';
import { clip } from './tokens';
import type { Formula } from './tree';
import { type Dimension, DIMENSIONS } from './units';

/**
 * What is known of a formula's dimension. `any` is a literal zero; `vector` has one entry per component; `unknown` is whatever
 * depends on a symbol without a unit, and is never reported.
 */
export type Dim =
  | { readonly kind: 'unknown' }
  | { readonly kind: 'any' }
  | { readonly kind: 'is'; readonly dimension: Dimension }
  | { readonly kind: 'vector'; readonly items: readonly Dim[] };

export const UNKNOWN: Dim = { kind: 'unknown' };
export const ANY: Dim = { kind: 'any' };
export const PLAIN: Dim = { kind: 'is', dimension: DIMENSIONS.none };

export function known(dimension: Dimension): Dim {
  return { kind: 'is', dimension };
}

/** Vectors of more entries or levels than a model has are given up: a shorthand in terms of itself would grow without end. */
const MOST_ENTRIES = 1000;
const MOST_LEVELS = 4;

function vector(items: readonly Dim[]): Dim {
  const level = (d: Dim): number => (d.kind === 'vector' ? 1 + Math.max(0, ...d.items.map(level)) : 0);
  const entries = (d: Dim): number => (d.kind === 'vector' ? d.items.reduce((n, item) => n + entries(item), 0) : 1);
  const result: Dim = { kind: 'vector', items };
  return items.length > MOST_ENTRIES || level(result) > MOST_LEVELS || entries(result) > MOST_ENTRIES ? UNKNOWN : result;
}

export interface Environment {
  /** False where no declared unit has time in it: time may then be scaled, and nothing is known of derivatives. */
  readonly timed: boolean;
  lookup(name: string): Dim | undefined;
  report(message: string, span: Span): void;
}

/** Functions of plain numbers (angles among them), with plain results. */
const OF_NUMBERS = new Set('sin cos tan asin acos atan sinh cosh tanh exp log'.split(' '));
const SAME = new Set(['abs', 'floor', 'transpose', 'norm']);

/** The dimension of a formula; inconsistencies inside it are reported once each, and make the result unknown. */
export function dimensionOf(f: Formula, env: Environment, expected?: Dimension): Dim {
  switch (f.kind) {
    case 'number':
      return f.value.isZero ? ANY : isCount(f.value) ? PLAIN : UNKNOWN;
    case 'name':
      return f.name === 'pi' || f.name === 'π' ? (env.lookup(f.name) ?? PLAIN) : (env.lookup(f.name) ?? UNKNOWN);
    case 'prime':
      return !env.timed ? blank(dimensionOf(f.operand, env)) : map(dimensionOf(f.operand, env), (d) => d.divide(DIMENSIONS.time.power(Rational.of(f.order))));
    case 'unary':
      return dimensionOf(f.operand, env, expected);
    case 'binary':
      return binaryDimension(f, env, expected);
    case 'call':
      return callDimension(f, env);
    case 'index':
      return indexDimension(f, env);
    case 'tuple':
    case 'list':
      return vector(f.items.map((item) => dimensionOf(item, env)));
    case 'sum':
      return dimensionOf(f.body, env, expected);
    case 'quantity':
      for (const arg of f.args) dimensionOf(arg, env);
      return UNKNOWN;
    default:
      return UNKNOWN;
  }
}

/**
 * Whole numbers and binary fractions count something. Any other decimal may be a measured value whose unit was left out
 * (`9.81`), and says nothing.
 */
function isCount(value: Rational): boolean {
  return value.isInteger || [2n, 4n, 8n, 16n].includes(value.denominator);
}

function binaryDimension(f: Formula & { kind: 'binary' }, env: Environment, expected?: Dimension): Dim {
  switch (f.op) {
    case '+':
    case '-':
      return sumDimension(f, env, expected);
    case '*':
      return multiply(dimensionOf(f.left, env), dimensionOf(f.right, env), (a, b) => a.multiply(b));
    case '/': {
      const left = dimensionOf(f.left, env);
      const right = dimensionOf(f.right, env);
      return right.kind === 'vector' ? UNKNOWN : multiply(left, right, (a, b) => a.divide(b));
    }
    case '^':
      return powerDimension(f, env);
    case 'and':
    case 'or':
      dimensionOf(f.left, env);
      dimensionOf(f.right, env);
      return UNKNOWN;
    default:
      agree([f.left, f.right], env, 'compared with');
      return UNKNOWN;
  }
}

function sumDimension(f: Formula, env: Environment, expected?: Dimension): Dim {
  const terms: Formula[] = [];
  let rest = f;
  while (rest.kind === 'binary' && (rest.op === '+' || rest.op === '-')) {
    terms.push(rest.right);
    rest = rest.left;
  }
  terms.push(rest);
  return agree(terms.reverse(), env, 'added to', expected);
}

/** Checks that formulas have one dimension, and returns it. The majority is right; in a draw what is expected, or the first. */
export function agree(formulas: readonly Formula[], env: Environment, how: 'added to' | 'compared with', expected?: Dimension): Dim {
  const dims = formulas.map((f) => dimensionOf(f, env, expected));
  const width = Math.max(...dims.map((d) => (d.kind === 'vector' ? d.items.length : 0)));
  if (width === 0) return agreeOn(formulas, dims, env, how, expected);
  if (dims.some((d) => d.kind === 'vector' && d.items.length !== width)) return UNKNOWN;
  const items = Array.from({ length: width }, (_, k) =>
    agreeOn(formulas, dims.map((d) => (d.kind === 'vector' ? d.items[k]! : d.kind === 'any' ? ANY : UNKNOWN)), env, how, undefined, k + 1),
  );
  return { kind: 'vector', items };
}

function agreeOn(
  formulas: readonly Formula[],
  dims: readonly Dim[],
  env: Environment,
  how: string,
  expected: Dimension | undefined,
  component?: number,
): Dim {
  const voters = dims.flatMap((d, i) => (d.kind === 'is' ? [{ formula: formulas[i]!, dimension: d.dimension }] : []));
  if (voters.length === 0) return dims.every((d) => d.kind === 'any') ? ANY : UNKNOWN;
  const votes = (d: Dimension): number => voters.filter((v) => v.dimension.equals(d)).length * 2 + (expected?.equals(d) ? 1 : 0);
  let best = voters[0]!;
  for (const v of voters.slice(0, 64)) if (votes(v.dimension) > votes(best.dimension)) best = v;
  const wrong = voters.filter((v) => !v.dimension.equals(best.dimension));
  for (const v of wrong.slice(0, 5)) {
    const part = component === undefined ? '' : `component ${component} of `;
    const text = `${part}\`${quote(v.formula)}\` is ${v.dimension.describe()}, but ${part}\`${quote(best.formula)}\`, which it is ${how}, ${best.dimension.describe()}`;
    env.report(how === 'added to' ? `the term ${text}` : text, v.formula.span);
  }
  // In a draw nobody knows which side is wrong, and more reports would only follow from this one.
  const drawn = wrong.some((v) => votes(v.dimension) === votes(best.dimension));
  return drawn ? UNKNOWN : known(best.dimension);
}

function powerDimension(f: Formula & { kind: 'binary' }, env: Environment): Dim {
  const base = uniform(dimensionOf(f.left, env));
  const exponent = dimensionOf(f.right, env);
  if (exponent.kind === 'is' && !exponent.dimension.isNone) {
    env.report(`the exponent \`${quote(f.right)}\` is ${exponent.dimension.describe()}: an exponent has no unit`, f.right.span);
    return UNKNOWN;
  }
  const value = literal(f.right);
  if (base.kind !== 'is') return base.kind === 'any' ? ANY : UNKNOWN;
  if (base.dimension.isNone) return exponent.kind === 'unknown' && !value ? UNKNOWN : PLAIN;
  return value && value.denominator <= 12n ? known(base.dimension.power(value)) : UNKNOWN;
}

/** The value of a constant exponent: `2`, `-1`, `1/2`, `(3/2)`. */
export function literal(f: Formula): Rational | undefined {
  if (f.kind === 'number') return f.value;
  if (f.kind === 'unary' && f.op !== 'not') {
    const inner = literal(f.operand);
    return f.op === '-' ? inner?.negate() : inner;
  }
  if (f.kind === 'binary' && f.op === '/') {
    const left = literal(f.left);
    const right = literal(f.right);
    return left && right && !right.isZero ? left.divide(right) : undefined;
  }
  return undefined;
}

function callDimension(f: Formula & { kind: 'call' }, env: Environment): Dim {
  const name = f.callee.kind === 'name' ? f.callee.name : '';
  if (name === 'min' || name === 'max') return f.args.length ? agree(f.args, env, 'compared with') : UNKNOWN;
  if (name === 'atan2' && f.args.length === 2) {
    agree(f.args, env, 'compared with');
    return PLAIN;
  }
  const args = f.args.map((a) => dimensionOf(a, env));
  const [first = UNKNOWN, second = UNKNOWN] = args;
  if (OF_NUMBERS.has(name)) {
    const entry = first.kind === 'vector' ? UNKNOWN : first;
    if (entry.kind === 'is' && !entry.dimension.isNone) {
      env.report(`the argument of ${name}, \`${quote(f.args[0]!)}\`, is ${entry.dimension.describe()}: it must have no unit`, f.args[0]!.span);
    }
    return PLAIN;
  }
  if (name === 'sign') return PLAIN;
  if (name === 'sqrt') return map(first, (d) => d.power(Rational.HALF));
  if (name === 'norm') return uniform(first);
  if (SAME.has(name)) return first;
  if (name === 'dot') return multiply(uniform(first), uniform(second), (a, b) => a.multiply(b));
  if (name === 'cross') {
    const product = multiply(uniform(first), uniform(second), (a, b) => a.multiply(b));
    const three = first.kind === 'vector' && first.items.length === 3;
    return three ? vector([product, product, product]) : product;
  }
  return UNKNOWN;
}

function indexDimension(f: Formula & { kind: 'index' }, env: Environment): Dim {
  const object = dimensionOf(f.object, env);
  if (object.kind !== 'vector') return f.object.kind === 'name' ? object : UNKNOWN;
  const value = f.indices.length === 1 ? literal(f.indices[0]!) : undefined;
  const all = uniform(object);
  if (all.kind !== 'unknown') return all;
  // The base of an index is not known here: components of different dimensions stay undecided.
  return value && value.isZero ? (object.items[0] ?? UNKNOWN) : UNKNOWN;
}

/** One dimension for all components, if they share one. */
export function uniform(d: Dim): Dim {
  if (d.kind !== 'vector') return d;
  let shared: Dim = ANY;
  for (const item of d.items) {
    const one = uniform(item);
    if (one.kind === 'unknown' || one.kind === 'vector') return UNKNOWN;
    if (one.kind === 'any') continue;
    if (shared.kind === 'is' && !shared.dimension.equals(one.dimension)) return UNKNOWN;
    shared = one;
  }
  return shared;
}

function blank(d: Dim): Dim {
  return d.kind === 'vector' ? { kind: 'vector', items: d.items.map(blank) } : d.kind === 'is' ? UNKNOWN : d;
}

function map(d: Dim, change: (dimension: Dimension) => Dimension): Dim {
  if (d.kind === 'is') return known(change(d.dimension));
  if (d.kind === 'vector') return { kind: 'vector', items: d.items.map((item) => map(item, change)) };
  return d;
}

function multiply(a: Dim, b: Dim, by: (a: Dimension, b: Dimension) => Dimension): Dim {
  if (a.kind === 'vector' && b.kind === 'vector') return multiply(uniform(a), uniform(b), by);
  if (a.kind === 'vector') return vector(a.items.map((item) => multiply(item, b, by)));
  if (b.kind === 'vector') return vector(b.items.map((item) => multiply(a, item, by)));
  if (a.kind === 'any' || b.kind === 'any') return ANY;
  if (a.kind === 'unknown' || b.kind === 'unknown') return UNKNOWN;
  return known(by(a.dimension, b.dimension));
}

export function quote(f: Formula): string {
  return clip(printFormula(f), 60);
}
