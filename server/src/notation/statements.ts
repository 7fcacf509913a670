import { CLAIMED, CODE, type Cursor, PHYSICS, type Mode } from './cursor';
import { parseFamilies } from './family';
import { LEVEL, hole } from './building';
import { type Content, reading, skipLabel, withStops } from './content';
import { parseExpression } from './formula';
import { parseBody, parseDamper, parsePoint, parseSpring } from './geometry';
import { NAMED } from './shape';
import { parseInterval, parseSymbols } from './symbols';
import type { Claim, Equation, Formula, Statement } from './tree';
import { ENERGY_WORDS, LONG_WORDS } from './words';

/** The statements of one group of lines: mostly one; several where commas join them (`T = ..., V = ...`). */
export function parseStatements(c: Cursor, word?: string): Statement[] {
  const result: Statement[] = [];
  let first = c.take();
  let head = word ?? first.text;
  for (;;) {
    // `coordinates: x, th`
    if (c.is(':') && !NAMED.has(head)) c.take();
    const contents = parseContent(c, head);
    const over = c.isWord('over') || c.isWord('for') ? parseFamilies(c, parseExpression) : undefined;
    c.skipRemark();
    const joined = c.is(',') && headAt(c, 1);
    // `parameters m[i] over i in 1..3, g > 0`: the same statement goes on, without the family.
    const resumed = !joined && over !== undefined && SYMBOL_WORDS.has(head) && c.is(',') && c.peek(1).kind === 'name';
    if (!joined && !resumed) reportRest(c);
    const remark = c.remarks.map((r) => r.text).join('; ');
    const span = c.from(first.span.start);
    for (const content of contents) {
      result.push({ ...content, span, wordSpan: first.span, ...(remark && { remark }), ...(over && { over }) } as Statement);
    }
    if (!joined && !resumed) return result;
    c.remarks.length = 0;
    c.take();
    if (!joined) continue;
    first = c.take();
    head = first.text;
  }
}

const SYMBOL_WORDS: ReadonlySet<string> = new Set(['coordinates', 'parameters', 'inputs']);

/** True where another statement begins at the k-th token: `V =`, `Q[x] =`, `checks return`. */
function headAt(c: Cursor, k: number): boolean {
  const token = c.peek(k);
  if (token.kind !== 'name') return false;
  if (ENERGY_WORDS.has(token.text)) return c.is('=', k + 1);
  if (token.text === 'Q') return c.is('[', k + 1);
  return LONG_WORDS.has(token.text) && ['name', 'number'].includes(c.peek(k + 1).kind);
}

function reportRest(c: Cursor): void {
  while (!c.atEnd) {
    const token = c.peek();
    const second = c.peek(1);
    // Plain words on a line of their own are a remark that was continued.
    if (token.newline && token.kind === 'name' && second.kind === 'name' && second.gap === 1 && !second.newline) {
      c.takeRemark();
      continue;
    }
    const close = token.kind === 'operator' && [')', ']', '}'].includes(token.text);
    c.error(
      token.problem ??
        (close
          ? `\`${token.text}\` closes no bracket`
          : `unexpected ${c.describeNext()}: the statement is complete before it; a remark begins after two spaces`),
      { start: token.span.start, end: Math.max(token.span.end, close ? 0 : c.lineEnd(token.span.start)) },
    );
    const before = token.span.start;
    if (close) {
      c.take();
      c.skipRemark();
    } else {
      c.seek(c.lineEnd(before));
    }
  }
}

function parseContent(c: Cursor, word: string): readonly Content[] {
  switch (word) {
    case 'coordinates':
    case 'parameters':
    case 'inputs':
      return [{ kind: word, items: parseSymbols(c, word) }];
    case 'time':
      return parseTime(c);
    case 'where':
      return [{ kind: 'where', items: parseEquations(c, 'where', PHYSICS, PHYSICS) }];
    case 'T':
    case 'V':
    case 'L':
    case 'D':
      return [{ kind: 'energy', which: word, value: parseEnergy(c, word) }];
    case 'Q':
      return [parseGeneralizedForce(c)];
    case 'force':
    case 'torque':
      return [parseForce(c, word)];
    case 'constraint':
      return parseConstraints(c);
    case 'point':
      return [parsePoint(c)];
    case 'body':
      return [parseBody(c)];
    case 'gravity':
      return [{ kind: 'gravity', value: reading(c, PHYSICS) }];
    case 'spring':
      return [parseSpring(c)];
    case 'damper':
      return [parseDamper(c)];
    case 'ranges':
      return [parseRanges(c)];
    case 'near':
      return [parseNear(c)];
    case 'assume':
      return parseAssume(c);
    case 'reads':
      return [{ kind: 'reads', items: parseEquations(c, 'reads', CODE, CLAIMED) }];
    case 'checks':
      return [{ kind: 'checks', items: parseEquations(c, 'checks', CODE, CLAIMED) }];
    case 'defines':
      return parseDefines(c);
    default:
      return [];
  }
}

