import type { Data, Expr, FunctionName, OpName, SymbolData } from './node';
import { work } from '../text/budget';
import { foldFunction } from './fold';
import { Rational } from './rational';

/** Beyond this many bits exact powers are left unfolded, so that `10**(10**9)` in a source costs nothing. */
const MOST_BITS = 4096;

/**
 * Makes and interns expressions. The constructors do only rewrites that keep the value at every point where the original
 * is defined and that cost no more than the arguments at hand: constants fold, sums and products sort their arguments and
 * collect equal ones. They never flatten, expand or cancel a quotient, so a graph stays linear in what it was built from.
 */
export class Graph {
  readonly nodes: Expr[] = [];
  private table = new Int32Array(1 << 10).fill(-1);
  private readonly rationals = new Map<string, Expr>();
  private readonly symbols = new Map<string, Expr>();

  readonly zero: Expr;
  readonly one: Expr;
  readonly minusOne: Expr;
  readonly pi: Expr;
  readonly nan: Expr;
  readonly true: Expr;
  readonly false: Expr;

  constructor() {
    this.zero = this.number(Rational.ZERO);
    this.one = this.number(Rational.ONE);
    this.minusOne = this.number(Rational.MINUS_ONE);
    this.pi = this.intern('pi', [], null);
    this.nan = this.intern('nan', [], null);
    this.true = this.intern('true', [], null);
    this.false = this.intern('false', [], null);
  }

  number(value: Rational | number | bigint): Expr {
    const r =
      typeof value === 'object' ? value : typeof value === 'bigint' ? Rational.of(value) : Rational.fromDouble(value);
    if (!r) return this.nan;
    const key = r.toString();
    let node = this.rationals.get(key);
    if (!node) {
      node = this.append('number', [], r);
      this.rationals.set(key, node);
    }
    return node;
  }

  /** The symbol of this role, name and order; the first domain given stays. */
  symbol(data: SymbolData): Expr {
    const key = `${data.role} ${data.order} ${data.name}`;
    let node = this.symbols.get(key);
    if (!node) {
      node = this.append('symbol', [], data);
      this.symbols.set(key, node);
    }
    return node;
  }

  add(...terms: readonly Expr[]): Expr {
    return this.sum(terms);
  }

  sum(terms: readonly Expr[]): Expr {
    let constant = Rational.ZERO;
    const parts: { core: Expr; coefficient: Rational }[] = [];
    for (const term of terms) {
      if (term.op === 'nan') return this.nan;
      if (term.op === 'number') constant = constant.add(term.data as Rational);
      else parts.push(this.splitCoefficient(term));
    }
    parts.sort((a, b) => a.core.id - b.core.id);
    const args: Expr[] = [];
    for (let i = 0; i < parts.length; ) {
      const core = parts[i]!.core;
      let coefficient = parts[i]!.coefficient;
      for (i++; i < parts.length && parts[i]!.core === core; i++) coefficient = coefficient.add(parts[i]!.coefficient);
      if (coefficient.isZero) continue;
      args.push(coefficient.isOne ? core : this.product([this.number(coefficient), core]));
    }
    if (!constant.isZero) args.push(this.number(constant));
    if (args.length === 0) return this.zero;
    if (args.length === 1) return args[0]!;
    return this.intern('sum', args.sort(byId), null);
  }

  subtract(a: Expr, b: Expr): Expr {
    return this.sum([a, this.negate(b)]);
  }

  negate(a: Expr): Expr {
    return this.product([this.minusOne, a]);
  }

  multiply(...factors: readonly Expr[]): Expr {
    return this.product(factors);
  }

