import { PHYSICS, type Cursor } from './cursor';
import { hole } from './building';
import { isOwnName } from './formula';
import { type Content, reading, skipLabel, withStops } from './content';
import type { Formula } from './tree';

const BODY_PARTS: Readonly<Record<string, 'mass' | 'inertia' | 'centre' | 'angle' | 'rotation'>> = {
  mass: 'mass', inertia: 'inertia', centre: 'centre', center: 'centre', at: 'centre', angle: 'angle', rotation: 'rotation',
};

/** The name before the colon, with a family's index left to `over`. */
function parseName(c: Cursor, word: string, firstPart: string): string {
  const token = c.peek();
  if (token.kind !== 'name') {
    const numbered = token.kind === 'number' && c.is(':', 1);
    if (numbered) c.take();
    c.eat(':');
    return numbered ? token.text : '';
  }
  if (token.text === firstPart && !c.is(':', 1)) return '';
  let colon = 1;
  if (c.is('[', 1)) {
    while (colon < 12 && !c.is(']', colon) && c.peek(colon).kind !== 'end') colon++;
    colon++;
  }
  const named = c.is(':', colon);
  if (!named && !c.isWord(firstPart, colon)) return '';
  for (let k = 0; k < colon; k++) c.take();
  if (named) c.take();
  else c.error(`put a colon after the name: \`${word} ${token.text}: ${firstPart} ...\``, token.span);
  return token.text;
}

/** `point NAME: mass m at P`, either part first. */
export function parsePoint(c: Cursor): Content {
  const name = parseName(c, 'point', 'mass');
  const mode = withStops(PHYSICS, 'at', 'mass');
  let mass: Formula | undefined;
  let at: Formula | undefined;
  for (;;) {
    if (!mass && c.eatWord('mass')) mass = reading(c, mode);
    else if (!at && c.eatWord('at')) at = reading(c, mode);
    else if (!mass && !c.atEnd && !c.is(',')) {
      const place = c.peek().span;
      c.error('`mass` is expected: `point bob: mass m at (x, y)`', place);
      mass = reading(c, mode);
      if (mass.kind === 'hole') break;
    } else break;
    if (c.is(',') && (c.isWord('at', 1) || c.isWord('mass', 1))) c.take();
  }
  mass ??= hole(c, '`mass` and its value are expected: `point bob: mass m at (x, y)`');
  at ??= hole(c, '`at` and the position are expected: `point bob: mass m at (x, y)`');
  return { kind: 'point', name, mass, at };
}

/** `body NAME: mass m, inertia J, centre P, angle th` (or `rotation R`), in any order. */
export function parseBody(c: Cursor): Content {
  const name = parseName(c, 'body', 'mass');
  const mode = withStops(PHYSICS, ...Object.keys(BODY_PARTS));
  const parts: Partial<Record<'mass' | 'inertia' | 'centre' | 'angle' | 'rotation', Formula>> = {};
  for (;;) {
    const token = c.peek();
    const part = token.kind === 'name' && Object.hasOwn(BODY_PARTS, token.text) ? BODY_PARTS[token.text] : undefined;
    if (part) {
      c.take();
      if (parts[part]) c.error(`\`${token.text}\` is given twice`, token.span);
      parts[part] = reading(c, mode);
    } else if (c.is(',') && c.peek(1).kind === 'name') {
      c.take();
      continue;
    } else if (token.kind === 'end' || c.isWord('over')) break;
    else {
      c.error(`\`mass\`, \`inertia\`, \`centre\`, \`angle\` or \`rotation\` is expected, but there is ${c.describeNext()}`, token.span);
      if (token.kind !== 'operator') c.take();
      while (!c.atEnd && !c.is(',') && !c.isWord('over')) c.take();
      if (c.is(',')) continue;
      break;
    }
  }
  if (Object.keys(parts).length === 0) hole(c, 'a body needs its parts: `body rod: mass m, inertia J, centre (x, y), angle th`');
  return { kind: 'body', name, ...parts };
}

interface Link {
  value: Formula;
  rest?: Formula;
  from: Formula;
  to: Formula;
}

function parseLink(c: Cursor, word: 'spring' | 'damper', example: string): Link {
  skipLabel(c);
  if (!isOwnName(c)) c.eatWord(word === 'spring' ? 'stiffness' : 'coefficient');
  const mode = withStops(PHYSICS, 'between', 'rest', 'and');
  const value = reading(c, mode);
  let rest: Formula | undefined;
  let from: Formula | undefined;
  let to: Formula | undefined;
  for (;;) {
    c.skipRemark();
    if (c.is(',') && (c.isWord('rest', 1) || c.isWord('between', 1))) c.take();
    if (!rest && c.isWord('rest')) {
      const at = c.take().span;
      if (c.isWord('length') && !isOwnName(c)) c.take();
      rest = reading(c, mode);
      if (word === 'damper') c.error('a damper has no rest length', at);
    } else if (!from && c.eatWord('between')) {
      from = reading(c, mode);
      if (c.eatWord('and') || c.eat(',')) to = reading(c, mode);
      else to = hole(c, `\`and\` and the second point are expected: \`${example}\``);
    } else break;
  }
  from ??= hole(c, `\`between\` and two points are expected: \`${example}\``);
  to ??= { kind: 'hole', span: from.span };
  return { value, ...(rest && { rest }), from, to };
}

export function parseSpring(c: Cursor): Content {
  const { value, rest, from, to } = parseLink(c, 'spring', 'spring k, rest L0 between A and B');
  return { kind: 'spring', stiffness: value, ...(rest && { rest }), from, to };
}

export function parseDamper(c: Cursor): Content {
  const { value, from, to } = parseLink(c, 'damper', 'damper c between A and B');
  return { kind: 'damper', coefficient: value, from, to };
}