function parseTime(c: Cursor): Content[] {
  const token = c.peek();
  if (token.kind !== 'name') {
    hole(c, 'the name of time is expected after `time`');
    return [];
  }
  c.take();
  return [{ kind: 'time', name: token.text, nameSpan: token.span }];
}

function parseEnergy(c: Cursor, word: string): Formula {
  // `T(q, q') = ...` says nothing that the coordinates do not say.
  if (c.is('(') || c.is('[')) {
    c.error(`an energy is written without arguments: \`${word} = ...\``, c.peek().span);
    while (!c.atEnd && !c.is('=')) c.take();
  }
  return afterEquals(c, word, PHYSICS);
}

function afterEquals(c: Cursor, left: string, mode: Mode): Formula {
  if (!eatEquals(c)) {
    if (c.is('+=') || c.is('-=')) c.error(`write \`${left} = ...\` with all terms`, c.take().span);
    else return hole(c, `\`=\` is expected after \`${left}\`, but there is ${c.describeNext()}`);
  }
  return reading(c, mode);
}

function eatEquals(c: Cursor): boolean {
  if (c.eat('=')) return true;
  if (c.is('==')) c.error('write one `=`', c.take().span);
  else if (c.is(':') && c.is('=', 1)) {
    c.take();
    c.error('write `=`', c.take().span);
  } else return false;
  return true;
}

function parseGeneralizedForce(c: Cursor): Content {
  let coordinate: Formula;
  if (c.eat('[')) {
    coordinate = reading(c, PHYSICS);
    if (!c.eat(']')) c.error(`\`]\` is expected after the coordinate, not ${c.describeNext()}`, c.peek().kind === 'end' ? c.lastSpan : c.peek().span);
  } else coordinate = hole(c, 'the coordinate is expected in brackets: `Q[x] = F`');
  return { kind: 'generalized-force', coordinate, value: afterEquals(c, 'Q[...]', PHYSICS) };
}

function parseForce(c: Cursor, word: 'force' | 'torque'): Content {
  skipLabel(c);
  const link = word === 'force' ? 'at' : 'on';
  const value = reading(c, withStops(PHYSICS, 'at', 'on'));
  let place: Formula;
  if (c.isWord('at') || c.isWord('on')) {
    const used = c.take();
    if (used.text !== link) {
      c.error(word === 'force' ? 'a force acts `at` a point' : 'a torque acts `on` an angle', used.span);
    }
    place = reading(c, PHYSICS);
  } else {
    place = hole(c, word === 'force' ? '`at` and the point are expected: `force (F, 0) at P`' : '`on` and the angle are expected: `torque tau on th`');
  }
  return word === 'force' ? { kind: 'force', value, at: place } : { kind: 'torque', value, on: place };
}

function parseConstraints(c: Cursor): Content[] {
  const result: Content[] = [];
  const mode = withStops(PHYSICS, 'with');
  do {
    skipLabel(c);
    const left = reading(c, mode);
    const right = eatEquals(c) ? reading(c, mode) : hole(c, 'a constraint is an equation, `A = B`: write `= 0` if nothing else stands on its right');
    let multiplier: string | undefined;
    if (c.eatWord('with')) {
      const token = c.peek();
      if (token.kind === 'name') multiplier = c.take().text;
      else hole(c, 'the name of the multiplier is expected after `with`');
    }
    result.push({ kind: 'constraint', left, right, ...(multiplier && { multiplier }) });
    c.skipRemark();
  } while (!headAt(c, 1) && c.eat(','));
  return result;
}

/** `A = B, C = D`, also one to a line. `checks` may claim an increment by `+=`. */
function parseEquations(c: Cursor, word: string, left: Mode, right: Mode): (Equation & Claim)[] {
  const items: (Equation & Claim)[] = [];
  for (;;) {
    const start = c.peek().span.start;
    const target = reading(c, left);
    let op: Claim['op'] = '=';
    if (word === 'checks' && (c.is('+=') || c.is('-='))) op = c.take().text as '+=' | '-=';
    else if (!eatEquals(c)) {
      const example = word === 'reads' ? 'reads p.m = m' : word === 'checks' ? "checks return = x''" : 'where P = (x, y)';
      const value = target.kind === 'hole' ? target : hole(c, `\`=\` is expected here, as in \`${example}\`, but there is ${c.describeNext()}`);
      items.push({ left: target, op, right: value, span: c.from(start) });
      if (!toNextEquation(c)) return items;
      continue;
    }
    const value = reading(c, right);
    items.push({ left: target, op, right: value, span: c.from(start) });
    if (headAt(c, 1) && word === 'where' && c.is(',')) return items;
    if (c.eat(',')) {
      if (c.atRemarkAfterComma()) c.takeRemark();
      continue;
    }
    if (c.is(';')) {
      c.error('separate these by a comma', c.take().span);
      continue;
    }
    if (!(c.peek().newline && equationAhead(c))) return items;
  }
}