  product(factors: readonly Expr[]): Expr {
    let coefficient = Rational.ONE;
    const parts: { base: Expr; exponent: number }[] = [];
    const push = (f: Expr): void => {
      const exponent = f.op === 'power' ? smallPositiveInteger(f.args[1]!) : undefined;
      if (exponent !== undefined) parts.push({ base: f.args[0]!, exponent });
      else parts.push({ base: f, exponent: 1 });
    };
    for (const factor of factors) {
      if (factor.op === 'nan') return this.nan;
      if (factor.op === 'number') coefficient = coefficient.multiply(factor.data as Rational);
      else if (factor.op === 'product' && factor.args[0]!.op === 'number') {
        coefficient = coefficient.multiply(factor.args[0]!.data as Rational);
        push(this.withoutCoefficient(factor));
      } else push(factor);
    }
    if (coefficient.isZero) return this.zero;
    parts.sort((a, b) => a.base.id - b.base.id);
    const args: Expr[] = [];
    for (let i = 0; i < parts.length; ) {
      const base = parts[i]!.base;
      let exponent = parts[i]!.exponent;
      for (i++; i < parts.length && parts[i]!.base === base; i++) exponent += parts[i]!.exponent;
      args.push(exponent === 1 ? base : this.power(base, this.number(exponent)));
    }
    // A merged power may itself be a number (as (2)^2 cannot be, but a folded function value can): fold once more.
    if (args.some((a) => a.op === 'number')) return this.product([this.number(coefficient), ...args]);
    if (args.length === 0) return this.number(coefficient);
    if (coefficient.isOne) return args.length === 1 ? args[0]! : this.intern('product', args.sort(byId), null);
    return this.intern('product', [this.number(coefficient), ...args.sort(byId)], null);
  }

  divide(a: Expr, b: Expr): Expr {
    if (b.op === 'number' && (b.data as Rational).isZero) return this.nan;
    return this.product([a, this.power(b, this.minusOne)]);
  }

  power(base: Expr, exponent: Expr): Expr {
    if (base.op === 'nan' || exponent.op === 'nan') return this.nan;
    if (exponent.op === 'number') {
      const e = exponent.data as Rational;
      if (e.isZero) return this.one;
      if (e.isOne) return base;
      if (base.op === 'number') {
        const folded = foldPower(base.data as Rational, e);
        if (folded === 'undefined') return this.nan;
        if (folded) return this.number(folded);
      }
      if (e.isInteger && base.op === 'power' && base.args[1]!.op === 'number') {
        const inner = base.args[1]!.data as Rational;
        if (inner.isInteger) return this.power(base.args[0]!, this.number(inner.multiply(e)));
      }
      // (c*x)^n: the constant comes out, so that (2*l)^2 and 4*l^2 meet.
      if (e.isInteger && base.op === 'product' && base.args[0]!.op === 'number') {
        const c = foldPower(base.args[0]!.data as Rational, e);
        if (c && c !== 'undefined') {
          return this.product([this.number(c), this.power(this.withoutCoefficient(base), exponent)]);
        }
      }
    }
    return this.intern('power', [base, exponent], null);
  }

  square(a: Expr): Expr {
    return this.power(a, this.number(2));
  }

  sqrt(a: Expr): Expr {
    return this.power(a, this.number(Rational.HALF));
  }

  apply(name: FunctionName, args: readonly Expr[]): Expr {
    if (args.some((a) => a.op === 'nan')) return this.nan;
    if ((name === 'min' || name === 'max') && args.length > 2) {
      return args.slice(1).reduce((a, b) => this.apply(name, [a, b]), args[0]!);
    }
    return foldFunction(this, name, args) ?? this.intern(name, args, null);
  }

  less(a: Expr, b: Expr): Expr {
    return this.compare('less', a, b);
  }

  lessEqual(a: Expr, b: Expr): Expr {
    return this.compare('lessEqual', a, b);
  }

  equal(a: Expr, b: Expr): Expr {
    if (a === b) return this.true;
    if (isBoolean(a) && isBoolean(b) && isConstantCondition(a) && isConstantCondition(b)) return this.false;
    return a.id < b.id ? this.compare('equal', a, b) : this.compare('equal', b, a);
  }

