import type { Cursor } from './cursor';
import { hole, LEVEL } from './building';
import type { Family, Formula } from './tree';

/** `over i in 1..n, j in 1..m over k in 1..2`: zero or more; the cursor stands on the first `over`. */
export function parseFamilies(c: Cursor, parse: (c: Cursor, level: number) => Formula): Family[] {
  const families: Family[] = [];
  while (c.isWord('over') || c.isWord('for')) {
    const word = c.take();
    if (word.text === 'for') c.error('families are written `over i in 1..n`', word.span);
    do families.push(parseFamily(c, parse));
    while (c.is(',') && c.peek(1).kind === 'name' && c.isWord('in', 2) && c.eat(','));
  }
  return families;
}

function parseFamily(c: Cursor, parse: (c: Cursor, level: number) => Formula): Family {
  const start = c.peek().span.start;
  const token = c.peek();
  if (token.kind !== 'name') {
    const missing = hole(c, `a family is written \`over i in 1..n\`, but after \`over\` there is ${c.describeNext()}`);
    return { index: '', from: missing, to: missing, span: missing.span };
  }
  c.take();
  const index = token.raw ?? token.text;
  if (!c.eatWord('in')) {
    if (!c.eat('=')) {
      const missing = hole(c, `\`in\` is expected after the index: \`over ${index} in 1..n\``);
      return { index, from: missing, to: missing, span: c.from(start) };
    }
    c.error(`the range of an index is written \`over ${index} in 1..n\``, c.lastSpan);
  }
  const from = parse(c, LEVEL.sum);
  let to: Formula;
  if (c.eat('..')) to = parse(c, LEVEL.sum);
  else if (c.is(':') || c.isWord('to')) {
    c.error(`a range is written with two dots: \`over ${index} in 1..n\``, c.take().span);
    to = parse(c, LEVEL.sum);
  } else to = hole(c, `a range is written \`over ${index} in 1..n\`: \`..\` and its last value are missing`);
  return { index, from, to, span: c.from(start) };
}
