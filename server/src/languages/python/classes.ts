import type { ClassNode, Expression, Member, Parameter, Statement, TypeNote } from '../../program/form';
import type { Span } from '../../text/span';
import { Bindings } from './bindings';
import { type Context, namePattern, nameText, spanOf, textOf } from './context';
import { decorated } from './decorators';
import { madeFunction } from './functions';
import { child, namedChildren, nodesOf, type Node } from './syntax';
import { noteOf } from './type-notes';

interface Field {
  readonly name: string;
  readonly nameSpan: Span;
  readonly isTyped: boolean;
  readonly note: TypeNote | undefined;
  readonly value: Expression | undefined;
  readonly span: Span;
}

/** A class; dataclasses and named tuples get the constructor that Python makes for them. */
export function classNode(c: Context, node: Node, decorators: readonly Node[] = []): ClassNode {
  const nameNode = child(node, 'name');
  const body = child(node, 'body');
  const bases = basesOf(c, node);
  const outside = c.bindings;
  // Methods do not see the names of the class body; its statements are no locals of the function around.
  c.bindings = new Bindings(outside, [], new Set(), undefined, new Set(), true);
  const members: Member[] = [];
  const fields: Field[] = [];
  for (const s of body ? namedChildren(body) : []) addMember(c, s, members, fields);
  c.bindings = outside;
  const isTuple = bases.some((b) => b.text === 'NamedTuple' || b.text.endsWith('.NamedTuple'));
  const typed = fields.filter((f) => f.isTyped);
  if ((isTuple || decorated(c, decorators).isDataclass) && !members.some((m) => m.kind === 'constructor')) {
    members.push(...recordMembers(typed, members, isTuple, spanOf(node)));
  }
  for (const f of fields) members.push(...classAttribute(c, f, typed.length > 0 && members.some((m) => m.kind === 'constructor')));
  const base = bases.find((b) => !SILENT_BASES.test(b.text));
  const made: ClassNode = {
    name: nameNode ? nameText(c, nameNode) : '',
    nameSpan: spanOf(nameNode ?? node),
    ...(base ? { base: c.expression(base.node) } : {}),
    members,
    span: spanOf(node),
  };
  c.classes.set(node, made);
  return made;
}

