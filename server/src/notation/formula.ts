import { Rational } from '../expression/rational';
import { cover, type Span } from '../text/span';
import type { Cursor, Mode } from './cursor';
import { childrenOf, grow, hole, LEVEL, MOST_DEPTH, overflow } from './building';
import { parsePhrase } from './phrases';
import { parseFamilies } from './family';
import type { BinaryOperator, Formula } from './tree';
import { NOUNS } from './words';

export const FUNCTION_NAMES: ReadonlySet<string> = new Set(
  ('sin cos tan asin acos atan atan2 sinh cosh tanh exp log sqrt abs sign min max dot cross norm transpose det diag sum floor').split(' '),
);

interface Infix {
  readonly op: BinaryOperator;
  readonly level: number;
}

const INFIX: Readonly<Record<string, Infix>> = {
  '||': { op: 'or', level: LEVEL.or },
  or: { op: 'or', level: LEVEL.or },
  '&&': { op: 'and', level: LEVEL.and },
  and: { op: 'and', level: LEVEL.and },
  '=': { op: '=', level: LEVEL.comparison },
  '==': { op: '=', level: LEVEL.comparison },
  '!=': { op: '!=', level: LEVEL.comparison },
  '<': { op: '<', level: LEVEL.comparison },
  '<=': { op: '<=', level: LEVEL.comparison },
  '>': { op: '>', level: LEVEL.comparison },
  '>=': { op: '>=', level: LEVEL.comparison },
  '+': { op: '+', level: LEVEL.sum },
  '-': { op: '-', level: LEVEL.sum },
  '*': { op: '*', level: LEVEL.product },
  '/': { op: '/', level: LEVEL.product },
  '^': { op: '^', level: LEVEL.power },
};

/** Reads a formula of this level or tighter. Where there is none it says so, and a hole stands in its place. */
export function parseExpression(c: Cursor, level: number = LEVEL.or): Formula {
  let left = parsePrefix(c);
  for (;;) {
    c.skipRemark();
    const infix = infixAt(c);
    if (infix) {
      if (infix.level < level) return left;
      const token = c.take();
      if (c.depth >= MOST_DEPTH) return overflow(c);
      c.depth++;
      // A power is right-associative, and its exponent may have a sign of its own.
      const right = parseOperand(c, infix.op === '^' ? LEVEL.sign : infix.level + 1, token.text);
      c.depth--;
      left = binary(c, infix.op, left, right);
      continue;
    }
    if (level > LEVEL.product || !juxtaposed(c)) return left;
    if (c.full) return overflow(c);
    const token = c.peek();
    // One such message is enough for a statement that is written so throughout.
    if (!c.saidJuxtaposed) c.error(juxtapositionWords(c, left), token.span);
    c.saidJuxtaposed = true;
    left = binary(c, '*', left, parseExpression(c, LEVEL.sign));
  }
}

function juxtapositionWords(c: Cursor, left: Formula): string {
  const token = c.peek();
  const before = c.text.slice(Math.max(left.span.start, left.span.end - 40), left.span.end);
  const after = shorten(c.text.slice(token.span.start, token.span.end));
  if (left.kind === 'binary' && left.op === '^' && isFunctionName(left.left) && token.text === '(') {
    return `a power of a function is written after its argument: \`${before.split(/[\^*²³]/)[0]}(...)^n\``;
  }
  const last = left.kind === 'binary' ? left.right : left;
  if (isFunctionName(last)) return `the argument of a function stands in brackets: \`${before.slice(last.span.start - left.span.end)}(${after})\``;
  return `an operator is missing before ${c.describeNext()}: a product is written \`${shorten(before)}*${after}\`; a remark begins after two spaces`;
}

function parseOperand(c: Cursor, level: number, after: string): Formula {
  if (startsOperand(c)) return parseExpression(c, level);
  const bars = c.is('|') ? ': a magnitude is written `norm(...)`, or `abs(...)` of a number' : '';
  return hole(c, `a formula is expected after \`${after}\`, before ${c.describeNext()}${bars}`);
}

function binary(c: Cursor, op: BinaryOperator, left: Formula, right: Formula): Formula {
  const make = (by: BinaryOperator, a: Formula, b: Formula): Formula =>
    grow(c, { kind: 'binary', op: by, left: a, right: b, span: cover(a.span, b.span) }, a, b);
  // `a < b < c` means a < b and b < c.
  const last = left.kind === 'binary' && left.op === 'and' && isOrder(op) ? left.right : left;
  if (isOrder(op) && last.kind === 'binary' && isOrder(last.op)) return make('and', left, make(op, last.right, right));
  return make(op, left, right);
}

