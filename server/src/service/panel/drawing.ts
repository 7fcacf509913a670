import type { Expr } from '../../expression/node';
import { symbolsOf } from '../../expression/reach';
import { Tape } from '../../expression/tape';
import { evaluate, evaluateScalar, forEachMember, type FormulaContext } from '../../mechanics/formula';
import type { System } from '../../mechanics/system';
import { components } from '../../mechanics/value';
import type { Formula } from '../../notation/tree';
import { Sampler } from '../../comparison/sampling';

/** What of a system can be drawn, as expressions. */
export interface Drawing {
  readonly points: readonly { readonly name: string; readonly at: readonly Expr[]; readonly isBody: boolean; readonly angle?: Expr }[];
  readonly springs: readonly { readonly from: readonly Expr[]; readonly to: readonly Expr[]; readonly kind: 'spring' | 'damper' }[];
  readonly rods: readonly (readonly [number, number])[];
  readonly gravity?: readonly Expr[];
}

const MOST_POINTS = 40;
const STATES = 12;

export function drawingOf(system: System): Drawing {
  const { graph } = system;
  const quiet: FormulaContext = { scope: system.scope, indices: new Map(), errors: [] };
  const place = (f: Formula, c: FormulaContext): readonly Expr[] | undefined => {
    const q = evaluate(f, c);
    const parts = q && components(q);
    if (!parts || parts.length > 3) return undefined;
    // A single number is a place along the first axis; zero is the origin.
    return parts.length === 1 ? [parts[0]!, graph.zero] : parts;
  };
  const points: Drawing['points'][number][] = [];
  const springs: Drawing['springs'][number][] = [];
  let gravity: readonly Expr[] | undefined;
  for (const s of system.block.statements) {
    if (s.kind === 'gravity') gravity = place(s.value, quiet);
    if (s.kind !== 'point' && s.kind !== 'body' && s.kind !== 'spring' && s.kind !== 'damper') continue;
    forEachMember(s.over ?? [], quiet, (c) => {
      if (s.kind === 'spring' || s.kind === 'damper') {
        const [from, to] = [place(s.from, c), place(s.to, c)];
        if (from && to) springs.push({ from, to, kind: s.kind });
        return;
      }
      const f = s.kind === 'point' ? s.at : s.centre;
      const at = f && place(f, c);
      if (!at || points.length >= MOST_POINTS) return;
      const index = [...c.indices.values()].join(',');
      const angle = s.kind === 'body' && s.angle ? evaluateScalar(s.angle, c) : undefined;
      points.push({ name: index ? `${s.name}[${index}]` : s.name, at, isBody: s.kind === 'body', ...(angle ? { angle } : {}) });
    });
  }
  if (points.length === 0) points.push(...named(system));
  return { points, springs, rods: rodsOf(system, points), ...(gravity ? { gravity } : {}) };
}

/** Where the energies are typed: positions among the shorthands. */
function named(system: System): Drawing['points'] {
  const c: FormulaContext = { scope: system.scope, indices: new Map(), errors: [] };
  const out: Drawing['points'][number][] = [];
  for (const s of system.block.statements) {
    if (s.kind !== 'where') continue;
    for (const { left, right } of s.items) {
      if (left.kind !== 'name' || (right.kind !== 'tuple' && right.kind !== 'list')) continue;
      const q = evaluate(left, c);
      const at = q && components(q);
      const moves = at && symbolsOf(...at).some((e) => system.coordinates.some((d) => d.symbol === e));
      if (at && moves && (at.length === 2 || at.length === 3)) out.push({ name: left.name, at, isBody: false });
    }
  }
  return out;
}

/**
 * Pairs of points, the origin among them, whose distance stays the same however the coordinates are: something rigid holds
 * them. Each point is tied to those before it only, the nearest first, so that a chain shows as a chain.
 */
function rodsOf(system: System, points: Drawing['points']): [number, number][] {
  if (points.length === 0) return [];
  const { graph } = system;
  const pairs: { pair: [number, number]; square: Expr }[] = [];
  points.forEach((p, i) => {
    for (let j = i - 1; j >= -1; j--) {
      const to = j < 0 ? p.at.map(() => graph.zero) : points[j]!.at;
      if (to.length !== p.at.length) continue;
      pairs.push({ pair: [i, j], square: graph.sum(p.at.map((x, k) => graph.square(graph.subtract(x, to[k]!)))) });
    }
  });
  const tape = new Tape(pairs.map((p) => p.square));
  const moving = new Set(system.coordinates.map((c) => c.symbol));
  const columns = new Sampler(system).draw(tape.symbols, STATES);
  // Only the coordinates change from state to state.
  for (const [symbol, column] of columns) if (!moving.has(symbol)) column.values.fill(column.values[0]!);
  const registers = tape.run((s) => columns.get(s), STATES);
  const out: [number, number][] = [];
  const tied = new Set<number>();
  for (const { pair, square } of pairs) {
    const first = registers.value(square, 0);
    const moves = symbolsOf(...points[pair[0]]!.at).some((s) => moving.has(s));
    if (!moves || tied.has(pair[0]) || !(first > 1e-12)) continue;
    let same = true;
    for (let s = 1; s < STATES; s++) if (!(Math.abs(registers.value(square, s) - first) <= 1e-9 * first)) same = false;
    if (!same) continue;
    tied.add(pair[0]);
    out.push(pair);
  }
  return out;
}
