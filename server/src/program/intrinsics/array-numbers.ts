import type { Expr } from '../../expression/node';
import { truthOf } from '../conditions';
import type { Machine } from '../machine';
import { mergeValues } from '../merging';
import { copyOfArray } from '../array-writes';
import { broadcast, depthOf } from '../broadcast';
import { binary } from '../operators';
import { countOf, dataOf, itemsOf, numeric } from '../numbers';
import type { BinaryOperator } from '../form';
import { isUnread, unread, type Value } from '../values';
import { atLeast, axisIn, flat, given, missing, one, shapeOf, zero } from './array-support';
import { isItems, itemsIn, sumOf } from './lists';
import { multiplyMatrices, solveLinear, transpose } from './matrices';
import type { Call, IntrinsicTable } from './table';

/** Sums, products and solutions of arrays. */

/** A reduction over an axis, or over all numbers. */
function reduction(reduce: (m: Machine, call: Call, items: readonly Value[]) => Value) {
  return (m: Machine, call: Call): Value => {
    const v = given(call, 0) ?? missing(call);
    if (v.kind === 'unread') return v;
    if (!itemsOf(m, v)) return v.kind === 'scalar' ? v : unread('an array that is not known', call.place);
    const axis = axisIn(m, call, v);
    if (axis === 'unknown') return unread('an axis that is not known', call.place);
    if (axis === undefined) return reduce(m, call, flat(m, v));
    const along = (x: Value, at: number): Value => {
      const items = itemsOf(m, x);
      if (!items) return unread('an axis that an array does not have', call.place);
      if (at > 0) return m.list(items.map((r) => along(r, at - 1)), true);
      const inner = itemsOf(m, items[0] ?? missing(call));
      if (!inner) return reduce(m, call, items);
      return m.list(inner.map((_, k) => along(m.list(items.map((r) => itemsOf(m, r)?.[k] ?? missing(call)), true), 0)), true);
    };
    return along(v, axis);
  };
}

function fold(op: '+' | '*', empty: (m: Machine) => Value) {
  return (m: Machine, call: Call, items: readonly Value[]): Value =>
    items.length === 0 ? empty(m) : items.reduce((a, b) => binary(m, call.module, op, a, b, call.place));
}

function extreme(op: 'min' | 'max') {
  return (m: Machine, call: Call, items: readonly Value[]): Value => {
    const exprs: Expr[] = [];
    for (const v of items) {
      const n = numeric(m, v, call.place);
      if (isUnread(n)) return n;
      exprs.push(n);
    }
    return exprs.length > 0 ? m.scalar(m.graph.apply(op, exprs), call.place) : unread(`the ${op} of nothing`, call.place);
  };
}

/** `c ? a : b`, number by number. */
function where(m: Machine, call: Call): Value {
  const [condition, yes, no] = call.args;
  if (!condition || !yes || !no) return unread('the places where a condition holds', call.place);
  if ([condition, yes, no].some((v) => itemsOf(m, v))) {
    return broadcast(m, [condition, yes, no], (args) => where(m, { ...call, args }), call.place);
  }
  const c = truthOf(m, condition, call.place);
  if (isUnread(c)) return c;
  if (c === m.graph.true) return yes;
  if (c === m.graph.false) return no;
  m.condition(c, call.place);
  return mergeValues(m, c, yes, no, call.place);
}

/** Numbers times anything is a product of numbers; vectors and matrices multiply as such. */
function dot(m: Machine, call: Call): Value {
  const [a, b] = call.args;
  if (!a || !b) return missing(call);
  if (!itemsOf(m, a) || !itemsOf(m, b)) return binary(m, call.module, '*', a, b, call.place);
  return multiplyMatrices(m, a, b, call.place);
}

