import { type Context, textOf } from './context';
import { child, namedChildren, type Node } from './syntax';

/** Built-in exceptions and the ones they are kinds of, where that is not `Exception` itself. */
const PARENTS: Readonly<Record<string, string>> = {
  ZeroDivisionError: 'ArithmeticError',
  OverflowError: 'ArithmeticError',
  FloatingPointError: 'ArithmeticError',
  KeyError: 'LookupError',
  IndexError: 'LookupError',
  NotImplementedError: 'RuntimeError',
  RecursionError: 'RuntimeError',
  UnicodeError: 'ValueError',
  LinAlgError: 'ValueError',
  ModuleNotFoundError: 'ImportError',
  FileNotFoundError: 'OSError',
  UnboundLocalError: 'NameError',
};

const PLAIN = new Set([
  ...Object.keys(PARENTS), ...Object.values(PARENTS), 'TypeError', 'AttributeError', 'AssertionError', 'StopIteration', 'MemoryError', 'EOFError',
]);

const EVERY = new Set(['Exception', 'BaseException']);

const last = (path: string): string => path.slice(path.lastIndexOf('.') + 1);

/** The class of what `raise` throws, by its name; undefined where it is not written there. */
export function raised(c: Context, node: Node): string | undefined {
  const value = namedChildren(node).find((n) => n.field !== 'cause');
  const callee = value?.type === 'call' ? child(value, 'function') : value;
  return callee && /^[\w.]+$/.test(textOf(c, callee)) ? last(textOf(c, callee)) : undefined;
}

/** Whether a handler takes an exception: undefined where that is not known. */
export function catcher(c: Context, clause: Node): (thrown: string | undefined) => boolean | undefined {
  const value = child(clause, 'value');
  const bare = value?.type === 'as_pattern' ? namedChildren(value)[0] : value;
  if (!bare) return () => true;
  const names = (bare.type === 'tuple' ? namedChildren(bare) : [bare]).map((n) => last(textOf(c, n)));
  return (thrown) => {
    if (names.some((n) => EVERY.has(n))) return true;
    if (thrown === undefined) return undefined;
    for (let at: string | undefined = thrown; at !== undefined; at = PARENTS[at]) if (names.includes(at)) return true;
    return PLAIN.has(thrown) && names.every((n) => PLAIN.has(n)) ? false : undefined;
  };
}
