import { type Context, textOf } from './context';
import { child, namedChildren, type Node } from './syntax';

/** What the decorators above a definition make of it. */
export interface Decorated {
  readonly isStatic: boolean;
  readonly isClassMethod: boolean;
  readonly kind: 'method' | 'getter' | 'setter';
  readonly isDataclass: boolean;
  readonly isCached: boolean;
  /** The first decorator whose effect is not known. */
  readonly unknown: string | undefined;
}

/** Compilers and markers that leave the meaning as it is, by the last name of their path. */
const TRANSPARENT = new Set(
  ('jit njit cuda vectorize guvectorize compile script no_grad inference_mode override overload final abstractmethod abstractproperty ' +
    'lru_cache cache wraps typechecked jaxtyped beartype njit_cached register_jitable checkify named_call remat checkpoint ' +
    'dataclass dataclasses total_ordering runtime_checkable staticmethod classmethod property cached_property setter getter ' +
    'define frozen mutable attrs s struct pytree_node_class register_pytree_node_class function partial vmap ' +
    'jitclass experimental autojit pure fixture skip parametrize deprecated').split(' '),
);

/** Those whose decorated function maps over a batch, or gives another function altogether. */
const OTHER_FUNCTION = new Set(['vmap', 'partial', 'vectorize', 'guvectorize']);

const DATACLASSES = new Set(['dataclass', 'define', 'frozen', 'mutable', 'attrs', 's', 'struct']);

export function decorated(c: Context, decorators: readonly Node[]): Decorated {
  const names = decorators.map((d) => nameOf(c, d));
  const last = (path: string): string => path.slice(path.lastIndexOf('.') + 1);
  const has = (...wanted: string[]): boolean => names.some((n) => wanted.includes(last(n)));
  const unknown = names.find((n) => !TRANSPARENT.has(last(n)) || (OTHER_FUNCTION.has(last(n)) && last(n) === 'vmap'));
  return {
    isStatic: has('staticmethod'),
    isClassMethod: has('classmethod'),
    kind: has('property', 'cached_property', 'abstractproperty', 'getter') ? 'getter' : has('setter') ? 'setter' : 'method',
    isCached: has('cached_property'),
    isDataclass: names.some((n) => DATACLASSES.has(last(n))),
    unknown: unknown === undefined ? undefined : `@${unknown}`,
  };
}

/** `functools.partial` of `@functools.partial(jax.jit, static_argnums=0)` counts as what it is given. */
function nameOf(c: Context, decorator: Node): string {
  let at = namedChildren(decorator)[0];
  for (let k = 0; at && at.type === 'call' && k < 8; k++) {
    const callee: Node | undefined = child(at, 'function');
    const name = callee ? textOf(c, callee) : '';
    const list: Node | undefined = child(at, 'arguments');
    const first: Node | undefined = list ? namedChildren(list)[0] : undefined;
    if (/(?:^|\.)partial$/.test(name) && first && first.type !== 'keyword_argument') at = first;
    else at = callee;
  }
  return at ? textOf(c, at).replace(/\s+/g, '') : '';
}
