import type { Graph } from '../graph';
import type { Expr, FunctionName } from '../node';
import type { Rational } from '../rational';
import { reachable } from '../reach';
import { shortenByIdentities } from './identities';
import {
  atom,
  Collector,
  constant,
  constantValue,
  timesMonomial,
  UNIT,
  type Factor,
  type Monomial,
  type Polynomial,
} from './polynomial';
import { raise } from './powers';
import { applyFunction } from './functions';

/** Powers of sums are multiplied out up to this exponent. */
const MOST_EXPANDED = 8;

/** How many monomials may be formed in all, per monomial allowed in the result. */
const WORK_PER_TERM = 250;

/**
 * Turns nodes into polynomials over atoms, once per node, in the order of their ids. `undefined` stands for one that
 * would have too many terms.
 */
export class Expander {
  private readonly values = new Map<Expr, Polynomial | undefined>();
  private readonly short = new Map<Expr, Expr>();
  private readonly solutions = new Map<Expr, readonly Expr[]>();
  /** What a sum that serves as an atom, or as an argument, stands for. */
  private readonly meanings = new Map<Expr, Polynomial>();
  private work: number;

  constructor(
    readonly graph: Graph,
    readonly mostTerms: number,
  ) {
    this.work = mostTerms * WORK_PER_TERM;
  }

  /** Grants the work anew: after expanding, to choose among what came of it. */
  refresh(): void {
    this.work = this.mostTerms * WORK_PER_TERM;
  }

  get exhausted(): boolean {
    return this.work <= 0;
  }

  expand(expr: Expr): Polynomial | undefined {
    for (const node of reachable([expr])) {
      if (this.values.has(node) || this.solutions.has(node) || this.short.has(node)) continue;
      if (isCondition(node)) this.short.set(node, this.graph.rebuild(node, node.args.map((a) => this.shortest(a))));
      else if (node.op === 'solve') this.solutions.set(node, this.solve(node));
      else this.values.set(node, this.expandNode(node));
    }
    return this.values.get(expr);
  }

  /** What a node below an expanded one came to. */
  polynomial(node: Expr): Polynomial | undefined {
    return this.values.get(node);
  }

  /** The shortened expression of a node that was expanded; the node itself where it had too many terms. */
  shortest(node: Expr): Expr {
    let e = this.short.get(node);
    if (!e) {
      const p = this.values.get(node);
      e = p ? this.expression(this.shorten(p)) : node;
      this.short.set(node, e);
    }
    return e;
  }

  shorten(p: Polynomial): Polynomial {
    return shortenByIdentities(this, p);
  }

  /** The expression of a polynomial, remembering what it stands for. */
  expression(p: Polynomial): Expr {
    const e = polynomialExpr(this.graph, p);
    if (!this.meanings.has(e)) this.meanings.set(e, p);
    return e;
  }

  /** The polynomial an atom or argument made by `expression` came from; the atom itself for any other. */
  meaning(e: Expr): Polynomial {
    return this.meanings.get(e) ?? (e.op === 'number' ? constant(e.data as Rational) : atom(e));
  }

  /** A function of polynomials, its argument shortened, signs and quarter turns taken out. */
  call(name: FunctionName, args: readonly Polynomial[]): Polynomial {
    return applyFunction(this, name, args);
  }

  add(terms: readonly Polynomial[]): Polynomial | undefined {
    const sum = new Collector();
    for (const p of terms) {
      for (const m of p) sum.put(m);
      if (!this.spend(p.length) || sum.size > 4 * this.mostTerms) return undefined;
    }
    return sum.terms();
  }

  multiply(a: Polynomial, b: Polynomial): Polynomial | undefined {
    if (!this.spend(a.length * b.length)) return undefined;
    const product = new Collector();
    for (const x of a) {
      for (const y of b) {
        const m = timesMonomial(x, y);
        const reduced = x.factors.length > 0 && y.factors.length > 0 ? this.reduce(m) : undefined;
        if (reduced) for (const r of reduced) product.put(r);
        else product.put(m);
      }
      if (product.size > 4 * this.mostTerms) return undefined;
    }
    return product.terms();
  }

  /** The product; left as it stands where multiplying it out would be long. */
  times(a: Polynomial, b: Polynomial): Polynomial {
    return this.multiply(a, b) ?? atom(this.graph.multiply(this.expression(a), this.expression(b)));
  }

  /** A whole power of a sum, multiplied out; undefined where that would be long. */
  multiplyOut(p: Polynomial, exponent: number): Polynomial | undefined {
    if (exponent > MOST_EXPANDED) return undefined;
    let out: Polynomial | undefined = [UNIT];
    for (let i = 0; i < exponent && out; i++) out = this.multiply(out, p);
    return out;
  }

