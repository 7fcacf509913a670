import type { Graph } from '../expression/graph';
import type { Domain, Expr, Role } from '../expression/node';
import type { Rational } from '../expression/rational';
import type { Bound, Statement, SymbolItem } from '../notation/tree';
import { evaluateScalar, forEachMember, type FormulaContext } from './formula';
import { canonicalName } from './names';
import type { Scope } from './scope';
import type { Coordinate, Declared, DeclarationProblem } from './system';

/** What the `coordinates`, `parameters`, `inputs` and `time` statements of a block declare. */
export interface Declarations {
  readonly coordinates: Coordinate[];
  readonly parameters: Declared[];
  readonly inputs: Declared[];
  readonly domains: Map<Expr, Domain>;
  time: Expr;
}

type SymbolStatement = Statement & { kind: 'coordinates' | 'parameters' | 'inputs' };

export function declareSymbols(
  statements: readonly Statement[],
  context: FormulaContext,
  problems: DeclarationProblem[],
): Declarations {
  const { scope } = context;
  const out: Declarations = {
    coordinates: [],
    parameters: [],
    inputs: [],
    domains: new Map(),
    time: scope.graph.symbol({ name: 't', role: 'time', order: 0 }),
  };
  for (const s of statements) {
    if (s.kind === 'coordinates' || s.kind === 'parameters' || s.kind === 'inputs') declareItems(s, context, out, problems);
  }
  const named = statements.find((s) => s.kind === 'time');
  if (named?.kind === 'time') {
    out.time = scope.graph.symbol({ name: named.name, role: 'time', order: 0 });
    claimName(scope, named.name, named.nameSpan, problems);
    scope.declare(named.name, out.time);
  } else if (!scope.has('t')) scope.declare('t', out.time);
  return out;
}

function declareItems(
  s: SymbolStatement,
  context: FormulaContext,
  out: Declarations,
  problems: DeclarationProblem[],
): void {
  for (const item of s.items) {
    if (item.name === '') continue;
    if (!claimName(context.scope, item.name, item.nameSpan, problems)) continue;
    if (item.index === undefined) {
      declareOne(s.kind, item, item.name, undefined, context, out);
      continue;
    }
    const over = (s.over ?? []).filter((f) => f.index === item.index);
    if (over.length === 0) {
      problems.push({
        code: 'syntax',
        message: `\`${item.name}[${item.index}]\` needs its range: end the line with \`over ${item.index} in 1..n\``,
        span: item.nameSpan,
        severity: 'error',
      });
      continue;
    }
    forEachMember(over, context, (inner) => {
      const i = inner.indices.get(item.index!)!;
      declareOne(s.kind, item, `${item.name}[${i}]`, { name: item.name, index: i }, inner, out);
    });
  }
}

function declareOne(
  kind: SymbolStatement['kind'],
  item: SymbolItem,
  name: string,
  family: Declared['family'],
  context: FormulaContext,
  out: Declarations,
): void {
  const { scope } = context;
  const g: Graph = scope.graph;
  const role: Role = kind === 'coordinates' ? 'coordinate' : kind === 'parameters' ? 'parameter' : 'input';
  const symbol = g.symbol({ name, role, order: 0 });
  if (family) scope.declareMember(family.name, family.index, symbol);
  else scope.declare(name, symbol);
  const domain = domainOf(item.bounds, context);
  if (domain) out.domains.set(symbol, domain);
  const typical = item.typical && constantValue(item.typical, context);
  const base = {
    name,
    symbol,
    span: item.nameSpan,
    ...(item.unit ? { unit: item.unit.text } : {}),
    ...(item.remark ? { remark: item.remark } : {}),
    ...(typical !== undefined ? { typical } : {}),
    ...(family ? { family } : {}),
  };
  if (kind === 'coordinates') {
    out.coordinates.push({
      ...base,
      kind: 'coordinate',
      velocity: g.symbol({ name, role, order: 1 }),
      acceleration: g.symbol({ name, role, order: 2 }),
    });
  } else if (kind === 'parameters') out.parameters.push({ ...base, kind: 'parameter' });
  else out.inputs.push({ ...base, kind: 'input' });
}

function claimName(
  scope: Scope,
  name: string,
  span: { start: number; end: number },
  problems: DeclarationProblem[],
): boolean {
  const key = canonicalName(name);
  if (!scope.symbols.has(key) && !scope.families.has(key)) return true;
  problems.push({
    code: 'ambiguous',
    message: `\`${name}\` is declared twice: give one of them another name`,
    span,
    severity: 'error',
  });
  return false;
}

/** The interval that bounds such as `> 0` or `in [a, b]` leave. */
export function domainOf(bounds: readonly Bound[], context: FormulaContext): Domain | undefined {
  if (bounds.length === 0) return undefined;
  let low: number | undefined;
  let high: number | undefined;
  let nonzero = false;
  const raise = (x: number | undefined): void => {
    if (x !== undefined) low = low === undefined ? x : Math.max(low, x);
  };
  const lower = (x: number | undefined): void => {
    if (x !== undefined) high = high === undefined ? x : Math.min(high, x);
  };
  for (const b of bounds) {
    if (b.op === 'in') {
      raise(constantValue(b.low, context));
      lower(constantValue(b.high, context));
      continue;
    }
    const x = constantValue(b.value, context);
    if (b.op === '>' || b.op === '>=') raise(x);
    else if (b.op === '<' || b.op === '<=') lower(x);
    else if (x === 0) nonzero = true;
  }
  return { ...(low !== undefined ? { low } : {}), ...(high !== undefined ? { high } : {}), ...(nonzero ? { nonzero } : {}) };
}

/** The number a formula without symbols stands for; undefined where symbols are in it. */
export function constantValue(f: Parameters<typeof evaluateScalar>[0], context: FormulaContext): number | undefined {
  const quiet: FormulaContext = { scope: context.scope, indices: context.indices, errors: [] };
  const e = evaluateScalar(f, quiet);
  return e && numberOf(e);
}

/** Value of a constant expression of arithmetic and pi. */
function numberOf(e: Expr): number | undefined {
  switch (e.op) {
    case 'number':
      return (e.data as Rational).toNumber();
    case 'pi':
      return Math.PI;
    case 'sum':
    case 'product':
    case 'power': {
      const args = e.args.map(numberOf);
      if (!args.every((a) => a !== undefined)) return undefined;
      if (e.op === 'power') return Math.pow(args[0]!, args[1]!);
      return args.reduce((x, y) => (e.op === 'sum' ? x + y : x * y));
    }
    default:
      return undefined;
  }
}
