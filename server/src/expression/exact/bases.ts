import type { Expr } from '../node';
import { Rational } from '../rational';
import { linearForm, type LinearForm } from './linear';

/** Whole multiples of base angles and base exponents. */
export interface Multiples {
  readonly parts: readonly { readonly base: string; readonly times: number }[];
  /** Quarter turns beyond them. */
  readonly quarters: number;
}

/** Larger multiples than this are left to floating point. */
const MOST_TIMES = 4096;

const CIRCULAR: ReadonlySet<string> = new Set(['sin', 'cos', 'tan']);
const EXPONENTIAL: ReadonlySet<string> = new Set(['exp', 'sinh', 'cosh', 'tanh']);

/**
 * What angles and exponents are multiples of. Each atom gets one base, its smallest part that occurs (th/2 where sin(th/2)
 * does), so that every angle is a whole multiple of bases. Bases are independent of each other and of the atoms' own
 * values: what holds for independent ones holds for those.
 */
export class Bases {
  readonly multiples = new Map<Expr, Multiples>();
  readonly angles = new Set<string>();
  readonly exponents = new Set<string>();
  /** The operation that can't be treated exactly. */
  readonly stopped: string | undefined;

  constructor(nodes: readonly Expr[]) {
    const forms = new Map<Expr, LinearForm>();
    const denominators = new Map<string, bigint>();
    for (const node of nodes) {
      const kind = CIRCULAR.has(node.op) ? 'a' : EXPONENTIAL.has(node.op) ? 'e' : undefined;
      if (!kind) continue;
      const form = linearForm(node.args[0]!);
      if (!form) {
        this.stopped = `${node.op} of a long sum`;
        return;
      }
      forms.set(node, form);
      const note = (key: string, r: Rational): void => {
        const now = denominators.get(kind + key) ?? 1n;
        denominators.set(kind + key, lcm(now, r.denominator));
      };
      for (const [key, r] of form.atoms) note(key, r);
      if (!form.constant.isZero) note('1', form.constant);
      if (kind === 'e' && !form.turns.isZero) note('pi', form.turns);
    }
    for (const [node, form] of forms) {
      const circular = CIRCULAR.has(node.op);
      const kind = circular ? 'a' : 'e';
      const parts: { base: string; times: number }[] = [];
      const all = [...form.atoms, ['1', form.constant] as const, ...(circular ? [] : [['pi', form.turns] as const])];
      for (const [key, r] of all) {
        if (r.isZero) continue;
        const base = kind + key;
        const times = Number(r.numerator * (denominators.get(base)! / r.denominator));
        if (Math.abs(times) > MOST_TIMES) {
          this.stopped = `${node.op} of a large multiple`;
          return;
        }
        parts.push({ base, times });
        (circular ? this.angles : this.exponents).add(base);
      }
      const quarters = circular ? form.turns.multiply(Rational.of(2)) : Rational.ZERO;
      if (!quarters.isInteger) {
        this.stopped = `${node.op} of ${form.turns}*pi`;
        return;
      }
      this.multiples.set(node, { parts, quarters: Number(((quarters.numerator % 4n) + 4n) % 4n) });
    }
  }
}

function lcm(a: bigint, b: bigint): bigint {
  let [x, y] = [a, b];
  while (y !== 0n) [x, y] = [y, x % y];
  return (a / x) * b;
}
