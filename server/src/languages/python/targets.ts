import type { Pattern, PatternItem } from '../../program/form';
import { type Context, bare, namePattern, nameText, opaque, spanOf } from './context';
import { child, namedChildren, type Node } from './syntax';

/** What stands left of an assignment, of `in` in a loop, or after `as`. */
export function target(c: Context, node: Node): Pattern {
  const at = bare(node);
  const span = spanOf(at);
  switch (at.type) {
    case 'identifier':
      return namePattern(nameText(c, at), span);
    case 'attribute':
    case 'subscript': {
      const place = c.expression(at);
      return place.kind === 'opaque' ? place : { kind: 'place', target: place, span };
    }
    case 'pattern_list':
    case 'tuple_pattern':
    case 'list_pattern':
    case 'tuple':
    case 'list':
    case 'expression_list':
      return { kind: 'list', items: namedChildren(at).map((n) => item(c, n)), span };
    default:
      return { kind: 'opaque', reason: 'an assignment to something of this kind', span };
  }
}

function item(c: Context, node: Node): PatternItem {
  if (node.type !== 'list_splat_pattern' && node.type !== 'list_splat') return { pattern: c.target(node) };
  const inner = namedChildren(node)[0];
  const pattern = inner ? c.target(inner) : ({ ...opaque('an unfinished target', spanOf(node)) } as Pattern);
  return { pattern, rest: true };
}

/** The names that a target binds. */
export function boundNames(pattern: Pattern): { readonly name: string; readonly span: Pattern['span'] }[] {
  if (pattern.kind === 'name') return [{ name: pattern.name, span: pattern.span }];
  if (pattern.kind === 'list') return pattern.items.flatMap((i) => (i ? boundNames(i.pattern) : []));
  return [];
}

/** True where only names are bound, at any depth. */
export function isPlain(pattern: Pattern): boolean {
  if (pattern.kind === 'list') return pattern.items.every((i) => !i || isPlain(i.pattern));
  return pattern.kind === 'name';
}

export function leftOf(node: Node): Node | undefined {
  return child(node, 'left');
}
