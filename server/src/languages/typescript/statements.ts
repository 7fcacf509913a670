import ts from 'typescript';
import type { Pattern, Statement } from '../../program/form';
import type { Span } from '../../text/span';
import { type Context, bare, hasModifier, isFunctionSyntax, nameOf, nameText, opaque, spanOf } from './context';
import { enumeration } from './enums';
import { exportAssignment, exportDeclaration, exportList, exportedValue, importDeclaration, importEquals } from './modules';
import { namespaceValue } from './namespaces';
import { valueNamed } from './naming';
import { boundNames } from './patterns';
import { prototypeClasses } from './prototype-classes';
import { typeNote } from './types';

const K = ts.SyntaxKind;

/** The statements of a block or file. Types, signatures and `declare`d names leave nothing at run time and are left out. */
export function statements(c: Context, nodes: readonly ts.Statement[]): Statement[] {
  const made: Statement[] = [];
  const classes = prototypeClasses(c, nodes);
  for (const node of nodes) {
    const gathered = classes.get(node);
    if (gathered) made.push(...gathered);
    else statement(c, node, nodes, made);
  }
  return made;
}

export function branch(c: Context, node: ts.Statement): Statement[] {
  return statements(c, ts.isBlock(node) ? node.statements : [node]);
}

function statement(c: Context, node: ts.Statement, siblings: readonly ts.Statement[], made: Statement[]): void {
  if (hasModifier(node, K.DeclareKeyword)) return;
  const span = spanOf(c, node);
  if (callsEval(c, node)) {
    made.push({ kind: 'opaque', reason: '`eval`, which may change anything', span });
    return;
  }
  if (ts.isVariableStatement(node)) {
    made.push(...declarations(c, node.declarationList, span));
    if (hasModifier(node, K.ExportKeyword)) made.push(exportList(node.declarationList.declarations.map((d) => d.name), span));
  } else if (ts.isFunctionDeclaration(node)) {
    if (node.body) declared(node, { kind: 'function', node: c.functionNode(node, defaultName(c, node)), span }, made);
  } else if (ts.isClassDeclaration(node)) {
    declared(node, { kind: 'class', node: c.classNode(node, defaultName(c, node)), span }, made);
  } else if (ts.isEnumDeclaration(node)) declared(node, enumeration(c, node), made);
  else if (ts.isModuleDeclaration(node)) {
    const value = namespaceValue(c, node, siblings);
    if (value) declared(node, value, made);
  } else if (ts.isExpressionStatement(node)) {
    const exported = exportedValue(c, node.expression, span);
    if (exported) made.push(...exported);
    else if (changesArguments(node.expression)) made.push({ kind: 'opaque', reason: 'a change of `arguments`', span });
    else expressionStatement(c, node.expression, span, made);
  } else if (ts.isImportDeclaration(node)) made.push(...importDeclaration(c, node, span));
  else if (ts.isImportEqualsDeclaration(node)) made.push(...importEquals(c, node, span));
  else if (ts.isExportDeclaration(node)) made.push(...exportDeclaration(node, span));
  else if (ts.isExportAssignment(node)) made.push(...exportAssignment(c, node, span));
  else made.push(...plain(c, node, span));
}

/** `arguments[0] = x` changes a parameter in some modes and not in others. */
function changesArguments(node: ts.Expression): boolean {
  if (!ts.isBinaryExpression(node) || node.operatorToken.kind < K.FirstAssignment || node.operatorToken.kind > K.LastAssignment) return false;
  const { left } = node;
  return ts.isElementAccessExpression(left) && ts.isIdentifier(left.expression) && left.expression.text === 'arguments';
}

/** True for a plain statement that hands text to `eval`, which sees and changes the variables around it. */
function callsEval(c: Context, node: ts.Statement): boolean {
  if (!c.callsEval || !(ts.isExpressionStatement(node) || ts.isVariableStatement(node) || ts.isReturnStatement(node))) return false;
  const stack: ts.Node[] = [node];
  for (let at = stack.pop(); at; at = stack.pop()) {
    if (ts.isCallExpression(at) && ts.isIdentifier(at.expression) && at.expression.text === 'eval') return true;
    if (!isFunctionSyntax(at)) ts.forEachChild(at, (child) => void stack.push(child));
  }
  return false;
}

