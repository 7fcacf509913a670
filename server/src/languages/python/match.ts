import type { Expression, Statement } from '../../program/form';
import { Rational } from '../../expression/rational';
import type { Span } from '../../text/span';
import { type Context, identifierOf, name, namePattern, nameText, opaque, spanOf, textOf } from './context';
import { child, children, namedChildren, type Node } from './syntax';
import { announce, assign } from './assignments';

/** What the library table calls the length of a value as a sequence, -1 where it is none; no source can spell it. */
export const SEQUENCE_LENGTH = 'length as sequence';

/** The value that is matched, under a name that no source can spell. */
const SUBJECT = 'value that is matched';

/** What a pattern asks of a value, and the names it gives to parts of it. */
interface Asked {
  readonly tests: readonly Expression[];
  readonly names: readonly { readonly node: Node; readonly value: Expression }[];
}

const ALL: Asked = { tests: [], names: [] };

/** `match`: the patterns of each case in turn, as conditions and assignments. */
export function matches(c: Context, node: Node): Statement[] {
  const span = spanOf(node);
  const subjects = children(node, 'subject').flatMap((n) => (n.type === 'expression_list' ? namedChildren(n) : [n]));
  const body = child(node, 'body');
  if (subjects.length === 0 || !body) return [{ kind: 'opaque', reason: 'an unfinished match', span }];
  const values = subjects.map((n) => c.expression(n));
  const given: Expression = values.length === 1 ? values[0]! : { kind: 'list', items: values.map((value) => ({ value })), span };
  const before = assign(c, namePattern(SUBJECT, spanOf(subjects[0]!)), given, span);
  let otherwise: Statement[] = [];
  const arms = namedChildren(body)
    .filter((n) => n.type === 'case_clause')
    .map((clause) => arm(c, clause));
  for (const one of arms.reverse()) {
    if (one.condition) otherwise = [{ kind: 'if', condition: one.condition, whenTrue: one.body, whenFalse: otherwise, span: { start: one.span.start, end: node.end } }];
    else otherwise = one.body;
  }
  return [...before, ...arms.flatMap((a) => a.announced), ...otherwise];
}

function arm(c: Context, clause: Node): { condition?: Expression; announced: Statement[]; body: Statement[]; span: Span } {
  const span = spanOf(clause);
  const patterns = namedChildren(clause).filter((n) => n.type === 'case_pattern');
  const subject = name(SUBJECT, span);
  const [only] = patterns;
  const asked = !only ? { ...ALL, tests: [opaque('an unfinished case', span)] } : patterns.length === 1 ? ask(c, only, subject) : sequence(c, patterns, subject, span);
  const announced = asked.names.flatMap((n) => announce(c, c.target(n.node)));
  const names = asked.names.map((n): Expression => ({ kind: 'assign', target: c.target(n.node), value: n.value, yields: 'new', span: spanOf(n.node) }));
  const guardNode = child(clause, 'guard');
  const guardInner = guardNode && namedChildren(guardNode)[0];
  const tests = [...asked.tests];
  // The guard sees the names, which are given anew where the case is taken.
  if (guardInner) tests.push({ kind: 'sequence', items: [...names, c.expression(guardInner)], span: spanOf(guardInner) });
  const body: Statement[] = [...names.map((value): Statement => ({ kind: 'expression', value, span: value.span })), ...c.block(child(clause, 'consequence'))];
  const condition = tests.reduce<Expression | undefined>((left, right) => (left ? { kind: 'logical', op: 'and', left, right, span } : right), undefined);
  return { ...(condition ? { condition } : {}), announced, body, span };
}

function join(parts: readonly Asked[]): Asked {
  return { tests: parts.flatMap((p) => p.tests), names: parts.flatMap((p) => p.names) };
}

function unknown(span: Span): Asked {
  return { tests: [opaque('a case of this kind', span)], names: [] };
}

function equal(value: Expression, right: Expression, span: Span): Asked {
  return { tests: [{ kind: 'binary', op: '==', left: value, right, opSpan: span, span }], names: [] };
}

function ask(c: Context, pattern: Node, value: Expression): Asked {
  const span = spanOf(pattern);
  const [inner, ...more] = pattern.type === 'case_pattern' ? namedChildren(pattern) : [pattern];
  if (!inner) return textOf(c, pattern).trim() === '_' ? ALL : unknown(span);
  if (more.length > 0) return unknown(span);
  switch (inner.type) {
    case 'dotted_name': {
      const parts = namedChildren(inner);
      if (parts.length === 1) return { tests: [], names: [{ node: parts[0]!, value }] };
      return equal(value, identifierOf(c, inner), span);
    }
    case 'union_pattern':
      return union(c, inner, value, span);
    case 'tuple_pattern': {
      const parts = namedChildren(inner);
      // One pattern in brackets without a comma is that pattern.
      if (parts.length === 1 && !textOf(c, inner).includes(',') && parts[0]!.type === 'case_pattern') return ask(c, parts[0]!, value);
      return sequence(c, parts, value, span);
    }
    case 'list_pattern':
      return sequence(c, namedChildren(inner), value, span);
    case 'dict_pattern':
      return mapping(c, inner, value, span);
    case 'class_pattern':
      return instance(c, inner, value, span);
    case 'as_pattern': {
      const [of, alias] = namedChildren(inner);
      if (!of || !alias) return unknown(span);
      return join([ask(c, of, value), { tests: [], names: [{ node: alias, value }] }]);
    }
    default: {
      const right = literal(c, inner, textOf(c, pattern));
      return right ? equal(value, right, span) : unknown(span);
    }
  }
}