  not(a: Expr): Expr {
    if (a === this.true) return this.false;
    if (a === this.false) return this.true;
    if (a.op === 'not') return a.args[0]!;
    return this.intern('not', [a], null);
  }

  and(a: Expr, b: Expr): Expr {
    if (a === this.false || b === this.false) return this.false;
    if (a === this.true) return b;
    if (b === this.true || a === b) return a;
    return this.intern('and', a.id < b.id ? [a, b] : [b, a], null);
  }

  or(a: Expr, b: Expr): Expr {
    if (a === this.true || b === this.true) return this.true;
    if (a === this.false) return b;
    if (b === this.false || a === b) return a;
    return this.intern('or', a.id < b.id ? [a, b] : [b, a], null);
  }

  select(condition: Expr, whenTrue: Expr, whenFalse: Expr): Expr {
    if (condition === this.true || whenTrue === whenFalse) return whenTrue;
    if (condition === this.false) return whenFalse;
    if (condition.op === 'not') return this.select(condition.args[0]!, whenFalse, whenTrue);
    return this.intern('select', [condition, whenTrue, whenFalse], null);
  }

  /**
   * The solution x of A x = b, one expression per unknown.
   * @param matrix n*n entries by rows
   */
  solve(matrix: readonly Expr[], right: readonly Expr[]): Expr[] {
    const n = right.length;
    if (matrix.length !== n * n) throw new RangeError(`a ${n} by ${n} matrix has ${n * n} entries, not ${matrix.length}`);
    if (n === 0) return [];
    if (n === 1) return [this.divide(right[0]!, matrix[0]!)];
    const all = [...matrix, ...right];
    if (all.some((a) => a.op === 'nan')) return right.map(() => this.nan);
    const node = this.intern('solve', all, n);
    return right.map((_, k) => this.intern('component', [node], k));
  }

  /** Rebuilds a node's operator on other arguments. */
  rebuild(node: Expr, args: readonly Expr[]): Expr {
    switch (node.op) {
      case 'number':
      case 'pi':
      case 'nan':
      case 'symbol':
      case 'true':
      case 'false':
        return node;
      case 'sum':
        return this.sum(args);
      case 'product':
        return this.product(args);
      case 'power':
        return this.power(args[0]!, args[1]!);
      case 'less':
      case 'lessEqual':
        return this.compare(node.op, args[0]!, args[1]!);
      case 'equal':
        return this.equal(args[0]!, args[1]!);
      case 'and':
        return this.and(args[0]!, args[1]!);
      case 'or':
        return this.or(args[0]!, args[1]!);
      case 'not':
        return this.not(args[0]!);
      case 'select':
        return this.select(args[0]!, args[1]!, args[2]!);
      case 'solve':
        return args.some((a) => a.op === 'nan') ? this.nan : this.intern('solve', args, node.data as number);
      case 'component':
        return args[0]!.op === 'nan' ? this.nan : this.intern('component', args, node.data as number);
      default:
        return this.apply(node.op, args);
    }
  }

  private compare(op: 'less' | 'lessEqual' | 'equal', a: Expr, b: Expr): Expr {
    if (a.op === 'number' && b.op === 'number') {
      const c = (a.data as Rational).compare(b.data as Rational);
      const truth = op === 'less' ? c < 0 : op === 'lessEqual' ? c <= 0 : c === 0;
      return truth ? this.true : this.false;
    }
    if (a === b) return op === 'less' ? this.false : this.true;
    return this.intern(op, [a, b], null);
  }

  private splitCoefficient(term: Expr): { core: Expr; coefficient: Rational } {
    if (term.op === 'product' && term.args[0]!.op === 'number') {
      return { core: this.withoutCoefficient(term), coefficient: term.args[0]!.data as Rational };
    }
    return { core: term, coefficient: Rational.ONE };
  }

  private withoutCoefficient(product: Expr): Expr {
    const rest = product.args.slice(1);
    return rest.length === 1 ? rest[0]! : this.intern('product', rest, null);
  }