function isOrder(op: BinaryOperator): boolean {
  return op === '<' || op === '<=' || op === '>' || op === '>=';
}

function infixAt(c: Cursor): Infix | undefined {
  const token = c.peek();
  if (token.kind === 'name') {
    if (token.text !== 'and' && token.text !== 'or') return undefined;
    if (c.mode.stops.has(token.text) || c.mode.logic === 'never') return undefined;
    return INFIX[token.text];
  }
  return token.kind === 'operator' && Object.hasOwn(INFIX, token.text) ? INFIX[token.text] : undefined;
}

/** True where a second operand follows with no operator between, on the same line. */
function juxtaposed(c: Cursor): boolean {
  const token = c.peek();
  if (token.newline) return false;
  if (token.kind === 'name') {
    if (token.text === 'for' && c.isWord('in', 2)) return false;
    return !c.mode.stops.has(token.text) && token.text !== 'and' && token.text !== 'or' && token.text !== 'in';
  }
  return token.kind === 'number' || token.kind === 'string' || c.is('(');
}

function startsOperand(c: Cursor): boolean {
  const token = c.peek();
  switch (token.kind) {
    case 'end':
      return false;
    case 'operator':
      return ['(', '[', '-', '+', '!', '~'].includes(token.text) || (c.mode.code && ['*', '&'].includes(token.text));
    case 'name':
      return (!c.mode.stops.has(token.text) || isOwnName(c)) && token.text !== 'and' && token.text !== 'or';
    default:
      return true;
  }
}

/** True where a word of the statement stands as a name of the declaration: a formula is expected, and none follows it. */
export function isOwnName(c: Cursor): boolean {
  if (!NOUNS.has(c.peek().text)) return false;
  const next = c.peek(1);
  if (next.newline) return true;
  switch (next.kind) {
    case 'name':
      return c.mode.stops.has(next.text) || next.text === 'and' || next.text === 'between' || next.text === 'rest';
    case 'operator':
      return next.text === '[' ? next.gap === 0 : next.text !== '(';
    default:
      return next.kind !== 'number' && next.kind !== 'string';
  }
}

function parsePrefix(c: Cursor): Formula {
  // The address and pointer marks of C carry nothing that a claim needs.
  while (c.mode.code && (c.is('*') || c.is('&'))) c.take();
  const token = c.peek();
  const sign = token.kind === 'operator' && (token.text === '-' || token.text === '+') ? token.text : undefined;
  const negated = (token.kind === 'operator' && (token.text === '!' || token.text === '~')) || c.isWord('not');
  if (!sign && !negated) return parsePostfix(c);
  c.take();
  if (c.depth >= MOST_DEPTH) return overflow(c);
  c.depth++;
  const operand = parseOperand(c, sign ? LEVEL.sign : LEVEL.comparison, token.text);
  c.depth--;
  const op = sign ?? 'not';
  return grow(c, { kind: 'unary', op, operand, span: cover(token.span, operand.span) }, operand);
}

function parsePostfix(c: Cursor): Formula {
  const phrase = parsePhrase(c, parseExpression);
  let node = phrase ?? parsePrimary(c);
  for (;;) {
    const token = c.peek();
    const touching = !token.newline && token.gap === 0;
    if (token.kind === 'prime' && touching) {
      c.take();
      if (token.problem) c.error(token.problem, token.span);
      node =
        node.kind === 'prime'
          ? grow(c, { ...node, order: node.order + token.order, span: cover(node.span, token.span) }, node.operand)
          : grow(c, { kind: 'prime', operand: node, order: token.order, span: cover(node.span, token.span) }, node);
    } else if (token.kind === 'superscript' && touching) {
      c.take();
      const right: Formula = { kind: 'number', value: token.value ?? Rational.ONE, text: token.text, span: token.span };
      node = binary(c, '^', node, right);
    } else if (c.is('(') && isCallable(node) && (touching || (token.gap === 1 && !token.newline && isFunctionName(node)))) {
      node = parseCall(c, node);
    } else if (c.is('[') && (touching || (token.gap === 1 && !token.newline)) && isIndexable(node)) {
      if (!touching && node.kind !== 'quantity') {
        c.error('an index stands directly after its name, without a space; a unit belongs to `coordinates`, `parameters` and `inputs`', token.span);
      }
      node = parseIndex(c, node);
    } else if (touching && token.kind === 'operator' && ['.', '->', '::', '?.'].includes(token.text) && isIndexable(node)) {
      c.take();
      const name = c.peek();
      if (name.kind === 'name' && name.gap === 0 && !name.newline) {
        c.take();
        node = grow(c, { kind: 'member', object: node, name: name.raw ?? name.text, span: cover(node.span, name.span) }, node);
      } else {
        c.error(`the name of a field is expected after \`${token.text}\``, token.span);
        return grow(c, { kind: 'member', object: node, name: '', span: cover(node.span, token.span) }, node);
      }
    } else return node;
  }
}

