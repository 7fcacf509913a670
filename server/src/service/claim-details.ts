import { Motion } from '../comparison/motion';
import type { WitnessState } from '../comparison/pair';
import type { ClaimResult } from '../comparison/subject';
import { inOrder } from '../diagnosis/describe';
import { symbolText, type Expr, type SymbolData } from '../expression/node';
import { monomialExpr, normalForm } from '../expression/normal-form';
import { tex, text } from '../expression/print';
import { symbolsOf } from '../expression/reach';
import { Tape, type Column } from '../expression/tape';
import type { Derived } from '../mechanics/lagrange';
import type { Document } from '../workspace/documents';
import type { ClaimDetails, Curve, TermTable } from './api';
import type { BlockOutcome } from './check';

const MOST_TERMS = 40;
const POINTS = 121;

/** What there is to show of the claims of a declaration that differ. */
export function claimDetails(document: Document, { entry, result, placed }: BlockOutcome): ClaimDetails[] {
  if (!entry || !result) return [];
  const { derived } = entry;
  return result.claims.flatMap((claim): ClaimDetails[] => {
    if (claim.decision.verdict !== 'differs') return [];
    const { witness } = claim.decision;
    const terms = termTable(derived, result.claims, claim, witness);
    const curve = curveThrough(derived, claim, witness);
    return [
      {
        line: document.lines.position(claim.span.start).line,
        system: placed.block.name,
        output: claim.output,
        quantity: claim.quantity,
        state: inOrder(derived.system, witness).map(([symbol, value]) => ({ name: symbolText(symbol.data as SymbolData), value })),
        ...(terms ? { terms } : {}),
        ...(curve ? { curve } : {}),
      },
    ];
  });
}

/**
 * Term by term at the witness. An acceleration is put into its equation of motion, whose terms add up to zero with the right
 * values: what is left over with the code's value stands beside the term that is to blame.
 */
function termTable(derived: Derived, claims: readonly ClaimResult[], claim: ClaimResult, witness: WitnessState): TermTable | undefined {
  const { system } = derived;
  const { graph, coordinates } = system;
  if (!claim.found || !claim.expected || system.near) return undefined;
  const row = coordinates.findIndex((c) => c.acceleration === claim.expected);
  const whole = row >= 0 ? derived.rows[row]! : claim.expected;
  const form = normalForm(graph, whole, MOST_TERMS);
  if (!form || form.terms.length === 0) return undefined;
  const terms = form.terms.map((m) => monomialExpr(graph, m));
  const motion = new Motion(derived);
  const columns = columnsAt(witness, [...symbolsOf(...terms, claim.found), ...motion.symbols], derived, 1);
  const solution = motion.solve(columns, 1);
  const declaredAt = evaluate(terms, (s) => solution.get(s) ?? columns.get(s));
  if (declaredAt.some((x) => !Number.isFinite(x))) return undefined;
  let codeAt: readonly number[] | undefined;
  if (row >= 0) {
    const ofCode = new Map<Expr, Column>();
    for (const c of coordinates) {
      const other = claims.find((o) => o.expected === c.acceleration && o.found);
      const [value] = other ? evaluate([other.found!], (s) => ofCode.get(s) ?? solution.get(s) ?? columns.get(s)) : [];
      if (value !== undefined && Number.isFinite(value)) ofCode.set(c.acceleration, { values: Float64Array.of(value) });
    }
    codeAt = evaluate(terms, (s) => ofCode.get(s) ?? solution.get(s) ?? columns.get(s));
    if (codeAt.some((x) => !Number.isFinite(x))) return undefined;
  }
  return {
    of: row >= 0 ? { text: `equation of ${coordinates[row]!.name}`, tex: `\\text{equation of } ${tex(coordinates[row]!.symbol)}` } : { text: claim.quantity, tex: tex(claim.expected) },
    isEquation: row >= 0,
    rows: terms.map((t, i) => ({ text: text(t), tex: tex(t), declared: declaredAt[i]!, ...(codeAt ? { code: codeAt[i]! } : {}) })),
  };
}

/** Both sides over a range of the first thing that moves, or of the first symbol at all. */
function curveThrough(derived: Derived, claim: ClaimResult, witness: WitnessState): Curve | undefined {
  const { system } = derived;
  if (!claim.found || !claim.expected || system.constraints.length > 0) return undefined;
  const moving = inOrder(system, witness).map(([s]) => s);
  const inside = symbolsOf(claim.found);
  const symbol = moving.find((s) => inside.includes(s) && (s.data as SymbolData).role === 'coordinate') ?? moving.find((s) => inside.includes(s)) ?? moving[0];
  if (!symbol) return undefined;
  const data = symbol.data as SymbolData;
  const value = witness.values.get(symbol)!;
  const { low, high } = system.domains.get(symbol) ?? {};
  const declared = [...system.coordinates, ...system.parameters, ...system.inputs].find((d) => d.name === data.name);
  const isAngle = data.order === 0 && declared?.unit === 'rad';
  const reach = isAngle ? Math.PI : Math.max(2 * Math.abs(value), 2);
  const from = low ?? (isAngle ? -reach : value - reach);
  const to = high ?? (isAngle ? reach : value + reach);
  const at = Float64Array.from({ length: POINTS }, (_, i) => from + ((to - from) * i) / (POINTS - 1));
  const motion = new Motion(derived);
  const columns = columnsAt(witness, [...symbolsOf(claim.found, claim.expected), ...motion.symbols], derived, POINTS);
  columns.set(symbol, { values: at });
  const solution = motion.solve(columns, POINTS);
  const tape = new Tape([claim.found, claim.expected]);
  const run = tape.run((s) => solution.get(s) ?? columns.get(s), POINTS);
  const [found, expected] = [claim.found, claim.expected].map((e) => [...run.column(e).values]) as [number[], number[]];
  if (found.filter(Number.isFinite).length < POINTS / 2 || expected.filter(Number.isFinite).length < POINTS / 2) return undefined;
  return {
    symbol: symbolText(data),
    ...(declared?.unit && data.order === 0 ? { unit: declared.unit } : {}),
    at: [...at],
    expected,
    found,
    witness: value,
  };
}

function columnsAt(witness: WitnessState, symbols: readonly Expr[], derived: Derived, n: number): Map<Expr, Column> {
  const unknown = new Set(derived.unknowns);
  const columns = new Map<Expr, Column>();
  for (const s of symbols) {
    if (unknown.has(s)) continue;
    // What neither side depends on stands at a plain value, as in the message.
    const plain = (s.data as SymbolData).role === 'parameter' ? 1 : 0;
    columns.set(s, { values: new Float64Array(n).fill(witness.values.get(s) ?? plain) });
  }
  return columns;
}

function evaluate(exprs: readonly Expr[], column: (s: Expr) => Column | undefined): number[] {
  const tape = new Tape(exprs);
  const run = tape.run(column, 1);
  return exprs.map((e) => run.value(e, 0));
}
