import type { Element } from '../../program/form';
import { type Context, opaque, spanOf } from './context';
import { namedChildren, type Node } from './syntax';

/** The items of a list, tuple or bracket, `*xs` among them. */
export function elements(c: Context, nodes: readonly Node[]): Element[] {
  return nodes.map((n) => {
    if (n.type !== 'list_splat' && n.type !== 'list_splat_pattern') return { value: c.expression(n) };
    const inner = namedChildren(n)[0];
    return { value: inner ? c.expression(inner) : opaque('an unfinished expression', spanOf(n)), spread: true };
  });
}
