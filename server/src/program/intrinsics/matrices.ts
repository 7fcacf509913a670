import type { Expr } from '../../expression/node';
import type { Place } from '../../text/span';
import type { Machine } from '../machine';
import { heldArray, matrixObject } from '../matrix-objects';
import { countOf, itemsOf, numeric } from '../numbers';
import { isUnread, unread, type Unread, type Value } from '../values';
import { kindIn, leavesOf, ofKind, viewOf } from './array-views';
import type { Call, IntrinsicTable } from './table';

/** Vectors are lists, matrices lists of rows. */

const LARGEST = 60;

/** A vector's entries, or the reason why they are not known. */
function vector(m: Machine, v: Value, place: Place): Expr[] | Unread {
  if (v.kind === 'unread') return v;
  const items = itemsOf(m, v);
  if (!items) return unread('a vector that is not known', place);
  const exprs: Expr[] = [];
  for (const item of items) {
    const inner = itemsOf(m, item);
    const n = numeric(m, inner?.length === 1 ? inner[0]! : item, place);
    if (isUnread(n)) return n;
    exprs.push(n);
  }
  return exprs;
}

function matrix(m: Machine, v: Value, place: Place): Expr[][] | Unread {
  if (v.kind === 'unread') return v;
  const items = itemsOf(m, v);
  if (!items) return unread('a matrix that is not known', place);
  const rows: Expr[][] = [];
  for (const item of items) {
    const row = vector(m, item, place);
    if (isUnreadList(row)) return row;
    if (rows.length > 0 && row.length !== rows[0]!.length) return unread('a matrix whose rows differ in length', place);
    rows.push(row);
  }
  return rows;
}

function isUnreadList<T>(x: T[] | Unread): x is Unread {
  return !Array.isArray(x);
}

function isMatrix(m: Machine, v: Value): boolean {
  const items = itemsOf(m, v);
  return items !== undefined && items.length > 0 && itemsOf(m, items[0]!) !== undefined;
}

function listOf(m: Machine, exprs: readonly Expr[], place: Place): Value {
  return m.list(exprs.map((e) => m.scalar(e, place)), true);
}

function rowsOf(m: Machine, rows: readonly (readonly Expr[])[], place: Place): Value {
  return m.list(rows.map((r) => listOf(m, r, place)), true);
}

function inner(m: Machine, a: readonly Expr[], b: readonly Expr[]): Expr {
  return m.graph.sum(a.map((x, k) => m.graph.product([x, b[k]!])));
}

export function multiplyMatrices(m: Machine, a: Value, b: Value, place: Place): Value {
  const aIsMatrix = isMatrix(m, a);
  const bIsMatrix = isMatrix(m, b);
  const wrong = unread('a product of matrices whose sizes do not fit', place);
  if (!itemsOf(m, a) || !itemsOf(m, b)) {
    const open = [a, b].find((v) => v.kind === 'unread');
    return open ?? unread('a product of matrices that are not known', place);
  }
  const left = aIsMatrix ? matrix(m, a, place) : vector(m, a, place);
  if (isUnreadList<Expr[] | Expr>(left)) return left;
  const right = bIsMatrix ? matrix(m, b, place) : vector(m, b, place);
  if (isUnreadList<Expr[] | Expr>(right)) return right;
  if (!aIsMatrix && !bIsMatrix) {
    return left.length === right.length ? m.scalar(inner(m, left as Expr[], right as Expr[]), place) : wrong;
  }
  const columns = (rows: Expr[][]): Expr[][] => (rows[0] ?? []).map((_, k) => rows.map((r) => r[k]!));
  if (aIsMatrix && !bIsMatrix) {
    const rows = left as Expr[][];
    if (rows[0]!.length !== right.length) return wrong;
    return listOf(m, rows.map((r) => inner(m, r, right as Expr[])), place);
  }
  const cols = columns(right as Expr[][]);
  if (!aIsMatrix) {
    // A plain list before a single row is a column.
    if ((right as Expr[][]).length === 1 && left.length !== 1 && !m.request.program.listConcat) {
      return rowsOf(m, (left as Expr[]).map((x) => (right as Expr[][])[0]!.map((y) => m.graph.product([x, y]))), place);
    }
    if (left.length !== right.length) return wrong;
    return listOf(m, cols.map((c) => inner(m, left as Expr[], c)), place);
  }
  const rows = left as Expr[][];
  if (rows[0]!.length !== right.length) return wrong;
  return rowsOf(m, rows.map((r) => cols.map((c) => inner(m, r, c))), place);
}