/** Bases that bring nothing a computation could use. */
const SILENT_BASES = /^(?:object|(?:\w+\.)*(?:NamedTuple|ABC|Protocol|Generic(?:\[.*)?|Enum|IntEnum|Struct))$/s;

function basesOf(c: Context, node: Node): { readonly node: Node; readonly text: string }[] {
  const list = child(node, 'superclasses');
  return (list ? namedChildren(list) : [])
    .filter((n) => n.type !== 'keyword_argument')
    .map((n) => ({ node: n, text: textOf(c, n) }));
}

function addMember(c: Context, node: Node, members: Member[], fields: Field[]): void {
  const span = spanOf(node);
  if (node.type === 'function_definition' || node.type === 'decorated_definition') {
    members.push(...method(c, node));
    return;
  }
  const statement = node.type === 'expression_statement' ? namedChildren(node)[0] : undefined;
  if (statement?.type !== 'assignment') return;
  const left = child(statement, 'left');
  const right = child(statement, 'right');
  if (left?.type !== 'identifier') return;
  const value = right ? defaultOf(c, right) : undefined;
  const type = child(statement, 'type');
  const isTyped = type !== undefined;
  c.bindings.classNames?.add(nameText(c, left));
  fields.push({ name: nameText(c, left), nameSpan: spanOf(left), isTyped, note: noteOf(c, type), value, span });
}

/** `field(default=1.0)` and `field(default_factory=lambda: ...)` stand for the value itself. */
function defaultOf(c: Context, node: Node): Expression | undefined {
  const callee = node.type === 'call' ? child(node, 'function') : undefined;
  if (!callee || !/^(?:dataclasses\.|attr\.|attrs\.)?(?:field|ib)$/.test(textOf(c, callee))) return c.expression(node);
  const list = child(node, 'arguments');
  for (const a of list ? namedChildren(list) : []) {
    const key = child(a, 'name');
    const value = child(a, 'value');
    if (!key || !value) continue;
    if (/^(?:default|factory|default_factory)$/.test(textOf(c, key))) {
      const made = c.expression(value);
      return textOf(c, key) === 'default' ? made : { kind: 'call', callee: made, args: [], span: made.span };
    }
  }
  return undefined;
}

function method(c: Context, node: Node): Member[] {
  const decorators = node.type === 'decorated_definition' ? namedChildren(node).filter((n) => n.type === 'decorator') : [];
  const inner = node.type === 'decorated_definition' ? child(node, 'definition') : node;
  if (inner?.type !== 'function_definition') return [];
  const { isStatic, isClassMethod, isCached, kind } = decorated(c, decorators);
  const made = c.functionNode(inner, { isMethod: !isStatic, decorators });
  const span = spanOf(node);
  if (made.name === '__init__') return [{ kind: 'constructor', name: '__init__', isStatic: false, node: made, span }];
  const one = { kind, name: made.name, node: made, span, ...(isCached ? { isCached } : {}) } as const;
  // Reached through the class and through an instance alike.
  if (isStatic || isClassMethod) return [{ ...one, isStatic: true }, { ...one, isStatic: false }];
  return [{ ...one, isStatic: false }];
}

/** A name of the class body: an attribute of the class that instances see too. */
function classAttribute(c: Context, f: Field, isRecord: boolean): Member[] {
  const common = { kind: 'field', name: f.name, span: f.span, ...(f.note ? { note: f.note } : {}) } as const;
  const value = f.value ? { value: f.value } : {};
  if (isRecord && f.isTyped) return [{ ...common, isStatic: false }, ...(f.value ? [{ ...common, isStatic: true, ...value }] : [])];
  const isConstant = !assignsMember(c, f.name);
  return [
    { ...common, isStatic: false, ...value, isConstant },
    ...(f.value ? [{ ...common, isStatic: true, ...value, isConstant }] : []),
  ];
}

function assignsMember(c: Context, name: string): boolean {
  return new RegExp(`\\.${name.replace(/[^\w]/g, '\\$&')}\\s*(?:[-+*/%@|&]|\\*\\*|//)?=(?!=)`).test(c.text);
}

/** The constructor of a dataclass or named tuple; of a tuple also its places by number. */
function recordMembers(fields: readonly Field[], members: readonly Member[], isTuple: boolean, span: Span): Member[] {
  const parameters = fields.map(
    (f): Parameter => ({ pattern: namePattern(f.name, f.nameSpan), field: true, ...(f.value ? { initial: f.value } : {}), ...(f.note ? { note: f.note } : {}) }),
  );
  const self: Expression = { kind: 'self', span };
  const body: Statement[] = [];
  if (members.some((m) => m.name === '__post_init__')) {
    const callee: Expression = { kind: 'member', object: self, name: '__post_init__', nameSpan: span, span };
    body.push({ kind: 'expression', value: { kind: 'call', callee, args: [], span }, span });
  }
  const made: Member[] = [
    { kind: 'constructor', name: '__init__', isStatic: false, node: madeFunction('__init__', parameters, body, span), span },
  ];
  if (!isTuple) return made;
  fields.forEach((f, k) => {
    const value: Expression = { kind: 'member', object: self, name: f.name, nameSpan: f.nameSpan, span: f.span };
    const node = madeFunction(String(k), [], [{ kind: 'return', value, span: f.span }], f.span);
    made.push({ kind: 'getter', name: String(k), isStatic: false, node, span: f.span });
  });
  return made;
}

/** True for a class whose members are names of numbers: `class Slot(IntEnum)`. */
export function isEnum(c: Context, node: Node): boolean {
  return basesOf(c, node).some((b) => /^(?:enum\.)?(?:Int)?Enum$/.test(b.text));
}

/** The names an enum gives to numbers. */
export function enumMembers(c: Context, node: Node): { name: string; value?: Expression; span: Span }[] {
  const body = child(node, 'body');
  const found: { name: string; value?: Expression; span: Span }[] = [];
  if (!body) return found;
  for (const n of nodesOf(body, (x) => x === body || x.type === 'expression_statement')) {
    const left = n.type === 'assignment' ? child(n, 'left') : undefined;
    const right = n.type === 'assignment' ? child(n, 'right') : undefined;
    if (left?.type === 'identifier' && right) found.push({ name: nameText(c, left), value: c.expression(right), span: spanOf(n) });
  }
  return found;
}
