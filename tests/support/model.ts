import type { Expr, SymbolData } from '../../server/src/expression/node';
import { symbolText } from '../../server/src/expression/node';
import { substitute } from '../../server/src/expression/substitute';
import { Tape } from '../../server/src/expression/tape';
import { evaluate } from '../../server/src/mechanics/formula';
import { Derived } from '../../server/src/mechanics/lagrange';
import { quantityContext, solutionMap } from '../../server/src/mechanics/quantities';
import { flatten } from '../../server/src/mechanics/value';
import { parseFormula } from '../../server/src/notation';
import { systemOf } from './decide-formulas';

/** Numbers by name: `th`, `th'`, `m`, `t`. */
export type Numbers = Readonly<Record<string, number>>;

/** A declared system with numbers for its parameters, moved by what the product derives from it. */
export class Model {
  readonly derived: Derived;
  private readonly names: readonly string[];
  private readonly moves: (at: Numbers) => number[];
  private readonly functions = new Map<string, (at: Numbers) => number[]>();

  constructor(
    declaration: string,
    private readonly parameters: Numbers,
  ) {
    const system = systemOf(declaration);
    if (system.problems.length > 0) throw new Error(system.problems.map((p) => p.message).join('; '));
    this.derived = new Derived(system);
    this.names = system.coordinates.map((c) => c.name);
    this.moves = this.compile(this.derived.accelerations);
  }

  private compile(exprs: readonly Expr[]): (at: Numbers) => number[] {
    const { graph } = this.derived.system;
    const solved = substitute(graph, exprs, solutionMap(this.derived));
    const tape = new Tape(solved);
    return (at) => {
      const registers = tape.run((s) => {
        const name = symbolText(s.data as SymbolData);
        const value = at[name] ?? this.parameters[name];
        if (value === undefined) throw new Error(`no number for ${name}`);
        return { values: Float64Array.of(value) };
      }, 1);
      return solved.map((e) => registers.value(e, 0));
    };
  }

  /** A derived quantity in numbers, matrices row by row. */
  values(quantity: string, at: Numbers = {}): number[] {
    let f = this.functions.get(quantity);
    if (!f) {
      const context = quantityContext(this.derived, []);
      const value = evaluate(parseFormula(quantity).formula, context);
      if (!value || context.errors.length > 0) throw new Error(`${quantity}: ${context.errors.map((e) => e.message).join('; ')}`);
      this.functions.set(quantity, (f = this.compile(flatten(value))));
    }
    return f(at);
  }

  value(quantity: string, at: Numbers = {}): number {
    return this.values(quantity, at)[0]!;
  }

  /** One step of the classical fourth-order Runge-Kutta method. */
  step(at: Numbers, h: number): Numbers {
    const { names } = this;
    const rates = (s: Numbers): number[] => {
      const a = this.moves(s);
      return [...names.map((n) => s[`${n}'`]!), ...a];
    };
    const moved = (s: Numbers, k: readonly number[], by: number): Numbers => {
      const out: Record<string, number> = { ...s, t: (at['t'] ?? 0) + by };
      names.forEach((n, i) => {
        out[n] = at[n]! + by * k[i]!;
        out[`${n}'`] = at[`${n}'`]! + by * k[names.length + i]!;
      });
      return out;
    };
    const k1 = rates(at);
    const k2 = rates(moved(at, k1, h / 2));
    const k3 = rates(moved(at, k2, h / 2));
    const k4 = rates(moved(at, k3, h));
    return moved(at, k1.map((x, i) => (x + 2 * k2[i]! + 2 * k3[i]! + k4[i]!) / 6), h);
  }

  run(start: Numbers, time: number, steps: number): Numbers {
    let at: Numbers = { t: 0, ...start };
    for (let i = 0; i < steps; i++) at = this.step(at, time / steps);
    return at;
  }

  /** The state at which `f` first goes through zero upwards, after the start, found to the step's own accuracy. */
  until(start: Numbers, h: number, f: (at: Numbers) => number, most = 20_000): Numbers {
    let at: Numbers = { t: 0, ...start };
    for (let i = 0; i < most; i++) {
      const next = this.step(at, h);
      if (i > 0 && f(at) < 0 && f(next) >= 0) {
        let [low, high] = [0, h];
        for (let k = 0; k < 45; k++) {
          const middle = (low + high) / 2;
          if (f(this.step(at, middle)) < 0) low = middle;
          else high = middle;
        }
        return this.step(at, high);
      }
      at = next;
    }
    throw new Error('nothing happened');
  }
}
