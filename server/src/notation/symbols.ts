import type { Cursor } from './cursor';
import { LEVEL } from './building';
import { parseExpression } from './formula';
import { parseUnit } from './units';
import type { Bound, Formula, SymbolItem, UnitText } from './tree';

interface Draft {
  name: string;
  nameSpan: { start: number; end: number };
  index?: string;
  unit?: UnitText;
  bounds: Bound[];
  typical?: Formula;
  remark?: string;
}

const ORDERS = new Set(['<', '<=', '>', '>=', '!=']);

/** The names of a `coordinates`, `parameters` or `inputs` statement, up to `over` or the end. */
export function parseSymbols(c: Cursor, what: string): SymbolItem[] {
  const items: Draft[] = [];
  const families = indexNames(c);
  for (;;) {
    const token = c.peek();
    if (token.kind !== 'name' || (isFamily(c) && c.peek(1).kind === 'name')) {
      if (items.length === 0 || token.kind !== 'end') {
        c.error(`a name is expected ${items.length ? 'after the comma' : `after \`${what}\``}, but there is ${c.describeNext()}`, token.kind === 'end' ? c.lastSpan : token.span);
      } else c.error('a name is expected after the comma', c.lastSpan);
      if (token.kind === 'end' || token.kind === 'name') break;
      if (!skipToComma(c)) break;
      continue;
    }
    items.push(parseItem(c, families));
    const remarks = c.remarks.length;
    c.skipRemark();
    if (c.remarks.length > remarks) items.at(-1)!.remark = c.remarks.at(-1)!.text;
    if (c.eat(',') || c.eat(';')) {
      if (c.atRemarkAfterComma()) {
        c.takeRemark();
        items.at(-1)!.remark = c.remarks.at(-1)?.text;
      }
      continue;
    }
    const next = c.peek();
    if (next.kind === 'end' || isFamily(c)) break;
    // One item per line needs no commas.
    if (next.newline && next.kind === 'name') continue;
    if (next.kind === 'name') {
      const name = c.text.slice(next.span.start, next.span.end);
      const third = c.peek(1);
      if (third.kind === 'name' && !third.newline) {
        c.error(`unexpected \`${name}\`: put two spaces before a remark`, next.span);
        c.takeRemark();
        if (c.atEnd) break;
        if (!c.eat(',')) continue;
      } else c.error(`a comma is missing before \`${name}\` (or two spaces, if a remark begins here)`, next.span);
      continue;
    }
    c.error(`unexpected ${c.describeNext()} after \`${items.at(-1)!.name}\`: a unit in square brackets, a bound such as \`> 0\`, a comma or two spaces and a remark may follow`, next.span);
    if (!skipToComma(c)) break;
  }
  shareBack(items);
  return items;
}

/** Index names of the statement's families, which tell `th[i]` from `x[m]`. */
function indexNames(c: Cursor): Set<string> {
  const names = new Set<string>();
  for (let k = 0; k < 400 && c.peek(k).kind !== 'end'; k++) {
    if (c.isWord('in', k + 2) && c.peek(k + 1).kind === 'name' && (c.isWord('over', k) || c.isWord('for', k) || (names.size && c.is(',', k)))) names.add(c.peek(k + 1).text);
  }
  return names;
}

/** `over i in 1..n`, or as other notations have it: the statement's end says what to write. */
function isFamily(c: Cursor): boolean {
  return c.isWord('over') || (c.isWord('for') && c.isWord('in', 2));
}

function skipToComma(c: Cursor): boolean {
  while (!c.atEnd && !c.is(',') && !c.isWord('over')) c.take();
  return c.eat(',');
}

