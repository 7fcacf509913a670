import { timeDerivatives } from '../expression/differentiate';
import type { Graph } from '../expression/graph';
import type { Expr, SymbolData } from '../expression/node';
import type { Rational } from '../expression/rational';
import type { Family, Formula } from '../notation/tree';
import type { Span } from '../text/span';
import { applyFunction, FUNCTION_NAMES, isFunctionName } from './formula-functions';
import { canonicalName } from './names';
import type { FormulaError, Scope } from './scope';
import {
  addQuantities, components, flatten, isMisfit, map, multiplyQuantities, scalar, shapeText, type Misfit, type Quantity,
} from './value';

export interface FormulaContext {
  readonly scope: Scope;
  /** Values of the indices of the families around the formula. */
  readonly indices: ReadonlyMap<string, number>;
  readonly errors: FormulaError[];
  /** Meaning of phrases such as `mass matrix`; given only where derived quantities may stand. */
  readonly phrase?: (formula: Formula & { kind: 'quantity' }) => Quantity | Misfit;
  /** Meaning of `p[q]`, `Q[q]`. */
  readonly indexed?: (name: string, index: Formula) => Quantity | undefined;
  /** Meaning of any formula the caller knows better (code paths in claims); tried first. */
  readonly outside?: (formula: Formula) => Quantity | undefined;
}

/** The largest family or sum that is written out. */
const MOST_MEMBERS = 200;

const CODE_WORDS: ReadonlySet<string> = new Set(['this', 'self', 'return']);

/** Evaluates a formula; undefined where it makes no sense, with the reason among the errors. */
export function evaluate(f: Formula, context: FormulaContext): Quantity | undefined {
  const g = context.scope.graph;
  const fail = (message: string, span: Span = f.span, code: FormulaError['code'] = 'syntax'): undefined => {
    context.errors.push({ code, message, span });
    return undefined;
  };
  const checked = (q: Quantity | Misfit): Quantity | undefined => (isMisfit(q) ? fail(q.misfit) : q);
  const known = context.outside?.(f);
  if (known) return known;
  switch (f.kind) {
    case 'number':
      return scalar(g.number(f.value));
    case 'name':
      return evaluateName(f, context);
    case 'prime': {
      const operand = evaluate(f.operand, context);
      return operand && differentiate(g, operand, f, context);
    }
    case 'unary': {
      if (f.op === 'not') return fail('a condition can stand in `assume` only');
      const operand = evaluate(f.operand, context);
      return operand && (f.op === '-' ? map(operand, (e) => g.negate(e)) : operand);
    }
    case 'binary':
      return evaluateBinary(f, context);
    case 'call':
      return evaluateCall(f, context);
    case 'index':
      return evaluateIndex(f, context);
    case 'member': {
      const axis = ['x', 'y', 'z'].indexOf(f.name);
      const object = evaluate(f.object, context);
      if (!object) return undefined;
      const item = object.kind === 'list' ? object.items[axis] : undefined;
      return item ?? fail(`${shapeText(object)} has no component \`.${f.name}\``);
    }
    case 'tuple':
    case 'list': {
      const items: Quantity[] = [];
      for (const item of f.items) {
        const q = evaluate(item, context);
        if (!q) return undefined;
        items.push(q);
      }
      return { kind: 'list', items };
    }
    case 'sum':
      return evaluateSum(f, context);
    case 'quantity': {
      if (!context.phrase) return fail(`\`${f.name}\` is a derived quantity: it can stand right of \`=\` in \`checks\` only`);
      return checked(context.phrase(f));
    }
    case 'string':
      return fail('a text is no quantity');
    case 'slice':
      return fail('a slice can stand in code only');
    case 'hole':
      return undefined;
  }
}

/** Evaluates a formula that must be a number. */
export function evaluateScalar(f: Formula, context: FormulaContext): Expr | undefined {
  const q = evaluate(f, context);
  if (!q) return undefined;
  if (q.kind === 'scalar') return q.expr;
  context.errors.push({ code: 'syntax', message: `a number is needed here, not ${shapeText(q)}`, span: f.span });
  return undefined;
}

