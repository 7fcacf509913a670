import type { Argument, BinaryOperator, Expression, Field, FunctionNode, Statement } from '../../program/form';
import { type Context, name, namePattern, nameText, opaque, spanOf, textOf } from './context';
import { subscript } from './subscripts';
import { child, namedChildren, type Node } from './syntax';

/** What the library table calls the copy of an array; no source can spell it. */
const COPY = 'copy of array';

/** Calls, and the few whose meaning is in their syntax: `super()`, `dict(a=1)`, `params.get("m", 1.0)`, `isinstance`. */

function convert(c: Context, node: Node, callee: Expression): Expression {
  return { kind: 'call', callee, args: argumentsOf(c, node), span: spanOf(node) };
}

function argumentsOf(c: Context, node: Node): Argument[] {
  const list = child(node, 'arguments');
  if (!list) return [];
  // `sum(x for x in xs)`: the brackets of the call are those of the generator.
  if (list.type === 'generator_expression') return [{ value: c.expression(list) }];
  return namedChildren(list).map((n): Argument => {
    const inner = namedChildren(n)[0];
    switch (n.type) {
      case 'keyword_argument': {
        const key = child(n, 'name');
        const value = child(n, 'value');
        if (!key || !value) return { value: opaque('an unfinished argument', spanOf(n)) };
        return { value: c.expression(value), name: nameText(c, key) };
      }
      case 'list_splat':
      case 'dictionary_splat': {
        const value = inner ? c.expression(inner) : opaque('an unfinished argument', spanOf(n));
        return { value, spread: true, ...(n.type === 'dictionary_splat' ? { name: '**' } : {}) };
      }
      default:
        return { value: c.expression(n) };
    }
  });
}

function positional(node: Node): Node[] {
  const list = child(node, 'arguments');
  return list ? namedChildren(list) : [];
}

type Special = 'updated' | 'super' | 'super-init' | 'base-init' | 'dict' | 'get' | 'isinstance' | 'pass-through';

function specialOf(c: Context, node: Node): Special | undefined {
  const callee = child(node, 'function');
  if (!callee) return undefined;
  if (callee.type === 'identifier') {
    const text = textOf(c, callee);
    if (text === 'super') return 'super';
    const args = positional(node);
    if (text === 'dict' && args.length > 0 && args.every((a) => a.type === 'keyword_argument')) return 'dict';
    if (text === 'isinstance' && args.length === 2) return 'isinstance';
    if (text === 'cast' && args.length === 2) return 'pass-through';
    return undefined;
  }
  if (callee.type !== 'attribute') return undefined;
  const method = child(callee, 'attribute');
  const object = child(callee, 'object');
  if (!method || !object) return undefined;
  const text = textOf(c, method);
  if (text === '__init__') {
    const inner = object.type === 'call' ? child(object, 'function') : undefined;
    if (inner?.type === 'identifier' && textOf(c, inner) === 'super') return 'super-init';
    const [first] = positional(node);
    if (first?.type === 'identifier' && c.bindings.isReceiver(textOf(c, first))) return 'base-init';
  }
  if (UPDATES[text] !== undefined && object.type === 'subscript' && positional(node).length === 1) {
    const whole = child(object, 'value');
    const at = whole?.type === 'attribute' ? child(whole, 'attribute') : undefined;
    if (at && textOf(c, at) === 'at') return 'updated';
  }
  if (text === 'get') {
    const args = positional(node);
    if (args[0]?.type === 'string' && args.length <= 2 && args.every((a) => a.type !== 'keyword_argument')) return 'get';
  }
  return undefined;
}

function special(c: Context, node: Node): Expression {
  const span = spanOf(node);
  const args = positional(node);
  switch (specialOf(c, node)) {
    case 'super':
      return { kind: 'super', span };
    case 'super-init':
      return { kind: 'call', callee: { kind: 'super', span }, args: argumentsOf(c, node), span };
    case 'base-init':
      return { kind: 'call', callee: { kind: 'super', span }, args: argumentsOf(c, node).slice(1), span };
    case 'dict':
      return { kind: 'record', fields: args.map((a) => field(c, a)), span };
    case 'isinstance': {
      const [left, right] = args.map((a) => c.expression(a)) as [Expression, Expression];
      return { kind: 'binary', op: 'instanceof', left, right, opSpan: span, span };
    }
    case 'updated':
      return updated(c, node);
    case 'get':
      return entry(c, node, args);
    case 'pass-through':
      return c.expression(args[1]!);
    default:
      return opaque('a call of this kind', span);
  }
}

/** What `x.at[i].set(v)` and its like do to the copy they give. */
const UPDATES: Readonly<Record<string, BinaryOperator | ''>> = { set: '', add: '+', subtract: '-', multiply: '*', mul: '*', divide: '/' };

/** `x.at[i].add(v)` is a copy of x in which `x[i] += v` was done. */
function updated(c: Context, node: Node): Expression {
  const span = spanOf(node);
  const callee = child(node, 'function')!;
  const method = textOf(c, child(callee, 'attribute')!);
  const place = child(callee, 'object')!;
  const copy = namePattern('copy that is updated', span);
  const object = c.expression(child(child(place, 'value')!, 'object')!);
  const value = c.expression(positional(node)[0]!);
  const local = name('copy that is updated', span);
  const target = subscript(c, place, local);
  const op = UPDATES[method];
  const write: Expression = { kind: 'assign', target: { kind: 'place', target, span }, ...(op ? { op } : {}), value, yields: 'new', span };
  const made: Expression = { kind: 'call', callee: name(COPY, span), args: [{ value: object }], span };
  const body: Statement[] = [
    { kind: 'declare', mutable: true, scope: 'function', target: copy, value: made, span },
    { kind: 'expression', value: write, span },
    { kind: 'return', value: local, span },
  ];
  const f: FunctionNode = { name: method, nameSpan: span, parameters: [], body, inheritsSelf: true, span, bodySpan: span };
  return { kind: 'call', callee: { kind: 'function', node: f, span }, args: [], span };
}

/** `params.get("m", 1.0)`: the entry, or the default where there is none. */
function entry(c: Context, node: Node, args: readonly Node[]): Expression {
  const object = child(child(node, 'function')!, 'object')!;
  const span = spanOf(node);
  const found: Expression = { kind: 'index', object: c.expression(object), indices: [c.expression(args[0]!)], optional: true, span };
  return args[1] ? { kind: 'logical', op: 'coalesce', left: found, right: c.expression(args[1]), span } : found;
}

function field(c: Context, node: Node): Field {
  const key = child(node, 'name');
  const value = child(node, 'value');
  const span = spanOf(node);
  return { kind: 'field', name: key ? nameText(c, key) : '', value: value ? c.expression(value) : name('', span), span };
}

export const call = {
  convert,
  special,
  /** True for calls that are what they look like. */
  isPlain: (c: Context, node: Node): boolean => specialOf(c, node) === undefined,
};
