import type { Graph } from '../expression/graph';
import type { Expr } from '../expression/node';
import type { Equation, Family, Formula } from '../notation/tree';
import type { Span } from '../text/span';
import { canonicalName } from './names';
import type { Quantity } from './value';

/** An entry of a `where` statement: `a = ...`, `r[0] = ...`, or `r[i] = ... over i in 1..n`. */
interface Shorthand {
  readonly equation: Equation;
  readonly index?: Formula;
  readonly over: readonly Family[];
}

/**
 * The names a formula may use. Symbols and shorthands are kept under their canonical spelling, so that `θ` and `theta` are
 * one name; shorthands are evaluated when first used.
 */
export class Scope {
  readonly symbols = new Map<string, Expr>();
  /** Members of a family by index. */
  readonly families = new Map<string, Map<number, Expr>>();
  readonly points = new Map<string, Quantity>();
  readonly shorthands = new Map<string, Shorthand[]>();
  /** Energies and other quantities that go by a name of their own; asked for only when nothing declared has the name. */
  quantities: (name: string) => Quantity | undefined = () => undefined;
  readonly used = new Set<Expr>();
  readonly usedShorthands = new Set<string>();
  readonly memo = new Map<string, Quantity | 'running'>();

  constructor(readonly graph: Graph) {}

  declare(name: string, symbol: Expr): void {
    this.symbols.set(canonicalName(name), symbol);
  }

  declareMember(family: string, index: number, symbol: Expr): void {
    const key = canonicalName(family);
    const members = this.families.get(key) ?? new Map<number, Expr>();
    members.set(index, symbol);
    this.families.set(key, members);
  }

  has(name: string): boolean {
    const key = canonicalName(name);
    return this.symbols.has(key) || this.families.has(key) || this.shorthands.has(key) || this.points.has(key);
  }

  define(name: string, shorthand: Shorthand): void {
    const key = canonicalName(name);
    const list = this.shorthands.get(key);
    if (list) list.push(shorthand);
    else this.shorthands.set(key, [shorthand]);
  }

  /** Names that could have been meant, nearest first. */
  near(name: string): string | undefined {
    const all = [...this.symbols.keys(), ...this.families.keys(), ...this.shorthands.keys(), ...this.points.keys()];
    const key = canonicalName(name).toLowerCase();
    const rate = /^(.+?)_?(d{1,2})ot$/.exec(key);
    const moving = rate && all.find((n) => n.toLowerCase() === rate[1]);
    if (moving) return moving + "'".repeat(rate[2]!.length);
    return all.find((n) => n.toLowerCase() === key) ?? all.find((n) => n.length > 2 && distanceIsOne(n.toLowerCase(), key));
  }
}

export interface FormulaError {
  readonly code: 'undeclared' | 'syntax';
  readonly message: string;
  readonly span: Span;
}

function distanceIsOne(a: string, b: string): boolean {
  if (Math.abs(a.length - b.length) > 1) return false;
  let i = 0;
  while (i < a.length && i < b.length && a[i] === b[i]) i++;
  return a.slice(i + 1) === b.slice(i + 1) || a.slice(i) === b.slice(i + 1) || a.slice(i + 1) === b.slice(i);
}
