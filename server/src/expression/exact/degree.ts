import type { Expr } from '../node';
import type { Rational } from '../rational';
import type { Bases } from './bases';

/** Degrees of numerator and denominator. */
export interface Degree {
  readonly top: number;
  readonly bottom: number;
}

/**
 * Bounds on the degrees of every node as a rational function of the random values, from which the chance follows that a
 * function that is not zero vanishes at a random point: at most degree over the number of values drawn from
 * (J. T. Schwartz, Fast probabilistic algorithms for verification of polynomial identities, 1980; R. Zippel, Probabilistic
 * algorithms for sparse polynomials, 1979; R. A. DeMillo and R. J. Lipton, A probabilistic remark on algebraic program
 * testing, 1978).
 */
export class Degrees {
  private readonly of = new Map<Expr, Degree>();
  /** A bound for two functions without algebra that have unlike arguments of one value, summed over all pairs of such. */
  private collisions = 0;
  private readonly opaque = new Map<string, number[]>();
  private roots = 1;
  /** The degrees of all that roots are taken of, together. */
  radicands = 0;

  constructor(private readonly bases: Bases) {}

  /** A symbol that stands for another node's value. */
  set(symbol: Expr, value: Expr): void {
    this.of.set(symbol, this.of.get(value)!);
  }

  /** Adds nodes, arguments first. */
  add(nodes: readonly Expr[]): void {
    for (const node of nodes) {
      if (this.of.has(node)) continue;
      const args = node.args.map((a) => this.of.get(a)!);
      this.of.set(node, degreeOf(node, args, this.bases));
      if (isRoot(node)) {
        this.radicands += (args[0]!.top + args[0]!.bottom) * this.roots;
        this.roots = Math.min(this.roots * 2, 2 ** 40);
      }
      if (this.isOpaque(node)) this.collide(node, args);
    }
  }

  /**
   * The degree of the difference of two nodes, freed of denominators and of square roots (each doubles it).
   * @param within what the nodes' own degree is multiplied by where symbols stand for solutions of equations
   */
  ofDifference(a: Expr, b: Expr, within = 1): number {
    const [x, y] = [this.of.get(a)!, this.of.get(b)!];
    return ((Math.max(x.top + y.bottom, y.top + x.bottom, 1) + x.bottom + y.bottom) * within + this.collisions) * this.roots;
  }

  /** A bound on the degree of a node with its denominator. */
  ofNode(a: Expr): number {
    const { top, bottom } = this.of.get(a)!;
    return top + bottom;
  }

  private isOpaque(node: Expr): boolean {
    if (node.op === 'number' || node.op === 'symbol' || node.op === 'pi') return false;
    if (node.op === 'power') return !isWholeOrHalf(node.args[1]!);
    return !ALGEBRAIC.has(node.op) && !this.bases.multiples.has(node);
  }

  private collide(node: Expr, args: readonly Degree[]): void {
    const degree = 1 + args.reduce((s, d) => s + d.top + d.bottom, 0);
    const others = this.opaque.get(node.op) ?? [];
    for (const other of others) this.collisions += degree + other;
    this.opaque.set(node.op, [...others, degree]);
  }
}

const ALGEBRAIC: ReadonlySet<string> = new Set(['sum', 'product', 'power', 'solve', 'component']);

function degreeOf(node: Expr, args: readonly Degree[], bases: Bases): Degree {
  switch (node.op) {
    case 'number':
      return { top: 0, bottom: 0 };
    case 'symbol':
      return { top: 2, bottom: 0 };
    case 'sum': {
      let bottom = 0;
      let top = 0;
      for (const d of args) bottom += d.bottom;
      for (const d of args) top = Math.max(top, d.top + bottom - d.bottom);
      return { top, bottom };
    }
    case 'product': {
      let top = 0;
      let bottom = 0;
      for (const d of args) {
        top += d.top;
        bottom += d.bottom;
      }
      return { top, bottom };
    }
    case 'power': {
      const base = args[0]!;
      const exponent = node.args[1]!;
      if (!isWholeOrHalf(exponent)) return { top: 1, bottom: 0 };
      const r = exponent.data as Rational;
      const e = Math.ceil(Math.abs(r.toNumber()));
      const scaled = { top: base.top * e, bottom: base.bottom * e };
      return r.sign < 0 ? { top: scaled.bottom, bottom: scaled.top } : scaled;
    }
    case 'solve': {
      // Cramer's rule, each row freed of its denominators.
      const n = node.data as number;
      let rows = 0;
      for (let i = 0; i < n; i++) {
        const row = [...args.slice(i * n, (i + 1) * n), args[n * n + i]!];
        rows += Math.max(...row.map((d) => d.top)) + row.reduce((s, d) => s + d.bottom, 0);
      }
      return { top: rows, bottom: rows };
    }
    case 'component':
      return args[0]!;
    default: {
      const multiples = bases.multiples.get(node);
      if (!multiples) return { top: 1, bottom: 0 };
      const size = 2 * multiples.parts.reduce((s, p) => s + Math.abs(p.times), 0);
      return { top: size, bottom: size };
    }
  }
}

function isWholeOrHalf(exponent: Expr): boolean {
  if (exponent.op !== 'number') return false;
  const { denominator, numerator } = exponent.data as Rational;
  return (denominator === 1n || denominator === 2n) && numerator <= 1_000_000n && numerator >= -1_000_000n;
}

export function isRoot(node: Expr): boolean {
  const exponent = node.args[1];
  return node.op === 'power' && exponent?.op === 'number' && (exponent.data as Rational).denominator === 2n;
}
