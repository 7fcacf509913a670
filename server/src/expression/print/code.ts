import type { Expr, SymbolData } from '../node';
import { symbolText } from '../node';
import type { CodeStyle } from './code-style';
import { layout, Level, type Style } from './layout';

export interface CodeOptions {
  /** What the surrounding code calls a symbol, by the way the declaration writes it (`th'`); others get a name of their own. */
  readonly names?: ReadonlyMap<string, string>;
  /** Prefix of the names of common parts. */
  readonly prefix?: string;
  /** Common parts get names when all values together take more characters than this; 0 names every one. */
  readonly limit?: number;
}

export interface Code {
  /** Definitions of common parts, in order. */
  readonly statements: readonly string[];
  readonly values: readonly string[];
  /** Functions the statements call. */
  readonly helpers: readonly string[];
}

/** The expressions in a programming language, their common parts computed once. */
export function code(style: CodeStyle, exprs: readonly Expr[], options: CodeOptions = {}): Code {
  let solves = false;
  const printed = layout(asStyle(style, options.names), exprs, {
    limit: options.limit ?? 80,
    least: 6,
    prefix: options.prefix ?? 's',
    always: (node) => {
      const isSolve = node.op === 'solve';
      solves ||= isSolve;
      return isSolve;
    },
  });
  return {
    statements: printed.where.map((w) => style.define(w.name, w.text)),
    values: printed.values,
    helpers: solves && style.solver !== '' ? [style.solver] : [],
  };
}

function asStyle(style: CodeStyle, names?: ReadonlyMap<string, string>): Style {
  return {
    ...style,
    symbol: (s: SymbolData) => names?.get(symbolText(s)) ?? style.identifier(s.name, s.order),
    brackets: (text) => `(${text})`,
    compare: (op, a, b) => `${a} ${op === 'less' ? '<' : op === 'lessEqual' ? '<=' : style.equal} ${b}`,
    not: (a) => ({ ...style.not(a), level: Level.power }),
  };
}
