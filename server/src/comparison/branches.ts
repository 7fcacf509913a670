import type { Graph } from '../expression/graph';
import type { Domain, Expr } from '../expression/node';
import type { Rational } from '../expression/rational';
import { reachable } from '../expression/reach';
import type { Registers } from '../expression/tape';
import type { Unvisited } from './pair';
import { isRuledOut } from './ruled-out';

/** The choices that expressions make: conditions of branches, and kinks of clips and absolute values. */
export interface Choices {
  readonly conditions: readonly Expr[];
  readonly kinks: readonly Expr[];
}

export function choicesOf(graph: Graph, roots: readonly Expr[]): Choices {
  return { conditions: conditionsOf(roots), kinks: kinksOf(graph, roots) };
}

/** The same for each group of expressions. */
export function choicesOfEach(graph: Graph, groups: readonly (readonly Expr[])[]): Choices[] {
  // Most code has none at all: one look at everything together settles that.
  const all = choicesOf(graph, groups.flat());
  if (all.conditions.length + all.kinks.length === 0) return groups.map(() => all);
  return groups.map((g) => choicesOf(graph, g));
}

/** Conditions that say on which side of a kink a value lies; those that can have one side only are left out. */
function kinksOf(graph: Graph, roots: readonly Expr[]): Expr[] {
  const out = new Set<Expr>();
  for (const node of reachable(roots)) {
    const [a, b] = node.args;
    if (node.op === 'min' || node.op === 'max') out.add(graph.lessEqual(a!, b!));
    else if ((node.op === 'abs' || node.op === 'sign') && !isSize(a!)) out.add(graph.less(a!, graph.zero));
  }
  out.delete(graph.true);
  out.delete(graph.false);
  return [...out];
}

/** The conditions that choose values of these expressions. */
export function conditionsOf(roots: readonly Expr[]): Expr[] {
  const out = new Set<Expr>();
  for (const node of reachable(roots)) {
    // Where one side is "no value" (a thrown error), nothing has to be seen there.
    if (node.op === 'select' && node.args[1]!.op !== 'nan' && node.args[2]!.op !== 'nan') out.add(node.args[0]!);
  }
  return [...out];
}

/**
 * Whether a side of a condition is too thin for random states to hit: an equality between reals, or a guard against
 * dividing by almost nothing. Such a side is not asked for.
 */
export function isThin(condition: Expr, side: boolean, equalities = true): boolean {
  const thin = (c: Expr, s: boolean): boolean => isThin(c, s, equalities);
  switch (condition.op) {
    case 'not':
      return thin(condition.args[0]!, !side);
    case 'equal':
      return side && equalities;
    case 'and':
      return side ? condition.args.some((c) => thin(c, true)) : condition.args.every((c) => thin(c, false));
    case 'or':
      return side ? condition.args.every((c) => thin(c, true)) : condition.args.some((c) => thin(c, false));
    case 'less':
    case 'lessEqual': {
      const [a, b] = condition.args as [Expr, Expr];
      if (side && isSize(a) && isTiny(b)) return true;
      if (!side && isTiny(a) && isSize(b)) return true;
      return false;
    }
    default:
      return false;
  }
}

function isTiny(e: Expr): boolean {
  return e.op === 'number' && Math.abs((e.data as Rational).toNumber()) <= 1e-3;
}

/** A comparison of the sizes of two things that both vary, without a threshold: every relation of them has been drawn. */
function isContest(condition: Expr): boolean {
  if (condition.op === 'not') return isContest(condition.args[0]!);
  return (condition.op === 'less' || condition.op === 'lessEqual') && condition.args.every((a) => isMagnitude(a, 0));
}

function isMagnitude(e: Expr, depth: number): boolean {
  if (e.op === 'abs') return e.args[0]!.op !== 'number';
  if (depth > 64) return false;
  if (e.op === 'select') return e.args.slice(1).every((a) => isMagnitude(a, depth + 1));
  return e.op === 'max' && e.args.every((a) => isMagnitude(a, depth + 1));
}

/** Never negative: an absolute value, a root, a square, or sums and products of such. */
function isSize(e: Expr): boolean {
  if (e.op === 'abs') return true;
  if (e.op === 'power') {
    const exponent = e.args[1]!;
    if (exponent.op !== 'number') return false;
    const r = exponent.data as Rational;
    return !r.isInteger || r.numerator % 2n === 0n || isSize(e.args[0]!);
  }
  if (e.op === 'sum' || e.op === 'product') {
    return e.args.every((a) => isSize(a) || (a.op === 'number' && (a.data as Rational).sign >= 0));
  }
  return false;
}

/** Keeps count of which sides of which conditions voting states have taken. */
export class Visits {
  private readonly seen = new Map<Expr, [boolean, boolean]>();

  readonly conditions: readonly Expr[];
  private readonly kinks: ReadonlySet<Expr>;

  constructor(
    choices: Choices,
    private readonly domains: ReadonlyMap<Expr, Domain>,
  ) {
    this.conditions = [...new Set([...choices.conditions, ...choices.kinks])];
    const branches = new Set(choices.conditions);
    this.kinks = new Set(choices.kinks.filter((k) => !branches.has(k)));
    for (const c of this.conditions) this.seen.set(c, [false, false]);
  }

  /** True for a state inside a guard against dividing by almost nothing: what the code does there is no physics. */
  isGuarded(registers: Registers, sample: number): boolean {
    return this.conditions.some((c) => registers.error(c, sample) === 0 && isThin(c, registers.value(c, sample) === 1, false));
  }

  /** True when the state is the first on some side. */
  note(registers: Registers, sample: number): boolean {
    let fresh = false;
    for (const c of this.conditions) {
      if (registers.error(c, sample) !== 0) continue;
      const side = registers.value(c, sample) === 1 ? 1 : 0;
      const seen = this.seen.get(c)!;
      if (!seen[side]) {
        seen[side] = true;
        fresh = true;
      }
    }
    return fresh;
  }

  /** The same, after many states: which of two sizes is larger, as in the choice of a pivot, may never change. */
  get missingForGood(): Unvisited[] {
    return this.missing.filter(({ condition }) => !isContest(condition));
  }

  private isAsked(condition: Expr, side: boolean): boolean {
    return !isThin(condition, side) && !isRuledOut(condition, side, this.domains);
  }

  /** How many sides of branches and kinks are worth looking for still. */
  get wanted(): number {
    let count = this.missing.length;
    for (const kink of this.kinks) {
      const [no, yes] = this.seen.get(kink)!;
      if (!yes && this.isAsked(kink, true)) count++;
      if (!no && this.isAsked(kink, false)) count++;
    }
    return count;
  }

  /**
   * Sides of branches that have to be seen. Those of kinks need not: a clip at a value that nothing reaches within the
   * declared ranges is no branch of its own.
   */
  get missing(): Unvisited[] {
    const out: Unvisited[] = [];
    for (const [condition, [no, yes]] of this.seen) {
      if (this.kinks.has(condition)) continue;
      if (!yes && this.isAsked(condition, true)) out.push({ condition, side: true });
      if (!no && this.isAsked(condition, false)) out.push({ condition, side: false });
    }
    return out;
  }
}
