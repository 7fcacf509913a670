import type { Expr } from '../expression/node';
import { evaluate } from '../mechanics/formula';
import { canonicalName } from '../mechanics/names';
import type { Coordinate, Declared, System } from '../mechanics/system';
import type { Meaning } from '../program/reading';

export interface NameMeaning {
  readonly expr: Expr;
  readonly text: string;
  /** The name stands for a formula: a scalar of a `where` statement. */
  readonly isFormula?: boolean;
}

/**
 * What a bare name in code can mean by agreement with the declaration: the name itself (Greek letters also by name, family
 * members as `th1` and `th_1`), the customary spellings of first and second time derivatives, and the scalars that `where`
 * gives a name.
 */
export class Spellings {
  private readonly exact = new Map<string, NameMeaning>();
  private readonly rates = new Map<string, NameMeaning[]>();
  private readonly families = new Map<string, Meaning[]>();

  constructor(private readonly system: System) {
    for (const d of [...system.coordinates, ...system.parameters, ...system.inputs]) {
      for (const name of plainSpellings(d)) this.exact.set(name, { expr: d.symbol, text: d.name });
      if (d.family) this.addToFamily(canonicalName(d.family.name), d.symbol);
    }
    if (!this.exact.has('t')) {
      const name = system.block.statements.find((s) => s.kind === 'time');
      const text = name?.kind === 'time' ? name.name : 't';
      this.exact.set(canonicalName(text), { expr: system.time, text });
    }
    for (const c of system.coordinates) this.addRates(c, c.velocity, c.acceleration);
    for (const u of system.inputs) {
      const g = system.graph;
      const rate = (order: number) => g.symbol({ name: u.name, role: 'input', order });
      this.addRates(u, rate(1), rate(2));
    }
  }

  /** A declared name goes before any spelling of a rate, and those before the names of formulas. */
  byName(name: string): readonly NameMeaning[] {
    const key = canonicalCodeName(name);
    const exact = this.exact.get(key);
    if (exact) return [exact];
    const rates = this.rates.get(key);
    if (rates) return rates;
    const formula = this.formula(key);
    return formula ? [formula] : [];
  }

  private formula(key: string): NameMeaning | undefined {
    const { scope } = this.system;
    const entries = scope.shorthands.get(key);
    if (entries?.length !== 1 || entries[0]!.index) return undefined;
    const span = entries[0]!.equation.left.span;
    const value = evaluate({ kind: 'name', name: key, span }, { scope, indices: new Map(), errors: [] });
    return value?.kind === 'scalar' ? { expr: value.expr, text: key, isFormula: true } : undefined;
  }

  familyByName(name: string): readonly Meaning[] | undefined {
    return this.families.get(canonicalCodeName(name));
  }

  private addRates(d: Declared | Coordinate, first: Expr, second: Expr): void {
    const { stem, index } = splitIndex(d);
    for (const [expr, order, text] of [
      [first, 1, `${d.name}'`],
      [second, 2, `${d.name}''`],
    ] as const) {
      for (const spelling of rateSpellings(stem, index, order)) {
        const list = this.rates.get(spelling) ?? [];
        if (!list.some((m) => m.expr === expr)) list.push({ expr, text });
        this.rates.set(spelling, list);
      }
      if (d.family) {
        for (const s of rateSpellings(canonicalName(d.family.name), '', order)) this.addToFamily(s, expr);
      }
    }
  }

  private addToFamily(name: string, expr: Expr): void {
    const list = this.families.get(name) ?? [];
    list.push({ kind: 'scalar', expr });
    this.families.set(name, list);
  }
}

/** `θ̇` in an identifier is `thetadot`. */
function canonicalCodeName(name: string): string {
  const parts = name.normalize('NFD');
  const dots = [...parts].filter((c) => c === '\u0307' || c === '\u0308').reduce((n, c) => n + (c === '\u0307' ? 1 : 2), 0);
  if (dots === 0) return canonicalName(name);
  const bare = parts.replace(/[\u0307\u0308]/g, '').normalize('NFC');
  return canonicalName(bare) + (dots === 1 ? 'dot' : 'ddot');
}

function plainSpellings(d: Declared): string[] {
  if (d.family) {
    const family = canonicalName(d.family.name);
    return [`${family}${d.family.index}`, `${family}_${d.family.index}`];
  }
  const { stem, index } = splitIndex(d);
  const name = canonicalName(d.name);
  return index === '' ? [name] : [...new Set([name, `${stem}${index}`, `${stem}_${index}`])];
}

/** `th1`, `th_1` and `th[1]` are `th` with index 1. */
function splitIndex(d: Declared): { stem: string; index: string } {
  if (d.family) return { stem: canonicalName(d.family.name), index: String(d.family.index) };
  const m = /^(.*?[^\d_])_?(\d+)$/.exec(canonicalName(d.name));
  return m ? { stem: m[1]!, index: m[2]! } : { stem: canonicalName(d.name), index: '' };
}

function rateSpellings(stem: string, index: string, order: 1 | 2): string[] {
  const capital = stem[0]!.toUpperCase() + stem.slice(1);
  const marks = order === 1 ? ['dot', '_dot', 'Dot', 'd', '_d'] : ['ddot', '_ddot', 'DDot', 'Ddot', 'dd', '_dd', 'dotdot', 'DotDot'];
  const heads = order === 1 ? ['d', 'dot_', 'd_'] : ['dd', 'ddot_', 'd2'];
  const out: string[] = [];
  for (const body of index === '' ? [stem] : [`${stem}${index}`, `${stem}_${index}`]) {
    for (const mark of marks) out.push(body + mark);
    for (const head of heads) out.push(head + body);
    out.push(heads[0]! + capital + body.slice(stem.length));
  }
  if (index !== '') {
    for (const mark of marks) out.push(`${stem}${mark}${index}`, `${stem}${mark}_${index}`);
  }
  return [...new Set(out)];
}