/** An integer known from the declaration alone: a literal, an index, or arithmetic on these. */
export function evaluateInteger(f: Formula, context: FormulaContext): number | undefined {
  const quiet: FormulaContext = { scope: context.scope, indices: context.indices, errors: [] };
  const q = evaluate(f, quiet);
  if (q?.kind !== 'scalar' || q.expr.op !== 'number') return undefined;
  const r = q.expr.data as Rational;
  return r.isInteger ? Number(r.numerator) : undefined;
}

/** Runs `each` for every combination of the families' indices. */
export function forEachMember(
  over: readonly Family[],
  context: FormulaContext,
  each: (context: FormulaContext) => void,
): void {
  const [family, ...rest] = over;
  if (!family) {
    each(context);
    return;
  }
  const from = evaluateInteger(family.from, context);
  const to = evaluateInteger(family.to, context);
  if (from === undefined || to === undefined) {
    context.errors.push({ code: 'syntax', message: `the range of \`${family.index}\` must be whole numbers`, span: family.span });
    return;
  }
  if (to - from >= MOST_MEMBERS) {
    context.errors.push({ code: 'syntax', message: `a family may have ${MOST_MEMBERS} members at most`, span: family.span });
    return;
  }
  for (let i = from; i <= to; i++) {
    forEachMember(rest, { ...context, indices: new Map(context.indices).set(family.index, i) }, each);
  }
}

function evaluateName(f: Formula & { kind: 'name' }, context: FormulaContext): Quantity | undefined {
  const { scope } = context;
  const index = context.indices.get(f.name);
  if (index !== undefined) return scalar(scope.graph.number(index));
  const key = canonicalName(f.name);
  const symbol = scope.symbols.get(key);
  if (symbol) {
    scope.used.add(symbol);
    return scalar(symbol);
  }
  const shorthand = scope.shorthands.get(key);
  if (shorthand) return evaluateShorthand(key, undefined, f, context);
  const members = scope.families.get(key);
  if (members) {
    const all = [...members.entries()].sort((a, b) => a[0] - b[0]).map(([, s]) => s);
    all.forEach((s) => scope.used.add(s));
    return { kind: 'list', items: all.map(scalar) };
  }
  const point = scope.points.get(key);
  if (point) return point;
  const quantity = scope.quantities(f.name);
  if (quantity) return quantity;
  if (key === 'pi') return scalar(scope.graph.pi);
  if (isFunctionName(f.name)) {
    context.errors.push({ code: 'syntax', message: `\`${f.name}\` is a function: write its argument in brackets`, span: f.span });
    return undefined;
  }
  if (CODE_WORDS.has(f.name)) {
    const message = `\`${f.name}\` is a word of the code: the right side of an equation is written in the words of the declaration, and what the code has for them stands on the left`;
    context.errors.push({ code: 'undeclared', message, span: f.span });
    return undefined;
  }
  const near = scope.near(f.name);
  const hint = near ? `: did you mean \`${near}\`?` : ': add it to `coordinates`, `parameters`, `inputs` or `where`';
  context.errors.push({ code: 'undeclared', message: `\`${f.name}\` is not declared${hint}`, span: f.span });
  return undefined;
}

function differentiate(
  g: Graph,
  operand: Quantity,
  f: Formula & { kind: 'prime' },
  context: FormulaContext,
): Quantity | undefined {
  if (f.operand.kind === 'name' && operand.kind === 'scalar' && operand.expr.op === 'symbol') {
    const { role } = operand.expr.data as SymbolData;
    if (role === 'parameter') {
      context.errors.push({
        code: 'undeclared',
        message: `\`${f.operand.name}\` is a parameter, so its time derivative is zero: declare it under \`inputs\` if it moves`,
        span: f.span,
      });
      return undefined;
    }
  }
  let value = operand;
  for (let i = 0; i < Math.min(f.order, 4); i++) {
    const rates = timeDerivatives(g, flatten(value));
    let next = 0;
    value = map(value, () => rates[next++]!);
  }
  return value;
}