/** A declaration, followed by its export where it has one. */
function declared(node: ts.DeclarationStatement, form: Statement, made: Statement[]): void {
  made.push(form);
  if (!hasModifier(node, K.ExportKeyword)) return;
  const local = form.kind === 'enum' ? form.name : node.name && ts.isIdentifier(node.name) ? node.name.text : 'default';
  const exported = hasModifier(node, K.DefaultKeyword) ? 'default' : local;
  made.push({ kind: 'export', names: [{ local, exported }], span: form.span });
}

/** `export default function (s) {}` is kept under the name `default`, which no variable can have. */
function defaultName(c: Context, node: ts.DeclarationStatement): { text: string; span: Span } | undefined {
  if (node.name) return undefined;
  const word = (ts.canHaveModifiers(node) ? ts.getModifiers(node) : undefined)?.find((m) => m.kind === K.DefaultKeyword);
  return { text: 'default', span: spanOf(c, word ?? node) };
}

/** `a = 1, b = 2;` is two statements. */
function expressionStatement(c: Context, node: ts.Expression, span: Span, made: Statement[]): void {
  const value = c.expression(node);
  if (value.kind !== 'sequence') made.push({ kind: 'expression', value, span });
  else for (const item of value.items) made.push({ kind: 'expression', value: item, span: item.span });
}

/** One statement per name; `span` is that of the whole statement, kept where it declares only one. */
export function declarations(c: Context, node: ts.VariableDeclarationList, span: Span): Statement[] {
  const scoped = (node.flags & ts.NodeFlags.BlockScoped) !== 0;
  const mutable = !scoped || (node.flags & ts.NodeFlags.BlockScoped) === ts.NodeFlags.Let;
  return node.declarations.flatMap((d): Statement[] => {
    const own = node.declarations.length === 1 ? span : spanOf(c, d);
    const label = ts.isIdentifier(d.name) ? nameOf(c, d.name) : undefined;
    const initial = d.initializer && !scoped && label ? withoutItself(d.initializer, label.text) : d.initializer;
    const exported = initial ? exportedValue(c, initial, own) : undefined;
    const value = initial ? { value: exported?.value ?? valueNamed(c, initial, label) } : {};
    const target = c.binding(d.name);
    const scope = scoped ? 'block' : 'function';
    if (target.kind === 'opaque') {
      // The names are there, and hide others of the same name; only what they hold is not known.
      return boundNames([d.name]).map((n) => {
        const name: Pattern = { kind: 'name', name: nameText(n.text), span: spanOf(c, n) };
        return { kind: 'declare', mutable, scope, target: name, value: opaque(target.reason, target.span), span: own };
      });
    }
    const note = typeNote(c, d.type);
    const made: Statement = { kind: 'declare', mutable, scope, target, ...value, ...(note ? { note } : {}), span: own };
    return exported ? [...exported, made] : [made];
  });
}

/** `var Sim = Sim || {}`: where no other script made it before, the name has no value yet. */
function withoutItself(initializer: ts.Expression, name: string): ts.Expression {
  const at = bare(initializer);
  if (!ts.isBinaryExpression(at) || (at.operatorToken.kind !== K.BarBarToken && at.operatorToken.kind !== K.QuestionQuestionToken)) return initializer;
  const left = bare(at.left);
  return ts.isIdentifier(left) && nameText(left.text) === name ? at.right : initializer;
}

function plain(c: Context, node: ts.Statement, span: Span): Statement[] {
  switch (node.kind) {
    case K.ReturnStatement: {
      const { expression } = node as ts.ReturnStatement;
      return [{ kind: 'return', ...(expression ? { value: c.expression(expression) } : {}), span }];
    }
    case K.IfStatement:
      return conditional(c, node as ts.IfStatement, span);
    case K.Block:
      return [{ kind: 'block', body: c.statements((node as ts.Block).statements), span }];
    case K.ForStatement:
    case K.WhileStatement:
    case K.DoStatement:
    case K.ForOfStatement:
    case K.ForInStatement:
      return [loop(c, node as ts.IterationStatement, span)];
    case K.SwitchStatement:
      return [choice(c, node as ts.SwitchStatement, span)];
    case K.BreakStatement:
    case K.ContinueStatement: {
      const { label } = node as ts.BreakOrContinueStatement;
      const kind = node.kind === K.BreakStatement ? 'break' : 'continue';
      return [{ kind, ...(label ? { label: label.text } : {}), span }];
    }
    case K.LabeledStatement:
      return [labelled(c, node as ts.LabeledStatement, span)];
    case K.ThrowStatement:
      return [{ kind: 'throw', value: c.expression((node as ts.ThrowStatement).expression), span }];
    case K.TryStatement:
      return [attempt(c, node as ts.TryStatement, span)];
    case K.WithStatement:
      return [{ kind: 'opaque', reason: 'a with statement', span }];
    default:
      // Semicolons, debugger statements, interfaces and type aliases.
      return [];
  }
}