function kron(m: Machine, call: Call): Value {
  const flatOnes = call.args.every((v) => depthOf(m, v) < 2);
  const [a, b] = call.args.map((v) => atLeast(m, v, 2));
  if (!a || !b) return missing(call);
  const rows = itemsOf(m, a)!.map((r) => itemsOf(m, r) ?? []);
  const other = itemsOf(m, b)!.map((r) => itemsOf(m, r) ?? []);
  const made = rows.flatMap((r) => other.map((o) => m.list(r.flatMap((x) => o.map((y) => binary(m, call.module, '*', x, y, call.place))), true)));
  return flatOnes ? made[0]! : m.list(made, true);
}

/** `einsum("ij,j->i", A, b)` with a pattern written out. */
function einsum(m: Machine, call: Call): Value {
  const [pattern, ...operands] = call.args;
  const parts = pattern?.kind === 'string' ? /^([a-zA-Z,]+)(?:->([a-zA-Z]*))?$/.exec(pattern.value.replace(/\s/g, '')) : null;
  if (!parts) return unread('a sum over indices whose pattern is not written out', call.place);
  const inputs = parts[1]!.split(',');
  const letters = [...new Set(inputs.join(''))];
  const counts = new Map(letters.map((l) => [l, inputs.join('').split(l).length - 1]));
  const output = parts[2] ?? letters.filter((l) => counts.get(l) === 1).sort().join('');
  const sizes = new Map<string, number>();
  if (inputs.length !== operands.length) return unread('a sum over indices that do not fit', call.place);
  for (const [k, letters_] of inputs.entries()) {
    const shape = shapeOf(m, operands[k]!);
    if (shape.length !== letters_.length) return unread('a sum over indices that do not fit', call.place);
    for (const [i, l] of [...letters_].entries()) {
      if ((sizes.get(l) ?? shape[i]) !== shape[i]) return unread('a sum over indices that do not fit', call.place);
      sizes.set(l, shape[i]!);
    }
  }
  if ([...sizes.values()].reduce((a, b) => a * b, 1) > 4096) return unread('a sum over too many indices', call.place);
  const inner = letters.filter((l) => !output.includes(l));
  const at = (v: Value, names: string, where_: ReadonlyMap<string, number>): Value =>
    [...names].reduce((x, l) => itemsOf(m, x)?.[where_.get(l)!] ?? missing(call), v);
  const sum = (k: number, where_: Map<string, number>): Value => {
    if (k === inner.length) return operands.map((o, i) => at(o, inputs[i]!, where_)).reduce((a, b) => binary(m, call.module, '*', a, b, call.place));
    const terms = Array.from({ length: sizes.get(inner[k]!)! }, (_, i) => sum(k + 1, new Map(where_).set(inner[k]!, i)));
    return terms.length === 0 ? zero(m) : terms.reduce((a, b) => binary(m, call.module, '+', a, b, call.place));
  };
  const build = (k: number, where_: Map<string, number>): Value =>
    k === output.length
      ? sum(0, where_)
      : m.list(Array.from({ length: sizes.get(output[k]!)! }, (_, i) => build(k + 1, new Map(where_).set(output[k]!, i))), true);
  return build(0, new Map());
}

function scan(op: '+' | '*') {
  return (m: Machine, call: Call): Value => {
    const items = itemsIn(m, call, 0);
    if (!isItems(items)) return items;
    const axis = axisIn(m, call, call.args[0]!);
    // Without an axis the numbers of a matrix are taken in a row.
    if (depthOf(m, call.args[0]!) > 1 && axis !== 0) return unread('a running sum along an axis', call.place);
    const made: Value[] = [];
    for (const v of items) made.push(made.length === 0 ? v : binary(m, call.module, op, made[made.length - 1]!, v, call.place));
    return m.list(made, true);
  };
}

function isSquare(m: Machine, v: Value): boolean {
  const shape = shapeOf(m, v);
  return shape.length === 2 && shape[0] === shape[1];
}

/** Under this name a factorisation holds its matrix; no source can spell it. */
const FACTORED = '(factored)';