function evaluateBinary(f: Formula & { kind: 'binary' }, context: FormulaContext): Quantity | undefined {
  const g = context.scope.graph;
  if (!['+', '-', '*', '/', '^'].includes(f.op)) {
    context.errors.push({ code: 'syntax', message: 'a condition can stand in `assume` only', span: f.span });
    return undefined;
  }
  const left = evaluate(f.left, context);
  const right = evaluate(f.right, context);
  if (!left || !right) return undefined;
  let value: Quantity | Misfit;
  switch (f.op) {
    case '+':
      value = addQuantities(g, left, right, 1);
      break;
    case '-':
      value = addQuantities(g, left, right, -1);
      break;
    case '*':
      value = multiplyQuantities(g, left, right);
      break;
    case '/':
      value =
        right.kind === 'scalar'
          ? map(left, (e) => g.divide(e, right.expr))
          : { misfit: `can't divide by ${shapeText(right)}` };
      break;
    default:
      value = raise(g, left, right);
  }
  if (!isMisfit(value)) return value;
  context.errors.push({ code: 'syntax', message: value.misfit, span: f.span });
  return undefined;
}

/** `v^2` of a vector is its square, as physicists write it. */
function raise(g: Graph, base: Quantity, exponent: Quantity): Quantity | Misfit {
  if (exponent.kind !== 'scalar') return { misfit: `an exponent must be a number, not ${shapeText(exponent)}` };
  if (base.kind === 'scalar') return scalar(g.power(base.expr, exponent.expr));
  const v = components(base);
  if (v && exponent.expr === g.number(2)) return scalar(g.sum(v.map((x) => g.square(x))));
  return { misfit: `${shapeText(base)} can't be raised to a power` };
}

function evaluateCall(f: Formula & { kind: 'call' }, context: FormulaContext): Quantity | undefined {
  const g = context.scope.graph;
  const fail = (message: string): undefined => {
    context.errors.push({ code: 'syntax', message, span: f.span });
    return undefined;
  };
  if (f.callee.kind !== 'name') return fail('only a function by its name can be called in a formula');
  const name = f.callee.name;
  if (!isFunctionName(name)) {
    if (context.scope.has(name)) return fail(`\`${name}\` is not a function: write \`*\` to multiply`);
    return fail(`there is no function \`${name}\`: the functions are ${FUNCTION_NAMES.join(' ')}`);
  }
  const args: Quantity[] = [];
  for (const arg of f.args) {
    const q = evaluate(arg, context);
    if (!q) return undefined;
    args.push(q);
  }
  const value = applyFunction(g, name, args);
  return isMisfit(value) ? fail(value.misfit) : value;
}

function evaluateIndex(f: Formula & { kind: 'index' }, context: FormulaContext): Quantity | undefined {
  const fail = (message: string, code: FormulaError['code'] = 'syntax'): undefined => {
    context.errors.push({ code, message, span: f.span });
    return undefined;
  };
  if (f.object.kind === 'name' && f.indices.length === 1) {
    const key = canonicalName(f.object.name);
    const { scope } = context;
    const members = scope.families.get(key);
    const shorthand = scope.shorthands.get(key);
    if (members || shorthand?.some((s) => s.index)) {
      const i = evaluateInteger(f.indices[0]!, context);
      if (i === undefined) return fail(`the index of \`${f.object.name}\` must be a whole number or the index of a family`);
      if (members) {
        const symbol = members.get(i);
        if (!symbol) return fail(`\`${f.object.name}\` has no member ${i}`, 'undeclared');
        scope.used.add(symbol);
        return scalar(symbol);
      }
      return evaluateShorthand(key, i, f, context);
    }
    const special = scope.has(f.object.name) ? undefined : context.indexed?.(f.object.name, f.indices[0]!);
    if (special) return special;
  }
  const object = evaluate(f.object, context);
  if (!object) return undefined;
  let value: Quantity = object;
  for (const index of f.indices) {
    const i = evaluateInteger(index, context);
    if (i === undefined) return fail('an index must be a whole number');
    const item: Quantity | undefined = value.kind === 'list' ? value.items[i - 1] : undefined;
    if (!item) return fail(`${shapeText(value)} has no entry ${i} (entries count from 1)`);
    value = item;
  }
  return value;
}

