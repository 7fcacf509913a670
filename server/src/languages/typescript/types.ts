import ts from 'typescript';
import type { Expression, TypeNote } from '../../program/form';
import { type Context, nameText, propertyName, spanOf } from './context';

const K = ts.SyntaxKind;

/** Types that leave the members of what they wrap as they are. */
const SAME = new Set(['Readonly', 'Required', 'NonNullable', 'Partial', 'Omit', 'Pick']);
const LISTS = new Set(['Array', 'ReadonlyArray']);

/** Types refer to types without end; deeper than this they say nothing. */
const DEEPEST = 24;

/** What a type says of the value's class, and of what is in it; undefined where it says nothing of either. */
export function typeNote(c: Context, node: ts.TypeNode | undefined, depth = 0): TypeNote | undefined {
  if (!node || depth > DEEPEST) return undefined;
  if (ts.isParenthesizedTypeNode(node)) return typeNote(c, node.type, depth + 1);
  if (ts.isTypeOperatorNode(node)) return node.operator === K.ReadonlyKeyword ? typeNote(c, node.type, depth + 1) : undefined;
  if (ts.isArrayTypeNode(node)) return listOf(typeNote(c, node.elementType, depth + 1));
  if (ts.isTypeLiteralNode(node)) return { member: (name) => memberNote(c, node.members, name, depth + 1) };
  if (ts.isUnionTypeNode(node)) return unionNote(c, node, depth);
  if (ts.isIntersectionTypeNode(node)) {
    const parts = node.types.map((t) => typeNote(c, t, depth + 1));
    return parts.find((p) => p?.class) ?? { member: (name) => first(parts, (p) => p?.member?.(name)) };
  }
  if (ts.isTupleTypeNode(node)) {
    return { member: (name) => (/^\d+$/.test(name) ? typeNote(c, elementType(node.elements[Number(name)]), depth + 1) : undefined) };
  }
  if (ts.isTypeReferenceNode(node)) return referenceNote(c, node, depth);
  return undefined;
}

function listOf(item: TypeNote | undefined): TypeNote | undefined {
  return item && { item };
}

function elementType(node: ts.TypeNode | ts.NamedTupleMember | undefined): ts.TypeNode | undefined {
  return node && ts.isNamedTupleMember(node) ? node.type : node;
}

/** `Vec | undefined` is a `Vec` where it is used. */
function unionNote(c: Context, node: ts.UnionTypeNode, depth: number): TypeNote | undefined {
  const real = node.types.filter((t) => t.kind !== K.UndefinedKeyword && !(ts.isLiteralTypeNode(t) && t.literal.kind === K.NullKeyword));
  return real.length === 1 ? typeNote(c, real[0], depth + 1) : undefined;
}

/** What a type says that the file declares by that name. */
export function declaredNote(c: Context, name: string, depth = 0): TypeNote | undefined {
  const declared = c.typesByName().get(name);
  if (!declared) return undefined;
  if (ts.isTypeAliasDeclaration(declared)) return typeNote(c, declared.type, depth + 1);
  return { member: (key) => interfaceMember(c, declared, key, depth + 1) };
}

function referenceNote(c: Context, node: ts.TypeReferenceNode, depth: number): TypeNote | undefined {
  const path = expressionOf(c, node.typeName);
  if (path.kind !== 'name') return { class: path };
  const argument = node.typeArguments?.[0];
  if (argument && LISTS.has(path.name)) return listOf(typeNote(c, argument, depth + 1));
  if (argument && SAME.has(path.name)) return typeNote(c, argument, depth + 1);
  return declaredNote(c, path.name, depth) ?? { class: path };
}

function interfaceMember(c: Context, node: ts.InterfaceDeclaration, name: string, depth: number): TypeNote | undefined {
  const bases = node.heritageClauses?.flatMap((h) => h.types) ?? [];
  return (
    memberNote(c, node.members, name, depth) ??
    first(bases, (b) => (ts.isIdentifier(b.expression) ? baseNote(c, b.expression.text, name, depth + 1) : undefined))
  );
}

function baseNote(c: Context, base: string, name: string, depth: number): TypeNote | undefined {
  const declared = depth > DEEPEST ? undefined : c.typesByName().get(base);
  if (!declared) return undefined;
  if (ts.isTypeAliasDeclaration(declared)) return typeNote(c, declared.type, depth)?.member?.(name);
  return interfaceMember(c, declared, name, depth);
}

function memberNote(c: Context, members: ts.NodeArray<ts.TypeElement>, name: string, depth: number): TypeNote | undefined {
  for (const m of members) {
    if (ts.isPropertySignature(m) && propertyName(m.name) === name) return typeNote(c, m.type, depth);
    if (ts.isIndexSignatureDeclaration(m)) return typeNote(c, m.type, depth);
  }
  return undefined;
}

function expressionOf(c: Context, node: ts.EntityName): Expression {
  const names: ts.Identifier[] = [];
  let at = node;
  for (; ts.isQualifiedName(at); at = at.left) names.push(at.right);
  let e: Expression = { kind: 'name', name: nameText(at.text), span: spanOf(c, at) };
  for (const n of names.reverse()) {
    e = { kind: 'member', object: e, name: nameText(n.text), nameSpan: spanOf(c, n), span: { start: e.span.start, end: n.end } };
  }
  return e;
}

function first<T, R>(items: readonly T[], f: (item: T) => R | undefined): R | undefined {
  for (const item of items) {
    const r = f(item);
    if (r !== undefined) return r;
  }
  return undefined;
}
