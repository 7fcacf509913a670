import { timeDerivatives } from '../expression/differentiate';
import type { Expr, SymbolData } from '../expression/node';
import { Rational } from '../expression/rational';
import { firstSymbols } from '../expression/reach';
import { evaluate } from '../mechanics/formula';
import { isFunctionName } from '../mechanics/formula-functions';
import type { Derived } from '../mechanics/lagrange';
import { canonicalName } from '../mechanics/names';
import { quantityContext, type QuantityContext } from '../mechanics/quantities';
import type { FormulaError, Scope } from '../mechanics/scope';
import { scalar, type Quantity } from '../mechanics/value';
import { printFormula } from '../notation';
import type { Block, Claim, Formula } from '../notation/tree';
import type { OutputRequest, OutputValue } from '../program/reading';
import type { Span } from '../text/span';
import { codeExpression } from './code-path';

/** What a claim's right side says, with the words for it; lists are claimed item by item. */
export type Target =
  | { readonly kind: 'one'; readonly text: string; readonly expr: Expr }
  | { readonly kind: 'many'; readonly text: string; readonly items: readonly Target[] };

/** A `checks` item made ready: which outputs of the code it needs, and what they must equal. */
export interface PreparedClaim {
  readonly claim: Claim;
  readonly left: Formula;
  readonly outputText: string;
  readonly target: Target | undefined;
  /** Why it can't be decided, whatever the code says. */
  readonly unread?: { readonly reason: string; readonly span: Span };
  /** Parts of the left side that are code, with where their request stands among the outputs. */
  readonly leaves: ReadonlyMap<Formula, number>;
  readonly increment: 1 | -1 | undefined;
  readonly mode: QuantityContext['mode'];
  readonly mustVanish: readonly Expr[];
}

/** Splits the claims of a block and gathers the outputs to ask the executor for. */
export function prepareClaims(
  block: Block,
  derived: Derived,
  outputs: OutputRequest[],
  errors: FormulaError[],
): PreparedClaim[] {
  const prepared: PreparedClaim[] = [];
  for (const s of block.statements) {
    if (s.kind !== 'checks') continue;
    for (const claim of s.items) prepareOne(claim, claim.left, claim.right, derived, outputs, errors, prepared);
  }
  return prepared;
}

function prepareOne(
  claim: Claim,
  left: Formula,
  right: Formula,
  derived: Derived,
  outputs: OutputRequest[],
  errors: FormulaError[],
  prepared: PreparedClaim[],
): void {
  if (isListing(left)) {
    // [a, b] = [x'', th'']: a claim each.
    const rights = isListing(right) ? right.items : undefined;
    left.items.forEach((item, i) => {
      const each = rights ? rights[i] : pickItem(right, i);
      if (each) prepareOne(claim, item, each, derived, outputs, errors, prepared);
      else errors.push({ code: 'syntax', message: 'there is no quantity for this output', span: item.span });
    });
    return;
  }
  const before = errors.length;
  const { target, unsupported, mode, mustVanish } = readTarget(right, derived, errors);
  const leaves = new Map<Formula, number>();
  const increment = claim.op === '=' ? undefined : claim.op === '+=' ? 1 : -1;
  collectLeaves(left, (leaf) => {
    leaves.set(leaf, outputs.length);
    outputs.push({ expression: codeExpression(leaf), ...(increment ? { increment: true } : {}) });
  });
  const outputText = printFormula(left);
  const base = { claim, left, outputText, leaves, increment, mode, mustVanish } as const;
  const error = errors[before];
  if (unsupported) {
    errors.length = before;
    prepared.push({ ...base, target: undefined, unread: { reason: `\`${unsupported}\` is not supported yet`, span: right.span } });
  } else if (!target) {
    const reason = error ? `the claim has an error: ${error.message}` : 'the claim is not complete';
    prepared.push({ ...base, target: undefined, unread: { reason, span: right.span } });
  } else prepared.push({ ...base, target });
}

/** Entry `i` of a right side that is not typed as a list. */
function pickItem(right: Formula, i: number): Formula {
  const index: Formula = { kind: 'number', value: Rational.of(i + 1), text: String(i + 1), span: right.span };
  return { kind: 'index', object: right, indices: [index], span: right.span };
}

function isListing(f: Formula): f is Formula & { kind: 'list' | 'tuple' } {
  return f.kind === 'list' || f.kind === 'tuple';
}

