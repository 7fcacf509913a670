import type { Expr } from '../node';
import type { Rational } from '../rational';
import type { Bases } from './bases';

interface Degrees {
  readonly top: number;
  readonly bottom: number;
}

/**
 * Bounds on the degrees of numerator and denominator of a node as a rational function of the random values, from which
 * the chance follows that a function that is not zero vanishes at a random point: at most degree over size of the field
 * (J. T. Schwartz 1980; R. Zippel 1979; R. A. DeMillo and R. J. Lipton 1978).
 * @returns the larger degree of the last node, doubled for every square root on the way
 */
export function degreeBound(nodes: readonly Expr[], bases: Bases, root: Expr): number {
  const of = new Map<Expr, Degrees>();
  let roots = 1;
  for (const node of nodes) {
    const args = node.args.map((a) => of.get(a)!);
    of.set(node, degrees(node, args, bases));
    if (isRoot(node)) roots = Math.min(roots * 2, 2 ** 40);
    if (node === root) break;
  }
  const { top, bottom } = of.get(root)!;
  return Math.max(top, bottom, 1) * roots;
}

function degrees(node: Expr, args: readonly Degrees[], bases: Bases): Degrees {
  const total = (f: (d: Degrees) => number) => args.reduce((s, d) => s + f(d), 0);
  switch (node.op) {
    case 'number':
      return { top: 0, bottom: 0 };
    case 'symbol':
      return { top: 2, bottom: 0 };
    case 'sum': {
      const bottom = total((d) => d.bottom);
      return { top: Math.max(...args.map((d) => d.top + bottom - d.bottom)), bottom };
    }
    case 'product':
      return { top: total((d) => d.top), bottom: total((d) => d.bottom) };
    case 'power': {
      const base = args[0]!;
      const exponent = node.args[1]!;
      if (exponent.op !== 'number') return { top: 1, bottom: 0 };
      const e = Math.ceil(Math.abs((exponent.data as Rational).toNumber()));
      const scaled = { top: base.top * e, bottom: base.bottom * e };
      return (exponent.data as Rational).sign < 0 ? { top: scaled.bottom, bottom: scaled.top } : scaled;
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

export function isRoot(node: Expr): boolean {
  const exponent = node.args[1];
  return node.op === 'power' && exponent?.op === 'number' && (exponent.data as Rational).denominator === 2n;
}
