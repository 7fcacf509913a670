import ts from 'typescript';
import type { Fixture, Section } from './fixtures';

/** A change of one or two tokens of a fixture's code, as slips of the keyboard are. */
export interface Mutant {
  readonly what: string;
  readonly text: string;
}

const OPERATORS: Readonly<Record<string, string>> = { '+': '-', '-': '+', '*': '/', '/': '*', '+=': '-=', '-=': '+=', '*=': '/=', '/=': '*=', '<': '>', '>': '<' };
const FUNCTIONS: Readonly<Record<string, string>> = { sin: 'cos', cos: 'sin', tan: 'sin', max: 'min', min: 'max', sqrt: 'abs', abs: 'sign' };

/**
 * All single changes of operators, functions, numbers and names in the code of a section, in order of place; none where the
 * declaration says how to take it whatever it is: ends of loops, clips under `within limits`.
 */
export function mutantsOf(fixture: Fixture, section: Section): Mutant[] {
  const { text } = fixture;
  const tree = ts.createSourceFile('module.tsx', text, ts.ScriptTarget.ES2022, true, ts.ScriptKind.TSX);
  const out: Mutant[] = [];
  const from = text.indexOf('@visviva', section.start);
  const clips = text.slice(from, section.end).includes('within limits');
  const change = (node: ts.Node, to: string): void => {
    const [start, end] = [node.getStart(tree), node.end];
    if (start < from || end > section.end || text.slice(start, end) === to) return;
    const line = tree.getLineAndCharacterOfPosition(start).line + 1;
    out.push({ what: `line ${line}: ${text.slice(start, end)} -> ${to}`, text: text.slice(0, start) + to + text.slice(end) });
  };
  const visit = (node: ts.Node): void => {
    if (ts.isTypeNode(node)) return;
    if (ts.isBinaryExpression(node)) {
      const other = OPERATORS[node.operatorToken.getText(tree)];
      if (other && !ts.isForStatement(node.parent)) change(node.operatorToken, other);
      if (node.operatorToken.kind === ts.SyntaxKind.MinusToken) swapSides(node);
    }
    if (ts.isPrefixUnaryExpression(node) && node.operator === ts.SyntaxKind.MinusToken) change(node, node.operand.getText(tree));
    if (ts.isNumericLiteral(node) && ts.isExpression(node.parent)) change(node, String(Number(node.text) + 1));
    if (ts.isIdentifier(node)) {
      const other = FUNCTIONS[node.text];
      if (other && ts.isExpression(node.parent)) {
        if (!clips || !/^m(ax|in)$/.test(other)) change(node, other);
      }
      else if (ts.isExpression(node.parent) && !ts.isCallExpression(node.parent) && isValue(node)) change(node, neighbour(node) ?? node.text);
    }
    ts.forEachChild(node, visit);
  };
  const swapSides = (node: ts.BinaryExpression): void => {
    change(node, `${node.right.getText(tree)} - ${node.left.getText(tree)}`);
  };
  /** Another value of the same function, the next one used after this. */
  const neighbour = (node: ts.Identifier): string | undefined => {
    const names = valuesNear(node);
    return names[(names.indexOf(node.text) + 1) % names.length];
  };
  const isValue = (node: ts.Identifier): boolean =>
    !(ts.isPropertyAccessExpression(node.parent) && node.parent.name === node) &&
    !(ts.isPropertyAccessExpression(node.parent) && ts.isCallExpression(node.parent.parent)) &&
    ts.isBinaryExpression(node.parent) && !/=$/.test(node.parent.operatorToken.getText(tree));
  const valuesNear = (node: ts.Node): string[] => {
    let owner: ts.Node = node;
    while (owner.parent && !ts.isStatement(owner)) owner = owner.parent;
    const names = new Set<string>();
    const collect = (n: ts.Node): void => {
      if (ts.isIdentifier(n) && isValue(n)) names.add(n.text);
      ts.forEachChild(n, collect);
    };
    collect(owner);
    return [...names];
  };
  visit(tree);
  return out;
}