interface ReadTarget {
  readonly target: Target | undefined;
  readonly unsupported: string | undefined;
  readonly mode: QuantityContext['mode'];
  readonly mustVanish: readonly Expr[];
}

/** Reads the right side; a list literal is read item by item, so that every claim has its own words. */
function readTarget(f: Formula, derived: Derived, errors: FormulaError[]): ReadTarget {
  const { scope, coordinates } = derived.system;
  if (isListing(f)) {
    const items: Target[] = [];
    const mustVanish: Expr[] = [];
    for (const item of f.items) {
      const read = readTarget(item, derived, errors);
      if (!read.target) return read;
      if (read.mode !== 'value') {
        errors.push({ code: 'syntax', message: `\`${printFormula(item)}\` is claimed by itself, not in a list`, span: item.span });
        return { ...read, target: undefined };
      }
      mustVanish.push(...read.mustVanish);
      if (read.target.kind === 'many' && isFamilyName(item, scope)) items.push(...read.target.items);
      else items.push(read.target);
    }
    return { target: { kind: 'many', text: printFormula(f), items }, unsupported: undefined, mode: 'value', mustVanish };
  }
  const context = quantityContext(derived, errors);
  const q = evaluate(f, context);
  const { unsupported, mode, mustVanish } = context;
  if (!q) return { target: undefined, unsupported, mode, mustVanish };
  const labels = f.kind === 'quantity' ? coordinates.map((c) => c.name) : undefined;
  return { target: targetOf(q, printFormula(f), labels), unsupported: undefined, mode, mustVanish };
}

function targetOf(q: Quantity, text: string, labels: readonly string[] | undefined): Target {
  if (q.kind === 'scalar') return { kind: 'one', text, expr: q.expr };
  const items = q.items.map((item, i) => {
    const label = labels?.length === q.items.length ? labels[i]! : String(i + 1);
    const inner = text.endsWith(']') && labels ? `${text.slice(0, -1)}, ${label}]` : `${text}[${label}]`;
    return targetOf(item, inner, labels);
  });
  return { kind: 'many', text, items };
}

/** `th` or `th'` of a family: in a list its members stand one by one. */
export function isFamilyName(f: Formula, scope: Scope): boolean {
  const name = f.kind === 'prime' ? f.operand : f;
  return name.kind === 'name' && scope.families.has(canonicalName(name.name));
}

/** The largest parts of a left side that are code: names, members, entries and calls; not functions and derivatives. */
function collectLeaves(f: Formula, found: (leaf: Formula) => void): void {
  switch (f.kind) {
    case 'name':
    case 'member':
    case 'index':
      found(f);
      return;
    case 'call':
      if (f.callee.kind === 'name' && isFunctionName(f.callee.name)) f.args.forEach((a) => collectLeaves(a, found));
      else found(f);
      return;
    case 'unary':
      collectLeaves(f.operand, found);
      return;
    case 'binary':
      collectLeaves(f.left, found);
      collectLeaves(f.right, found);
      return;
    case 'tuple':
    case 'list':
      f.items.forEach((i) => collectLeaves(i, found));
      return;
    case 'sum':
      collectLeaves(f.body, found);
      return;
    default:
  }
}

/** Puts the code's values into a left side that is a formula of outputs. */
export function evaluateLeft(
  prepared: PreparedClaim,
  derived: Derived,
  outputs: readonly OutputValue[],
): OutputValue {
  const value = leftValue(prepared, derived, outputs);
  if (prepared.mode === 'constant') return mapOutput(value, (e) => timeDerivatives(derived.system.graph, [e])[0]!);
  return prepared.mode === 'times velocities' ? timesVelocities(value, derived) : value;
}

function leftValue(prepared: PreparedClaim, derived: Derived, outputs: readonly OutputValue[]): OutputValue {
  const { left, leaves } = prepared;
  const single = leaves.get(left);
  if (single !== undefined) return outputs[single]!;
  for (const index of leaves.values()) {
    const problem = firstUnread(outputs[index]!);
    if (problem) return problem;
  }
  const errors: FormulaError[] = [];
  const physics = quantityContext(derived, errors);
  const value = evaluate(left, {
    ...physics,
    outside: (f) => {
      const index = leaves.get(f);
      if (index !== undefined) return quantityOf(outputs[index]!);
      return f.kind === 'prime' ? evaluate(f, physics) : undefined;
    },
  });
  const place = [...leaves.values()].map((i) => outputs[i]!.place).find((p) => p !== undefined);
  if (!value) return { kind: 'unread', reason: errors[0]?.message ?? 'the left side of the claim makes no sense', place };
  return outputOf(value, place);
}

