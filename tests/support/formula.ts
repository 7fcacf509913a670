/**
 * Numbers out of formulas, by a parser of its own: the tests' judge of the product must not share the product's code.
 */
export type Value = number | readonly number[];

export interface Scope {
  /** The value of `name` with `order` primes. */
  lookup(name: string, order: number): Value;
  /** Time derivative of a formula. */
  rate(of: Evaluate): Value;
  /** `p[q]` and the like. */
  indexed?(name: string, index: string): Value | undefined;
}

export type Evaluate = (scope: Scope) => Value;

export function num(v: Value): number {
  if (typeof v !== 'number') throw new Error('a vector where a number was expected');
  return v;
}

export function vec(v: Value): readonly number[] {
  if (typeof v === 'number') throw new Error('a number where a vector was expected');
  return v;
}

const each = (a: Value, b: Value, f: (x: number, y: number) => number): Value => {
  if (typeof a === 'number' && typeof b === 'number') return f(a, b);
  if (typeof a === 'number') return vec(b).map((y) => f(a, y));
  if (typeof b === 'number') return a.map((x) => f(x, b));
  if (a.length !== b.length) throw new Error('vectors of different length');
  return a.map((x, i) => f(x, b[i]!));
};

const dot = (a: Value, b: Value): number => vec(each(a, b, (x, y) => x * y)).reduce((s, x) => s + x, 0);

const FUNCTIONS: Record<string, (...a: Value[]) => Value> = {
  dot: (a, b) => dot(a!, b!),
  norm: (a) => Math.sqrt(dot(a!, a!)),
  cross: (a, b) => {
    const [x, y, z] = vec(a!) as number[];
    const [u, v, w] = vec(b!) as number[];
    if (z === undefined || w === undefined) return x! * v! - y! * u!;
    return [y! * w - z * v!, z * u! - x! * w, x! * v! - y! * u!];
  },
};
for (const name of ['sin', 'cos', 'tan', 'asin', 'acos', 'atan', 'atan2', 'sinh', 'cosh', 'tanh', 'exp', 'log', 'sqrt', 'abs', 'sign', 'min', 'max']) {
  FUNCTIONS[name] = (...a) => (Math[name as 'atan2'] as (...x: number[]) => number)(...a.map(num));
}

type Token = { kind: 'number' | 'name' | 'mark' | 'end'; text: string; at: number };

function tokenize(text: string): Token[] {
  const tokens: Token[] = [];
  const pattern = /\s*(?:(\d+\.?\d*(?:e[+-]?\d+)?|\.\d+)|([\p{L}_][\p{L}\p{N}_]*)|(\*\*|'|[-+*/^(),.[\]]))/uy;
  while (pattern.lastIndex < text.trimEnd().length) {
    const at = pattern.lastIndex;
    const m = pattern.exec(text);
    if (!m) throw new Error(`cannot read "${text.slice(at)}" in "${text}"`);
    if (m[1]) tokens.push({ kind: 'number', text: m[1], at });
    else if (m[2]) tokens.push({ kind: 'name', text: m[2], at });
    else tokens.push({ kind: 'mark', text: m[3]!, at });
  }
  tokens.push({ kind: 'end', text: '', at: text.length });
  return tokens;
}

export function parseFormula(text: string): Evaluate {
  const tokens = tokenize(text);
  let i = 0;
  const is = (mark: string): boolean => tokens[i]!.kind === 'mark' && tokens[i]!.text === mark;
  const accept = (mark: string): boolean => is(mark) && (i++, true);
  const need = (mark: string): void => {
    if (!accept(mark)) throw new Error(`"${mark}" expected at "${text.slice(tokens[i]!.at)}" in "${text}"`);
  };
  const list = (close: string): Evaluate[] => {
    const items: Evaluate[] = [];
    while (!accept(close)) {
      items.push(sum());
      if (!is(close)) need(',');
    }
    return items;
  };
  const sum = (): Evaluate => {
    let left = product();
    for (;;) {
      const l = left;
      if (accept('+')) {
        const r = product();
        left = (s) => each(l(s), r(s), (x, y) => x + y);
      } else if (accept('-')) {
        const r = product();
        left = (s) => each(l(s), r(s), (x, y) => x - y);
      } else return left;
    }
  };
  const product = (): Evaluate => {
    let left = sign();
    for (;;) {
      const l = left;
      if (accept('*')) {
        const r = sign();
        left = (s) => each(l(s), r(s), (x, y) => x * y);
      } else if (accept('/')) {
        const r = sign();
        left = (s) => each(l(s), r(s), (x, y) => x / y);
      } else return left;
    }
  };
  const sign = (): Evaluate => {
    if (accept('-')) {
      const a = sign();
      return (s) => each(-1, a(s), (x, y) => x * y);
    }
    return accept('+') ? sign() : power();
  };
  const power = (): Evaluate => {
    const base = postfix();
    if (!accept('^') && !accept('**')) return base;
    const exponent = sign();
    return (s) => Math.pow(num(base(s)), num(exponent(s)));
  };
  const postfix = (): Evaluate => {
    let value = atom();
    for (;;) {
      const inner = value;
      if (accept("'")) value = (s) => s.rate(inner);
      else if (accept('[')) {
        const at = sum();
        need(']');
        value = (s) => vec(inner(s))[num(at(s)) - 1] ?? NaN;
      } else if (accept('.')) {
        const axis = 'xyz'.indexOf(tokens[i++]!.text);
        value = (s) => vec(inner(s))[axis] ?? NaN;
      } else return value;
    }
  };
  const atom = (): Evaluate => {
    const token = tokens[i++]!;
    if (token.kind === 'number') return () => Number(token.text);
    if (token.kind === 'name') {
      if (FUNCTIONS[token.text] && accept('(')) {
        const args = list(')');
        return (s) => FUNCTIONS[token.text]!(...args.map((a) => a(s)));
      }
      if (token.text === 'p' && is('[')) {
        const name = tokens[i + 1]!.text;
        i += 2;
        need(']');
        return (s) => s.indexed?.('p', name) ?? NaN;
      }
      let order = 0;
      while (accept("'")) order++;
      return (s) => s.lookup(token.text, order);
    }
    if (token.text === '(') {
      const items = list(')');
      return items.length === 1 ? items[0]! : (s) => items.map((a) => num(a(s)));
    }
    if (token.text === '[') {
      const items = list(']');
      return (s) => items.map((a) => num(a(s)));
    }
    throw new Error(`cannot read "${text.slice(token.at)}" in "${text}"`);
  };
  const formula = sum();
  if (tokens[i]!.kind !== 'end') throw new Error(`cannot read "${text.slice(tokens[i]!.at)}" in "${text}"`);
  return formula;
}

/** Splits at separators outside all brackets. */
export function splitOutside(text: string, separator: string): string[] {
  const parts: string[] = [];
  let depth = 0;
  let from = 0;
  for (let i = 0; i < text.length; i++) {
    if ('([{'.includes(text[i]!)) depth++;
    else if (')]}'.includes(text[i]!)) depth--;
    else if (depth === 0 && text[i] === separator) {
      parts.push(text.slice(from, i).trim());
      from = i + 1;
    }
  }
  parts.push(text.slice(from).trim());
  return parts.filter((p) => p !== '');
}