function isCallable(node: Formula): boolean {
  return node.kind === 'name' || node.kind === 'member' || node.kind === 'call' || node.kind === 'index' || node.kind === 'hole';
}

function isFunctionName(node: Formula): boolean {
  return node.kind === 'name' && FUNCTION_NAMES.has(node.name);
}

function isIndexable(node: Formula): boolean {
  return node.kind !== 'number' && node.kind !== 'string';
}

function parsePrimary(c: Cursor): Formula {
  const token = c.peek();
  switch (token.kind) {
    case 'number':
      c.take();
      return { kind: 'number', value: token.value ?? Rational.ZERO, text: token.text, span: token.span };
    case 'string':
      c.take();
      return { kind: 'string', value: token.text, span: token.span };
    case 'name': {
      if (!startsOperand(c)) break;
      c.take();
      if (c.mode.code) return { kind: 'name', name: token.raw ?? token.text, span: token.span };
      const name: Formula = { kind: 'name', name: token.text, span: token.span };
      return token.order > 0 ? grow(c, { kind: 'prime', operand: name, order: token.order, span: token.span }, name) : name;
    }
    case 'operator':
      if (token.text === '(' || token.text === '[') return parseBracket(c);
      break;
    case 'bad':
    case 'prime':
    case 'superscript':
      c.take();
      c.error(token.problem ?? `\`${token.text}\` stands after nothing that it could belong to`, token.span);
      return { kind: 'hole', span: token.span };
    default:
  }
  return hole(c, `a formula is expected here, but there is ${c.describeNext()}`);
}

const NO_STOPS: ReadonlySet<string> = new Set();
const SUM_STOPS: ReadonlySet<string> = new Set(['over', 'for']);

/**
 * Brackets set the statement's own words aside: inside them only their own punctuation ends a formula. Returns the mode to go
 * back to. (No callback: every frame counts where brackets nest deep.)
 */
function enter(c: Cursor, stops: ReadonlySet<string>): Mode {
  const outer = c.mode;
  if (outer.stops !== stops) c.mode = { ...outer, stops };
  c.depth++;
  return outer;
}

function leave(c: Cursor, outer: Mode): void {
  c.depth--;
  c.mode = outer;
}

function parseBracket(c: Cursor): Formula {
  if (c.depth >= MOST_DEPTH) return overflow(c);
  const open = c.take();
  const close = open.text === '(' ? ')' : ']';
  const outer = enter(c, NO_STOPS);
  const { items, rows, comma } = parseItems(c, close, open.span);
  leave(c, outer);
  const span = c.from(open.span.start);
  if (close === ']') {
    if (rows.length < 2) return grow(c, { kind: 'list', items, span }, ...items);
    const lists = rows.map((row) => grow(c, { kind: 'list', items: row, span: row.length ? cover(row[0]!.span, row.at(-1)!.span) : span }, ...row));
    return grow(c, { kind: 'list', items: lists, span }, ...lists);
  }
  if (rows.length > 1) c.error('rows are separated by `;` only in square brackets', span);
  if (items.length === 1 && !comma) {
    // The bracket belongs to the place of what it encloses, but the formula itself stays bare.
    const only = items[0]!;
    return grow(c, { ...only, span } as Formula, ...childrenOf(only));
  }
  if (items.length === 0) {
    c.error('a formula is expected between these brackets', span);
    return { kind: 'hole', span };
  }
  return grow(c, { kind: 'tuple', items, span }, ...items);
}

interface Items {
  readonly items: Formula[];
  readonly rows: Formula[][];
  readonly comma: boolean;
}