/** `else if` chains are walked in a loop: they can be as long as the source. */
function conditional(c: Context, node: ts.IfStatement, span: Span): Statement[] {
  const chain: ts.IfStatement[] = [node];
  let last = node.elseStatement;
  for (; last && ts.isIfStatement(last); last = last.elseStatement) chain.push(last);
  let whenFalse: Statement[] = last ? c.branch(last) : [];
  for (let link = chain.pop(); link; link = chain.pop()) {
    const own = link === node ? span : spanOf(c, link);
    const condition = c.expression(link.expression);
    whenFalse = [{ kind: 'if', condition, whenTrue: c.branch(link.thenStatement), whenFalse, span: own }];
  }
  return whenFalse;
}

function loop(c: Context, node: ts.IterationStatement, span: Span): Statement {
  const body = c.branch(node.statement);
  if (ts.isForOfStatement(node) || ts.isForInStatement(node)) {
    if (ts.isForOfStatement(node) && node.awaitModifier) {
      return { kind: 'opaque', reason: 'a loop over awaited values', span };
    }
    const { target, declares } = loopTarget(c, node.initializer);
    const keys = ts.isForInStatement(node) ? { keys: true } : {};
    return { kind: 'for-each', target, declares, over: c.expression(node.expression), ...keys, body, span };
  }
  if (ts.isForStatement(node)) {
    const condition = node.condition ? { condition: c.expression(node.condition) } : {};
    const initial = node.initializer ? loopPart(c, node.initializer) : [];
    const update = node.incrementor ? loopPart(c, node.incrementor) : [];
    return { kind: 'loop', initial, ...condition, testFirst: true, update, body, span };
  }
  const { expression } = node as ts.WhileStatement | ts.DoStatement;
  return { kind: 'loop', initial: [], condition: c.expression(expression), testFirst: ts.isWhileStatement(node), update: [], body, span };
}

function loopPart(c: Context, node: ts.ForInitializer): Statement[] {
  const span = spanOf(c, node);
  if (ts.isVariableDeclarationList(node)) return declarations(c, node, span);
  const made: Statement[] = [];
  expressionStatement(c, node, span, made);
  return made;
}

function loopTarget(c: Context, node: ts.ForInitializer): { target: Pattern; declares: boolean } {
  if (!ts.isVariableDeclarationList(node)) return { target: c.target(node), declares: false };
  const first = node.declarations[0];
  if (first) return { target: c.binding(first.name), declares: true };
  return { target: { kind: 'opaque', reason: 'an unfinished loop', span: spanOf(c, node) }, declares: true };
}

function choice(c: Context, node: ts.SwitchStatement, span: Span): Statement {
  const cases = node.caseBlock.clauses.map((clause) => ({
    ...(ts.isCaseClause(clause) ? { test: c.expression(clause.expression) } : {}),
    body: c.statements(clause.statements),
    span: spanOf(c, clause),
  }));
  return { kind: 'switch', value: c.expression(node.expression), cases, fallsThrough: true, span };
}

function labelled(c: Context, node: ts.LabeledStatement, span: Span): Statement {
  const inner = c.statements([node.statement]);
  const body: Statement = inner.length === 1 ? inner[0]! : { kind: 'block', body: inner, span };
  return { kind: 'labelled', label: node.label.text, body, span };
}

function attempt(c: Context, node: ts.TryStatement, span: Span): Statement {
  const clause = node.catchClause;
  const parameter = clause?.variableDeclaration ? { parameter: c.binding(clause.variableDeclaration.name) } : {};
  return {
    kind: 'try',
    body: c.statements(node.tryBlock.statements),
    ...(clause ? { handlers: [{ ...parameter, body: c.statements(clause.block.statements) }] } : {}),
    finalizer: node.finallyBlock ? c.statements(node.finallyBlock.statements) : [],
    span,
  };
}