/** A factorisation can only be solved with. Of a symmetric matrix it looks at one triangle. */
function factored(m: Machine, call: Call, symmetric: boolean): Value {
  const lower = given(call, 1, 'lower');
  const isLower = lower?.kind === 'condition' && lower.expr === m.graph.true;
  if (lower && lower.kind !== 'condition') return unread('a factorisation of a triangle that is not known', call.place);
  const v = given(call, 0) ?? missing(call);
  const matrix = symmetric ? mirrored(m, call, v, isLower) : v;
  if (matrix.kind === 'unread') return matrix;
  const held = m.object({ kind: 'record', members: new Map([[FACTORED, copyOfArray(m, matrix)]]) });
  return m.list([held, { kind: 'nothing' }]);
}

/** The symmetric matrix of which one triangle is given. */
export function mirrored(m: Machine, call: Call, v: Value, isLower: boolean): Value {
  if (!isSquare(m, v)) return v.kind === 'unread' ? v : unread('a matrix that is not square', call.place);
  const rows = itemsOf(m, v)!.map((r) => itemsOf(m, r)!);
  const at = (i: number, j: number): Value => ((isLower ? i >= j : i <= j) ? rows[i]![j]! : rows[j]![i]!);
  return m.list(rows.map((r, i) => m.list(r.map((_, j) => at(i, j)), true)), true);
}

/** `solve(A, b)`; told that A is symmetric, it looks at one triangle only. */
function solve(m: Machine, call: Call): Value {
  const a = given(call, 0, 'a') ?? missing(call);
  const b = given(call, 1, 'b') ?? missing(call);
  const kind = call.named.get('assume_a');
  const isPositive = call.named.get('sym_pos');
  const symmetric = (kind && !(kind.kind === 'string' && kind.value === 'gen')) || (isPositive?.kind === 'condition' && isPositive.expr === m.graph.true);
  if (kind && !(kind.kind === 'string' && /^(?:gen|sym|her|pos|symmetric|hermitian|positive definite|general)$/.test(kind.value))) {
    return unread('a linear system of a kind that is not known', call.place);
  }
  const lower = call.named.get('lower');
  if (call.args.length > 2 || (lower && lower.kind !== 'condition')) return unread('a linear system with arguments that are not known', call.place);
  const isLower = lower?.kind === 'condition' && lower.expr === m.graph.true;
  const made = solveLinear(m, symmetric && kind?.kind === 'string' && kind.value !== 'general' ? mirrored(m, call, a, isLower) : a, b, call.place);
  // What it may overwrite holds nothing of use any more.
  for (const [name, v] of [['overwrite_a', a], ['overwrite_b', b]] as const) {
    if (call.named.has(name) && v.kind === 'object') m.breakObject(v.id, unread(`an array that \`${name}\` may have changed`, call.place));
  }
  return made;
}

/** An operator by its name: `add(a, b)`. */
function operator(op: BinaryOperator) {
  return (m: Machine, call: Call): Value => {
    const [a, b] = call.args;
    return a && b ? binary(m, call.module, op, a, b, call.place) : missing(call);
  };
}

