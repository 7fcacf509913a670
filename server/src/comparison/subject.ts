import { symbolText, type Expr, type SymbolData } from '../expression/node';
import { firstSymbols } from '../expression/reach';
import { evaluate, type FormulaContext } from '../mechanics/formula';
import type { Derived } from '../mechanics/lagrange';
import { quantityContext } from '../mechanics/quantities';
import type { FormulaError } from '../mechanics/scope';
import type { DeclarationProblem } from '../mechanics/system';
import type { Quantity } from '../mechanics/value';
import { printFormula } from '../notation';
import type { Block, Formula } from '../notation/tree';
import type { Expression, Program, Subject } from '../program/form';
import type { Library } from '../program/library';
import { read } from '../program/read';
import type { Meaning, Meanings, OutputRequest, ReadRequest, Reading, ReadsBinding } from '../program/reading';
import { BudgetSpent, type Budget } from '../text/budget';
import type { Place, Span } from '../text/span';
import { evaluateLeft, freeSymbol, freeSymbols, isFamilyName, pairUp, prepareClaims } from './claims';
import { codeExpression } from './code-path';
import { contradictions } from './contradictions';
import { decide, type DecideRequest } from './decide';
import type { Decision } from './pair';
import type { Spellings } from './spellings';

export interface SubjectRequest {
  /** The block with `reads` and `checks`: the system's own, or one that names it. */
  readonly block: Block;
  readonly derived: Derived;
  readonly spellings: Spellings;
  readonly file: string;
  readonly program: Program;
  readonly library: Library;
  readonly subject: Subject;
  readonly importFile: ReadRequest['importFile'];
  readonly budget: Budget;
  /** For texts that are only tried out: verdicts without the exact test. */
  readonly withoutProof?: boolean;
  readonly tag?: ReadRequest['tag'];
  readonly isNumber?: ReadRequest['isNumber'];
  /** Outputs to read beside those of the claims; their values come last in the reading. */
  readonly extra?: readonly OutputRequest[];
}

export interface ClaimResult {
  /** `return[3]`, `this.w` */
  readonly output: string;
  readonly quantity: string;
  /** The claim in its declaration. */
  readonly span: Span;
  readonly decision: Decision;
  /** Where the code makes the output. */
  readonly place: Place | undefined;
  readonly found: Expr | undefined;
  readonly expected: Expr | undefined;
}

export interface SubjectResult {
  readonly claims: readonly ClaimResult[];
  readonly problems: readonly DeclarationProblem[];
  /** Names in the code that could mean several things. */
  readonly ambiguities: readonly { readonly message: string; readonly place: Place }[];
  readonly reading: Reading | undefined;
}

/** Claims read but not decided: `pending` tells which results wait for a verdict. */
export interface SubjectReading extends SubjectResult {
  readonly pending: readonly { readonly at: number; readonly found: Expr; readonly expected: Expr }[];
}

/** Reads what a block is about and decides all its claims. */
export function checkSubject(request: SubjectRequest): SubjectResult {
  const { derived, budget } = request;
  const { claims, problems, ambiguities, reading, pending } = budget.run('reading the code', () => readClaims(request));
  if (!reading || pending.length === 0) return { claims, problems, ambiguities, reading };
  const places = new Map(reading.conditions.map((c) => [c.expr, c.place]));
  const assumed = reading.assumed.filter((a) => !freeSymbol(a));
  const question = { derived, pairs: pending, assumed, budget, placeOf: (c: Expr) => places.get(c), withoutProof: request.withoutProof === true };
  const decisions = decided(question, (at) => claims[pending[at]!.at]!.place);
  const all = [...claims];
  pending.forEach((p, i) => (all[p.at] = { ...claims[p.at]!, decision: decisions[i]! }));
  return { claims: all, problems, ambiguities, reading };
}

/** The decisions, or for each that the time ran out. */
function decided(question: DecideRequest, placeOf: (at: number) => Place | undefined): Decision[] {
  try {
    return question.budget.run('comparing at states', () => decide(question));
  } catch (error) {
    if (!(error instanceof BudgetSpent)) throw error;
    return question.pairs.map((_, i) => ({ verdict: 'unread', reason: question.budget.reason, place: placeOf(i) }));
  }
}

