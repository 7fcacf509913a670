import type { PanelNode, PanelTape } from '@visviva/shared';
import type { Expr } from '../../expression/node';
import type { Rational } from '../../expression/rational';
import { reachable } from '../../expression/reach';

/** Expressions as instructions for the panel; `at` gives each root's place in the list. */
export function panelTape(roots: readonly Expr[], symbols: ReadonlyMap<Expr, number>): { readonly tape: PanelTape; readonly at: (e: Expr) => number } {
  const nodes = reachable(roots);
  const place = new Map(nodes.map((n, i) => [n, i]));
  const tape = nodes.map((node): PanelNode => {
    const args = node.args.map((a) => place.get(a)!);
    switch (node.op) {
      case 'number':
        return { op: 'number', args, value: (node.data as Rational).toNumber() };
      case 'pi':
        return { op: 'number', args, value: Math.PI };
      case 'symbol':
        return { op: 'symbol', args, value: symbols.get(node) ?? -1 };
      case 'solve':
      case 'component':
        return { op: node.op, args, value: node.data as number };
      default:
        return { op: node.op, args };
    }
  });
  return { tape: { nodes: tape }, at: (e) => place.get(e)! };
}
