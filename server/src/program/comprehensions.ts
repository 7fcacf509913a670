import type { Place } from '../text/span';
import { conditionOf } from './conditions';
import type { Expression } from './form';
import type { Machine } from './machine';
import { itemsOf } from './numbers';
import { bindPattern } from './patterns';
import { Scope } from './scope';
import { declare, write } from './variables';
import { isUnread, unread, type Unread, type Value } from './values';

/** `[f(x) for x in xs if c]`, over lists that are known. */
export function comprehend(m: Machine, scope: Scope, e: Expression & { kind: 'comprehension' }, place: Place): Value {
  const items: Value[] = [];
  const visit = (inner: Scope, k: number): Unread | undefined => {
    const l = e.loops[k];
    if (!l) {
      items.push(m.evaluate(inner, e.body));
      return undefined;
    }
    const over = m.evaluate(inner, l.over);
    const list = itemsOf(m, over);
    if (!list) return over.kind === 'unread' ? over : unread('a comprehension over a list that is not known', place);
    const one = scope.frame.module.program.lateBinding ? new Scope(inner, inner.frame) : undefined;
    for (const item of [...list]) {
      const stopped = m.spend(() => place);
      if (stopped) return stopped;
      const each = one ?? new Scope(inner, inner.frame);
      bindPattern(m, each, l.target, item, (s, p, v) => {
        if (p.kind !== 'name') return;
        const known = one?.variables.get(p.name);
        if (known) write(m, known, v);
        else declare(m, s, p.name, v);
      });
      let keep = true;
      for (const condition of l.conditions) {
        const c = conditionOf(m, each, condition);
        if (isUnread(c)) return c;
        if (c === m.graph.false) keep = false;
        else if (c !== m.graph.true) return unread('a comprehension with a condition that is not decided', m.place(scope, condition.span));
        if (!keep) break;
      }
      const problem = keep ? visit(each, k + 1) : undefined;
      if (problem) return problem;
    }
    return undefined;
  };
  return visit(scope, 0) ?? m.list(items);
}
