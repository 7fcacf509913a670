import { normalForm, type Monomial } from '../../../expression/normal-form';
import { monomialExpr } from '../../../expression/normal-form';
import { symbolsOf } from '../../../expression/reach';
import { Tape } from '../../../expression/tape';
import type { Expr, SymbolData } from '../../../expression/node';
import { Binding, bindingOf, bracket, replaceSite } from '../edits';
import { LogFit } from '../log-fit';
import type { Model } from '../model';
import { prefixFor } from '../scene';
import { agree, map2, seenAt, type Maker, type Scene } from './candidate';
import { isSum } from './operators';
import { commonOf, isInnerFactor, writeNice } from './numbers';

/** A product that may be missing: a term of the derived equations without its constant factor. */
export interface KnownTerm {
  readonly monomial: Monomial;
  readonly expr: Expr;
  readonly value: Float64Array;
}

const MOST_TERMS = 60;

/** The terms of the derived equations (and of other claims), as columns. */
export function knownTerms(model: Model, wanted: readonly Expr[]): KnownTerm[] {
  const { system } = model.derived;
  const { graph } = system;
  const out = new Map<Expr, Monomial>();
  for (const e of wanted) {
    for (const m of normalForm(graph, e, 40)?.terms ?? []) {
      const factors = m.factors;
      if (factors.length === 0) continue;
      out.set(monomialExpr(graph, { coefficient: m.coefficient.divide(m.coefficient), factors }), m);
      if (out.size >= MOST_TERMS) break;
    }
  }
  if (out.size === 0) return [];
  const exprs = [...out.keys()];
  const tape = new Tape(exprs);
  const registers = tape.run((s) => {
    const values = model.column(s);
    return values && { values };
  }, model.n);
  return exprs.flatMap((expr) => {
    const value = registers.column(expr).values;
    return value.every(Number.isFinite) ? [{ monomial: out.get(expr)!, expr, value }] : [];
  });
}

/** A term of the derived equations put in, or a factor that is missing or too many. */
export function insertions(terms: readonly KnownTerm[], fit: LogFit<Expr>): Maker {
  return (scene, spot, give) => {
    const { site, need, values, text } = spot;
    if (!need || values.length !== 1) {
      guesses(scene, spot, give);
      return;
    }
    const now = values[0]!;
    const { node } = site;
    const { source } = scene;
    const parent = site.parent?.node;
    const printer = new TermPrinter(scene, spot.site.span.start, spot.site.owner);

    // A factor: a product of declared symbols, or something the code has a name for.
    if (!isInnerFactor(spot) || (parent?.kind === 'binary' && parent.op === '/' && node.kind !== 'number')) {
      const ratio = need.map((x, s) => x / now[s]!);
      const give1 = (factor: Product, cost: number): void => {
        const inner = bindingOf(node) < Binding.product ? bracket(text) : text;
        const whole = factor.attach(inner);
        if (whole === undefined) return;
        give({
          site,
          edits: [replaceSite(site, source, whole, Binding.product)],
          code: 'factor',
          cost,
          values: [need],
          label: `times ${factor.label}`,
          old: text,
          new: whole,
        });
      };
      if (commonOf(ratio) === undefined) {
        const p = fit.product(ratio);
        const product = p && printer.product(p.constant, p.powers);
        const own = product ? undefined : printer.own.product(ratio);
        const below = parent?.kind === 'binary' && parent.op === '/' && site.role === 'right' ? 0.5 : 0;
        if (product) give1(product, below + 1.9 + 0.3 * p.powers.length + (Math.abs(p.constant - 1) > 1e-9 ? 0.6 : 0));
        else if (own) {
          const written = printer.ofAtoms(own.constant, own.powers);
          if (written) give1(written, below + 2 + 0.3 * own.powers.length);
        } else {
          for (const atom of printer.atoms) {
            for (const power of [1, -1]) {
              const rest = ratio.map((x, s) => x / atom.value[s]! ** power);
              const constant = commonOf(rest);
              if (constant === undefined) {
                continue;
              }
              const product = printer.withAtom(constant, atom.text, power);
              if (product) give1(product, below + 2 + (Math.abs(constant - 1) > 1e-9 ? 0.6 : 0));
            }
          }
        }
      }
    }
    // A term: only at the top of a sum, whose parts all have the same effect.
    if (parent?.kind === 'binary' && isSum(parent.op)) return;
    const gap = need.map((x, s) => x - now[s]!);
    if (!gap.some((x) => Math.abs(x) > 1e-9)) return;
    const least = Math.max(...gap.map((x) => (Number.isNaN(x) ? 0 : Math.abs(x))));
    const offer = (sign: '+' | '-', body: string, cost: number): void => {
      const whole = `${bindingOf(node) < Binding.sum ? bracket(text) : text} ${sign} ${body}`;
      const isZero = node.kind === 'number' && node.value.isZero;
      give({
        site,
        edits: [replaceSite(site, source, isZero ? (sign === '-' ? `-${body}` : body) : whole, isZero ? Binding.product : Binding.sum)],
        code: 'missing-term',
        cost,
        values: [need],
        label: `${sign} ${body}`,
        old: '',
        new: `${sign} ${body}`,
      });
    };
    for (const atom of printer.atoms) {
      if (agree(atom.value, gap)) offer('+', atom.text, 1.9);
      else if (agree(atom.value.map((x) => -x), gap)) offer('-', atom.text, 1.9);
    }
    const own = printer.own.product(gap);
    const written = own && printer.ofAtoms(Math.abs(own.constant), own.powers);
    if (own && written) {
      const body = written.attach('');
      if (body) offer(own.constant < 0 ? '-' : '+', body, 2 + 0.15 * own.powers.length);
    }
    for (const term of terms) {
      const ratio = gap.map((x, s) => x / term.value[s]!);
      if (least < 1e-9) continue;
      const p = fit.product(ratio);
      if (!p) continue;
      const written = printer.term(term.monomial, p.powers, Math.abs(p.constant));
      if (written) offer(p.constant < 0 ? '-' : '+', written.text, 2.2 + 0.1 * written.size);
    }
  };
}

