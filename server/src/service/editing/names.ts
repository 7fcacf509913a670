import { canonicalName } from '../../mechanics/names';
import { childrenOf } from '../../notation/building';
import type { Block, Formula, Statement } from '../../notation/tree';
import type { Span } from '../../text/span';
import type { PlacedBlock } from '../../workspace/documents';

/** Something that a declaration gives a name. */
export interface Named {
  readonly name: string;
  /** One spelling for what a reader takes for the same name. */
  readonly key: string;
  readonly kind: 'coordinate' | 'parameter' | 'input' | 'time' | 'shorthand' | 'point' | 'multiplier';
  readonly span: Span;
  readonly unit?: string;
  readonly remark?: string;
}

const KINDS = { coordinates: 'coordinate', parameters: 'parameter', inputs: 'input' } as const;

/** What a block gives names to, in order. */
export function namedIn(text: string, block: Block): Named[] {
  const out: Named[] = [];
  const add = (name: string, kind: Named['kind'], span: Span | undefined, more: { unit?: string; remark?: string } = {}): void => {
    if (name !== '' && span) out.push({ name, key: canonicalName(name), kind, span, ...more });
  };
  for (const s of block.statements) {
    switch (s.kind) {
      case 'coordinates':
      case 'parameters':
      case 'inputs':
        for (const i of s.items) {
          add(i.name, KINDS[s.kind], i.nameSpan, { ...(i.unit ? { unit: i.unit.text } : {}), ...(i.remark ? { remark: i.remark } : {}) });
        }
        break;
      case 'time':
        add(s.name, 'time', s.nameSpan);
        break;
      case 'where':
        for (const { left } of s.items) {
          const target = left.kind === 'index' ? left.object : left;
          if (target.kind === 'name') add(target.name, 'shorthand', target.span);
        }
        break;
      case 'point':
      case 'body':
        add(s.name, 'point', wordAfter(text, s.wordSpan.end, s.span.end, s.name));
        break;
      case 'constraint':
        if (s.multiplier) add(s.multiplier, 'multiplier', wordAfter(text, s.right.span.end, s.span.end, s.multiplier));
        break;
      default:
    }
  }
  return out;
}

/** A use of a name on the physics side of a declaration; `order` is how often it is differentiated. */
export interface NameUse {
  readonly key: string;
  readonly name: string;
  readonly span: Span;
}

/** Every place of a block where a name of the physics stands, its declarations included. */
export function namesUsed(text: string, block: Block): NameUse[] {
  const out = namedIn(text, block).map(({ key, name, span }): NameUse => ({ key, name, span }));
  const seen = new Set(out.map((u) => u.span.start));
  const visit = (f: Formula, bound: ReadonlySet<string>): void => {
    const stack: [Formula, ReadonlySet<string>][] = [[f, bound]];
    for (let next = stack.pop(); next; next = stack.pop()) {
      const [node, names] = next;
      if (node.kind === 'name') {
        const key = canonicalName(node.name);
        if (!names.has(key) && !seen.has(node.span.start)) {
          seen.add(node.span.start);
          out.push({ key, name: node.name, span: node.span });
        }
        continue;
      }
      const inner = node.kind === 'sum' ? new Set([...names, ...node.over.map((o) => canonicalName(o.index))]) : names;
      for (const child of childrenOf(node)) stack.push([child, inner]);
    }
  };
  for (const s of block.statements) {
    const bound = new Set((s.over ?? []).map((o) => canonicalName(o.index)));
    for (const f of physicsOf(s)) visit(f, bound);
  }
  return out.sort((a, b) => a.span.start - b.span.start);
}

/** The formulas of a statement that are physics, not code. */
export function physicsOf(s: Statement): readonly Formula[] {
  const over = (s.over ?? []).flatMap((o) => [o.from, o.to]);
  const given = (...f: (Formula | undefined)[]): Formula[] => [...f.filter((x) => x !== undefined), ...over];
  switch (s.kind) {
    case 'coordinates':
    case 'parameters':
    case 'inputs':
      return given(...s.items.flatMap((i) => [i.typical, ...i.bounds.flatMap((b) => (b.op === 'in' ? [b.low, b.high] : [b.value]))]));
    case 'where':
    case 'near':
      return given(...s.items.flatMap((i) => [i.left, i.right]));
    case 'energy':
    case 'gravity':
      return given(s.value);
    case 'generalized-force':
      return given(s.coordinate, s.value);
    case 'force':
      return given(s.value, s.at);
    case 'torque':
      return given(s.value, s.on);
    case 'constraint':
      return given(s.left, s.right);
    case 'point':
      return given(s.mass, s.at);
    case 'body':
      return given(s.mass, s.inertia, s.centre, s.angle, s.rotation);
    case 'spring':
      return given(s.stiffness, s.rest, s.from, s.to);
    case 'damper':
      return given(s.coefficient, s.from, s.to);
    case 'ranges':
      return given(...s.items.flatMap((i) => [i.target, i.low, i.high]));
    case 'reads':
      return given(...s.items.map((i) => i.right));
    // What is differentiated with a prime on the left of a claim is physics: `M11*x'' + h1`.
    case 'checks':
      return given(...s.items.flatMap((i) => [i.right, ...primed(i.left)]));
    case 'defines':
      return given(...(s.what.kind === 'index' ? s.what.indices : []));
    default:
      return [];
  }
}

function primed(f: Formula): Formula[] {
  return f.kind === 'prime' ? [f] : childrenOf(f).flatMap(primed);
}

function wordAfter(text: string, from: number, to: number, word: string): Span | undefined {
  const at = text.slice(from, to).search(new RegExp(`(?<![\\p{L}\\p{N}_])${word.replace(/[$]/g, '\\$&')}(?![\\p{L}\\p{N}_])`, 'u'));
  return at < 0 ? undefined : { start: from + at, end: from + at + word.length };
}

/** The block whose lines an offset is in or directly below, and so may still become part of. */
export function blockAt(blocks: readonly PlacedBlock[], offset: number): PlacedBlock | undefined {
  return blocks.findLast((b) => b.block.span.start <= offset);
}
