import { normalForm, type Monomial } from '../../../expression/normal-form';
import { monomialExpr } from '../../../expression/normal-form';
import { Tape } from '../../../expression/tape';
import type { Expr } from '../../../expression/node';
import { Binding, bindingOf, bracket, replaceSite, roomAt } from '../edits';
import { LinearFit } from '../linear-fit';
import type { LogFit } from '../log-fit';
import type { Model } from '../model';
import { agree, isVisible, map2, seenAt, type Maker } from './candidate';
import { isScalarCall } from '../sites';
import { isSum } from './operators';
import { commonOf, isInnerFactor } from './numbers';
import { TermPrinter, type Product } from './term-printer';

/** A product that may be missing: a term of the derived equations without its constant factor. */
export interface KnownTerm {
  readonly monomial: Monomial;
  readonly expr: Expr;
  readonly value: Float64Array;
  /** Terms of one derived expression have the same number: they may be missing together. */
  readonly group: number;
}

const MOST_TERMS = 60;

/** The terms of the derived equations (and of other claims), as columns. */
export function knownTerms(model: Model, wanted: readonly Expr[]): KnownTerm[] {
  const { system } = model.derived;
  const { graph } = system;
  const out = new Map<Expr, { monomial: Monomial; group: number }>();
  for (const [group, e] of wanted.entries()) {
    for (const m of normalForm(graph, e, 40)?.terms ?? []) {
      const factors = m.factors;
      if (factors.length === 0) continue;
      out.set(monomialExpr(graph, { coefficient: m.coefficient.divide(m.coefficient), factors }), { monomial: m, group });
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
    return value.every(Number.isFinite) ? [{ ...out.get(expr)!, expr, value }] : [];
  });
}

/** A term of the derived equations put in, or a factor that is missing or too many. */
export function insertions(terms: readonly KnownTerm[], fit: LogFit<Expr>, n: number): Maker {
  const groups = [...new Set(terms.map((t) => t.group))].map((g) => terms.filter((t) => t.group === g));
  const sums = groups.filter((g) => g.length > 1).map((g) => new LinearFit(g.map((t) => ({ expr: t, value: t.value })), n));
  return (scene, spot, give) => {
    const { site, need, values, text } = spot;
    if (!need || values.length !== 1) {
      guesses(scene, spot, give);
      return;
    }
    const now = values[0]!;
    const value = need.map((x, s) => (Number.isNaN(x) ? now[s]! : x));
    const { node } = site;
    const { source } = scene;
    const parent = site.parent?.node;
    const printer = new TermPrinter(scene, site);

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
          values: [value],
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
          const sum = printer.sumOfAtoms(ratio);
          if (sum !== undefined) give1({ label: sum, attach: (inner) => `${inner} * ${sum}` }, below + 2.4);
          for (const atom of printer.atoms) {
            for (const power of [1, -1]) {
              const rest = ratio.map((x, s) => x / atom.value[s]! ** power);
              const constant = commonOf(rest);
              if (constant === undefined) continue;
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
      // A term belongs into a sum that is there, sooner than into one made for it in brackets.
      const made = !isZero && roomAt(site, source) > Binding.sum ? 0.7 : 0;
      give({
        site,
        edits: [replaceSite(site, source, isZero ? (sign === '-' ? `-${body}` : body) : whole, isZero ? Binding.product : Binding.sum)],
        code: 'missing-term',
        cost: cost + made,
        values: [value],
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
    for (const fit of sums) {
      const parts = fit.sum(gap);
      // Whole terms as the equations have them: anything else would make up for faults of other terms.
      const ratios = parts?.map((p) => p.coefficient / p.base.monomial.coefficient.toNumber());
      if (!parts || parts.length < 2 || !ratios!.every((r) => Math.abs(Math.abs(r) - 1) < 1e-6 && r * ratios![0]! > 0)) continue;
      const written = parts.map((p) => ({ sign: p.coefficient < 0 ? '-' : '+', ...printer.term(p.base.monomial, [], Math.abs(p.coefficient)) }));
      if (written.some((w) => w.text === undefined)) continue;
      const [first, ...rest] = written;
      offer(first!.sign as '+' | '-', [first!.text, ...rest.map((w) => `${w.sign} ${w.text}`)].join(' '), 2.5 + 0.1 * written.reduce((t, w) => t + w.size!, 0));
    }
  };
}

/**
 * Where the values needed are not known: times or divided by anything the code has a name for; in a function's argument, and
 * where a place is evaluated several times, also more or less of it.
 */
const guesses: Maker = (scene, spot, give) => {
  const { site, values, text } = spot;
  if (isInnerFactor(spot) || site.node.kind === 'number') return;
  const parent = site.parent?.node;
  const isArgument = site.role === 'argument' && site.parent?.node.kind === 'call' && isScalarCall(site.parent.node);
  const inner = bindingOf(site.node) < Binding.product ? bracket(text) : text;
  for (const atom of scene.atoms) {
    if (!isVisible(atom, site) || atom.text.length > 24) continue;
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
    if ((!isArgument && values.length === 1) || atom.compound || (parent?.kind === 'binary' && isSum(parent.op))) continue;
    const more = (op: '+' | '-', term: string, seenTerm: readonly Float64Array[]): void =>
      give({
        site,
        edits: [replaceSite(site, scene.source, `${text} ${op} ${term}`, Binding.sum)],
        code: 'missing-term',
        cost: 2,
        values: map2(values, seenTerm, op === '+' ? (x, y) => x + y : (x, y) => x - y),
        label: `${op} ${term}`,
        old: '',
        new: `${op} ${term}`,
      });
    const square = values.length > 1 && /^[\p{L}_]\w*$/u.test(atom.text) ? map2(seen, seen, (x, y) => x * y) : undefined;
    for (const op of ['-', '+'] as const) {
      more(op, atom.text, seen);
      if (square) more(op, `${atom.text} * ${atom.text}`, square);
    }
  }
};
