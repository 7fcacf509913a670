import type { Monomial } from '../../../expression/normal-form';
import { symbolsOf } from '../../../expression/reach';
import { Tape } from '../../../expression/tape';
import type { Expr, SymbolData } from '../../../expression/node';
import { prefixFor } from '../atoms';
import { Binding, bracket } from '../edits';
import { LinearFit } from '../linear-fit';
import { LogFit } from '../log-fit';
import type { Site } from '../sites';
import { agree, isVisible, type Scene } from './candidate';
import { writeNice } from './numbers';

interface Fits {
  readonly product: LogFit<string>;
  readonly sum: LinearFit<string>;
}

const fits = new WeakMap<Scene, Map<string, Fits>>();

/** One pair of fits per set of names, made once: distinct sizes only, plain names first. */
function fitsOf(scene: Scene, atoms: readonly { readonly text: string; readonly value: Float64Array; readonly compound?: boolean }[]): Fits {
  let known = fits.get(scene);
  if (!known) fits.set(scene, (known = new Map()));
  const key = atoms.map((a) => a.text).join(' ');
  let fit = known.get(key);
  if (!fit) {
    const chosen: { expr: string; value: Float64Array }[] = [];
    for (const a of [...atoms].sort((x, y) => x.text.length - y.text.length)) {
      if (a.compound || a.value.some((x) => Math.abs(x) < 1e-9) || chosen.some((c) => c.value.every((x, s) => Math.abs(Math.abs(x) - Math.abs(a.value[s]!)) < 1e-9))) continue;
      chosen.push({ expr: a.text, value: a.value });
    }
    const { n } = scene.model;
    const short = chosen.filter((c) => c.expr.length <= 16).slice(0, n - 6);
    const one = { expr: '1', value: new Float64Array(n).fill(1) };
    known.set(key, (fit = { product: new LogFit(chosen, n), sum: new LinearFit([one, ...short], n) }));
  }
  return fit;
}

export interface Product {
  readonly label: string;
  attach(inner: string): string | undefined;
}

/** Writes products of symbols with the names that the code has for them at a place. */
export class TermPrinter {
  readonly atoms: readonly { readonly text: string; readonly value: Float64Array; readonly compound?: boolean }[];
  private fit: LogFit<string> | undefined;

  constructor(
    private readonly scene: Scene,
    site: Site,
  ) {
    this.atoms = scene.atoms
      .filter((a) => a.values.length === 1 && isVisible(a, site))
      .map((a) => ({ text: a.text, value: a.values[0]!, ...(a.compound ? { compound: true } : {}) }));
  }

  /** Products of what the code has names for here. */
  get own(): LogFit<string> {
    return (this.fit ??= fitsOf(this.scene, this.atoms).product);
  }

  /** A sum of what the code has names for here, in brackets; two terms at least. */
  sumOfAtoms(column: Float64Array): string | undefined {
    const terms = fitsOf(this.scene, this.atoms).sum.sum(column, 3);
    if (!terms || terms.length < 2) return undefined;
    const parts = terms.map((t) => ({ sign: t.coefficient < 0 ? '-' : '+', body: this.times(Math.abs(t.coefficient), t.base) }));
    const first = parts.findIndex((p) => p.sign === '+');
    if (first < 0 || parts.some((p) => p.body === undefined)) return undefined;
    const order = [parts[first]!, ...parts.filter((_, i) => i !== first)];
    return bracket(order.map((p, i) => (i === 0 ? p.body : `${p.sign} ${p.body}`)).join(' '));
  }

  private times(constant: number, text: string): string | undefined {
    if (Math.abs(constant - 1) < 1e-7) return text;
    const number = writeNice(constant, this.scene, undefined);
    if (text === '1') return number?.text;
    return number && `${number.binding < Binding.atom ? bracket(number.text) : number.text} * ${text}`;
  }

  ofAtoms(constant: number, powers: readonly { readonly base: string; readonly power: number }[]): Product | undefined {
    const number = Math.abs(constant - 1) < 1e-9 ? undefined : writeNice(constant, this.scene, undefined);
    if ((Math.abs(constant - 1) >= 1e-9 && !number) || powers.some((p) => p.power % 1 !== 0)) return undefined;
    const list = (sign: number) => powers.flatMap((p) => Array<string>(Math.max(0, sign * p.power)).fill(p.base));
    return joinFactors(list(1), list(-1), number && (number.binding < Binding.atom ? bracket(number.text) : number.text));
  }