  private append(op: OpName, args: readonly Expr[], data: Data): Expr {
    work(30);
    const node: Expr = { id: this.nodes.length, op, args, data };
    this.nodes.push(node);
    return node;
  }

  private intern(op: OpName, args: readonly Expr[], data: null | number): Expr {
    let hash = hashOf(op, args, data) & (this.table.length - 1);
    for (;;) {
      const id = this.table[hash]!;
      if (id < 0) break;
      const node = this.nodes[id]!;
      if (node.op === op && node.data === data && sameArgs(node.args, args)) return node;
      hash = (hash + 1) & (this.table.length - 1);
    }
    const node = this.append(op, args, data);
    this.table[hash] = node.id;
    if (this.nodes.length * 2 > this.table.length) this.grow();
    return node;
  }

  private grow(): void {
    this.table = new Int32Array(this.table.length * 4).fill(-1);
    const mask = this.table.length - 1;
    for (const node of this.nodes) {
      if (node.op === 'number' || node.op === 'symbol') continue;
      let hash = hashOf(node.op, node.args, node.data as null | number) & mask;
      while (this.table[hash]! >= 0) hash = (hash + 1) & mask;
      this.table[hash] = node.id;
    }
  }
}

const opHash = new Map<string, number>();

function hashOf(op: OpName, args: readonly Expr[], data: null | number): number {
  let h = opHash.get(op);
  if (h === undefined) {
    h = (opHash.size + 1) * 0x9e3779b1;
    opHash.set(op, h);
  }
  h ^= data ?? 0;
  for (const a of args) h = Math.imul(h ^ a.id, 0x85ebca6b) + (h >>> 13);
  return (h ^ (h >>> 16)) >>> 0;
}

function sameArgs(a: readonly Expr[], b: readonly Expr[]): boolean {
  if (a.length !== b.length) return false;
  for (let i = 0; i < a.length; i++) if (a[i] !== b[i]) return false;
  return true;
}

function byId(a: Expr, b: Expr): number {
  return a.id - b.id;
}

function isBoolean(a: Expr): boolean {
  return isConstantCondition(a) || ['less', 'lessEqual', 'equal', 'and', 'or', 'not'].includes(a.op);
}

function isConstantCondition(a: Expr): boolean {
  return a.op === 'true' || a.op === 'false';
}

function smallPositiveInteger(e: Expr): number | undefined {
  if (e.op !== 'number') return undefined;
  const r = e.data as Rational;
  return r.isInteger && r.sign > 0 && r.numerator < 1000n ? Number(r.numerator) : undefined;
}

/** base^e where that is an exact rational of sensible size; 'undefined' for 0 to a negative power. */
function foldPower(base: Rational, e: Rational): Rational | 'undefined' | undefined {
  if (base.isZero) return e.sign < 0 ? 'undefined' : Rational.ZERO;
  if (base.isOne) return base;
  if (e.isInteger) {
    const n = e.numerator < 0n ? -e.numerator : e.numerator;
    if (n > 4096n) return undefined;
    const bits = Math.max(base.numerator.toString(16).length, base.denominator.toString(16).length) * 4;
    if (bits * Number(n) > MOST_BITS) return undefined;
    return base.power(Number(e.numerator));
  }
  if (e.denominator === 2n && base.sign > 0) {
    const n = exactRoot(base.numerator);
    const d = exactRoot(base.denominator);
    if (n !== undefined && d !== undefined) return foldPower(Rational.of(n, d), Rational.of(e.numerator)) ?? undefined;
  }
  return undefined;
}

function exactRoot(n: bigint): bigint | undefined {
  if (n < 0n || n > 1n << 2048n) return undefined;
  let x = BigInt(Math.floor(Math.sqrt(Number(n > 1n << 1000n ? 0n : n))));
  for (let i = 0; i < 3 && x > 0n; i++) x = (x + n / x) / 2n;
  for (const c of [x - 1n, x, x + 1n]) if (c >= 0n && c * c === n) return c;
  return undefined;
}