/** Formulas between commas up to a closing bracket, which is taken. */
function parseItems(c: Cursor, close: string, open: Span, slices = false): Items {
  const rows: Formula[][] = [[]];
  let comma = false;
  for (;;) {
    if (c.eat(close)) break;
    const token = c.peek();
    if (token.kind === 'end') {
      c.error(`this bracket is not closed: \`${close}\` is missing`, open);
      break;
    }
    if (token.kind === 'operator' && (token.text === ')' || token.text === ']' || token.text === '}')) {
      c.error(`\`${close}\` is expected here, not \`${token.text}\``, token.span);
      c.take();
      break;
    }
    if (c.is(',') || c.is(';')) {
      hole(c, `a formula is expected before \`${token.text}\``);
      rows.at(-1)!.push({ kind: 'hole', span: { start: token.span.start, end: token.span.start } });
    } else {
      rows.at(-1)!.push(slices ? parseIndexItem(c) : parseExpression(c));
      c.skipRemark();
    }
    if (c.eat(',')) {
      comma = true;
      if (c.atRemarkAfterComma()) c.takeRemark();
    } else if (c.eat(';')) rows.push([]);
    else if (!c.is(close) && !c.atEnd && !c.is(')') && !c.is(']') && !c.is('}')) {
      const odd = c.take();
      c.error(odd.problem ?? `a comma or \`${close}\` is expected before \`${shorten(c.text.slice(odd.span.start, odd.span.end))}\``, odd.span);
    }
  }
  if (rows.length > 1 && rows.at(-1)!.length === 0) rows.pop();
  return { items: rows.flat(), rows, comma };
}

function parseIndexItem(c: Cursor): Formula {
  const start = c.peek().span.start;
  const from = c.is(':') ? undefined : parseExpression(c);
  if (!c.is(':')) return from!;
  c.take();
  const to = c.is(']') || c.is(',') || c.is(')') || c.atEnd ? undefined : parseExpression(c);
  if (c.is(':')) {
    c.error('a slice has no step here: write its slots one by one', c.peek().span);
    c.take();
    if (startsOperand(c)) parseExpression(c);
  }
  const parts = [from, to].filter((x) => x !== undefined);
  return grow(c, { kind: 'slice', ...(from && { from }), ...(to && { to }), span: c.from(start) }, ...parts);
}

function parseIndex(c: Cursor, object: Formula): Formula {
  if (c.depth >= MOST_DEPTH) return overflow(c);
  const open = c.take();
  const outer = enter(c, NO_STOPS);
  const { items } = parseItems(c, ']', open.span, true);
  leave(c, outer);
  const span = c.from(object.span.start);
  if (items.length === 0) c.error('an index is expected between these brackets', { start: open.span.start, end: span.end });
  if (object.kind === 'quantity' && object.args.length === 0) return grow(c, { ...object, args: items, span }, ...items);
  return grow(c, { kind: 'index', object, indices: items, span }, object, ...items);
}

function parseCall(c: Cursor, callee: Formula): Formula {
  if (c.depth >= MOST_DEPTH) return overflow(c);
  const open = c.take();
  if (callee.kind === 'name' && callee.name === 'sum' && !c.mode.code) {
    const outer = enter(c, SUM_STOPS);
    const sum = parseSum(c, callee.span, open.span);
    leave(c, outer);
    if (sum.kind === 'sum') return sum;
    return grow(c, { kind: 'call', callee, args: sum.args, span: c.from(callee.span.start) }, callee, ...sum.args);
  }
  // `y(1:2)` is MATLAB's slice.
  const outer = enter(c, NO_STOPS);
  const { items } = parseItems(c, ')', open.span, c.mode.code);
  leave(c, outer);
  return grow(c, { kind: 'call', callee, args: items, span: c.from(callee.span.start) }, callee, ...items);
}

function parseSum(c: Cursor, word: Span, open: Span): (Formula & { kind: 'sum' }) | { kind: 'args'; args: Formula[] } {
  if (c.is(')')) {
    c.error('a sum is written `sum(m[i]*x[i] over i in 1..n)`', cover(word, c.take().span));
    return { kind: 'args', args: [] };
  }
  const body = parseExpression(c);
  if (c.isWord('over') || c.isWord('for')) {
    const over = parseFamilies(c, parseExpression);
    if (!c.eat(')')) {
      if (c.atEnd) c.error('this bracket is not closed: `)` is missing', open);
      else {
        c.error(`\`)\` is expected after the ranges of a sum, not ${c.describeNext()}`, c.peek().span);
        while (!c.atEnd && !c.eat(')')) c.take();
      }
    }
    const node = { kind: 'sum' as const, body, over, span: c.from(word.start) };
    grow(c, node, body);
    return node;
  }
  c.eat(',');
  const rest = parseItems(c, ')', open);
  return { kind: 'args', args: [body, ...rest.items] };
}

function shorten(text: string): string {
  const line = text.replace(/\s+/g, ' ');
  return line.length <= 24 ? line : `...${line.slice(-20)}`;
}