/** Reads what a block is about, and puts every claim beside what it must equal. */
export function readClaims(request: SubjectRequest): SubjectReading {
  const { block, derived, program, file } = request;
  const { system } = derived;
  const errors: FormulaError[] = [];
  const outputs: OutputRequest[] = [];
  const prepared = prepareClaims(block, derived, outputs, errors);
  const reads = readsBindings(block, derived, errors);
  const problems = errors.map((e): DeclarationProblem => ({ ...e, severity: 'error' }));
  const whole = (reason: string, span: Span): SubjectReading => ({
    claims: prepared.flatMap((p) =>
      (p.target ? pairUp({ kind: 'unread', reason, place: undefined }, p.target, p.outputText, program.indexBase) : [
        { output: p.outputText, quantity: printFormula(p.claim.right), found: undefined, expected: undefined },
      ]).map((c) => ({
        output: c.output,
        quantity: c.quantity,
        span: p.claim.span,
        decision: { verdict: 'unread' as const, reason, place: { file, span } },
        place: undefined,
        found: undefined,
        expected: c.expected,
      })),
    ),
    problems,
    ambiguities: [],
    reading: undefined,
    pending: [],
  });
  if (system.blocked) return whole(system.blocked.reason, block.nameSpan);
  if (prepared.length === 0) return { claims: [], problems, ambiguities: [], reading: undefined, pending: [] };

  const reading = readSubject(request, reads, [...outputs, ...(request.extra ?? [])]);
  const results: ClaimResult[] = [];
  const values: { at: number; found: Expr; expected: Expr }[] = [];
  for (const p of prepared) {
    const unread = (reason: string, place: Place | undefined): Decision => ({ verdict: 'unread', reason, place });
    if (!p.target) {
      const decision = unread(p.unread!.reason, { file, span: p.unread!.span });
      const quantity = printFormula(p.claim.right);
      results.push({ output: p.outputText, quantity, span: p.claim.span, decision, place: undefined, found: undefined, expected: undefined });
      continue;
    }
    if (!isEquilibrium(request, p.mustVanish)) {
      const reason = 'the point that `near` gives is not an equilibrium: the accelerations there are not zero';
      const output = { output: p.outputText, quantity: printFormula(p.claim.right), span: p.claim.span };
      results.push({ ...output, decision: unread(reason, { file, span: p.claim.span }), place: undefined, found: undefined, expected: undefined });
      continue;
    }
    const value = evaluateLeft(p, derived, reading.outputs);
    for (const single of pairUp(value, p.target, p.outputText, program.indexBase)) {
      const { found, output, quantity } = single;
      const base = { output, quantity, span: p.claim.span, place: found.place };
      const expected = p.increment === -1 ? system.graph.negate(single.expected!) : single.expected!;
      if (found.kind !== 'scalar') {
        const reason = found.kind === 'unread' ? found.reason : 'it is a list';
        results.push({ ...base, decision: unread(reason, found.place), found: undefined, expected });
        continue;
      }
      values.push({ at: results.length, found: found.expr, expected });
      results.push({ ...base, decision: unread('not decided', found.place), found: found.expr, expected });
    }
  }
  const borrowed = borrowedAccelerations(values, results, reading);
  for (const [at, decision] of borrowed) results[at] = { ...results[at]!, decision };
  const free = freeSymbols(values.map((p) => p.found));
  const pending = values.filter((p, i) => {
    const symbol = free[i];
    if (!symbol) return !borrowed.has(p.at);
    const why = reading.free.get(symbol);
    const place = why?.place ?? results[p.at]!.place;
    const reason = why?.reason ?? 'it depends on something that has no meaning here';
    results[p.at] = { ...results[p.at]!, decision: { verdict: 'unread', reason, place } };
    return false;
  });
  // Names that nobody needs to tell apart, since every claim was read without them, are no finding.
  const isRead = results.every((r, i) => r.decision.verdict !== 'unread' || pending.some((p) => p.at === i));
  return { claims: results, problems, ambiguities: isRead ? [] : reading.ambiguities, reading, pending };
}

/**
 * Claims about accelerations whose value is taken from something that only by its name is an acceleration: nothing was
 * computed, so nothing is confirmed. A residual takes the accelerations as arguments and is meant so.
 */
function borrowedAccelerations(
  values: readonly { readonly at: number; readonly found: Expr }[],
  results: readonly ClaimResult[],
  reading: Reading,
): Map<number, Decision> {
  const named = new Map<Expr, Reading['bindings'][number]>();
  for (const b of reading.bindings) {
    const data = b.meaning.op === 'symbol' ? (b.meaning.data as SymbolData) : undefined;
    if (b.how === 'name' && data?.role === 'coordinate' && data.order >= 2) named.set(b.meaning, b);
  }
  const out = new Map<number, Decision>();
  // The same of a formula's name that is the whole value.
  for (const v of values) {
    const binding = v.found.op === 'symbol' ? undefined : reading.bindings.find((b) => b.how === 'name' && b.meaning === v.found);
    if (!binding) continue;
    const reason = `it is not computed here but taken from \`${binding.code}\`, a name of the declaration: bind it with \`reads\` if that is meant`;
    out.set(v.at, { verdict: 'unread', reason, place: binding.place });
  }
  if (named.size === 0) return out;
  const first = firstSymbols(values.map((v) => v.found), (s) => named.has(s));
  values.forEach((v, i) => {
    const binding = first[i] && named.get(first[i]);
    if (!binding || results[v.at]!.quantity.includes('residual')) return;
    const meaning = symbolText(binding.meaning.data as SymbolData);
    const reason = `it is not computed here but taken from \`${binding.code}\`; if that is ${meaning} indeed, say so with \`reads ${binding.code} = ${meaning}\``;
    out.set(v.at, { verdict: 'unread', reason, place: binding.place });
  });
  return out;
}

