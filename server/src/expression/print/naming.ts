import type { Expr, SymbolData } from '../node';
import { reachable } from '../reach';
import type { Rational } from '../rational';

/** Which shared parts get a name of their own, so that what is written stays linear in the graph. */
export interface Naming {
  readonly names: ReadonlyMap<Expr, string>;
  /** Every node below the roots, arguments first. */
  readonly nodes: readonly Expr[];
}

export interface NamingOptions {
  /** Names are given only when the roots together would be longer than this many characters. */
  readonly limit: number;
  /** The least length, in characters, of a shared part worth a name. */
  readonly least: number;
  /** Names that start a family of their own, `s1`, `s2`, ... */
  readonly prefix: string;
  /** Parts that must have a name however short: a solved linear system in code. */
  readonly always?: (node: Expr) => boolean;
}

export function nameShared(roots: readonly Expr[], options: NamingOptions): Naming {
  const nodes = reachable(roots);
  const names = new Map<Expr, string>();
  const whole = lengths(nodes, new Set());
  let total = 0;
  for (const r of roots) total += whole.get(r)!;
  const forced = options.always ? nodes.filter(options.always) : [];
  if (total <= options.limit && forced.length === 0) return { names, nodes };

  const uses = countUses(roots, nodes);
  const named = new Set<Expr>(forced);
  if (total > options.limit) {
    lengths(nodes, named, (node, length) => {
      if (uses.get(node)! >= 2 && length >= options.least && mayBeNamed(node)) named.add(node);
    });
  }
  const taken = new Set(nodes.flatMap((n) => (n.op === 'symbol' ? [(n.data as SymbolData).name] : [])));
  let k = 0;
  for (const node of nodes) {
    if (!named.has(node)) continue;
    do k++;
    while (taken.has(`${options.prefix}${k}`));
    names.set(node, `${options.prefix}${k}`);
  }
  return { names, nodes };
}

/** Roughly how many characters each node takes with the named ones replaced by their names; saturates at infinity. */
function lengths(nodes: readonly Expr[], named: ReadonlySet<Expr>, visit?: (node: Expr, length: number) => void): Map<Expr, number> {
  const out = new Map<Expr, number>();
  for (const node of nodes) {
    let length = node.op === 'symbol' ? (node.data as SymbolData).name.length + 1 : node.args.length === 0 ? 2 : 3;
    for (const a of node.args) length += out.get(a)! + 1;
    visit?.(node, length);
    out.set(node, named.has(node) ? 3 : length);
  }
  return out;
}

/** How often each node is written. What is written as part of its user, a denominator say, counts with that user. */
function countUses(roots: readonly Expr[], nodes: readonly Expr[]): Map<Expr, number> {
  const uses = new Map<Expr, number>();
  const add = (e: Expr, n: number) => uses.set(e, Math.min((uses.get(e) ?? 0) + n, 1e6));
  for (const r of roots) add(r, 1);
  for (let i = nodes.length - 1; i >= 0; i--) {
    const node = nodes[i]!;
    const n = mayBeNamed(node) ? 1 : uses.get(node)!;
    for (const a of node.args) add(a, n);
  }
  return uses;
}

/** Denominators and signed terms are written into what uses them; their inner part takes the name instead. */
function mayBeNamed(node: Expr): boolean {
  if (node.args.length === 0) return false;
  if (node.op === 'power') {
    const e = node.args[1]!;
    return e.op !== 'number' || (e.data as Rational).sign > 0;
  }
  return !(node.op === 'product' && node.args.length === 2 && node.args[0]!.op === 'number');
}
