import type { Graph } from '../expression/graph';
import type { Domain, Expr, SymbolData } from '../expression/node';
import { symbolsOf } from '../expression/reach';
import type { Block, Statement } from '../notation/tree';
import { constantValue, declareSymbols, type Declarations } from './declare';
import { evaluateScalar, forEachMember, type FormulaContext } from './formula';
import { gatherConstraints } from './constraints';
import { gatherGeometry } from './geometry';
import { canonicalName } from './names';
import { Scope, type FormulaError } from './scope';
import type { DeclarationProblem, System } from './system';
import { scalar } from './value';

/** Energies that the code itself defines (`defines T`), read by the caller. */
export type CodeEnergies = ReadonlyMap<'T' | 'V' | 'L' | 'D', Expr>;

/** Resolves the declaration of a system. Always gives one back; what is wrong with it is among its problems. */
export function buildSystem(block: Block, graph: Graph, energies: CodeEnergies = new Map()): System {
  const problems: DeclarationProblem[] = [];
  const errors: FormulaError[] = [];
  const scope = new Scope(graph);
  const context: FormulaContext = { scope, indices: new Map(), errors };
  const statements = block.statements;

  for (const e of block.errors) problems.push({ ...e, severity: 'error' });
  const declared = declareSymbols(statements, context, problems);
  defineShorthands(statements, scope, problems);

  const points = new Map<string, readonly Expr[]>();
  const geometry = gatherGeometry(statements, declared.coordinates, context, problems, points);
  const energy = gatherEnergies(statements, context, geometry, energies);
  const Q = geometry.Q.map((terms) => graph.sum(terms));
  const constraints = gatherConstraints(statements, declared.coordinates, context);
  gatherRanges(statements, context, declared);
  const near = gatherNear(statements, context);

  for (const e of errors) problems.push({ ...e, severity: 'error' });
  checkOrders(block, [energy.L, energy.D, ...Q], problems);
  const system: System = {
    name: block.name,
    block,
    graph,
    scope,
    coordinates: declared.coordinates,
    parameters: declared.parameters,
    inputs: declared.inputs,
    time: declared.time,
    ...energy,
    Q,
    constraints,
    domains: declared.domains,
    near,
    withinLimits: statements.some((s) => s.kind === 'assume' && s.withinLimits),
    blocked: blocker(block, problems, declared),
    problems,
    points,
  };
  return system;
}

/** Resolution can leave errors in formulas that no claim needs, but a system with any is not to be trusted. */
function blocker(block: Block, problems: readonly DeclarationProblem[], declared: Declarations): System['blocked'] {
  const error = problems.find((p) => p.severity === 'error');
  if (error) return { reason: `the declaration has an error: ${error.message.replace(/[?.]$/, '')}`, span: error.span };
  if (declared.coordinates.length === 0) return { reason: 'no coordinates are declared', span: block.nameSpan };
  return undefined;
}

function defineShorthands(statements: readonly Statement[], scope: Scope, problems: DeclarationProblem[]): void {
  const plain = new Set<string>();
  for (const s of statements) {
    if (s.kind !== 'where') continue;
    for (const equation of s.items) {
      const target = equation.left;
      const name = target.kind === 'index' ? target.object : target;
      if (name.kind !== 'name') {
        if (name.kind !== 'hole') {
          problems.push({
            code: 'syntax',
            message: '`where` gives a name to a formula: write `where a = ...`',
            span: target.span,
            severity: 'error',
          });
        }
        continue;
      }
      const key = canonicalName(name.name);
      if (scope.symbols.has(key) || scope.families.has(key) || (target.kind === 'name' && plain.has(key))) {
        problems.push({
          code: 'ambiguous',
          message: `\`${name.name}\` is declared twice: give one of them another name`,
          span: name.span,
          severity: 'error',
        });
        continue;
      }
      if (target.kind === 'name') plain.add(key);
      scope.define(name.name, {
        equation,
        ...(target.kind === 'index' ? { index: target.indices[0]! } : {}),
        over: s.over ?? [],
      });
    }
  }
}

interface Energies extends Pick<System, 'doubled'> {
  readonly T: Expr | undefined;
  readonly V: Expr | undefined;
  readonly L: Expr;
  readonly D: Expr;
}

