import type { ComprehensionLoop, Expression } from '../../program/form';
import { Bindings } from './bindings';
import { type Context, name, opaque, spanOf } from './context';
import { child, namedChildren, type Node } from './syntax';

/** What the library table calls the record made of pairs; no source can spell it. */
export const RECORD_OF_PAIRS = 'dict of pairs';

/** `[f(x) for x in xs if c]`, of a set or generator too, and `{k: v for ...}`. */
export function comprehension(c: Context, node: Node): Expression {
  const span = spanOf(node);
  const body = child(node, 'body');
  if (!body) return opaque('an unfinished expression', span);
  // Its variables are its own.
  const outside = c.bindings;
  c.bindings = new Bindings(outside, [], new Set(), outside.receiver);
  const loops: { -readonly [K in keyof ComprehensionLoop]: ComprehensionLoop[K] }[] = [];
  for (const clause of namedChildren(node)) {
    if (clause.type === 'for_in_clause') {
      const target = child(clause, 'left');
      const over = clause.children.filter((n) => n.field === 'right' && n.isNamed);
      if (!target || over.length === 0) continue;
      loops.push({ target: c.target(target), over: c.expression(over[0]!), conditions: [] });
    } else if (clause.type === 'if_clause') {
      const condition = namedChildren(clause)[0];
      const last = loops[loops.length - 1];
      if (last && condition) last.conditions = [...last.conditions, c.expression(condition)];
    }
  }
  const each = body.type === 'pair' ? pair(c, body) : c.expression(body);
  c.bindings = outside;
  const list: Expression = { kind: 'comprehension', body: each, loops, span };
  if (body.type !== 'pair') return list;
  return { kind: 'call', callee: name(RECORD_OF_PAIRS, span), args: [{ value: list }], span };
}

function pair(c: Context, node: Node): Expression {
  const parts = [child(node, 'key'), child(node, 'value')];
  return { kind: 'list', items: parts.flatMap((p) => (p ? [{ value: c.expression(p) }] : [])), span: spanOf(node) };
}