export const ARRAY_NUMBERS: IntrinsicTable = {
  'array-solve': solve,
  'array-sum': reduction(fold('+', zero)),
  'array-product': reduction(fold('*', one)),
  'array-min': reduction(extreme('min')),
  'array-max': reduction(extreme('max')),
  'array-mean': reduction((m, call, items) =>
    items.length === 0 ? missing(call) : binary(m, call.module, '/', sumOf(m, call, items), m.scalar(m.graph.number(items.length)), call.place),
  ),
  'array-running-sum': scan('+'),
  'array-running-product': scan('*'),
  'array-differences': (m, call) => {
    const items = itemsIn(m, call, 0);
    if (!isItems(items) || call.args.length > 1 || call.named.size > 0 || depthOf(m, call.args[0]!) > 1) return isItems(items) ? unread('differences of higher order', call.place) : items;
    return m.list(items.slice(1).map((v, k) => binary(m, call.module, '-', v, items[k]!, call.place)), true);
  },
  'array-where': where,
  'array-dot': dot,
  'array-inner': (m, call) => {
    const [a, b] = call.args;
    if (!a || !b) return missing(call);
    return dot(m, { ...call, args: [a, depthOf(m, b) > 1 ? transpose(m, b, call.place) : b] });
  },
  'array-vdot': (m, call) => {
    const [a, b] = call.args;
    if (!a || !b) return missing(call);
    return dot(m, { ...call, args: [a, b].map((v) => m.list(flat(m, v), true)) });
  },
  'array-kron': kron,
  'array-einsum': einsum,
  'array-trace': (m, call) => {
    const rows = itemsIn(m, call, 0);
    if (!isItems(rows)) return rows;
    if (call.args.length > 1) return unread('the trace of another diagonal', call.place);
    return sumOf(m, call, rows.map((r, k) => itemsOf(m, r)?.[k] ?? unread('the trace of something that is no matrix', call.place)));
  },
  'array-norm': (m, call) => {
    const v = given(call, 0) ?? missing(call);
    if (v.kind === 'unread') return v;
    if (call.args.length > 1 || call.named.size > 0) return unread('a norm of another kind', call.place);
    const squares: Expr[] = [];
    for (const x of flat(m, v)) {
      const n = numeric(m, x, call.place);
      if (isUnread(n)) return n;
      squares.push(m.graph.square(n));
    }
    return m.scalar(m.graph.sqrt(m.graph.sum(squares)), call.place);
  },
  'least-squares': (m, call) => {
    const [a, b] = call.args;
    if (!a || !b) return missing(call);
    if (!isSquare(m, a)) return unread('least squares of a system that is not square', call.place);
    const lost = unread('what least squares gives beside the solution', call.place);
    return m.list([solveLinear(m, a, b, call.place), lost, lost, lost]);
  },
  'matrix-factor': (m, call) => factored(m, call, false),
  'matrix-factor-symmetric': (m, call) => factored(m, call, true),
  'factor-solve': (m, call) => {
    const factor = call.args[0] && itemsOf(m, call.args[0]);
    const held = factor?.[0] && dataOf(m, factor[0]);
    const a = held?.kind === 'record' ? held.members.get(FACTORED) : undefined;
    if (!a || !call.args[1] || call.args.length > 2) return unread('a factorisation that is not known', call.place);
    return solveLinear(m, a, call.args[1], call.place);
  },
  'matrix-power': (m, call) => {
    const [a, n] = call.args;
    const k = n && countOf(m, n, call.place);
    if (!a || k === undefined || k < 1 || k > 12) return unread('a power of a matrix that is not written out', call.place);
    return Array.from({ length: k - 1 }).reduce<Value>((x) => multiplyMatrices(m, x, a, call.place), a);
  },
  plus: operator('+'),
  minus: operator('-'),
  times: operator('*'),
  divided: operator('/'),
  'matrix-chain': (m, call) => {
    const parts = itemsIn(m, call, 0);
    if (!isItems(parts)) return parts;
    return parts.length > 0 ? parts.reduce((a, b) => multiplyMatrices(m, a, b, call.place)) : missing(call);
  },
  distance: (m, call) => {
    const [a, b] = call.args;
    if (!a || !b) return missing(call);
    const pairs = [flat(m, a), flat(m, b)] as const;
    if (pairs[0].length !== pairs[1].length) return unread('points of different dimension', call.place);
    const squares: Expr[] = [];
    for (const [k, x] of pairs[0].entries()) {
      const d = numeric(m, binary(m, call.module, '-', x, pairs[1][k]!, call.place), call.place);
      if (isUnread(d)) return d;
      squares.push(m.graph.square(d));
    }
    return m.scalar(m.graph.sqrt(m.graph.sum(squares)), call.place);
  },
};
