import type { Cursor } from './cursor';
import type { Formula } from './tree';

/** What all parts of the formula parser build with: levels, limits, nodes and holes. */

/** Brackets, signs and powers may nest this deep; the trees may grow no higher than this, so that walking them is safe. */
export const MOST_DEPTH = 600;
const MOST_HEIGHT = 1500;

export const LEVEL = { or: 1, and: 2, not: 3, comparison: 4, sum: 5, product: 6, sign: 7, power: 8, postfix: 9 } as const;

const heights = new WeakMap<Formula, number>();

/** Registers a node above its parts; where the tree grows too high, it is cut off with an error. */
export function grow(c: Cursor, node: Formula, ...parts: readonly Formula[]): Formula {
  let height = 1;
  for (const part of parts) height = Math.max(height, 1 + (heights.get(part) ?? 1));
  if (height > MOST_HEIGHT) {
    if (!c.tooDeep) c.error(`this formula has more than ${MOST_HEIGHT} operations in a row: split it with \`where\``, node.span);
    c.tooDeep = true;
    return { kind: 'hole', span: node.span };
  }
  heights.set(node, height);
  return node;
}

/** A hole at the cursor, with its error. */
export function hole(c: Cursor, message: string): Formula {
  const at = c.peek();
  c.error(message, at.kind === 'end' ? c.lastSpan : at.span);
  const place = at.kind === 'end' ? c.lastSpan.end : at.span.start;
  return { kind: 'hole', span: { start: place, end: place } };
}

export function overflow(c: Cursor): Formula {
  const place = c.peek().span;
  if (!c.tooDeep && !c.full) c.error(`brackets and signs nest deeper than ${MOST_DEPTH}: split it with \`where\``, place);
  c.tooDeep = true;
  // Nothing sensible can follow: give up the rest of the statement.
  while (!c.atEnd) c.take();
  return { kind: 'hole', span: place };
}

export function childrenOf(f: Formula): readonly Formula[] {
  switch (f.kind) {
    case 'prime':
    case 'unary':
      return [f.operand];
    case 'binary':
      return [f.left, f.right];
    case 'call':
      return [f.callee, ...f.args];
    case 'member':
      return [f.object];
    case 'index':
      return [f.object, ...f.indices];
    case 'slice':
      return [f.from, f.to].filter((x) => x !== undefined);
    case 'tuple':
    case 'list':
      return f.items;
    case 'sum':
      return [f.body, ...f.over.flatMap((o) => [o.from, o.to])];
    case 'quantity':
      return f.args;
    default:
      return [];
  }
}
