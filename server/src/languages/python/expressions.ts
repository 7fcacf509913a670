import type { Expression } from '../../program/form';
import { call } from './calls';
import { comprehension } from './comprehensions';
import { type Context, DEEPEST, bare, name, nameText, opaque, spanOf, textOf } from './context';
import { elements } from './elements';
import { literalValue } from './numbers';
import { BINARY, COMPARISONS } from './operators';
import { subscript } from './subscripts';
import { child, namedChildren, type Node } from './syntax';
import { text } from './strings';

/**
 * An expression in program form. Sums of thousands of terms and long call chains lean to the left without limit, so that
 * side is walked in a loop; nesting of other kinds is limited.
 */
export function expression(c: Context, node: Node): Expression {
  if (c.depth > DEEPEST) return opaque('something nested too deeply', spanOf(node));
  c.depth++;
  const spine: Node[] = [];
  let at = bare(node);
  for (let left = leftOf(c, at); left; left = leftOf(c, at)) {
    spine.push(at);
    at = bare(left);
  }
  let value = leaf(c, at);
  for (let link = spine.pop(); link; link = spine.pop()) value = extend(c, link, value);
  c.depth--;
  return value;
}

/** What a node continues: the left operand, the object of a member, the callee of a plain call. */
function leftOf(c: Context, node: Node): Node | undefined {
  switch (node.type) {
    case 'binary_operator':
    case 'boolean_operator':
      return child(node, 'left');
    case 'attribute':
      return isSuper(c, child(node, 'object')) ? undefined : child(node, 'object');
    case 'subscript':
      return child(node, 'value');
    case 'call':
      return call.isPlain(c, node) ? child(node, 'function') : undefined;
    default:
      return undefined;
  }
}

function extend(c: Context, node: Node, left: Expression): Expression {
  const span = spanOf(node);
  switch (node.type) {
    case 'binary_operator':
      return binary(c, node, left);
    case 'boolean_operator': {
      const op = child(node, 'operator')?.type === 'or' ? 'or' : 'and';
      return { kind: 'logical', op, left, right: operand(c, node, 'right'), span };
    }
    case 'attribute': {
      const last = child(node, 'attribute');
      if (!last || last.end === last.start) return opaque('an unfinished expression', span);
      return { kind: 'member', object: left, name: nameText(c, last), nameSpan: spanOf(last), span };
    }
    case 'subscript':
      return subscript(c, node, left);
    default:
      return call.convert(c, node, left);
  }
}

function operand(c: Context, node: Node, field: string): Expression {
  const found = child(node, field);
  return found && found.end > found.start ? c.expression(found) : opaque('an unfinished expression', spanOf(node));
}

function binary(c: Context, node: Node, left: Expression): Expression {
  const sign = child(node, 'operator');
  const right = operand(c, node, 'right');
  const op = BINARY[sign?.type ?? ''] ?? 'bit';
  const opSpan = sign ? spanOf(sign) : spanOf(node);
  return { kind: 'binary', op, left, right, opSpan, span: spanOf(node) };
}

function leaf(c: Context, node: Node): Expression {
  const span = spanOf(node);
  switch (node.type) {
    case 'identifier':
      return identifier(c, node);
    case 'integer':
    case 'float':
      return number(c, node);
    case 'true':
    case 'false':
      return { kind: 'boolean', value: node.type === 'true', span };
    case 'none':
      return { kind: 'nothing', isNull: true, span };
    case 'string':
    case 'concatenated_string':
      return text(c, node);
    case 'attribute':
      return superMember(c, node);
    case 'call':
      return call.special(c, node);
    case 'unary_operator':
      return unary(c, node);
    case 'not_operator':
      return { kind: 'unary', op: 'not', operand: operand(c, node, 'argument'), span };
    case 'comparison_operator':
      return comparison(c, node);
    case 'conditional_expression':
      return conditional(c, node);
    case 'named_expression':
      return walrus(c, node);
    case 'lambda':
      return { kind: 'function', node: c.functionNode(node), span };
    case 'list':
    case 'tuple':
    case 'set':
    case 'expression_list':
    case 'pattern_list':
    case 'list_pattern':
    case 'tuple_pattern':
      return { kind: 'list', items: elements(c, namedChildren(node)), span };
    case 'dictionary':
      return dictionary(c, node);
    case 'list_comprehension':
    case 'set_comprehension':
    case 'generator_expression':
    case 'dictionary_comprehension':
      return comprehension(c, node);
    case 'assignment':
    case 'augmented_assignment':
      return opaque('an assignment in this place', span);
    case 'await':
      return opaque('a value that is awaited', span);
    case 'yield':
      return opaque('a yield', span);
    case 'ellipsis':
      return { kind: 'nothing', span };
    case 'ERROR':
    case 'parenthesized_expression':
      return opaque('an unfinished expression', span);
    default:
      return opaque('syntax of this kind', span);
  }
}

