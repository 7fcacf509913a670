import type { Expr, FunctionName, SymbolData } from '../node';
import { Rational } from '../rational';
import { nameShared, type NamingOptions } from './naming';
import { compareFactors, compareTerms, orderKey, type OrderKey } from './order';

/** How tightly the outermost operator of a text binds. */
export enum Level {
  select,
  or,
  and,
  compare,
  sum,
  product,
  power,
  atom,
}

export interface Written {
  readonly text: string;
  readonly level: Level;
}

/** An operand: what was written for a node, without its sign. */
export interface Part extends Written {
  readonly node: Expr;
  readonly key: OrderKey;
}

/** How one output language writes the pieces; `layout` decides their order, signs and names. */
export interface Style {
  readonly pi: string;
  readonly nan: string;
  readonly true: string;
  readonly false: string;
  symbol(s: SymbolData): string;
  /** `value` is not negative. */
  number(value: Rational): Written;
  brackets(text: string): string;
  /** A text with a minus sign before it; `-text` where this is left out. */
  minus?(text: string): string;
  /** |coefficient| * top / bottom; at least one of top and bottom has an entry. */
  product(coefficient: Rational, top: readonly Part[], bottom: readonly Part[]): Written;
  /** `exponent` is positive and not 1. */
  power(base: Part, exponent: Rational): Written;
  generalPower(base: Written, exponent: Written): Written;
  call(name: FunctionName, args: readonly string[]): Written;
  compare(op: 'less' | 'lessEqual' | 'equal', a: string, b: string): string;
  not(a: string): Written;
  readonly and: string;
  readonly or: string;
  select(condition: Written, yes: Written, no: Written): Written;
  solve(rows: readonly (readonly string[])[], right: readonly string[]): Written;
  component(solution: string, index: number): Written;
}

export interface Printed {
  readonly values: readonly string[];
  /** Names of shared parts, each defined before it is used. */
  readonly where: readonly { readonly name: string; readonly text: string; readonly node: Expr }[];
}

/** A node as written: a sign to come before it, and for products the parts still apart, so that users can merge them. */
interface Piece extends Part {
  readonly minus: boolean;
  readonly fraction?: { coefficient: Rational; top: readonly Part[]; bottom: readonly Part[] };
}

/** Products nested in products are written flat up to this many parts. */
const MOST_MERGED = 48;

/** Writes expressions in a style, each node once. */
export function layout(style: Style, roots: readonly Expr[], options: NamingOptions): Printed {
  const { names, nodes } = nameShared(roots, options);
  const writer = new Writer(style);
  const where: { name: string; text: string; node: Expr }[] = [];
  for (const node of nodes) {
    const name = names.get(node);
    writer.write(node, name);
    if (name !== undefined) where.push({ name, text: writer.definition, node });
  }
  return { values: roots.map((r) => writer.full(r)), where };
}

class Writer {
  private readonly pieces = new Map<Expr, Piece>();
  /** What the node written last is, where it is known by a name. */
  definition = '';

  constructor(private readonly style: Style) {}

  write(node: Expr, name?: string): void {
    const key = orderKey(node, node.args.map((a) => this.pieces.get(a)!.key));
    const piece = this.compose(node, key);
    if (name === undefined) {
      this.pieces.set(node, piece);
      return;
    }
    this.definition = signed(this.style, piece).text;
    this.pieces.set(node, { node, key, text: name, level: Level.atom, minus: false });
  }

  full(node: Expr): string {
    return this.whole(node).text;
  }

  private whole(node: Expr): Written {
    return signed(this.style, this.pieces.get(node)!);
  }

  /** As an operand that must bind at least as tightly as `level`. */
  private operand(node: Expr, level: Level): string {
    return this.atLeast(this.whole(node), level);
  }

  private atLeast(w: Written, level: Level): string {
    return w.level >= level ? w.text : this.style.brackets(w.text);
  }

