import type { Expr, FunctionName, SymbolData } from '../node';
import type { Rational } from '../rational';
import { Rational as R } from '../rational';
import { joined, layout, Level, type Part, type Printed, type Style, type Written } from './layout';
import { writeRational } from './number';

/** An expression as TeX for mathematics mode. */
export function tex(expr: Expr, options?: { readonly limit?: number }): string {
  const p = texAll([expr], options);
  if (p.where.length === 0) return p.values[0]!;
  return `${p.values[0]!} \\quad\\text{where}\\quad ${p.where.map((w) => `${w.name} = ${w.text}`).join(',\\; ')}`;
}

/** Several expressions that share the names of their common parts. */
export function texAll(exprs: readonly Expr[], options: { readonly limit?: number } = {}): Printed {
  const printed = layout(STYLE, exprs, { limit: options.limit ?? 600, least: 24, prefix: 's' });
  return printed;
}

const GREEK_NAMES =
  'alpha beta gamma delta epsilon zeta eta theta iota kappa lambda mu nu xi pi rho sigma tau upsilon phi chi psi omega';
const GREEK_LETTERS = 'αβγδεζηθικλμνξπρστυφχψω';
const SAME_AS_LATIN = new Set(['alpha', 'beta', 'epsilon', 'zeta', 'eta', 'iota', 'kappa', 'mu', 'nu', 'rho', 'tau', 'chi']);

const greek = new Map<string, string>();
GREEK_NAMES.split(' ').forEach((name, i) => {
  const capital = name[0]!.toUpperCase() + name.slice(1);
  const command = `\\${name}`;
  const capitalCommand = SAME_AS_LATIN.has(name) ? `\\mathrm{${capital[0]!}}` : `\\${capital}`;
  const letter = GREEK_LETTERS[i]!;
  greek.set(name, command).set(letter, command);
  greek.set(capital, capitalCommand).set(letter.toUpperCase(), capitalCommand);
});
greek.set('ϑ', '\\vartheta').set('ϕ', '\\phi').set('φ', '\\varphi').set('ς', '\\varsigma');

/** `theta1` is \theta_{1}, `m_load` m_{\mathrm{load}}, `th''` \ddot{th}. */
export function symbolTex(s: SymbolData): string {
  const { stem, subscript } = split(s.name);
  let body = stemTex(stem);
  if (s.order === 1) body = `\\dot{${body}}`;
  else if (s.order === 2) body = `\\ddot{${body}}`;
  else if (s.order > 2) body = `${body}^{(${s.order})}`;
  return subscript === '' ? body : `${body}_{${subscriptTex(subscript)}}`;
}

function split(name: string): { stem: string; subscript: string } {
  const m = /^(.+?)(?:_+(.+)|(\d+(?:_.+)?)|\[(.+)\])$/u.exec(name);
  if (!m) return { stem: name, subscript: '' };
  return { stem: m[1]!, subscript: m[2] ?? m[3] ?? m[4]! };
}

function stemTex(stem: string): string {
  return greek.get(stem) ?? (/^\p{L}$/u.test(stem) ? stem : `\\mathit{${escaped(stem)}}`);
}

function subscriptTex(subscript: string): string {
  if (/^[\d, ]+$|^[A-Za-z]$/.test(subscript)) return subscript;
  return greek.get(subscript) ?? `\\mathrm{${escaped(subscript)}}`;
}

