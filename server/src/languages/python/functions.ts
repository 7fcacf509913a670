import type { FunctionNode, Parameter, Pattern, Statement, TypeNote } from '../../program/form';
import type { Span } from '../../text/span';
import { Bindings, outerNames } from './bindings';
import { type Context, type FunctionOptions, namePattern, nameText, spanOf, textOf } from './context';
import { decorated } from './decorators';
import { child, namedChildren, nodesOf, type Node } from './syntax';
import { boundNames } from './targets';
import { noteOf } from './type-notes';

/** What functions without a name are called. */
export const ANONYMOUS = '<anonymous>';

/** A `def` or `lambda`. */
export function functionNode(c: Context, node: Node, options: FunctionOptions = {}): FunctionNode {
  const made = node.type === 'lambda' ? lambda(c, node) : definition(c, node, options);
  c.functions.set(node, made);
  return made;
}

function definition(c: Context, node: Node, { isMethod = false, decorators = [] }: FunctionOptions): FunctionNode {
  const nameNode = child(node, 'name');
  const { unknown } = decorated(c, decorators);
  const body = child(node, 'body');
  const base = {
    name: nameNode ? nameText(c, nameNode) : ANONYMOUS,
    nameSpan: spanOf(nameNode ?? node),
    span: spanOf(node),
    bodySpan: spanOf(body ?? node),
    inheritsSelf: !isMethod && c.bindings.receiver !== undefined,
    ...(isMethod ? { selfParameter: true } : {}),
    ...(unknown === undefined ? {} : { wrapped: `it is decorated with \`${unknown}\`, which is not known` }),
  };
  if (c.broken.has(node.start)) return { ...base, parameters: [], body: [], opaque: 'not finished: it has a syntax error' };
  const { parameters, names } = parametersOf(c, child(node, 'parameters'));
  const receiver = isMethod ? names[0] : undefined;
  const opaque = opacity(c, node, body);
  const made: Statement[] = body ? inside(c, names, receiver, body, () => c.block(body)) : [];
  return { ...base, parameters, body: made, ...(opaque === undefined ? {} : { opaque }) };
}

/** Converts a body with names of its own. */
function inside<T>(c: Context, names: readonly string[], receiver: string | undefined, body: Node, convert: () => T): T {
  const outside = c.bindings;
  const outer = outerNames(c.text, body);
  const seen = receiver ?? (outside.receiver !== undefined && !names.includes(outside.receiver) ? outside.receiver : undefined);
  c.bindings = new Bindings(outside, names, outer, seen);
  const made = convert();
  c.bindings = outside;
  return made;
}

function lambda(c: Context, node: Node): FunctionNode {
  const { parameters, names } = parametersOf(c, child(node, 'parameters'));
  const body = child(node, 'body');
  const span = spanOf(node);
  const statements: Statement[] = body
    ? [{ kind: 'return', value: inside(c, names, undefined, body, () => c.expression(body)), span: spanOf(body) }]
    : [];
  return {
    name: ANONYMOUS,
    nameSpan: { start: span.start, end: span.start + 6 },
    parameters,
    body: statements,
    inheritsSelf: c.bindings.receiver !== undefined,
    span,
    bodySpan: spanOf(body ?? node),
  };
}

/** Why a call of it can't be read, by how it is written. */
function opacity(c: Context, node: Node, body: Node | undefined): string | undefined {
  if (node.children.some((n) => n.type === 'async')) return 'an async function';
  if (!body || !/\byield\b/.test(textOf(c, body))) return undefined;
  for (const n of nodesOf(body, (x) => x.type !== 'function_definition' && x.type !== 'lambda' && x.type !== 'class_definition')) {
    if (n.type === 'yield') return 'a generator';
  }
  return undefined;
}

function parametersOf(c: Context, list: Node | undefined): { parameters: Parameter[]; names: string[] } {
  const parameters: Parameter[] = [];
  let keywordOnly = false;
  for (const node of list ? namedChildren(list) : []) {
    if (node.type === 'keyword_separator') keywordOnly = true;
    const made = parameter(c, node);
    if (!made) continue;
    parameters.push(keywordOnly && !made.rest && !made.restNamed ? { ...made, keywordOnly: true } : made);
    if (made.rest) keywordOnly = true;
  }
  return { parameters, names: parameters.flatMap((p) => boundNames(p.pattern).map((n) => n.name)) };
}

function parameter(c: Context, node: Node): Parameter | undefined {
  switch (node.type) {
    case 'identifier':
    case 'tuple_pattern':
      return { pattern: c.target(node) };
    case 'default_parameter':
    case 'typed_default_parameter': {
      const name = child(node, 'name');
      const value = child(node, 'value');
      if (!name) return undefined;
      return { pattern: c.target(name), ...(value ? { initial: c.expression(value) } : {}), ...noted(c, child(node, 'type')) };
    }
    case 'typed_parameter': {
      const inner = namedChildren(node).find((n) => n.field !== 'type');
      const made = inner && parameter(c, inner);
      return made && { ...made, ...noted(c, child(node, 'type')) };
    }
    case 'list_splat_pattern':
    case 'dictionary_splat_pattern': {
      const inner = namedChildren(node)[0];
      if (!inner) return undefined;
      const pattern = namePattern(nameText(c, inner), spanOf(inner));
      return node.type === 'list_splat_pattern' ? { pattern, rest: true } : { pattern, restNamed: true };
    }
    default:
      return undefined;
  }
}

function noted(c: Context, type: Node | undefined): { note?: TypeNote } {
  const note = noteOf(c, type);
  return note ? { note } : {};
}

/** A function that no source spells out: the constructor of a dataclass. */
export function madeFunction(name: string, parameters: readonly Parameter[], body: readonly Statement[], span: Span): FunctionNode {
  const self: Pattern = namePattern('self', { start: span.start, end: span.start });
  return {
    name,
    nameSpan: span,
    parameters: [{ pattern: self }, ...parameters],
    body,
    inheritsSelf: false,
    selfParameter: true,
    span,
    bodySpan: span,
  };
}
