import type { Expression, Pattern, Statement } from '../../program/form';
import { type Context, namePattern, textOf } from './context';
import { child, type Node } from './syntax';
import { boundNames, isPlain } from './targets';

/** Assignments: the first one to a name declares it. */
export function assign(c: Context, target: Pattern, value: Expression, span: Statement['span']): Statement[] {
  const names = boundNames(target);
  if (isPlain(target)) {
    const fresh = names.filter((n) => c.bindings.bind(n.name));
    if (fresh.length === names.length && names.length > 0) {
      const mutable = names.some((n) => c.bindings.isMutable(n.name));
      return [{ kind: 'declare', mutable, scope: 'function', target, value, span }];
    }
    return [...fresh.map((n) => empty(n)), { kind: 'expression', value: { kind: 'assign', target, value, yields: 'new', span }, span }];
  }
  return [...announce(c, target), { kind: 'expression', value: { kind: 'assign', target, value, yields: 'new', span }, span }];
}

/** Makes the new names of a target known as variables of the function. */
export function announce(c: Context, target: Pattern): Statement[] {
  return boundNames(target)
    .filter((n) => c.bindings.bind(n.name))
    .map((n) => empty(n));
}

function empty(n: { readonly name: string; readonly span: Statement['span'] }): Statement {
  return { kind: 'declare', mutable: true, scope: 'function', target: namePattern(n.name, n.span), span: n.span };
}

/** The names that `:=` binds somewhere in an expression. */
export function announced(c: Context, node: Node, span: Statement['span']): Statement[] {
  if (!textOf(c, node).includes(':=')) return [];
  const found: Statement[] = [];
  const stack = [node];
  for (let n = stack.pop(); n; n = stack.pop()) {
    if (n.type === 'named_expression') {
      const target = child(n, 'name');
      if (target) found.push(...announce(c, c.target(target)));
    }
    if (n.type !== 'lambda') stack.push(...n.children);
  }
  return found.map((s) => ({ ...s, span }));
}
