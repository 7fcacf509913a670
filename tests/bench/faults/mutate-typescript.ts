import ts from 'typescript';
import type { Fixture, Section } from '../../support/fixtures';
import type { Mutation } from './mutations';

const SWAPPED: Readonly<Record<string, string>> = { sin: 'cos', cos: 'sin', tan: 'sin', sqrt: 'abs', asin: 'acos', acos: 'asin' };

/** Every single-place mutation, by ten operators, of the code of a section. */
export function mutateTypeScript(fixture: Fixture, section: Section): Mutation[] {
  const source = ts.createSourceFile('f.tsx', fixture.text, ts.ScriptTarget.ESNext, true, ts.ScriptKind.TSX);
  const out: Mutation[] = [];
  const put = (operator: string, node: ts.Node, text: string): void => {
    out.push({ operator, start: node.getStart(), end: node.getEnd(), text });
  };
  const visit = (node: ts.Node, names: ReadonlySet<string>): void => {
    if (node.getEnd() <= section.start || node.getStart() >= section.end) return;
    let inner = names;
    if (ts.isFunctionLike(node)) inner = localNames(node);
    if (node.getStart() >= section.start && node.getEnd() <= section.end && isInFunction(node)) mutate(node, inner, put);
    if (!ts.isTypeNode(node)) ts.forEachChild(node, (child) => visit(child, inner));
  };
  visit(source, new Set());
  return out;
}

type Put = (operator: string, node: ts.Node, text: string) => void;

function mutate(node: ts.Node, names: ReadonlySet<string>, put: Put): void {
  if (ts.isBinaryExpression(node)) {
    const op = node.operatorToken.getText();
    const left = node.left.getText();
    const right = node.right.getText();
    if (isLoopControl(node)) return;
    if (op === '+' || op === '-') {
      put('sign', node.operatorToken, op === '+' ? '-' : '+');
      put('dropped term', node, left);
      put('operator', node.operatorToken, '*');
    }
    if (op === '*') {
      put('operator', node.operatorToken, '/');
      put('dropped factor', node, left);
      put('dropped factor', node, right);
      put('factor', node, `2 * ${text(node)}`);
      put('factor', node, `0.5 * ${text(node)}`);
    }
    if (op === '/') {
      put('operator', node.operatorToken, '*');
      put('dropped factor', node, left);
    }
    if (op === '**') put('power', node, left);
    if (op === '+=' || op === '-=') put('sign', node.operatorToken, op === '+=' ? '-=' : '+=');
  } else if (ts.isPrefixUnaryExpression(node) && node.operator === ts.SyntaxKind.MinusToken) {
    put('sign', node, node.operand.getText());
  } else if (ts.isNumericLiteral(node) && !isIndex(node) && !isLoopControl(node)) {
    const value = Number(node.text);
    const isExponent = isExponentOf(node);
    put(isExponent ? 'power' : 'factor', node, String(value + 1));
    if (!isExponent && value !== 0) put('factor', node, String(value / 2));
  } else if (ts.isNumericLiteral(node) && isIndex(node)) {
    put('index', node, String(Number(node.text) + 1));
    if (Number(node.text) > 0) put('index', node, String(Number(node.text) - 1));
  } else if (ts.isCallExpression(node)) {
    const callee = ts.isPropertyAccessExpression(node.expression) ? node.expression.name : node.expression;
    const other = SWAPPED[callee.getText()];
    if (other) put('function', callee, other);
    if (callee.getText() === 'atan2') put('function', node, `${node.expression.getText()}(${[...node.arguments].reverse().map((a) => a.getText()).join(', ')})`);
  } else if (ts.isParenthesizedExpression(node)) {
    put('bracket', node, node.expression.getText());
  } else if (ts.isIdentifier(node) && isValue(node) && names.has(node.text)) {
    const list = [...names];
    const at = list.indexOf(node.text);
    for (const k of [1, 2]) {
      const other = list[(at + k) % list.length]!;
      if (other !== node.text) put('name', node, other);
    }
  }
}

function text(node: ts.Node): string {
  return node.getText();
}

function isInFunction(node: ts.Node): boolean {
  for (let n: ts.Node | undefined = node.parent; n; n = n.parent) {
    if (ts.isFunctionLike(n)) return !ts.isParameter(node) && !isInParameter(node);
  }
  return false;
}

function isInParameter(node: ts.Node): boolean {
  for (let n: ts.Node | undefined = node; n && !ts.isBlock(n); n = n.parent) if (ts.isParameter(n)) return true;
  return false;
}

/** Numbers by name: parameters and locals that are used in arithmetic. */
function localNames(node: ts.SignatureDeclaration): Set<string> {
  const out = new Set<string>();
  const visit = (n: ts.Node): void => {
    if (ts.isIdentifier(n) && isValue(n) && isOperand(n)) out.add(n.text);
    ts.forEachChild(n, visit);
  };
  visit(node);
  return out;
}

function isOperand(n: ts.Identifier): boolean {
  const p = n.parent;
  return ts.isBinaryExpression(p) && /^([-+*/]|\*\*)$/.test(p.operatorToken.getText());
}

function isValue(n: ts.Identifier): boolean {
  const p = n.parent;
  if (isLoopControl(n)) return false;
  if (ts.isBinaryExpression(p)) return !/=$/.test(p.operatorToken.getText()) || p.right === n;
  if (ts.isCallExpression(p)) return p.arguments.includes(n);
  return ts.isPrefixUnaryExpression(p) || ts.isParenthesizedExpression(p) || ts.isArrayLiteralExpression(p);
}

function isIndex(n: ts.Node): boolean {
  return ts.isElementAccessExpression(n.parent) && n.parent.argumentExpression === n;
}

function isExponentOf(n: ts.Node): boolean {
  const p = n.parent;
  if (ts.isBinaryExpression(p)) return p.operatorToken.getText() === '**' && p.right === n;
  return ts.isCallExpression(p) && /pow$/.test(p.expression.getText()) && p.arguments[1] === n;
}

function isLoopControl(n: ts.Node): boolean {
  for (let p: ts.Node | undefined = n; p?.parent; p = p.parent) {
    if (ts.isForStatement(p.parent)) return p.parent.statement !== p;
    if (ts.isIfStatement(p.parent)) return p.parent.expression === p;
    if (ts.isFunctionLike(p)) return false;
  }
  return false;
}
