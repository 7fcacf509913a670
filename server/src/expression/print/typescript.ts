import type { FunctionName } from '../node';
import { Rational } from '../rational';
import { above, atom, number, product, tight } from './code-parts';
import type { CodeStyle } from './code-style';
import { joined, Level, type Part } from './layout';

const RESERVED = new Set(
  ('break case catch class const continue debugger default delete do else enum export extends false finally for function if ' +
    'import in instanceof new null return super switch this throw true try typeof var void while with yield let static ' +
    'implements interface package private protected public await arguments eval Math NaN').split(' '),
);

const SOLVER = `/** Solves a x = b by elimination with row exchange. */
function solveLinear(a: number[][], b: number[]): number[] {
  const n = b.length;
  for (let k = 0; k < n; k++) {
    let p = k;
    for (let i = k + 1; i < n; i++) if (Math.abs(a[i][k]) > Math.abs(a[p][k])) p = i;
    [a[k], a[p]] = [a[p], a[k]];
    [b[k], b[p]] = [b[p], b[k]];
    for (let i = k + 1; i < n; i++) {
      const f = a[i][k] / a[k][k];
      for (let j = k; j < n; j++) a[i][j] -= f * a[k][j];
      b[i] -= f * b[k];
    }
  }
  for (let k = n - 1; k >= 0; k--) {
    for (let j = k + 1; j < n; j++) b[k] -= a[k][j] * b[j];
    b[k] /= a[k][k];
  }
  return b;
}`;

export const typescript: CodeStyle = {
  language: 'typescript',
  pi: 'Math.PI',
  nan: 'NaN',
  true: 'true',
  false: 'false',
  and: '&&',
  or: '||',
  equal: '===',
  number,
  product: (coefficient, top, bottom) => product(coefficient, top, bottom, isPlainSquare),
  power(base, exponent) {
    if (exponent.equals(Rational.HALF)) return atom(`Math.sqrt(${base.text})`);
    if (exponent.equals(Rational.of(2)) && isName(base.text)) {
      return { text: `${base.text} * ${base.text}`, level: Level.product };
    }
    const e = exponent.isInteger ? exponent.toString() : `(${exponent.numerator} / ${exponent.denominator})`;
    return { text: `${tight(base)} ** ${e}`, level: Level.power };
  },
  generalPower: (base, exponent) => ({ text: `${tight(base)} ** ${tight(exponent)}`, level: Level.power }),
  call(name: FunctionName, args) {
    return atom(`Math.${name}(${joined(args, ', ')})`);
  },
  // The language forbids a sign straight before a power.
  minus: (text) => (text.length > 10_000 || text.includes('**') ? `-(${text})` : `-${text}`),
  not: (a) => ({ text: `!${a}`, level: Level.power }),
  select: (c, yes, no) => ({
    text: `${above(c, Level.select)} ? ${above(yes, Level.select)} : ${above(no, Level.select)}`,
    level: Level.select,
  }),
  solve: (rows, right) =>
    atom(`solveLinear([${joined(rows.map((r) => `[${joined(r, ', ')}]`), ', ')}], [${joined(right, ', ')}])`),
  component: (solution, index) => atom(`${solution}[${index}]`),
  define: (name, value) => `const ${name} = ${value};`,
  solver: SOLVER,
  function: (f) => functionText(f, `(state: number[], p: { ${f.constants.map((c) => `${c}: number`).join('; ')} }): number[]`),
  identifier(name, order) {
    const clean = name.replace(/[^\p{ID_Continue}$]+/gu, '_').replace(/_+$/, '') || '_';
    const safe = /^\p{ID_Start}|^[$_]/u.test(clean) && !RESERVED.has(clean) ? clean : `_${clean}`;
    return order === 0 ? safe : `${safe}${'D'.repeat(order - 1)}Dot`;
  },
};

/** The same without types. */
export const javascript: CodeStyle = {
  ...typescript,
  language: 'javascript',
  solver: SOLVER.replace('(a: number[][], b: number[]): number[]', '(a, b)'),
  function: (f) => functionText(f, '(state, p)'),
};

function functionText(f: Parameters<CodeStyle['function']>[0], parameters: string): string {
  return [
    ...f.helpers,
    ...(f.helpers.length > 0 ? [''] : []),
    `/** ${f.remark} */`,
    `export function ${camelCase(f.name)}${parameters} {`,
    `  const [${f.state.join(', ')}] = state;`,
    ...(f.constants.length > 0 ? [`  const { ${f.constants.join(', ')} } = p;`] : []),
    ...f.statements.map((s) => `  ${s}`),
    `  return [${f.values.join(', ')}];`,
    '}',
  ].join('\n');
}

function camelCase(words: string): string {
  return words.replace(/[^A-Za-z0-9]+(.)?/g, (_, c: string | undefined) => (c ? c.toUpperCase() : ''));
}

function isName(text: string): boolean {
  return text.length < 80 && /^[\p{ID_Start}$_][\p{ID_Continue}$.]*$/u.test(text);
}

/** `l * l` among other factors. */
function isPlainSquare(p: Part): boolean {
  return p.node.op === 'power' && p.level === Level.product && !p.text.includes('/');
}