export function transpose(m: Machine, v: Value, place: Place): Value {
  if (v.kind === 'unread') return v;
  const items = itemsOf(m, v);
  if (!items) {
    const n = numeric(m, v, place);
    return isUnread(n) ? n : m.scalar(n, place);
  }
  if (!isMatrix(m, v)) {
    // With columns as lists of rows of one, a plain list turned is a column; without, it is itself.
    return m.columnsMatter ? m.list(items.map((x) => m.list([x], true)), true) : v;
  }
  const rows = items.map((r) => itemsOf(m, r) ?? [r]);
  const n = rows[0]!.length;
  if (rows.some((r) => r.length !== n)) return unread('a matrix whose rows differ in length', place);
  if (n === 1 && m.columnsMatter) return m.list(rows.map((r) => r[0]!), true);
  const columns = Array.from({ length: n }, (_, k) => rows.map((r) => r[k]!));
  if (!m.request.program.listConcat) return m.list(columns.map((c) => m.list(c, true)), true);
  // The same numbers, seen by columns.
  const leaves = leavesOf(m, v);
  return m.list(columns.map((c, k) => (leaves.length === n * rows.length ? viewOf(m, v, rows.map((_, i) => leaves[i * n + k]!)) : m.list(c, true))), true);
}

/** x of A x = b, as one node with several outputs; b may be a matrix of right-hand sides. */
export function solveLinear(m: Machine, a: Value, b: Value, place: Place): Value {
  if (!itemsOf(m, a) && a.kind !== 'unread' && !itemsOf(m, b)) {
    const x = numeric(m, a, place);
    if (isUnread(x)) return x;
    const y = numeric(m, b, place);
    return isUnread(y) ? y : m.scalar(m.graph.divide(y, x), place);
  }
  const rows = matrix(m, a, place);
  if (isUnreadList(rows)) return rows;
  const n = rows.length;
  if (n === 0 || rows[0]!.length !== n || n > LARGEST) return unread(`a linear system of ${n} rows and ${rows[0]?.length ?? 0} columns`, place);
  const solve = (right: readonly Expr[]): Expr[] => m.graph.solve(rows.flat(), right);
  const items = itemsOf(m, b);
  if (items?.length !== n) return b.kind === 'unread' ? b : unread('a linear system whose right side has another length', place);
  if (isMatrix(m, b) && (itemsOf(m, items[0]!)?.length ?? 0) > 1) {
    const right = matrix(m, b, place);
    if (isUnreadList(right)) return right;
    const columns = right[0]!.map((_, k) => solve(right.map((r) => r[k]!)));
    return rowsOf(m, right.map((_, i) => columns.map((c) => c[i]!)), place);
  }
  const right = vector(m, b, place);
  if (isUnreadList(right)) return right;
  const x = solve(right);
  if (isMatrix(m, b)) return rowsOf(m, x.map((e) => [e]), place);
  return listOf(m, x, place);
}

