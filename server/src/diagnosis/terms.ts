import type { FindingCode } from '@visviva/shared';
import { Motion } from '../comparison/motion';
import { Prober } from '../comparison/prober';
import { Sampler } from '../comparison/sampling';
import type { ClaimResult } from '../comparison/subject';
import type { Expr, SymbolData } from '../expression/node';
import { monomialExpr, normalForm } from '../expression/normal-form';
import { text } from '../expression/print';
import { symbolsOf } from '../expression/reach';
import { Tape } from '../expression/tape';
import type { Derived } from '../mechanics/lagrange';
import { LogFit } from './search/log-fit';
import { factorText } from './rows';

/** What is wrong with one term of the equations that the code should implement. */
export interface TermFault {
  readonly code: FindingCode;
  /** `gravity`, `centrifugal`, ... */
  readonly kind: string;
  readonly term: string;
  /** Completes "the gravity term m*g ... of th's equation ...". */
  readonly verdict: string;
  /** The coordinate in whose equation it stands; undefined for claims that are no accelerations. */
  readonly equation: string | undefined;
}

const DRAWN = 48;
const STATES = 20;
const FEWEST = 10;
const MOST_TERMS = 60;
const CLOSE = 1e-7;

/** An equation whose terms add up to zero with the right values. */
interface Row {
  readonly terms: readonly Expr[];
  readonly equation: string | undefined;
  readonly coordinate: number | undefined;
}

/**
 * Compares term by term. The code's accelerations go into the equations M q'' - f = 0, where a fault in one equation stays
 * in that one; a term that is off by a factor c leaves (1 - c) times itself there. Other claims are compared directly.
 */
export function findTermFault(derived: Derived, claims: readonly ClaimResult[], index: number): TermFault | undefined {
  const { system } = derived;
  const { graph } = system;
  const claim = claims[index]!;
  if (system.near || !claim.found || !claim.expected) return undefined;
  const accelerations = system.coordinates.map((c) => c.acceleration);
  const isAcceleration = accelerations.includes(claim.expected);
  const known = claims.filter((c) => c.found && c.expected && (isAcceleration ? accelerations.includes(c.expected) : c === claim));
  const rows: Row[] = [];
  if (isAcceleration) {
    // The claim's own equation first.
    const order = system.coordinates.map((_, i) => i).sort((a, b) => Number(accelerations[b] === claim.expected) - Number(accelerations[a] === claim.expected));
    for (const i of order) {
      const terms = termsOf(derived, derived.residuals[i]!);
      if (terms) rows.push({ terms, equation: system.coordinates[i]!.name, coordinate: i });
    }
  } else {
    const terms = termsOf(derived, claim.expected);
    if (terms) rows.push({ terms: terms.map((t) => graph.negate(t)), equation: undefined, coordinate: undefined });
  }
  const all = rows.flatMap((r) => r.terms);
  const prober = new Prober(new Motion(derived), known.map((c) => [{ found: c.found!, expected: c.expected! }]), [...symbolsOf(...all)]);
  const wanted = new Set([...prober.symbols, ...symbolsOf(...all)].filter((s) => !accelerations.includes(s)));
  const { registers, columns } = prober.run(new Sampler(system).draw([...wanted], DRAWN), DRAWN);
  const good: number[] = [];
  for (let s = 0; s < DRAWN && good.length < STATES; s++) if (known.every((_, k) => prober.compare(registers, k, s).votes)) good.push(s);
  if (good.length < FEWEST) return undefined;
  const at = (symbol: Expr): Float64Array => {
    const own = isAcceleration ? known.findIndex((c) => c.expected === symbol) : -1;
    if (own >= 0) return Float64Array.from(good, (s) => registers.value(known[own]!.found!, s));
    const given = columns.get(symbol);
    return Float64Array.from(good, (s) => (given ? given.values[s]! : registers.value(symbol, s)));
  };
  const n = good.length;
  const tape = new Tape(all);
  const run = tape.run((s) => ({ values: at(s) }), n);
  const symbols = [...wanted].filter((s) => (s.data as SymbolData).role !== 'auxiliary');
  const fit = new LogFit(symbols.map((expr) => ({ expr, value: at(expr) })), n);
  const found = isAcceleration ? undefined : Float64Array.from(good, (s) => registers.value(claim.found!, s));
  for (const row of rows) {
    const values = row.terms.map((t) => run.column(t).values);
    const rest = new Float64Array(n);
    const size = new Float64Array(n);
    values.forEach((v) => v.forEach((x, s) => {
      rest[s] = rest[s]! + x;
      size[s] = Math.max(size[s]!, Math.abs(x));
    }));
    if (found) found.forEach((x, s) => (rest[s] = rest[s]! + x));
    if (rest.every((x, s) => Math.abs(x) <= CLOSE * size[s]!)) continue;
    const fault = explain(derived, row, values, rest, fit);
    if (fault) return fault;
  }
  return undefined;
}