export function identifier(c: Context, node: Node): Expression {
  const text = nameText(c, node);
  const span = spanOf(node);
  if (text === '') return opaque('an unfinished expression', span);
  if (c.bindings.isReceiver(text)) return { kind: 'self', span };
  if (c.bindings.classNames?.has(text)) return { kind: 'member', object: { kind: 'self', span }, name: text, nameSpan: span, span };
  return name(text, span);
}

function number(c: Context, node: Node): Expression {
  const source = textOf(c, node);
  const value = literalValue(source);
  if (!value) return opaque(/[jJ]$/.test(source) ? 'a complex number' : 'a number too large for a double', spanOf(node));
  const integer = node.type === 'integer' || /^[\d_]+[lL]?$/.test(source);
  return { kind: 'number', value, text: source, integer, span: spanOf(node) };
}

function unary(c: Context, node: Node): Expression {
  const sign = child(node, 'operator')?.type;
  const value = operand(c, node, 'argument');
  const op = sign === '-' || sign === '+' ? sign : 'bit-not';
  return { kind: 'unary', op, operand: value, span: spanOf(node) };
}

/** `a < b <= c` is `a < b and b <= c`. */
function comparison(c: Context, node: Node): Expression {
  const parts: Expression[] = [];
  const signs: { readonly text: string; readonly node: Node }[] = [];
  for (const n of node.children) {
    if (n.field === 'operators') signs.push({ text: textOf(c, n).replace(/\s+/g, ' '), node: n });
    else if (n.isNamed) parts.push(c.expression(n));
  }
  let whole: Expression | undefined;
  signs.forEach((sign, k) => {
    const known = COMPARISONS[sign.text];
    const left = parts[k];
    const right = parts[k + 1];
    if (!known || !left || !right) return;
    const span = { start: left.span.start, end: right.span.end };
    let one: Expression = { kind: 'binary', op: known.op, left, right, opSpan: spanOf(sign.node), span };
    if (known.negated) one = { kind: 'unary', op: 'not', operand: one, span };
    whole = whole ? { kind: 'logical', op: 'and', left: whole, right: one, span: { start: whole.span.start, end: span.end } } : one;
  });
  return whole ?? opaque('an unfinished comparison', spanOf(node));
}

function conditional(c: Context, node: Node): Expression {
  const [yes, condition, no] = namedChildren(node);
  if (!yes || !condition || !no) return opaque('an unfinished expression', spanOf(node));
  const [whenTrue, test, whenFalse] = [yes, condition, no].map((n) => c.expression(n)) as [Expression, Expression, Expression];
  return { kind: 'conditional', condition: test, whenTrue, whenFalse, span: spanOf(node) };
}

function walrus(c: Context, node: Node): Expression {
  const target = child(node, 'name');
  if (!target) return opaque('an unfinished expression', spanOf(node));
  return { kind: 'assign', target: c.target(target), value: operand(c, node, 'value'), yields: 'new', span: spanOf(node) };
}

function dictionary(c: Context, node: Node): Expression {
  const fields = namedChildren(node).map((n): (Expression & { kind: 'record' })['fields'][number] => {
    const span = spanOf(n);
    if (n.type === 'dictionary_splat') {
      const inner = namedChildren(n)[0];
      return { kind: 'spread', value: inner ? c.expression(inner) : opaque('an unfinished expression', span), span };
    }
    const key = operand(c, n, 'key');
    const value = operand(c, n, 'value');
    return key.kind === 'string' ? { kind: 'field', name: key.value, value, span } : { kind: 'computed', name: key, value, span };
  });
  return { kind: 'record', fields, span: spanOf(node) };
}

function isSuper(c: Context, node: Node | undefined): boolean {
  if (node?.type !== 'call') return false;
  const callee = child(node, 'function');
  return callee?.type === 'identifier' && textOf(c, callee) === 'super';
}

/** `super().rates` */
function superMember(c: Context, node: Node): Expression {
  const last = child(node, 'attribute');
  const object = child(node, 'object');
  if (!last || !object) return opaque('an unfinished expression', spanOf(node));
  const above: Expression = { kind: 'super', span: spanOf(object) };
  return { kind: 'member', object: above, name: nameText(c, last), nameSpan: spanOf(last), span: spanOf(node) };
}