function escaped(s: string): string {
  return s.replace(/[\\{}$&#^_%~]/g, (c) => (c === '\\' || c === '^' || c === '~' ? ' ' : `\\${c}`));
}

const KNOWN = new Set<FunctionName>(['sin', 'cos', 'tan', 'sinh', 'cosh', 'tanh', 'exp', 'min', 'max']);
const OTHER: Partial<Record<FunctionName, string>> = {
  asin: '\\arcsin',
  acos: '\\arccos',
  atan: '\\arctan',
  log: '\\ln',
  atan2: '\\operatorname{atan2}',
  sign: '\\operatorname{sign}',
};

const STYLE: Style = {
  pi: '\\pi',
  nan: '\\text{undefined}',
  true: '\\text{true}',
  false: '\\text{false}',
  and: '\\land',
  or: '\\lor',
  symbol: symbolTex,
  number(r) {
    const n = writeRational(r);
    if (n.kind === 'fraction') return { text: `\\frac{${n.top}}{${n.bottom}}`, level: Level.product };
    return { text: scientific(n.text), level: n.text.includes('e') ? Level.product : Level.atom };
  },
  brackets: (s) => `\\left(${s}\\right)`,
  product: productTex,
  power(base, exponent) {
    if (exponent.equals(R.HALF)) return atom(`\\sqrt{${base.text}}`);
    const e = exponentTex(exponent);
    const head = functionHead(base.node.op);
    if (head && exponent.isInteger && base.text.startsWith(head)) {
      return { text: `${head}^{${e}}${base.text.slice(head.length)}`, level: Level.power };
    }
    return { text: `${raisable(base)}^{${e}}`, level: Level.power };
  },
  generalPower: (base, exponent) => ({ text: `${tight(base)}^{${exponent.text}}`, level: Level.power }),
  call(name, args) {
    if (name === 'abs') return atom(`\\left|${args[0]!}\\right|`);
    if (name === 'floor') return atom(`\\left\\lfloor ${args[0]!}\\right\\rfloor`);
    return atom(`${functionHead(name)!}\\left(${joined(args, ', ')}\\right)`);
  },
  compare: (op, a, b) => `${a} ${op === 'less' ? '<' : op === 'lessEqual' ? '\\le' : '='} ${b}`,
  not: (a) => ({ text: `\\lnot ${a}`, level: Level.compare }),
  select: (c, yes, no) =>
    atom(`\\begin{cases} ${yes.text} & ${c.text} \\\\ ${no.text} & \\text{otherwise} \\end{cases}`),
  solve: (rows, right) =>
    atom(`${matrix(rows)}^{-1} ${matrix(right.map((r) => [r]))}`),
  component: (solution, index) => ({ text: `\\left[${solution}\\right]_{${index + 1}}`, level: Level.atom }),
};

function functionHead(op: string): string | undefined {
  return KNOWN.has(op as FunctionName) ? `\\${op}` : OTHER[op as FunctionName];
}

function matrix(rows: readonly (readonly string[])[]): string {
  return `\\begin{bmatrix} ${joined(rows.map((r) => joined(r, ' & ')), ' \\\\ ')} \\end{bmatrix}`;
}

function atom(text: string): Written {
  return { text, level: Level.atom };
}

function tight(w: Written): string {
  return w.level >= Level.atom ? w.text : STYLE.brackets(w.text);
}

/** A dotted or subscripted symbol takes an exponent as it stands; a selection or a matrix does not. */
function raisable(base: Part): string {
  return base.level >= Level.atom && base.node.op !== 'select' ? base.text : STYLE.brackets(base.text);
}

function exponentTex(e: Rational): string {
  return e.isInteger ? e.toString() : `${e.numerator}/${e.denominator}`;
}

function scientific(text: string): string {
  const [mantissa, exponent] = text.split('e');
  return exponent === undefined ? text : `${mantissa!} \\cdot 10^{${exponent}}`;
}

/** Factors side by side; a quotient as a fraction, whose parts then need no brackets when they stand alone. */
function productTex(coefficient: Rational, top: readonly Part[], bottom: readonly Part[]): Written {
  const n = writeRational(coefficient);
  if (bottom.length === 0) {
    if (coefficient.isOne && top.length === 1) return top[0]!;
    const front = coefficient.isOne ? '' : n.kind === 'fraction' ? `\\frac{${n.top}}{${n.bottom}} ` : `${scientific(n.text)} `;
    return { text: front + side(top), level: Level.product };
  }
  const above = n.kind === 'fraction' ? (n.top === '1' ? '' : n.top) : coefficient.isOne ? '' : scientific(n.text);
  const below = n.kind === 'fraction' ? n.bottom : '';
  return { text: `\\frac{${beside(above, top)}}{${beside(below, bottom)}}`, level: Level.product };
}

function beside(number: string, parts: readonly Part[]): string {
  if (parts.length === 0) return number === '' ? '1' : number;
  if (number === '') return parts.length === 1 ? parts[0]!.text : side(parts);
  return `${number} ${side(parts)}`;
}

function side(parts: readonly Part[]): string {
  return joined(parts.map((p) => (p.level > Level.product ? p.text : STYLE.brackets(p.text))), ' ');
}