function isEquilibrium(request: SubjectRequest, mustVanish: readonly Expr[]): boolean {
  if (mustVanish.length === 0) return true;
  const { derived, budget } = request;
  const pairs = mustVanish.map((found) => ({ found, expected: derived.system.graph.zero }));
  return decide({ derived, pairs, assumed: [], budget, placeOf: () => undefined }).every((d) => d.verdict === 'holds');
}

/** Reads the subject of a block; also used for energies that the code defines. */
export function readSubject(request: SubjectRequest, reads: readonly ReadsBinding[], outputs: readonly OutputRequest[]): Reading {
  const { block, derived, spellings, subject } = request;
  const { system } = derived;
  const declared = new Set<Expr>();
  const meanings: Meanings = {
    reads,
    byName: (name) => spellings.byName(name),
    familyByName: (name) => spellings.familyByName(name),
    isDeclared: (symbol) => {
      if (declared.has(symbol)) return true;
      const data = symbol.data;
      const known = data !== null && typeof data === 'object' && 'role' in data && data.role !== 'free' && data.role !== 'auxiliary';
      if (known) declared.add(symbol);
      return known;
    },
  };
  const assumptions: Expression[] = [];
  let withinLimits = system.withinLimits;
  for (const s of new Set([...system.block.statements, ...block.statements])) {
    if (s.kind !== 'assume') continue;
    if (s.withinLimits) withinLimits = true;
    if (s.condition) assumptions.push(codeExpression(s.condition));
  }
  const asked: ReadRequest = {
    graph: system.graph,
    file: request.file,
    program: request.program,
    library: request.library,
    subject:
      subject.kind === 'function'
        ? { kind: 'function', node: subject.node, ...(subject.owner ? { owner: subject.owner } : {}) }
        : subject.kind === 'class'
          ? { kind: 'class', node: subject.node }
          : { kind: 'file' },
    meanings,
    assumptions,
    withinLimits,
    outputs,
    importFile: request.importFile,
    budget: request.budget,
    ...(request.tag ? { tag: request.tag } : {}),
    ...(request.isNumber ? { isNumber: request.isNumber } : {}),
  };
  const reading = read(asked);
  const contradicted = contradictions(derived, reading, request.budget);
  return contradicted.size === 0 ? reading : read({ ...asked, contradicted });
}

/** `reads CODE = FORMULA` of a block, the right sides evaluated. */
export function readsBindings(block: Block, derived: Derived, errors: FormulaError[]): ReadsBinding[] {
  const out: ReadsBinding[] = [];
  const bind = (left: Formula, right: Formula): void => {
    if (left.kind === 'binary' || left.kind === 'unary' || left.kind === 'number') {
      const message = `\`reads\` takes a variable, field, element or call of the code, not the formula \`${printFormula(left)}\`: say what each name in it means`;
      errors.push({ code: 'syntax', message, span: left.span });
      return;
    }
    if ((left.kind === 'list' || left.kind === 'tuple') && (right.kind === 'list' || right.kind === 'tuple')) {
      if (left.items.length !== right.items.length) {
        errors.push({
          code: 'syntax',
          message: `${left.items.length} code names are given ${right.items.length} meanings`,
          span: { start: left.span.start, end: right.span.end },
        });
        return;
      }
      left.items.forEach((item, i) => bind(item, right.items[i]!));
      return;
    }
    const meaning = meaningOf(right, quantityContext(derived, errors));
    if (!meaning) return;
    if (left.kind === 'list' || left.kind === 'tuple') {
      if (meaning.kind === 'list' && meaning.items.length === left.items.length) {
        left.items.forEach((item, i) => out.push(binding(item, meaning.items[i]!, right)));
        return;
      }
      errors.push({ code: 'syntax', message: 'a list of code names needs a list of as many meanings', span: left.span });
      return;
    }
    out.push(binding(left, meaning, right));
  };
  for (const s of block.statements) if (s.kind === 'reads') for (const item of s.items) bind(item.left, item.right);
  return out;
}

function binding(left: Formula, meaning: Meaning, right: Formula): ReadsBinding {
  return {
    target: codeExpression(left),
    meaning,
    text: `${printFormula(left)} = ${printFormula(right)}`,
    span: { start: left.span.start, end: right.span.end },
  };
}

function meaningOf(f: Formula, context: FormulaContext): Meaning | undefined {
  if (f.kind === 'list' || f.kind === 'tuple') {
    const items: Meaning[] = [];
    for (const item of f.items) {
      const m = meaningOf(item, context);
      if (!m) return undefined;
      if (m.kind === 'list' && isFamilyName(item, context.scope)) items.push(...m.items);
      else items.push(m);
    }
    return { kind: 'list', items };
  }
  const q = evaluate(f, context);
  return q && asMeaning(q);
}

function asMeaning(q: Quantity): Meaning {
  return q.kind === 'scalar' ? q : { kind: 'list', items: q.items.map(asMeaning) };
}
