import type { Expr } from '../node';
import { symbolText } from '../node';
import { Rational } from '../rational';
import { joined, layout, Level, type Part, type Printed, type Style, type Written } from './layout';
import { writeRational } from './number';

export interface TextOptions {
  /** Shared parts get names of their own where the text would be longer than this. */
  readonly limit?: number;
}

const LIMIT = 600;
const LEAST_NAMED = 24;

/** An expression in the language of declarations: `m*l^2*th'' + m*g*l*sin(th)`. */
export function text(expr: Expr, options?: TextOptions): string {
  return withWhere(texts([expr], options));
}

/** Several expressions that share the names of their common parts. */
export function texts(exprs: readonly Expr[], options: TextOptions = {}): Printed {
  return layout(STYLE, exprs, { limit: options.limit ?? LIMIT, least: LEAST_NAMED, prefix: 's' });
}

/** `left = right`. */
export function equationText(left: Expr, right: Expr, options?: TextOptions): string {
  const printed = texts([left, right], options);
  return withWhere({ values: [`${printed.values[0]} = ${printed.values[1]}`], where: printed.where });
}

function withWhere(p: Printed): string {
  if (p.where.length === 0) return p.values[0]!;
  return `${p.values[0]!} where ${p.where.map((w) => `${w.name} = ${w.text}`).join(', ')}`;
}

const STYLE: Style = {
  pi: 'pi',
  nan: 'undefined',
  true: 'true',
  false: 'false',
  and: 'and',
  or: 'or',
  symbol: symbolText,
  number: numberText,
  brackets: (s) => `(${s})`,
  product: productText,
  power(base, exponent) {
    if (exponent.equals(Rational.HALF)) return atom(`sqrt(${base.text})`);
    return { text: `${tight(base)}^${exponent.isInteger ? exponent : `(${exponent})`}`, level: Level.power };
  },
  generalPower: (base, exponent) => ({ text: `${tight(base)}^${tight(exponent)}`, level: Level.power }),
  call: (name, args) => atom(`${name}(${joined(args, ', ')})`),
  compare: (op, a, b) => `${a} ${op === 'less' ? '<' : op === 'lessEqual' ? '<=' : '='} ${b}`,
  not: (a) => ({ text: `not ${a}`, level: Level.compare }),
  select: (c, yes, no) => ({ text: `${yes.text} if ${c.text} else ${no.text}`, level: Level.select }),
  solve: (rows, right) => atom(`solve([${joined(rows.map((r) => `[${joined(r, ', ')}]`), ', ')}], [${joined(right, ', ')}])`),
  component: (solution, index) => atom(`${solution}[${index + 1}]`),
};

function atom(t: string): Written {
  return { text: t, level: Level.atom };
}

function tight(w: Written): string {
  return w.level >= Level.atom ? w.text : `(${w.text})`;
}

function factor(w: Written): string {
  return w.level > Level.product ? w.text : `(${w.text})`;
}

export function numberText(r: Rational): Written {
  const n = writeRational(r);
  if (n.kind === 'fraction') return { text: `${n.top}/${n.bottom}`, level: Level.product };
  return { text: n.text, level: Level.atom };
}

/** `1/2*m*x'^2`, `3*g/(2*l)`, `1/r`. */
function productText(coefficient: Rational, top: readonly Part[], bottom: readonly Part[]): Written {
  const above = top.map(factor);
  const below = bottom.map(factor);
  const n = writeRational(coefficient);
  if (below.length === 0) {
    const front = coefficient.isOne ? [] : [n.kind === 'fraction' ? `${n.top}/${n.bottom}` : n.text];
    if (front.length === 0 && above.length === 1) return top[0]!;
    return { text: joined([...front, ...above], '*'), level: Level.product };
  }
  if (n.kind === 'fraction') {
    if (n.top !== '1') above.unshift(n.top);
    below.unshift(n.bottom);
  } else if (!coefficient.isOne) above.unshift(n.text);
  const numerator = above.length === 0 ? '1' : joined(above, '*');
  return { text: `${numerator}/${below.length === 1 ? below[0]! : `(${joined(below, '*')})`}`, level: Level.product };
}
