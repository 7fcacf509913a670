import type { Expr } from '../node';
import { Rational } from '../rational';

/** An expression as a sum of rational multiples of atoms, plus a rational multiple of pi and a rational. */
export interface LinearForm {
  /** By a key that two atoms share exactly when they are the same product. */
  readonly atoms: ReadonlyMap<string, Rational>;
  readonly turns: Rational;
  readonly constant: Rational;
}

const MOST_TERMS = 64;

/** Takes sums and rational multiples apart; everything else is an atom. Undefined where that gets long. */
export function linearForm(e: Expr): LinearForm | undefined {
  const atoms = new Map<string, Rational>();
  let turns = Rational.ZERO;
  let constant = Rational.ZERO;
  const open: { node: Expr; factor: Rational }[] = [{ node: e, factor: Rational.ONE }];
  const addTo = (key: string, factor: Rational): void => {
    atoms.set(key, (atoms.get(key) ?? Rational.ZERO).add(factor));
  };
  for (let steps = 0; open.length > 0; steps++) {
    if (steps > 10 * MOST_TERMS || atoms.size > MOST_TERMS) return undefined;
    const { node, factor } = open.pop()!;
    if (node.op === 'number') constant = constant.add(factor.multiply(node.data as Rational));
    else if (node.op === 'pi') turns = turns.add(factor);
    else if (node.op === 'sum') for (const a of node.args) open.push({ node: a, factor });
    else if (node.op === 'product' && node.args[0]!.op === 'number') {
      const scaled = factor.multiply(node.args[0]!.data as Rational);
      const rest = node.args.slice(1);
      if (rest.length === 1) open.push({ node: rest[0]!, factor: scaled });
      else addTo(keyOf(rest), scaled);
    } else addTo(node.op === 'product' ? keyOf(node.args) : String(node.id), factor);
  }
  for (const [key, factor] of atoms) if (factor.isZero) atoms.delete(key);
  return { atoms, turns, constant };
}

function keyOf(factors: readonly Expr[]): string {
  return factors.map((f) => f.id).join('*');
}