  private compose(node: Expr, key: OrderKey): Piece {
    const style = this.style;
    const plain = (w: Written): Piece => ({ ...w, node, key, minus: false });
    const atom = (text: string): Piece => plain({ text, level: Level.atom });
    switch (node.op) {
      case 'number': {
        const r = node.data as Rational;
        const minus = r.sign < 0;
        return { ...plain(style.number(minus ? r.negate() : r)), minus };
      }
      case 'pi':
      case 'nan':
      case 'true':
      case 'false':
        return atom(style[node.op]);
      case 'symbol':
        return atom(style.symbol(node.data as SymbolData));
      case 'sum':
        return plain({ text: this.sum(node.args), level: Level.sum });
      case 'product':
        return this.product(node, key);
      case 'power':
        return this.power(node, key);
      case 'less':
      case 'lessEqual':
      case 'equal': {
        const [a, b] = node.args.map((x) => this.operand(x, Level.sum)) as [string, string];
        return plain({ text: style.compare(node.op, a, b), level: Level.compare });
      }
      case 'and':
      case 'or': {
        const level = node.op === 'and' ? Level.and : Level.or;
        const sides = node.args.map((x) => this.operand(x, level));
        return plain({ text: joined(sides, ` ${style[node.op]} `), level });
      }
      case 'not':
        return plain(style.not(this.operand(node.args[0]!, Level.atom)));
      case 'select':
        return plain(style.select(this.whole(node.args[0]!), this.whole(node.args[1]!), this.whole(node.args[2]!)));
      case 'solve': {
        const n = node.data as number;
        const texts = node.args.map((x) => this.whole(x).text);
        const rows = Array.from({ length: n }, (_, i) => texts.slice(i * n, i * n + n));
        return plain(style.solve(rows, texts.slice(n * n)));
      }
      case 'component':
        return plain(style.component(this.whole(node.args[0]!).text, node.data as number));
      default:
        return plain(style.call(node.op, node.args.map((x) => this.whole(x).text)));
    }
  }

  private sum(args: readonly Expr[]): string {
    const terms = args.map((a) => this.pieces.get(a)!);
    terms.sort(compareTerms(Math.max(...terms.map((t) => t.key.order))));
    // -a + b reads better as b - a, as long as no higher derivative moves back for it.
    if (terms[0]!.minus) {
      const i = terms.findIndex((t) => !t.minus && t.key.order === terms[0]!.key.order);
      if (i > 0) terms.unshift(...terms.splice(i, 1));
    }
    let text = '';
    for (const t of terms) {
      const body = this.atLeast(t, Level.product);
      text += text === '' ? (t.minus ? negative(this.style, body) : body) : t.minus ? ` - ${body}` : ` + ${body}`;
    }
    return text;
  }

  private product(node: Expr, key: OrderKey): Piece {
    let coefficient = Rational.ONE;
    let minus = false;
    const top: Part[] = [];
    const bottom: Part[] = [];
    for (const a of node.args) {
      const p = this.pieces.get(a)!;
      if (a.op === 'number') {
        const r = a.data as Rational;
        if (r.sign < 0) minus = !minus;
        coefficient = coefficient.multiply(r.sign < 0 ? r.negate() : r);
      } else if (p.fraction && p.fraction.top.length + p.fraction.bottom.length <= MOST_MERGED) {
        if (p.minus) minus = !minus;
        coefficient = coefficient.multiply(p.fraction.coefficient);
        top.push(...p.fraction.top);
        bottom.push(...p.fraction.bottom);
      } else {
        if (p.minus) minus = !minus;
        top.push(p);
      }
    }
    top.sort(compareFactors);
    bottom.sort(compareFactors);
    const written = this.style.product(coefficient, top, bottom);
    return { ...written, node, key, minus, fraction: { coefficient, top, bottom } };
  }

  private power(node: Expr, key: OrderKey): Piece {
    const [base, exponent] = [node.args[0]!, node.args[1]!];
    if (exponent.op !== 'number') {
      return { ...this.style.generalPower(this.whole(base), this.whole(exponent)), node, key, minus: false };
    }
    const e = exponent.data as Rational;
    const p = this.pieces.get(base)!;
    const part: Part = p.minus ? { ...p, text: this.style.brackets(negative(this.style, this.atLeast(p, Level.product))), level: Level.atom } : p;
    if (e.sign > 0) return { ...this.style.power(part, e), node, key, minus: false };
    const size = e.negate();
    if (size.isOne && p.fraction && p.fraction.bottom.length + p.fraction.top.length <= MOST_MERGED) {
      const { top: bottom, bottom: top } = p.fraction;
      const coefficient = size.divide(p.fraction.coefficient);
      const written = this.style.product(coefficient, top, bottom);
      return { ...written, node, key, minus: p.minus, fraction: { coefficient, top, bottom } };
    }
    const below: Part = size.isOne ? part : { ...this.style.power(part, size), node, key };
    return {
      ...this.style.product(Rational.ONE, [], [below]),
      node,
      key,
      minus: false,
      fraction: { coefficient: Rational.ONE, top: [], bottom: [below] },
    };
  }
}

/** Like `join`, which would copy: long texts grow by reference here, so that depth costs no more than length. */
export function joined(parts: readonly string[], separator: string): string {
  let out = '';
  for (let i = 0; i < parts.length; i++) out += i === 0 ? parts[i]! : separator + parts[i]!;
  return out;
}

function signed(style: Style, p: Piece): Written {
  if (!p.minus) return p;
  const body = p.level >= Level.product ? p.text : style.brackets(p.text);
  return { text: negative(style, body), level: Level.sum };
}

function negative(style: Style, text: string): string {
  return style.minus?.(text) ?? `-${text}`;
}