function parseItem(c: Cursor, families: ReadonlySet<string>): Draft {
  const token = c.take();
  if (token.order > 0) c.error(`declare \`${token.text}\` itself: its time derivatives follow from it`, token.span);
  const item: Draft = { name: token.text, nameSpan: token.span, bounds: [] };
  if (c.peek().kind === 'prime') c.error(`declare \`${token.text}\` itself: its time derivatives follow from it`, c.take().span);
  if (c.is('[') && c.peek(1).kind === 'name' && families.has(c.peek(1).text) && c.is(']', 2)) {
    c.take();
    item.index = c.take().text;
    c.take();
  }
  for (;;) {
    const next = c.peek();
    if (c.is('[') && !(next.newline && item.unit)) {
      const unit = parseUnitText(c);
      if (item.unit) c.error(`\`${item.name}\` has a unit already`, unit.span);
      else item.unit = unit;
    } else if (next.kind === 'operator' && ORDERS.has(next.text)) {
      c.take();
      const value = parseExpression(c, LEVEL.sum);
      item.bounds.push({ op: next.text as '<', value, span: c.from(next.span.start) });
    } else if (c.isWord('in') && !isRemarkWithIn(c)) {
      c.take();
      const { low, high } = parseInterval(c);
      item.bounds.push({ op: 'in', low, high, span: c.from(next.span.start) });
    } else if (c.is('=') || c.is('==')) {
      c.take();
      item.typical = parseExpression(c, LEVEL.sum);
    } else return item;
  }
}

/** `x [m]    in the turning frame`: words after two spaces are a remark, also where the first of them is `in`. */
function isRemarkWithIn(c: Cursor): boolean {
  const word = c.peek();
  return !word.newline && word.gap >= 2 && !c.is('[', 1) && !c.is('(', 1);
}

/** `[kg m^2]`, taken as raw text: units have their own grammar. */
function parseUnitText(c: Cursor): UnitText {
  const open = c.peek().span;
  const line = c.text.slice(open.end, c.lineEnd(open.start));
  const close = line.indexOf(']');
  if (close < 0) {
    c.error('the bracket of this unit is not closed: `]` is missing', open);
    const text = /^[^,>=<]*/.exec(line)![0].trimEnd();
    c.seek(open.end + text.length);
    return { text: text.trim(), span: { start: open.start, end: open.end + text.length } };
  }
  const end = open.end + close + 1;
  c.seek(end);
  const unit = { text: line.slice(0, close).trim(), span: { start: open.start, end } };
  const read = parseUnit(unit.text);
  if ('error' in read) c.error(read.error, unit.span);
  return unit;
}

/** `[a, b]`, `(a, b]`, `[a, b)`, `(a, b)`: both ends. */
export function parseInterval(c: Cursor): { low: Formula; high: Formula } {
  const open = c.peek();
  const missing = (): Formula => ({ kind: 'hole', span: { start: c.lastSpan.end, end: c.lastSpan.end } });
  if (!c.eat('[') && !c.eat('(')) {
    c.error(`a range is written \`in [low, high]\`, but there is ${c.describeNext()}`, open.kind === 'end' ? c.lastSpan : open.span);
    return { low: missing(), high: missing() };
  }
  c.depth++;
  const low = parseExpression(c, LEVEL.sum);
  let high: Formula;
  if (c.eat(',') || c.eat('..') || c.eat(';')) high = parseExpression(c, LEVEL.sum);
  else {
    c.error(`a range has two ends: \`[low, high]\`; a comma is expected before ${c.describeNext()}`, c.peek().kind === 'end' ? c.lastSpan : c.peek().span);
    high = missing();
  }
  c.depth--;
  if (!c.eat(']') && !c.eat(')')) c.error('this range is not closed: `]` is missing', open.span);
  return { low, high };
}

/** In `M, m [kg] > 0` unit and bound belong to both: a name with neither, and no value, takes those of the next name. */
function shareBack(items: Draft[]): void {
  let source: Draft | undefined;
  for (let i = items.length - 1; i >= 0; i--) {
    const item = items[i]!;
    if (item.unit || item.bounds.length || item.typical) source = item;
    else if (source) {
      item.unit = source.unit;
      item.bounds = source.bounds;
    }
  }
}
