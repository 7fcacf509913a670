import type { Expression, Statement } from '../../program/form';
import { enumMembers, isEnum } from './classes';
import { type Context, DEEPEST, namePattern, nameText, opaque, spanOf, textOf } from './context';
import { announce, announced, assign } from './assignments';
import { conditionals, loopFor, loopWhile, tries, withs } from './control';
import { raised } from './errors';
import { importFrom, importModules } from './imports';
import { matches } from './match';
import { augmented } from './operators';
import { child, namedChildren, type Node } from './syntax';

export function statements(c: Context, nodes: readonly Node[]): Statement[] {
  const made: Statement[] = [];
  for (const node of nodes) if (node.isNamed) made.push(...statement(c, node));
  return made;
}

export function block(c: Context, node: Node | undefined): Statement[] {
  return node ? c.statements(node.children) : [];
}

function statement(c: Context, node: Node): Statement[] {
  const span = spanOf(node);
  if (c.depth > DEEPEST) return [{ kind: 'opaque', reason: 'something nested too deeply', span }];
  c.depth++;
  const made = convert(c, node);
  c.depth--;
  return made;
}

function convert(c: Context, node: Node): Statement[] {
  const span = spanOf(node);
  switch (node.type) {
    case 'expression_statement':
      return expressionStatement(c, node);
    case 'return_statement': {
      const value = namedChildren(node)[0];
      return [{ kind: 'return', ...(value ? { value: c.expression(value) } : {}), span }];
    }
    case 'function_definition':
    case 'class_definition':
      return definition(c, node, []);
    case 'decorated_definition': {
      const inner = child(node, 'definition');
      return inner ? definition(c, inner, namedChildren(node).filter((n) => n.type === 'decorator')) : [];
    }
    case 'if_statement':
      return conditionals(c, node);
    case 'for_statement':
      return loopFor(c, node);
    case 'while_statement':
      return loopWhile(c, node);
    case 'match_statement':
      return matches(c, node);
    case 'with_statement':
      return withs(c, node);
    case 'try_statement':
      return tries(c, node);
    case 'raise_statement':
      return [throwing(c, node)];
    case 'break_statement':
      return [{ kind: 'break', span }];
    case 'continue_statement':
      return [{ kind: 'continue', span }];
    case 'import_statement':
      return placed(c, importModules(c, node));
    case 'import_from_statement':
      return placed(c, importFrom(c, node));
    case 'delete_statement':
      return deletion(c, node);
    case 'exec_statement':
      return [{ kind: 'opaque', reason: 'code that is made while the program runs', span }];
    case 'ERROR':
      return [{ kind: 'opaque', reason: 'a line with a syntax error', span }];
    // Nothing of these changes a number: assertions hold where the code works at all.
    case 'pass_statement':
    case 'assert_statement':
    case 'global_statement':
    case 'nonlocal_statement':
    case 'future_import_statement':
    case 'print_statement':
    case 'type_alias_statement':
      return [];
    default:
      return [{ kind: 'opaque', reason: 'a statement of this kind', span }];
  }
}

function throwing(c: Context, node: Node): Statement {
  const type = raised(c, node);
  return { kind: 'throw', ...(type === undefined ? {} : { type }), span: spanOf(node) };
}

/** Imports inside functions are known to the whole file; see `Context.innerImports`. */
function placed(c: Context, made: Statement[]): Statement[] {
  if (c.bindings.isModule) return made;
  c.innerImports.push(...made);
  return [];
}

function definition(c: Context, node: Node, decorators: readonly Node[]): Statement[] {
  const span = spanOf(node);
  const nameNode = child(node, 'name');
  if (nameNode) c.bindings.bind(nameText(c, nameNode));
  if (node.type === 'function_definition') return [{ kind: 'function', node: c.functionNode(node, { decorators }), span }];
  if (isEnum(c, node) && nameNode) {
    return [{ kind: 'enum', name: nameText(c, nameNode), members: enumMembers(c, node), span }];
  }
  return [{ kind: 'class', node: c.classNode(node, decorators), span }];
}

function expressionStatement(c: Context, node: Node): Statement[] {
  const span = spanOf(node);
  const [first, ...more] = namedChildren(node);
  if (!first) return [];
  if (more.length > 0) {
    return [first, ...more].flatMap((n): Statement[] => [{ kind: 'expression', value: c.expression(n), span: spanOf(n) }]);
  }
  switch (first.type) {
    case 'assignment':
      return assignment(c, first);
    case 'augmented_assignment':
      return augmentation(c, first);
    case 'string':
    case 'concatenated_string':
    case 'ellipsis':
    case 'integer':
    case 'float':
      return [];
    default: {
      const value = c.expression(first);
      return [...announced(c, first, span), { kind: 'expression', value, span }];
    }
  }
}

/** `a = v`, `a, b = v`, `a = b = v`, `a: float = v`. */
function assignment(c: Context, node: Node): Statement[] {
  const span = spanOf(node);
  const left = child(node, 'left');
  let right = child(node, 'right');
  if (!left) return [{ kind: 'opaque', reason: 'an unfinished assignment', span }];
  if (!right) return child(node, 'type') ? [] : [{ kind: 'opaque', reason: 'an unfinished assignment', span }];
  const targets = [c.target(left)];
  while (right?.type === 'assignment' && child(right, 'left')) {
    targets.push(c.target(child(right, 'left')!));
    right = child(right, 'right');
  }
  const value = right ? named(c, left, right) : opaque('an unfinished assignment', span);
  const before = right ? announced(c, right, span) : [];
  if (targets.length === 1) return [...before, ...assign(c, targets[0]!, value, span)];
  const all: Statement[] = [...before, ...targets.flatMap((t) => announce(c, t))];
  let whole = value;
  for (const t of [...targets].reverse()) whole = { kind: 'assign', target: t, value: whole, yields: 'new', span };
  return [...all, { kind: 'expression', value: whole, span }];
}

/** A lambda given to a name is called by it. */
function named(c: Context, left: Node, right: Node): Expression {
  const value = c.expression(right);
  if (value.kind !== 'function' || left.type !== 'identifier') return value;
  const node = { ...value.node, name: nameText(c, left), nameSpan: spanOf(left) };
  for (const [syntax, made] of c.functions) if (made === value.node) c.functions.set(syntax, node);
  return { ...value, node };
}

function augmentation(c: Context, node: Node): Statement[] {
  const span = spanOf(node);
  const left = child(node, 'left');
  const right = child(node, 'right');
  const sign = child(node, 'operator');
  if (!left || !right || !sign) return [{ kind: 'opaque', reason: 'an unfinished assignment', span }];
  const target = c.target(left);
  const given = c.expression(right);
  const value: Expression = { kind: 'assign', target, op: augmented(textOf(c, sign)), value: given, yields: 'new', span };
  return [...announced(c, right, span), { kind: 'expression', value, span }];
}

/** `del x`: the name has no value any more. */
function deletion(c: Context, node: Node): Statement[] {
  const span = spanOf(node);
  return namedChildren(node)
    .flatMap((n) => (n.type === 'expression_list' ? namedChildren(n) : [n]))
    .flatMap((n): Statement[] => {
      if (n.type === 'identifier') {
        const target = namePattern(nameText(c, n), spanOf(n));
        const value = opaque('a variable that was deleted', spanOf(n));
        return [{ kind: 'expression', value: { kind: 'assign', target, value, yields: 'new', span }, span }];
      }
      return [{ kind: 'opaque', reason: 'a deletion', span }];
    });
}