  /** Takes n steps of the work allowed; false when it is used up. */
  spend(n: number): boolean {
    this.work -= n + 1;
    return this.work > 0;
  }

  /** Roots that met their like: sqrt(s)*sqrt(s) is s again, |x|^2 is x^2, 2^(1/2)*2^(1/2) is 2. */
  private reduce(m: Monomial): Polynomial | undefined {
    for (const f of m.factors) {
      const value = this.reduceFactor(f);
      if (!value) continue;
      const rest = { coefficient: m.coefficient, factors: m.factors.filter((g) => g !== f) };
      return this.multiply([rest], value);
    }
    return undefined;
  }

  private reduceFactor(f: Factor): Polynomial | undefined {
    if (f.base.op === 'number') {
      const folded = this.graph.power(f.base, this.graph.number(f.exponent));
      return folded.op === 'number' ? constant(folded.data as Rational) : undefined;
    }
    if (!f.exponent.isInteger || f.exponent.sign < 0 || f.exponent.numerator > 64n) return undefined;
    const n = Number(f.exponent.numerator);
    if (f.base.op === 'sum') return this.multiplyOut(this.meaning(f.base), n);
    if (f.base.op === 'product') return raise(this, this.meaning(f.base), f.exponent);
    if (f.base.op === 'abs' && n % 2 === 0) return raise(this, this.meaning(f.base.args[0]!), f.exponent);
    return undefined;
  }

  private expandNode(node: Expr): Polynomial | undefined {
    switch (node.op) {
      case 'number':
        return constant(node.data as Rational);
      case 'pi':
      case 'nan':
      case 'symbol':
        return atom(node);
      case 'sum': {
        const terms = this.known(node.args);
        return terms && this.add(terms);
      }
      case 'product': {
        const factors = this.known(node.args);
        if (!factors) return undefined;
        let product: Polynomial | undefined = [UNIT];
        for (const f of factors) product = product && this.multiply(product, f);
        return product;
      }
      case 'power':
        return this.power(node);
      case 'select': {
        const condition = this.shortest(node.args[0]!);
        const [yes, no] = [this.shortest(node.args[1]!), this.shortest(node.args[2]!)];
        if (condition === this.graph.true || yes === no) return this.meaning(yes);
        if (condition === this.graph.false) return this.meaning(no);
        return atom(this.graph.select(condition, yes, no));
      }
      case 'component': {
        const value = this.solutions.get(node.args[0]!)![node.data as number]!;
        return value.op === 'number' ? constant(value.data as Rational) : atom(value);
      }
      default: {
        const args = this.known(node.args);
        if (args) return this.call(node.op as FunctionName, args);
        const e = this.graph.apply(node.op as FunctionName, node.args.map((a) => this.shortest(a)));
        return e.op === 'number' ? constant(e.data as Rational) : atom(e);
      }
    }
  }

  private power(node: Expr): Polynomial | undefined {
    const base = this.values.get(node.args[0]!);
    const exponent = this.values.get(node.args[1]!);
    const e = exponent && constantValue(exponent);
    if (base && e) return raise(this, base, e);
    const whole = this.graph.power(this.shortest(node.args[0]!), this.shortest(node.args[1]!));
    return whole.op === 'number' ? constant(whole.data as Rational) : atom(whole);
  }

  private solve(node: Expr): readonly Expr[] {
    const n = node.data as number;
    const args = node.args.map((a) => this.shortest(a));
    return this.graph.solve(args.slice(0, n * n), args.slice(n * n));
  }

  private known(nodes: readonly Expr[]): Polynomial[] | undefined {
    const out: Polynomial[] = [];
    for (const n of nodes) {
      const p = this.values.get(n);
      if (!p) return undefined;
      out.push(p);
    }
    return out;
  }
}

export function monomialExpr(graph: Graph, m: Monomial): Expr {
  return graph.product([graph.number(m.coefficient), ...m.factors.map((f) => graph.power(f.base, graph.number(f.exponent)))]);
}

export function polynomialExpr(graph: Graph, p: Polynomial): Expr {
  return graph.sum(p.map((m) => monomialExpr(graph, m)));
}

function isCondition(node: Expr): boolean {
  switch (node.op) {
    case 'less':
    case 'lessEqual':
    case 'equal':
    case 'and':
    case 'or':
    case 'not':
    case 'true':
    case 'false':
      return true;
    default:
      return false;
  }
}