export function inverse(m: Machine, call: Call): Value {
  const held = call.args[0] && heldArray(m, call.args[0]);
  if (held) return matrixObject(m, inverse(m, { ...call, args: [held] }), call.place);
  const rows = matrix(m, call.args[0] ?? unread('a matrix that is not given', call.place), call.place);
  if (isUnreadList(rows)) return rows;
  const n = rows.length;
  if (n === 0 || rows[0]!.length !== n || n > LARGEST) return unread('the inverse of a matrix that is not square', call.place);
  const columns = rows.map((_, k) => m.graph.solve(rows.flat(), rows.map((_r, i) => (i === k ? m.graph.one : m.graph.zero))));
  return rowsOf(m, rows.map((_, i) => columns.map((c) => c[i]!)), call.place);
}

/** By minors along the first row. */
function determinant(m: Machine, rows: readonly (readonly Expr[])[]): Expr {
  const g = m.graph;
  if (rows.length === 1) return rows[0]![0]!;
  return g.sum(
    rows[0]!.map((x, k) => {
      const minor = determinant(m, rows.slice(1).map((r) => r.filter((_, j) => j !== k)));
      return g.product([k % 2 === 0 ? g.one : g.minusOne, x, minor]);
    }),
  );
}

function two(m: Machine, call: Call): [Expr[], Expr[]] | Unread {
  const a = vector(m, call.args[0] ?? unread('a vector that is not given', call.place), call.place);
  if (isUnreadList(a)) return a;
  const b = vector(m, call.args[1] ?? unread('a vector that is not given', call.place), call.place);
  if (isUnreadList(b)) return b;
  return [a, b];
}

export const MATRICES: IntrinsicTable = {
  'matrix-multiply': (m, call) => call.args.slice(1).reduce<Value>((a, b) => multiplyMatrices(m, a, b, call.place), call.args[0] ?? unread('a matrix that is not given', call.place)),
  'matrix-transpose': (m, call) => transpose(m, call.args[0] ?? unread('a matrix that is not given', call.place), call.place),
  'matrix-solve': (m, call) => solveLinear(m, call.args[0] ?? unread('a matrix that is not given', call.place), call.args[1] ?? unread('a vector that is not given', call.place), call.place),
  'matrix-inverse': inverse,
  'matrix-determinant': (m, call) => {
    const rows = matrix(m, call.args[0] ?? unread('a matrix that is not given', call.place), call.place);
    if (isUnreadList(rows)) return rows;
    if (rows.length === 0 || rows.length > 6 || rows[0]!.length !== rows.length) return unread('the determinant of a matrix of this size', call.place);
    return m.scalar(determinant(m, rows), call.place);
  },
  'matrix-identity': (m, call) => {
    const n = numericCount(m, call.args[0], call);
    const columns = call.args[1] && call.args[1].kind !== 'nothing' ? numericCount(m, call.args[1], call) : n;
    const k = offset(m, call, 2);
    if (n === undefined || columns === undefined || k === undefined) return unread('an identity matrix whose size is not known', call.place);
    const rows = Array.from({ length: n }, (_, i) => Array.from({ length: columns }, (_x, j) => (i + k === j ? m.graph.one : m.graph.zero)));
    return ofKind(m, call, rowsOf(m, rows, call.place), kindIn(call));
  },
  'matrix-diagonal': (m, call) => {
    const [first] = call.args;
    const shift = offset(m, call, 1);
    if (shift !== 0) return shift === undefined ? unread('a diagonal that is not known', call.place) : shiftedDiagonal(m, call, first, shift);
    if (first && isMatrix(m, first)) {
      const rows = matrix(m, first, call.place);
      return isUnreadList(rows) ? rows : listOf(m, rows.map((r, k) => r[k]!).filter((e) => e !== undefined), call.place);
    }
    const entries = vector(m, first ?? unread('a vector that is not given', call.place), call.place);
    if (isUnreadList(entries)) return entries;
    return rowsOf(m, entries.map((e, i) => entries.map((_, j) => (i === j ? e : m.graph.zero))), call.place);
  },
  'vector-dot': (m, call) => {
    if (call.args.some((a) => isMatrix(m, a))) return multiplyMatrices(m, call.args[0]!, call.args[1] ?? unread('a vector that is not given', call.place), call.place);
    const pair = two(m, call);
    if (isUnreadPair(pair)) return pair;
    if (pair[0].length !== pair[1].length) return unread('vectors of different length', call.place);
    return m.scalar(inner(m, pair[0], pair[1]), call.place);
  },
  'vector-cross': (m, call) => {
    const pair = two(m, call);
    if (isUnreadPair(pair)) return pair;
    const [a, b] = pair;
    const g = m.graph;
    const minor = (i: number, j: number): Expr => g.subtract(g.product([a[i]!, b[j]!]), g.product([a[j]!, b[i]!]));
    if (a.length === 2 && b.length === 2) return m.scalar(minor(0, 1), call.place);
    if (a.length !== 3 || b.length !== 3) return unread('a cross product of vectors that are not of three', call.place);
    return listOf(m, [minor(1, 2), g.negate(minor(0, 2)), minor(0, 1)], call.place);
  },
  'vector-norm': (m, call) => {
    const a = vector(m, call.args[0] ?? unread('a vector that is not given', call.place), call.place);
    return isUnreadList(a) ? a : m.scalar(m.graph.sqrt(m.graph.sum(a.map((x) => m.graph.square(x)))), call.place);
  },
  'vector-norm-squared': (m, call) => {
    const a = vector(m, call.args[0] ?? unread('a vector that is not given', call.place), call.place);
    return isUnreadList(a) ? a : m.scalar(m.graph.sum(a.map((x) => m.graph.square(x))), call.place);
  },
  'vector-normalize': (m, call) => {
    const a = vector(m, call.args[0] ?? unread('a vector that is not given', call.place), call.place);
    if (isUnreadList(a)) return a;
    const length = m.graph.sqrt(m.graph.sum(a.map((x) => m.graph.square(x))));
    return listOf(m, a.map((x) => m.graph.divide(x, length)), call.place);
  },
  'vector-outer': (m, call) => {
    const pair = two(m, call);
    if (isUnreadPair(pair)) return pair;
    return rowsOf(m, pair[0].map((x) => pair[1].map((y) => m.graph.product([x, y]))), call.place);
  },
};