/** Where the values needed are not known: times or divided by anything the code has a name for. */
const guesses: Maker = (scene, spot, give) => {
  const { site, values, text } = spot;
  if (isInnerFactor(spot) || site.node.kind === 'number') return;
  const inner = bindingOf(site.node) < Binding.product ? bracket(text) : text;
  for (const atom of scene.atoms) {
    if (atom.from > site.span.start || (atom.owner && atom.owner !== site.owner) || atom.text.length > 24) continue;
    const seen = seenAt(atom, values.length);
    if (!seen) continue;
    for (const op of ['*', '/'] as const) {
      const whole = `${inner} ${op} ${atom.text}`;
      give({
        site,
        edits: [replaceSite(site, scene.source, whole, Binding.product)],
        code: 'factor',
        cost: 2,
        values: map2(values, seen, op === '*' ? (x, y) => x * y : (x, y) => x / y),
        label: `${op} ${atom.text}`,
        old: text,
        new: whole,
      });
    }
  }
};

const fits = new WeakMap<Scene, Map<string, LogFit<string>>>();

/** One fit per set of names, made once: distinct sizes only, plain names first. */
function fitOf(scene: Scene, atoms: readonly { readonly text: string; readonly value: Float64Array }[]): LogFit<string> {
  let known = fits.get(scene);
  if (!known) fits.set(scene, (known = new Map()));
  const key = atoms.map((a) => a.text).join(' ');
  let fit = known.get(key);
  if (!fit) {
    const chosen: { expr: string; value: Float64Array }[] = [];
    for (const a of [...atoms].sort((x, y) => x.text.length - y.text.length)) {
      if (a.value.some((x) => Math.abs(x) < 1e-9) || chosen.some((c) => c.value.every((x, s) => Math.abs(Math.abs(x) - Math.abs(a.value[s]!)) < 1e-9))) continue;
      chosen.push({ expr: a.text, value: a.value });
    }
    known.set(key, (fit = new LogFit(chosen, scene.model.n)));
  }
  return fit;
}

interface Product {
  readonly label: string;
  attach(inner: string): string | undefined;
}

/** Writes products of symbols with the names that the code has for them at a place. */
class TermPrinter {
  readonly atoms: readonly { readonly text: string; readonly value: Float64Array }[];
  private fit: LogFit<string> | undefined;

  constructor(
    private readonly scene: Scene,
    at: number,
    owner: unknown,
  ) {
    this.atoms = scene.atoms
      .filter((a) => a.values.length === 1 && a.from <= at && (!a.owner || a.owner === owner))
      .map((a) => ({ text: a.text, value: a.values[0]! }));
  }

  /** Products of what the code has names for here. */
  get own(): LogFit<string> {
    return (this.fit ??= fitOf(this.scene, this.atoms));
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
      const up = [...(number ? [number] : []), ...(inner ? [inner] : []), ...top].join(' * ') || '1';
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