function gatherEnergies(
  statements: readonly Statement[],
  context: FormulaContext,
  geometry: { readonly T: Expr[]; readonly V: Expr[]; readonly D: Expr[] },
  code: CodeEnergies,
): Energies {
  const g = context.scope.graph;
  const sums = { T: [...geometry.T], V: [...geometry.V], D: [...geometry.D] };
  const byHand: { which: 'T' | 'V' | 'D'; expr: Expr; span: Statement['span'] }[] = [];
  const typed = { T: false, V: false };
  for (const s of statements) {
    if (s.kind !== 'energy' || s.which === 'L') continue;
    forEachMember(s.over ?? [], context, (c) => {
      const e = evaluateScalar(s.value, c);
      if (e) {
        sums[s.which as 'T' | 'V' | 'D'].push(e);
        byHand.push({ which: s.which as 'T' | 'V' | 'D', expr: e, span: s.span });
      }
      if (s.which !== 'D') typed[s.which as 'T' | 'V'] = true;
    });
  }
  for (const which of ['T', 'V', 'D'] as const) {
    const e = code.get(which);
    if (e) sums[which].push(e);
  }
  const T = g.sum(sums.T);
  const V = g.sum(sums.V);
  const doubled = byHand
    .filter((t) => geometry[t.which].length > 0)
    .map((t) => ({ which: t.which, difference: g.subtract(t.expr, g.sum(geometry[t.which])), value: t.expr, span: t.span }));
  let usesTV = false;
  context.scope.quantities = (name) => {
    if (name !== 'T' && name !== 'V') return undefined;
    usesTV = true;
    return scalar(name === 'T' ? T : V);
  };
  const lagrangians: Expr[] = [];
  for (const s of statements) {
    if (s.kind !== 'energy' || s.which !== 'L') continue;
    const e = evaluateScalar(s.value, context);
    if (e) lagrangians.push(e);
  }
  const fromCode = code.get('L');
  if (fromCode) lagrangians.push(fromCode);
  context.scope.quantities = () => undefined;
  const D = g.sum(sums.D);
  if (lagrangians.length === 0) return { T, V, L: g.subtract(T, V), D, doubled };
  const onlyL = !usesTV && sums.T.length === 0 && sums.V.length === 0;
  const L = usesTV ? g.sum(lagrangians) : g.sum([...lagrangians, T, g.negate(V)]);
  return { T: onlyL ? undefined : T, V: onlyL ? undefined : V, L, D, doubled };
}

function gatherRanges(statements: readonly Statement[], context: FormulaContext, declared: Declarations): void {
  for (const s of statements) {
    if (s.kind !== 'ranges') continue;
    for (const item of s.items) {
      const target = evaluateScalar(item.target, context);
      if (!target) continue;
      if (target.op !== 'symbol') {
        context.errors.push({
          code: 'syntax',
          message: '`ranges` takes a coordinate, a velocity, a parameter or an input',
          span: item.target.span,
        });
        continue;
      }
      const low = constantValue(item.low, context);
      const high = constantValue(item.high, context);
      if (low !== undefined && high !== undefined && low > high) {
        context.errors.push({
          code: 'syntax',
          message: `no value lies in this range: its low end ${low} is above its high end ${high}`,
          span: item.span,
        });
        continue;
      }
      const before: Domain = declared.domains.get(target) ?? {};
      declared.domains.set(target, {
        ...before,
        ...(low !== undefined ? { low } : {}),
        ...(high !== undefined ? { high } : {}),
      });
    }
  }
}

function gatherNear(statements: readonly Statement[], context: FormulaContext): System['near'] {
  const point = new Map<Expr, Expr>();
  let order = 1;
  let any = false;
  for (const s of statements) {
    if (s.kind !== 'near') continue;
    any = true;
    order = s.order;
    for (const item of s.items) {
      const target = evaluateScalar(item.left, context);
      const value = evaluateScalar(item.right, context);
      if (!target || !value) continue;
      if (target.op !== 'symbol' || (target.data as SymbolData).role === 'parameter') {
        context.errors.push({
          code: 'syntax',
          message: '`near` takes coordinates: `near th = 0, order 1`',
          span: item.left.span,
        });
        continue;
      }
      point.set(target, value);
    }
  }
  return any ? { point, order } : undefined;
}

/** Energies and forces may hold coordinates, velocities and inputs with their rates, but no accelerations. */
function checkOrders(block: Block, exprs: readonly Expr[], problems: DeclarationProblem[]): void {
  const bad = symbolsOf(...exprs).find((s) => {
    const data = s.data as SymbolData;
    return data.role === 'coordinate' && data.order > 1;
  });
  if (!bad) return;
  problems.push({
    code: 'syntax',
    message: `the energies contain an acceleration (${(bad.data as SymbolData).name}''): they may hold coordinates and velocities only`,
    span: block.nameSpan,
    severity: 'error',
  });
}
