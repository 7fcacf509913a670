import type { Expression } from '../../program/form';
import { type Context, opaque, spanOf } from './context';
import { elements } from './elements';
import { children, namedChildren, type Node } from './syntax';

/** `x[i]`, `x[1:-1, 0]`, `np.r_[a, b]` */
export function subscript(c: Context, node: Node, object: Expression): Expression {
  const span = spanOf(node);
  const inside = children(node, 'subscript').flatMap((n) => (n.type === 'tuple' ? namedChildren(n) : [n]));
  if (inside.length === 0) return opaque('an unfinished expression', span);
  if (object.kind === 'member' && (object.name === 'r_' || object.name === 'c_')) {
    // Brackets that join: a call in all but spelling.
    const list: Expression = { kind: 'list', items: elements(c, inside), span };
    return { kind: 'call', callee: object, args: [{ value: list }], span };
  }
  return { kind: 'index', object, indices: inside.map((n) => index(c, n)), span };
}

function index(c: Context, node: Node): Expression {
  const span = spanOf(node);
  if (node.type === 'ellipsis') return { kind: 'slice', rest: true, span };
  if (node.type !== 'slice') {
    // `np.newaxis` is None.
    const value = c.expression(node);
    return value.kind === 'member' && value.name === 'newaxis' ? { kind: 'nothing', span } : value;
  }
  const parts: (Node | undefined)[] = [undefined];
  for (const n of node.children) {
    if (n.isNamed) parts[parts.length - 1] = n;
    else if (n.type === ':') parts.push(undefined);
  }
  const [from, to, step] = parts.map((p) => (p && p.type !== 'none' ? c.expression(p) : undefined));
  return { kind: 'slice', ...(from ? { from } : {}), ...(to ? { to } : {}), ...(step ? { step } : {}), span };
}