function evaluateSum(f: Formula & { kind: 'sum' }, context: FormulaContext): Quantity | undefined {
  const g = context.scope.graph;
  const terms: Quantity[] = [];
  let failed = false;
  forEachMember(f.over, context, (inner) => {
    if (failed) return;
    const q = evaluate(f.body, inner);
    if (q) terms.push(q);
    else failed = true;
  });
  if (failed) return undefined;
  if (terms.length === 0) return scalar(g.zero);
  if (terms.every((t) => t.kind === 'scalar')) return scalar(g.sum(terms.map((t) => (t as { expr: Expr }).expr)));
  let total: Quantity | Misfit = terms[0]!;
  for (const t of terms.slice(1)) if (!isMisfit(total)) total = addQuantities(g, total, t, 1);
  if (!isMisfit(total)) return total;
  context.errors.push({ code: 'syntax', message: total.misfit, span: f.span });
  return undefined;
}

/** A `where` name, or its member `index`; evaluated once, in the scope's own terms. */
function evaluateShorthand(key: string, index: number | undefined, f: Formula, context: FormulaContext): Quantity | undefined {
  const { scope } = context;
  scope.usedShorthands.add(key);
  const memoKey = index === undefined ? key : `${key}[${index}]`;
  const memo = scope.memo.get(memoKey);
  if (memo === 'running') {
    context.errors.push({ code: 'syntax', message: `\`${memoKey}\` is defined by itself`, span: f.span });
    return undefined;
  }
  if (memo) return memo;
  scope.memo.set(memoKey, 'running');
  const value = findShorthand(key, index, f, context);
  if (value) scope.memo.set(memoKey, value);
  else scope.memo.delete(memoKey);
  return value;
}

function findShorthand(key: string, index: number | undefined, f: Formula, context: FormulaContext): Quantity | undefined {
  const entries = context.scope.shorthands.get(key)!;
  const plain: FormulaContext = { scope: context.scope, indices: new Map(), errors: context.errors };
  if (index === undefined) {
    const single = entries.find((e) => !e.index);
    if (single) return evaluate(single.equation.right, plain);
    // The family as a whole: its members in order.
    const found = new Set<number>();
    for (const e of entries) {
      if (e.over.length === 0) {
        const i = evaluateInteger(e.index!, plain);
        if (i !== undefined) found.add(i);
      } else forEachMember(e.over, plain, (c) => found.add(evaluateInteger(e.index!, c) ?? 0));
    }
    const items: Quantity[] = [];
    for (const i of [...found].sort((a, b) => a - b)) {
      const q = evaluateShorthand(key, i, f, context);
      if (!q) return undefined;
      items.push(q);
    }
    return { kind: 'list', items };
  }
  // A member given by its own number goes before the family's rule.
  for (const e of entries) {
    if (e.index && e.over.length === 0 && evaluateInteger(e.index, plain) === index) return evaluate(e.equation.right, plain);
  }
  let value: Quantity | undefined;
  let found = false;
  for (const e of entries) {
    if (!e.index || e.over.length === 0) continue;
    forEachMember(e.over, plain, (c) => {
      if (found || evaluateInteger(e.index!, c) !== index) return;
      found = true;
      value = evaluate(e.equation.right, c);
    });
  }
  if (!found) {
    context.errors.push({ code: 'undeclared', message: `\`${key}\` has no member ${index}`, span: f.span });
  }
  return value;
}
