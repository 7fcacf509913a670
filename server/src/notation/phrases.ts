import { cover } from '../text/span';
import type { Cursor } from './cursor';
import { grow, hole, LEVEL, MOST_DEPTH, overflow } from './building';
import type { Formula, QuantityPhrase } from './tree';

/** Phrases of two words; the second word decides. Proper names may be capitalised. */
const PHRASES: Readonly<Record<string, Readonly<Record<string, QuantityPhrase>>>> = {
  mass: { matrix: 'mass matrix' },
  coriolis: { vector: 'coriolis vector', matrix: 'coriolis matrix' },
  gravity: { vector: 'gravity vector' },
  damping: { vector: 'damping vector' },
  input: { matrix: 'input matrix' },
  right: { side: 'right side' },
  linearised: { A: 'linearised A', B: 'linearised B' },
  linearized: { A: 'linearised A', B: 'linearised B' },
};

const WORDS: Readonly<Record<string, QuantityPhrase>> = { bias: 'bias', residual: 'residual', constant: 'constant' };

/** A quantity whose name is a phrase, if one stands at the cursor. */
export function parsePhrase(c: Cursor, parse: (c: Cursor, level: number) => Formula): Formula | undefined {
  const first = c.peek();
  if (c.mode.code || first.kind !== 'name' || first.order > 0) return undefined;
  const lower = first.text.toLowerCase();
  const second = c.peek(1);
  const joined = second.kind === 'name' && !second.newline && second.gap > 0;
  if (joined && Object.hasOwn(PHRASES, lower)) {
    const phrases = PHRASES[lower]!;
    if (Object.hasOwn(phrases, second.text)) {
      c.take();
      c.take();
      return { kind: 'quantity', name: phrases[second.text]!, args: [], span: cover(first.span, second.span) };
    }
  }
  if (joined && lower === 'multiplier') {
    c.take();
    c.take();
    const arg: Formula = { kind: 'name', name: second.text, span: second.span };
    return grow(c, { kind: 'quantity', name: 'multiplier', args: [arg], span: cover(first.span, second.span) }, arg);
  }
  if (joined && lower === 'jacobian' && second.text === 'of') return parseJacobian(c, parse);
  if (c.mode.quantities && Object.hasOwn(WORDS, first.text)) {
    c.take();
    return { kind: 'quantity', name: WORDS[first.text]!, args: [], span: first.span };
  }
  return undefined;
}

/** `jacobian of X by Y` */
function parseJacobian(c: Cursor, parse: (c: Cursor, level: number) => Formula): Formula {
  if (c.depth >= MOST_DEPTH) return overflow(c);
  const start = c.take().span.start;
  c.take();
  const outer = c.mode;
  c.mode = { ...outer, stops: new Set([...outer.stops, 'by']) };
  c.depth++;
  const of = parse(c, LEVEL.sum);
  c.depth--;
  c.mode = outer;
  const by = c.eatWord('by')
    ? parse(c, LEVEL.power)
    : hole(c, '`by` and the variables are expected here: `jacobian of X by Y`');
  return grow(c, { kind: 'quantity', name: 'jacobian', args: [of, by], span: c.from(start) }, of, by);
}