function union(c: Context, node: Node, value: Expression, span: Span): Asked {
  const tests: Expression[] = [];
  // The sign of a number is no node of its own.
  let sign = '';
  for (const n of node.children) {
    if (!n.isNamed) {
      sign = textOf(c, n) === '-' ? '-' : '';
      continue;
    }
    const right = n.type === 'dotted_name' && namedChildren(n).length > 1 ? identifierOf(c, n) : literal(c, n, sign + textOf(c, n));
    if (!right) return unknown(span);
    tests.push(...equal(value, right, span).tests);
    sign = '';
  }
  if (tests.length === 0) return unknown(span);
  return { tests: [tests.reduce((left, right) => ({ kind: 'logical', op: 'or', left, right, span }))], names: [] };
}

function literal(c: Context, node: Node, whole: string): Expression | undefined {
  const at = node.type === 'case_pattern' ? (namedChildren(node)[0] ?? node) : node;
  if (!/^(?:integer|float|string|concatenated_string|true|false|none)$/.test(at.type)) return undefined;
  const value = c.expression(at);
  return whole.trim().startsWith('-') ? { kind: 'unary', op: '-', operand: value, span: spanOf(node) } : value;
}

/** `[a, 1, *rest]` */
function sequence(c: Context, parts: readonly Node[], value: Expression, span: Span): Asked {
  const star = parts.findIndex((p) => isStar(p));
  const length: Expression = { kind: 'call', callee: name(SEQUENCE_LENGTH, span), args: [{ value }], span };
  const count = numberOf(star < 0 ? parts.length : parts.length - 1, span);
  const fits: Expression = { kind: 'binary', op: star < 0 ? '==' : '>=', left: length, right: count, opSpan: span, span };
  const items = parts.map((p, k): Asked => {
    if (k === star) {
      const after = parts.length - 1 - star;
      const part: Expression = { kind: 'slice', from: numberOf(star, span), ...(after > 0 ? { to: numberOf(-after, span) } : {}), span };
      const named = namedChildren(starIn(p))[0];
      return named ? { tests: [], names: [{ node: named, value: { kind: 'index', object: value, indices: [part], span } }] } : ALL;
    }
    const at = star >= 0 && k > star ? k - parts.length : k;
    return ask(c, p, { kind: 'index', object: value, indices: [numberOf(at, span)], span });
  });
  return join([{ tests: [fits], names: [] }, ...items]);
}

function starIn(p: Node): Node {
  return p.type === 'case_pattern' ? (namedChildren(p)[0] ?? p) : p;
}

function isStar(p: Node): boolean {
  return starIn(p).type === 'splat_pattern';
}

function numberOf(n: number, span: Span): Expression {
  const text = String(Math.abs(n));
  const value: Expression = { kind: 'number', value: Rational.of(Math.abs(n)), text, integer: true, span };
  return n < 0 ? { kind: 'unary', op: '-', operand: value, span } : value;
}

/** `{"kind": "rod", "m": m}` */
function mapping(c: Context, node: Node, value: Expression, span: Span): Asked {
  const parts: Asked[] = [];
  let key: Expression | undefined;
  for (const n of namedChildren(node)) {
    if (n.field === 'key') key = c.expression(n);
    else if (n.field === 'value' && key) {
      const held: Expression = { kind: 'binary', op: 'in', left: key, right: value, opSpan: span, span };
      parts.push({ tests: [held], names: [] }, ask(c, n, { kind: 'index', object: value, indices: [key], span }));
      key = undefined;
    } else return unknown(span);
  }
  return join(parts);
}

/** `Spring(k=k, rest=0)`: by attributes only. */
function instance(c: Context, node: Node, value: Expression, span: Span): Asked {
  const [type, ...attributes] = namedChildren(node);
  if (!type) return unknown(span);
  const is: Expression = { kind: 'binary', op: 'instanceof', left: value, right: identifierOf(c, type), opSpan: span, span };
  const parts = attributes.map((a): Asked => {
    const keyword = a.type === 'case_pattern' ? namedChildren(a)[0] : a;
    const [key, of] = keyword?.type === 'keyword_pattern' ? namedChildren(keyword) : [];
    if (!key || !of) return unknown(span);
    return ask(c, of, { kind: 'member', object: value, name: nameText(c, key), nameSpan: spanOf(key), span });
  });
  return join([{ tests: [is], names: [] }, ...parts]);
}