/** After an equation that could not be read: on to the next one. */
function toNextEquation(c: Cursor): boolean {
  let depth = 0;
  for (;;) {
    const token = c.peek();
    if (token.kind === 'end' || (depth <= 0 && c.isWord('over'))) return false;
    if (depth <= 0 && token.text === ',' && token.kind === 'operator') {
      c.take();
      return true;
    }
    if (token.newline && equationAhead(c)) return true;
    if (token.kind === 'operator' && '([{'.includes(token.text)) depth++;
    if (token.kind === 'operator' && ')]}'.includes(token.text)) depth--;
    c.take();
  }
}

/** True where the line at the cursor has the form `CODE = ...`. */
function equationAhead(c: Cursor): boolean {
  let depth = 0;
  for (let k = 0; k < 200; k++) {
    const token = c.peek(k);
    if (token.kind === 'end' || (k > 0 && token.newline && depth <= 0)) return false;
    if (token.kind !== 'operator') continue;
    if ('([{'.includes(token.text)) depth++;
    else if (')]}'.includes(token.text)) depth--;
    else if (depth === 0 && ['=', '+=', '-='].includes(token.text)) return k > 0;
    if (depth < 0) return false;
  }
  return false;
}

function parseRanges(c: Cursor): Content {
  const items: { target: Formula; low: Formula; high: Formula; span: { start: number; end: number } }[] = [];
  let waiting: Formula[] = [];
  for (;;) {
    const start = c.peek().span.start;
    const target = reading(c, withStops(PHYSICS, 'in'));
    waiting.push(target);
    if (c.eatWord('in')) {
      const { low, high } = parseInterval(c);
      for (const t of waiting) items.push({ target: t, low, high, span: c.from(Math.min(start, t.span.start)) });
      waiting = [];
      c.skipRemark();
    } else if (!c.is(',')) {
      const token = c.peek();
      c.error(`a range is written \`ranges th in [low, high]\`, but there is ${c.describeNext()}`, token.kind === 'end' ? c.lastSpan : token.span);
      waiting = [];
      while (!c.atEnd && !c.is(',') && !c.isWord('over')) c.take();
    }
    if (!c.eat(',')) {
      if (c.peek().newline && c.peek().kind === 'name' && !c.isWord('over') && inAhead(c)) continue;
      break;
    }
  }
  if (waiting.length) c.error('a range is expected: `in [low, high]`', c.lastSpan);
  return { kind: 'ranges', items };
}

function inAhead(c: Cursor): boolean {
  for (let k = 1; k < 40; k++) {
    if (c.peek(k).newline || c.peek(k).kind === 'end') return false;
    if (c.isWord('in', k)) return true;
  }
  return false;
}

function parseNear(c: Cursor): Content {
  const items: Equation[] = [];
  let waiting: Formula[] = [];
  let order = 1;
  const mode = withStops(PHYSICS, 'order');
  for (;;) {
    if (c.isWord('order') && !c.is('=', 1)) {
      c.take();
      const token = c.peek();
      const n = token.kind === 'number' && token.value?.isInteger ? Number(token.value.numerator) : 0;
      if (n >= 1 && n <= 10) order = n;
      else c.error('the order is a whole number from 1 to 10', token.kind === 'end' ? c.lastSpan : token.span);
      if (token.kind === 'number') c.take();
      c.skipRemark();
    } else {
      const target = reading(c, mode);
      waiting.push(target);
      if (eatEquals(c)) {
        const right = reading(c, mode);
        for (const left of waiting) items.push({ left, right, span: c.from(left.span.start) });
        waiting = [];
      } else if (!c.is(',')) {
        c.error(`the point of the expansion is written \`near th = 0\`, but there is ${c.describeNext()}`, c.peek().kind === 'end' ? c.lastSpan : c.peek().span);
        waiting = [];
        while (!c.atEnd && !c.is(',') && !c.isWord('order')) c.take();
      }
    }
    if (c.eat(',') || c.isWord('order')) continue;
    break;
  }
  if (waiting.length) c.error('`=` and the value are expected: `near th = 0`', c.lastSpan);
  return { kind: 'near', items, order };
}

function parseAssume(c: Cursor): Content[] {
  const result: Content[] = [];
  do {
    if (c.isWord('within') && (c.isWord('limits', 1) || c.peek(1).kind === 'end')) {
      c.take();
      if (!c.eatWord('limits')) c.error('`assume within limits` is meant', c.lastSpan);
      result.push({ kind: 'assume', withinLimits: true });
      c.skipRemark();
    } else {
      result.push({ kind: 'assume', condition: reading(c, { ...CODE, logic: 'always' }, LEVEL.or), withinLimits: false });
    }
  } while (c.eat(',') || (c.isWord('and') && c.isWord('within', 1) && c.eatWord('and')));
  return result;
}

function parseDefines(c: Cursor): Content[] {
  const result: Content[] = [];
  do {
    const what = reading(c, PHYSICS, LEVEL.postfix);
    const known = (what.kind === 'name' && ENERGY_WORDS.has(what.name)) || (what.kind === 'index' && what.object.kind === 'name' && what.object.name === 'Q');
    if (!known && what.kind !== 'hole') c.error('a function can define T, V, L, D or Q[q]', what.span);
    result.push({ kind: 'defines', what });
  } while (c.eat(','));
  return result;
}
