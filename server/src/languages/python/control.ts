import type { Expression, Statement } from '../../program/form';
import { type Context, namePattern, opaque, spanOf, textOf } from './context';
import { announce, announced, assign } from './assignments';
import { catcher } from './errors';
import { child, children, namedChildren, nodesOf, type Node } from './syntax';

/** `if`, `elif`, `else`. What runs only as a script (`if __name__ == "__main__"`) or for type checkers is left out. */
export function conditionals(c: Context, node: Node): Statement[] {
  const condition = child(node, 'condition');
  if (condition && /^__name__\s*==|^(?:typing\.)?TYPE_CHECKING$/.test(textOf(c, condition))) return [];
  const arms = children(node, 'alternative');
  const last = arms.find((a) => a.type === 'else_clause');
  const before: Statement[] = condition ? announced(c, condition, spanOf(node)) : [];
  const whenTrue = c.block(child(node, 'consequence'));
  const elifs = arms
    .filter((a) => a.type === 'elif_clause')
    .map((arm) => {
      const test = child(arm, 'condition');
      if (test) before.push(...announced(c, test, spanOf(arm)));
      return { test, body: c.block(child(arm, 'consequence')), span: { start: arm.start, end: node.end } };
    });
  let otherwise = last ? c.block(child(last, 'body')) : [];
  const test = (n: Node | undefined): Expression => (n ? c.expression(n) : opaque('an unfinished condition', spanOf(node)));
  for (const arm of elifs.reverse()) {
    otherwise = [{ kind: 'if', condition: test(arm.test), whenTrue: arm.body, whenFalse: otherwise, span: arm.span }];
  }
  return [...before, { kind: 'if', condition: test(condition), whenTrue, whenFalse: otherwise, span: spanOf(node) }];
}

export function loopFor(c: Context, node: Node): Statement[] {
  const left = child(node, 'left');
  const right = child(node, 'right');
  const span = spanOf(node);
  if (!left || !right) return [{ kind: 'opaque', reason: 'an unfinished loop', span }];
  if (node.children.some((n) => n.type === 'async')) return [{ kind: 'opaque', reason: 'a loop over values that are awaited', span }];
  const over = c.expression(right);
  const target = c.target(left);
  const before = announce(c, target);
  const loop: Statement = { kind: 'for-each', target, declares: false, over, body: c.block(child(node, 'body')), span };
  return [...before, loop, ...afterLoop(c, node)];
}

export function loopWhile(c: Context, node: Node): Statement[] {
  const condition = child(node, 'condition');
  const span = spanOf(node);
  const before = condition ? announced(c, condition, span) : [];
  const loop: Statement = {
    kind: 'loop',
    initial: [],
    condition: condition ? c.expression(condition) : opaque('an unfinished condition', span),
    testFirst: true,
    update: [],
    body: c.block(child(node, 'body')),
    span,
  };
  return [...before, loop, ...afterLoop(c, node)];
}

/** `else` after a loop runs unless the loop was broken off. */
function afterLoop(c: Context, node: Node): Statement[] {
  const other = child(node, 'alternative');
  if (!other) return [];
  const body = child(node, 'body');
  const breaks = body && [...nodesOf(body, (n) => n.type !== 'function_definition')].some((n) => n.type === 'break_statement');
  if (breaks) return [{ kind: 'opaque', reason: 'an `else` after a loop that may be broken off', span: spanOf(other) }];
  return c.block(child(other, 'body'));
}

/** `with a as b:` runs its body; what `b` is stays unknown. */
export function withs(c: Context, node: Node): Statement[] {
  const span = spanOf(node);
  const clause = node.children.find((n) => n.type === 'with_clause');
  const made: Statement[] = [];
  for (const item of clause ? namedChildren(clause) : []) {
    const value = child(item, 'value');
    if (value?.type !== 'as_pattern') continue;
    const alias = child(value, 'alias');
    const inner = alias ? namedChildren(alias)[0] : undefined;
    if (inner) made.push(...assign(c, c.target(inner), opaque('what a `with` statement gives', spanOf(value)), span));
  }
  return [...made, ...c.block(child(node, 'body'))];
}

export function tries(c: Context, node: Node): Statement[] {
  const span = spanOf(node);
  const inner = (n: Node): Node | undefined => child(n, 'body') ?? namedChildren(n).find((x) => x.type === 'block');
  const handlers = namedChildren(node).filter((n) => n.type === 'except_clause' || n.type === 'except_group_clause');
  const after = namedChildren(node).find((n) => n.type === 'else_clause');
  const last = namedChildren(node).find((n) => n.type === 'finally_clause');
  // At a file's top only imports are tried: the first one that is meant to work counts.
  if (c.bindings.isModule) return c.block(child(node, 'body'));
  const body = [...c.block(child(node, 'body')), ...(after ? c.block(inner(after)) : [])];
  const finalizer = last ? c.block(inner(last)) : [];
  if (handlers.length === 0) return [{ kind: 'try', body, finalizer, span }];
  const made = handlers.map((h) => {
    const parameter = namePattern(caughtName(c, h), spanOf(h));
    return { parameter, body: [...announce(c, parameter), ...c.block(inner(h))], catches: catcher(c, h) };
  });
  return [{ kind: 'try', body, handlers: made, finalizer, span }];
}

function caughtName(c: Context, handler: Node): string {
  const alias = child(child(handler, 'value') ?? handler, 'alias');
  return alias ? textOf(c, alias) : 'error that was caught';
}