function explain(derived: Derived, row: Row, values: readonly Float64Array[], rest: Float64Array, fit: LogFit<Expr>): TermFault | undefined {
  const make = (k: number, code: FindingCode, verdict: string): TermFault => ({
    code,
    kind: kindOf(derived, row.terms[k]!, row.coordinate),
    term: text(positive(derived, row.terms[k]!)),
    verdict,
    equation: row.equation,
  });
  for (let k = 0; k < values.length; k++) {
    const factor = commonValue(rest.map((x, s) => 1 - x / values[k]![s]!));
    if (factor === undefined || Math.abs(factor - 1) < 1e-7) continue;
    if (Math.abs(factor) < 1e-7) return make(k, 'missing-term', 'is missing');
    if (Math.abs(factor + 1) < 1e-7) return make(k, 'sign', 'has the wrong sign');
    const words = factorText(factor);
    if (!/^-?\d+(\/\d+)?$|pi/.test(words)) continue;
    return make(k, 'factor', factor === 2 ? 'counts double' : `is taken ${words} times`);
  }
  for (let k = 0; k < values.length; k++) {
    const ratio = rest.map((x, s) => 1 - x / values[k]![s]!);
    const p = fit.product(ratio);
    if (!p || p.powers.length === 0 || p.powers.length > 2) continue;
    const { graph } = derived.system;
    const product = graph.product(p.powers.map((x) => graph.power(x.base, graph.number(x.power))));
    const scaled = Math.abs(p.constant - 1) < 1e-7 ? text(product) : `${factorText(p.constant)}*${text(product)}`;
    const isPower = p.powers.length === 1 && symbolsOf(row.terms[k]!).includes(p.powers[0]!.base);
    const isSwap = p.powers.length === 2 && p.powers[0]!.power === -p.powers[1]!.power;
    return make(k, isSwap ? 'swapped-symbol' : isPower ? 'wrong-power' : 'factor', `is taken ${scaled} times`);
  }
  const extra = fit.product(rest);
  if (!extra || extra.powers.length === 0) return undefined;
  const { graph } = derived.system;
  const product = graph.product(extra.powers.map((x) => graph.power(x.base, graph.number(x.power))));
  const term = Math.abs(Math.abs(extra.constant) - 1) < 1e-7 ? text(product) : `${factorText(Math.abs(extra.constant))}*${text(product)}`;
  return { code: 'extra-term', kind: '', term, verdict: 'is one too many', equation: row.equation };
}

function commonValue(ratios: Float64Array): number | undefined {
  const first = ratios[0]!;
  const size = Math.max(1, Math.abs(first));
  return Number.isFinite(first) && ratios.every((r) => Math.abs(r - first) <= CLOSE * size) ? first : undefined;
}

function termsOf(derived: Derived, e: Expr): Expr[] | undefined {
  const { graph } = derived.system;
  const form = normalForm(graph, e, MOST_TERMS);
  return form?.terms.map((m) => monomialExpr(graph, m));
}

function positive(derived: Derived, term: Expr): Expr {
  const { graph } = derived.system;
  const form = normalForm(graph, term, 2);
  const m = form?.terms[0];
  return m && form.terms.length === 1 && m.coefficient.sign < 0 ? graph.negate(monomialExpr(graph, m)) : term;
}

/** What a term is called, by what it is made of. */
function kindOf(derived: Derived, term: Expr, row: number | undefined): string {
  const { system } = derived;
  const symbols = symbolsOf(term);
  const data = symbols.map((s) => s.data as SymbolData);
  if (data.some((d) => d.role === 'input')) return 'input';
  const acceleration = system.coordinates.findIndex((c) => symbols.includes(c.acceleration));
  if (acceleration >= 0) return row === undefined || acceleration === row ? 'inertia' : 'inertia coupling';
  const velocities = data.filter((d) => d.role === 'coordinate' && d.order === 1);
  if (row === undefined) return '';
  if (velocities.length >= 2) return 'Coriolis';
  if (velocities.length === 1) {
    const { graph } = system;
    const isLinear = velocityPower(term, symbols.find((s) => (s.data as SymbolData).order === 1)!) === 1;
    if (!isLinear) return 'centrifugal';
    return derived.damping[row] !== graph.zero ? 'damping' : 'velocity';
  }
  const gravity = system.block.statements.find((s) => s.kind === 'gravity');
  const names = gravity ? JSON.stringify(gravity, (_, v: unknown) => (typeof v === 'bigint' ? String(v) : v)) : '';
  const isGravity = data.some((d) => d.role === 'parameter' && (d.name === 'g' || names.includes(`"name":"${d.name}"`)));
  if (isGravity) return 'gravity';
  return system.V && data.some((d) => d.role === 'coordinate') ? 'spring' : '';
}

function velocityPower(term: Expr, velocity: Expr): number {
  for (const f of term.op === 'product' ? term.args : [term]) {
    if (f === velocity) return 1;
    if (f.op === 'power' && f.args[0] === velocity) return 2;
  }
  return 1;
}

/** `the gravity term m*g*l*sin(th) of th's equation has the wrong sign` */
export function termText(fault: TermFault): string {
  const kind = fault.kind === '' ? 'term' : `${fault.kind} term`;
  return `the ${kind} ${fault.term}${fault.equation === undefined ? '' : ` in the equation of ${fault.equation}`} ${fault.verdict}`;
}
