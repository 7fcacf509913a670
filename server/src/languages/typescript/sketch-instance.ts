import ts from 'typescript';
import { type Context, type FunctionSyntax, bare, nameText } from './context';

/**
 * The instance style of p5.js sketches, in which the drawing library is a parameter: `new p5((p) => { p.draw = ... })` (its
 * reference, "p5" and "Global and instance mode"). Its functions are those of the global style.
 */

/** Converts what is inside a function while its parameters count as sketches, or hide those of the functions around it. */
export function insideOf<T>(c: Context, node: FunctionSyntax, convert: () => T): T {
  const before = c.sketches;
  const names = node.parameters.flatMap((p) => (ts.isIdentifier(p.name) ? [p.name.text] : []));
  const isFirst = names[0] !== undefined && saysSketch(c, node, names[0]) && !isHidden(node, names[0]);
  if (isFirst || names.some((n) => before.has(n))) {
    c.sketches = new Map(before);
    for (const n of names) c.sketches.delete(n);
    if (isFirst) c.sketches.set(names[0]!, membersSet(node, names[0]!));
  }
  const made = convert();
  c.sketches = before;
  return made;
}

/**
 * `p.sin` where `p` is the sketch: the member as one name, which no identifier of the program can be; undefined where it is
 * something else, or a member that the program sets itself.
 */
export function sketchMember(c: Context, node: ts.PropertyAccessExpression): string | undefined {
  if (c.sketches.size === 0) return undefined;
  const object = bare(node.expression);
  const own = ts.isIdentifier(object) ? c.sketches.get(object.text) : undefined;
  if (!own || !ts.isIdentifier(object) || node.name.text === '' || own.has(node.name.text)) return undefined;
  return node.name.text === 'createVector' ? 'createVector' : `${nameText(object.text)}.${nameText(node.name.text)}`;
}

function saysSketch(c: Context, node: FunctionSyntax, name: string): boolean {
  const type = node.parameters[0]?.type;
  if (type) return ts.isTypeReferenceNode(type) && /^p5(?:Types?|\.default)?$/.test(type.typeName.getText(c.source));
  if (/^p5(?:js)?$/i.test(name)) return true;
  const set = membersSet(node, name);
  return set.has('draw') || set.has('setup');
}

/** The members of a parameter that the function's own statements set: `p.draw = ...`. */
function membersSet(node: FunctionSyntax, name: string): ReadonlySet<string> {
  const members = new Set<string>();
  for (const s of node.body && ts.isBlock(node.body) ? node.body.statements : []) {
    if (!ts.isExpressionStatement(s) || !ts.isBinaryExpression(s.expression)) continue;
    const { left, operatorToken } = s.expression;
    if (operatorToken.kind !== ts.SyntaxKind.EqualsToken || !ts.isPropertyAccessExpression(left)) continue;
    if (ts.isIdentifier(left.expression) && left.expression.text === name) members.add(left.name.text);
  }
  return members;
}

/** True where something inside the function is declared by the same name: no use of it is then taken for the sketch. */
function isHidden(node: FunctionSyntax, name: string): boolean {
  const stack: ts.Node[] = node.body ? [node.body] : [];
  for (let at = stack.pop(); at; at = stack.pop()) {
    if (ts.isVariableDeclaration(at) || ts.isBindingElement(at) || ts.isFunctionDeclaration(at) || ts.isClassDeclaration(at)) {
      if (at.name && ts.isIdentifier(at.name) && at.name.text === name) return true;
    }
    ts.forEachChild(at, (child) => void stack.push(child));
  }
  return false;
}