function isUnreadPair(x: [Expr[], Expr[]] | Unread): x is Unread {
  return !Array.isArray(x);
}

/** How far a diagonal lies above the main one: `k=1`. */
function offset(m: Machine, call: Call, at: number): number | undefined {
  const v = call.args[at] ?? call.named.get('k') ?? call.named.get('offset');
  return v ? countOf(m, v, call.place) : 0;
}

/** A diagonal beside the main one, of a matrix or as a matrix. */
function shiftedDiagonal(m: Machine, call: Call, v: Value | undefined, k: number): Value {
  const given = v ?? unread('a vector that is not given', call.place);
  if (isMatrix(m, given)) {
    const rows = matrix(m, given, call.place);
    return isUnreadList(rows) ? rows : listOf(m, rows.map((r, i) => r[i + k]).filter((e) => e !== undefined), call.place);
  }
  const entries = vector(m, given, call.place);
  if (isUnreadList(entries)) return entries;
  const n = entries.length + Math.abs(k);
  const at = (i: number, j: number): Expr => (i + k === j ? entries[k > 0 ? i : j]! : m.graph.zero);
  return rowsOf(m, Array.from({ length: n }, (_, i) => Array.from({ length: n }, (_x, j) => at(i, j))), call.place);
}

function numericCount(m: Machine, v: Value | undefined, call: Call): number | undefined {
  if (!v) return undefined;
  const n = numeric(m, v, call.place);
  if (isUnread(n) || n.op !== 'number') return undefined;
  const k = Number(String(n.data));
  return Number.isInteger(k) && k >= 0 && k <= LARGEST ? k : undefined;
}