function mapOutput(o: OutputValue, f: (e: Expr) => Expr): OutputValue {
  if (o.kind === 'scalar') return { ...o, expr: f(o.expr) };
  return o.kind === 'list' ? { ...o, items: o.items.map((i) => mapOutput(i, f)) } : o;
}

/** C q' of a matrix the code makes; a Coriolis matrix is right when this is. */
function timesVelocities(o: OutputValue, derived: Derived): OutputValue {
  const problem = firstUnread(o);
  if (problem) return problem;
  const { graph: g, coordinates } = derived.system;
  const unread = (reason: string): OutputValue => ({ kind: 'unread', reason, place: o.place });
  const n = coordinates.length;
  if (o.kind !== 'list' || o.items.length !== n) return unread(`a ${n} by ${n} matrix is needed`);
  const items: OutputValue[] = [];
  for (const row of o.items) {
    const entries = row.kind === 'list' ? row.items : [row];
    if (entries.length !== n) return unread(`a ${n} by ${n} matrix is needed`);
    const terms = entries.map((e, j) => g.multiply((e as { expr: Expr }).expr, coordinates[j]!.velocity));
    items.push({ kind: 'scalar', expr: g.sum(terms), place: row.place });
  }
  return { kind: 'list', items, place: o.place };
}

function firstUnread(o: OutputValue): (OutputValue & { kind: 'unread' }) | undefined {
  if (o.kind === 'unread') return o;
  if (o.kind === 'scalar') return undefined;
  for (const item of o.items) {
    const problem = firstUnread(item);
    if (problem) return problem;
  }
  return undefined;
}

function quantityOf(o: OutputValue): Quantity | undefined {
  if (o.kind === 'scalar') return scalar(o.expr);
  if (o.kind === 'unread') return undefined;
  const items = o.items.map(quantityOf);
  return items.every((i) => i !== undefined) ? { kind: 'list', items } : undefined;
}

function outputOf(q: Quantity, place: OutputValue['place']): OutputValue {
  if (q.kind === 'scalar') return { kind: 'scalar', expr: q.expr, place };
  return { kind: 'list', items: q.items.map((i) => outputOf(i, place)), place };
}

/** One number against one number, or why there is none. */
export interface SingleClaim {
  readonly output: string;
  readonly quantity: string;
  readonly found: OutputValue;
  readonly expected: Expr | undefined;
}

/** Brings an output and its target down to single numbers. */
export function pairUp(found: OutputValue, target: Target, output: string, indexBase: 0 | 1): SingleClaim[] {
  const unread = (reason: string): OutputValue => ({ kind: 'unread', reason, place: found.place });
  if (target.kind === 'one') {
    const only = found.kind === 'list' && found.items.length === 1 ? found.items[0]! : found;
    const value = only.kind === 'list' ? unread(`\`${output}\` is a list of ${only.items.length}, the claim is about one number`) : only;
    return [{ output, quantity: target.text, found: value, expected: target.expr }];
  }
  return target.items.flatMap((item, i) => {
    const name = `${output}[${i + indexBase}]`;
    if (found.kind === 'list') {
      const entry = found.items[i];
      return pairUp(entry ?? unread(`\`${output}\` has ${found.items.length} entries, no ${name}`), item, name, indexBase);
    }
    if (found.kind === 'scalar') {
      if (target.items.length === 1) return pairUp(found, item, output, indexBase);
      return pairUp(unread(`\`${output}\` is one number, the claim is about ${target.items.length}`), item, name, indexBase);
    }
    return pairUp(found, item, name, indexBase);
  });
}

/** A symbol of the value that stands for code nobody gave a meaning. */
export function freeSymbol(e: Expr): Expr | undefined {
  return freeSymbols([e])[0];
}

/** The same for many values at once. */
export function freeSymbols(values: readonly Expr[]): (Expr | undefined)[] {
  return firstSymbols(values, (s) => (s.data as SymbolData).role === 'free');
}