  /** The code's text for an expression: one whose value is the same. */
  private textOf(e: Expr): string | undefined {
    const { model } = this.scene;
    let value = e.op === 'symbol' ? model.column(e) : undefined;
    if (!value) {
      const symbols = symbolsOf(e);
      const tape = new Tape([e]);
      if (symbols.some((s) => !model.column(s))) return undefined;
      value = tape.run((s) => ({ values: model.column(s)! }), model.n).column(e).values;
    }
    const found = this.atoms.filter((a) => agree(a.value, value, 1e-9)).sort((a, b) => a.text.length - b.text.length)[0];
    if (found) return found.text;
    if (e.args.length === 1) {
      const prefix = prefixFor(this.scene.code, e.op);
      const inner = this.textOf(e.args[0]!);
      if (prefix !== undefined && inner) return `${prefix}${e.op}(${inner})`;
    }
    if (e.op === 'sum') {
      const parts = e.args.map((a) => this.textOf(a));
      if (parts.every((p) => p !== undefined)) return parts.join(' + ');
    }
    if (e.op === 'product' && e.args.length === 2 && e.args[0]!.op === 'number') {
      const inner = this.textOf(e.args[1]!);
      const c = (e.args[0]!.data as { toNumber(): number }).toNumber();
      if (inner) return c === -1 ? `-${inner}` : writeNice(c, this.scene, undefined)?.text + ` * ${inner}`;
    }
    return undefined;
  }

  private factors(list: readonly { readonly base: Expr; readonly power: number }[]): { top: string[]; bottom: string[] } | undefined {
    const top: string[] = [];
    const bottom: string[] = [];
    for (const { base, power } of list) {
      const text = this.textOf(base);
      if (text === undefined || power % 1 !== 0 || Math.abs(power) > 4) return undefined;
      for (let k = 0; k < Math.abs(power); k++) (power > 0 ? top : bottom).push(text);
    }
    return { top, bottom };
  }

  product(constant: number, powers: readonly { readonly base: Expr; readonly power: number }[]): Product | undefined {
    const f = this.factors(powers);
    const number = Math.abs(constant - 1) < 1e-9 ? undefined : writeNice(constant, this.scene, undefined);
    if (!f || (Math.abs(constant - 1) >= 1e-9 && !number)) return undefined;
    return joinFactors(f.top, f.bottom, number && (number.binding < Binding.atom ? bracket(number.text) : number.text));
  }

  withAtom(constant: number, text: string, power: number): Product | undefined {
    const number = Math.abs(constant - 1) < 1e-9 ? undefined : writeNice(constant, this.scene, undefined);
    if (Math.abs(constant - 1) >= 1e-9 && !number) return undefined;
    return joinFactors(power > 0 ? [text] : [], power < 0 ? [text] : [], number && (number.binding < Binding.atom ? bracket(number.text) : number.text));
  }

  term(m: Monomial, extra: readonly { readonly base: Expr; readonly power: number }[], constant: number): { text: string; size: number } | undefined {
    const powers = new Map<Expr, number>();
    for (const f of m.factors) powers.set(f.base, f.exponent.toNumber());
    for (const x of extra) powers.set(x.base, (powers.get(x.base) ?? 0) + x.power);
    const list = [...powers].filter(([, p]) => p !== 0).map(([base, power]) => ({ base, power }));
    list.sort((a, b) => rank(a.base) - rank(b.base));
    const f = this.factors(list);
    if (!f) return undefined;
    const number = Math.abs(constant - 1) < 1e-9 ? undefined : writeNice(constant, this.scene, undefined);
    if (Math.abs(constant - 1) >= 1e-9 && !number) return undefined;
    const top = [...(number ? [number.binding < Binding.atom ? bracket(number.text) : number.text] : []), ...f.top];
    if (top.length === 0) top.push('1');
    const bottom = f.bottom.length === 0 ? '' : f.bottom.length === 1 ? ` / ${f.bottom[0]}` : ` / (${f.bottom.join(' * ')})`;
    return { text: top.join(' * ') + bottom, size: top.length + f.bottom.length };
  }
}

function joinFactors(top: readonly string[], bottom: readonly string[], number: string | undefined): Product {
  return {
    label: `${number ?? ''} ${top.join('*')}/${bottom.join('*')}`,
    attach: (inner) => {
      const negative = number === '(-1)';
      const up = (negative ? '-' : '') + ([...(number && !negative ? [number] : []), ...(inner ? [inner] : []), ...top].join(' * ') || '1');
      if (bottom.length === 0) return up;
      return `${up} / ${bottom.length === 1 ? bottom[0] : bracket(bottom.join(' * '))}`;
    },
  };
}

/** Parameters, coordinates, velocities, functions: the order people write factors in. */
function rank(e: Expr): number {
  if (e.op !== 'symbol') return 3;
  const { role, order } = e.data as SymbolData;
  return role === 'parameter' ? 0 : 1 + order / 2;
}
