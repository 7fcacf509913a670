import type { FunctionName } from '../node';
import { Rational } from '../rational';
import { above, atom, number, product, tight } from './code-parts';
import type { CodeStyle } from './code-style';
import { joined, Level } from './layout';

const RESERVED = new Set(
  ('False None True and as assert async await break class continue def del elif else except finally for from global if import in ' +
    'is lambda nonlocal not or pass raise return try while with yield match case type np math').split(' '),
);

/** Where the functions of the surrounding code come from, as it writes them. */
export interface PythonNames {
  /** `np.`, `math.`, or nothing after `from math import sin`. */
  readonly prefix: string;
  /** numpy's names (`arcsin`), against those of `math` (`asin`). */
  readonly isNumpy: boolean;
  /** The prefix under which numpy itself is known, for solving and choosing. */
  readonly arrays: string;
}

const NUMPY_NAMES: Readonly<Partial<Record<FunctionName, string>>> = {
  asin: 'arcsin',
  acos: 'arccos',
  atan: 'arctan',
  atan2: 'arctan2',
};

/** Python with the names of numpy or of `math`. */
export function pythonStyle(names: PythonNames): CodeStyle {
  const called = (name: FunctionName): string => {
    if (name === 'abs') return 'abs';
    if (name === 'min' || name === 'max') return name;
    if (name === 'sign') return `${names.arrays}sign`;
    return names.prefix + ((names.isNumpy ? NUMPY_NAMES[name] : undefined) ?? name);
  };
  return {
    language: 'python',
    pi: `${names.prefix}pi`,
    nan: "float('nan')",
    true: 'True',
    false: 'False',
    and: 'and',
    or: 'or',
    equal: '==',
    number,
    product,
    power(base, exponent) {
      if (exponent.equals(Rational.HALF)) return atom(`${names.prefix}sqrt(${base.text})`);
      const e = exponent.isInteger ? exponent.toString() : `(${exponent.numerator} / ${exponent.denominator})`;
      return { text: `${tight(base)}**${e}`, level: Level.power };
    },
    generalPower: (base, exponent) => ({ text: `${tight(base)}**${tight(exponent)}`, level: Level.power }),
    call: (name: FunctionName, args) => atom(`${called(name)}(${joined(args, ', ')})`),
    not: (a) => atom(`(not ${a})`),
    select: (c, yes, no) => ({
      text: `${above(yes, Level.select)} if ${above(c, Level.select)} else ${above(no, Level.select)}`,
      level: Level.select,
    }),
    solve: (rows, right) =>
      atom(`${names.arrays}linalg.solve([${joined(rows.map((r) => `[${joined(r, ', ')}]`), ', ')}], [${joined(right, ', ')}])`),
    component: (solution, index) => atom(`${solution}[${index}]`),
    define: (name, value) => `${name} = ${value}`,
    solver: '',
    function: (f) =>
      [
        ...f.helpers,
        `def ${snakeCase(f.name)}(${['state', ...f.constants].join(', ')}):`,
        `    """${f.remark}"""`,
        `    ${f.state.join(', ')}${f.state.length === 1 ? ',' : ''} = state`,
        ...f.statements.map((s) => `    ${s}`),
        `    return [${f.values.join(', ')}]`,
      ].join('\n'),
    identifier(name, order) {
      const clean = name.normalize('NFKC').replace(/[^\p{ID_Continue}]+/gu, '_').replace(/_+$/, '') || '_';
      const safe = /^\p{ID_Start}|^_/u.test(clean) && !RESERVED.has(clean) ? clean : `${clean}_`;
      const valid = /^[\p{ID_Start}_]/u.test(safe) ? safe : `_${safe}`;
      return order === 0 ? valid : `${valid}_${'d'.repeat(order)}ot`;
    },
  };
}

/** Python that has `import numpy as np`. */
export const python: CodeStyle = pythonStyle({ prefix: 'np.', isNumpy: true, arrays: 'np.' });

function snakeCase(words: string): string {
  const name = words.replace(/[^A-Za-z0-9]+/g, '_').replace(/^_+|_+$/g, '').toLowerCase();
  return /^\d/.test(name) ? `f_${name}` : name;
}
