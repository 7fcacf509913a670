import type { Expr } from '../expression/node';
import { substitute } from '../expression/substitute';
import type { Machine } from './machine';

/** What `assume` settles about a condition. */
export function settle(m: Machine, c: Expr): Expr {
  const g = m.graph;
  if (c === g.true || c === g.false) return c;
  const negated = g.not(c);
  for (const a of [...m.assumed, ...m.facts]) {
    if (a === c) return g.true;
    if (a === negated) return g.false;
    const against = opposite(m, a);
    if (against === c) return g.false;
    if (against && g.not(against) === c) return g.true;
    if (a.op === 'less' && g.lessEqual(a.args[0]!, a.args[1]!) === c) return g.true;
    const told = toldByValue(m, a, c);
    if (told) return told;
  }
  return c;
}

/** What `kind == 1` says about `kind == 2` or `kind < 1`. */
function toldByValue(m: Machine, a: Expr, c: Expr): Expr | undefined {
  if (a.op !== 'equal') return undefined;
  const [x, n] = a.args[0]!.op === 'number' ? [a.args[1]!, a.args[0]!] : [a.args[0]!, a.args[1]!];
  if (x.op !== 'symbol' || n.op !== 'number') return undefined;
  const [said] = substitute(m.graph, [c], new Map([[x, n]]));
  return said === m.graph.true || said === m.graph.false ? said : undefined;
}

/** `b <= a` for `a < b`, `b < a` for `a <= b`. */
function opposite(m: Machine, c: Expr): Expr | undefined {
  if (c.op === 'less') return m.graph.lessEqual(c.args[1]!, c.args[0]!);
  if (c.op === 'lessEqual') return m.graph.less(c.args[1]!, c.args[0]!);
  return undefined;
}
