import type { PanelClaim, PanelData, PanelEquation, PanelFormula, PanelSymbol, PanelTerm } from '@visviva/shared';
import type { WitnessState } from '../../comparison/pair';
import { termFactors } from '../../diagnosis/term-factors';
import { stateText } from '../../diagnosis/describe';
import { derivative } from '../../expression/differentiate';
import type { Expr, SymbolData } from '../../expression/node';
import { formatPair } from '../../expression/print/number';
import { tex, text } from '../../expression/print';
import { symbolsOf } from '../../expression/reach';
import { substitute } from '../../expression/substitute';
import { conserved } from '../../mechanics/equations';
import type { Derived } from '../../mechanics/lagrange';
import type { Declared } from '../../mechanics/system';
import { contains } from '../../text/span';
import type { Document } from '../../workspace/documents';
import type { BlockOutcome } from '../check';
import { subjectName } from '../check';
import { drawingOf } from './drawing';
import { panelTape } from './tape';

const LONGEST = 400;

export type PanelContent = Omit<PanelData, 'uri' | 'version'>;

/** The declaration at an offset: the one whose lines or function it is in, else the last one above. */
export function outcomeAt(outcomes: readonly BlockOutcome[], offset: number): BlockOutcome | undefined {
  const inside = outcomes.filter(({ placed: { block, subject } }) => contains(block.span, offset) || (subject.kind !== 'file' && contains(subject.node.span, offset)));
  // Of nested ones the innermost, which begins last.
  return inside.at(-1) ?? outcomes.findLast((o) => o.placed.block.span.start <= offset) ?? outcomes[0];
}

export function panelOf(document: Document, o: BlockOutcome): PanelContent {
  const { block, subject } = o.placed;
  const derived = o.entry?.derived;
  const span = subject.kind === 'file' ? block.nameSpan : subject.node.nameSpan;
  const head = {
    system: block.name,
    function: subjectName(subject),
    line: document.lines.position(span.start).line,
    endLine: document.lines.position(subject.kind === 'file' ? block.span.end : subject.node.span.end).line,
    claims: derived ? claimsOf(document, o) : [],
  };
  const reason = !derived ? (o.problems[0]?.message ?? 'The declaration was not found.') : derived.system.blocked?.reason;
  if (!derived || reason !== undefined) {
    const empty = { conventions: [], equations: [], conserved: [], symbols: [], drawing: { points: [], springs: [], rods: [] }, motion: undefined, tape: { nodes: [] } };
    return { ...head, ...empty, blocked: reason ?? '' };
  }
  const witness = firstWitness(o);
  const motion = motionOf(derived, o);
  const drawing = drawingOf(derived.system);
  const places = [...drawing.points.flatMap((p) => [...p.at, ...(p.angle ? [p.angle] : [])]), ...drawing.springs.flatMap((s) => [...s.from, ...s.to]), ...(drawing.gravity ?? [])];
  const roots = [...places, ...(motion ? [...motion.derived, ...(motion.code ?? []), motion.energy] : [])];
  const { list, symbols } = symbolsFor(derived, roots, witness);
  const { tape, at } = panelTape(roots, list);
  const all = (exprs: readonly Expr[]): number[] => exprs.map(at);
  return {
    ...head,
    conventions: [...new Set(derived.system.coordinates.flatMap((c) => (c.remark ? [c.remark] : [])))],
    equations: equationsOf(derived, o),
    conserved: conserved(derived).map((c) => ({ formula: { text: `${c.name} = ${text(c.expr, { limit: LONGEST })}`, tex: tex(c.expr, { limit: LONGEST }) }, why: c.why })),
    symbols,
    drawing: {
      points: drawing.points.map((p) => ({ name: p.name, at: all(p.at), isBody: p.isBody, ...(p.angle ? { angle: at(p.angle) } : {}) })),
      springs: drawing.springs.map((s) => ({ from: all(s.from), to: all(s.to), kind: s.kind })),
      rods: drawing.rods,
      ...(drawing.gravity ? { gravity: all(drawing.gravity) } : {}),
    },
    motion: motion && {
      coordinates: derived.system.coordinates.map((c) => c.name),
      derived: all(motion.derived),
      ...(motion.code ? { code: all(motion.code) } : {}),
      energy: at(motion.energy),
    },
    tape,
  };
}

function firstWitness(o: BlockOutcome): WitnessState | undefined {
  for (const c of o.result?.claims ?? []) if (c.decision.verdict === 'differs') return c.decision.witness;
  return undefined;
}

function claimsOf(document: Document, o: BlockOutcome): PanelClaim[] {
  const system = o.entry!.derived.system;
  return (o.result?.claims ?? []).map((c): PanelClaim => {
    const { decision } = c;
    const here = c.place?.file === document.file ? c.place.span : c.span;
    const base = { output: c.output, quantity: c.quantity, verdict: decision.verdict, range: document.lines.range(here) };
    switch (decision.verdict) {
      case 'holds':
        return { ...base, message: decision.proof?.kind === 'identity' ? 'identity, failure chance below 1e-15' : `equal at ${decision.states} states` };
      case 'unread':
        return { ...base, message: decision.reason };
      case 'differs': {
        const [found, expected] = formatPair(decision.witness.found, decision.witness.expected);
        return { ...base, message: `at ${stateText(system, decision.witness)} the code gives ${found}, the declared energies give ${expected}` };
      }
    }
  });
}

function equationsOf(derived: Derived, o: BlockOutcome): PanelEquation[] {
  const { graph, coordinates } = derived.system;
  const claims = o.result?.claims ?? [];
  return coordinates.map((c, i): PanelEquation => {
    const row = termFactors(derived, claims, i);
    if (!row) return { coordinate: c.name, terms: [], note: 'This equation has too many terms to list.' };
    const { terms, factors } = row;
    const claimed = claims.find((x) => x.expected === c.acceleration);
    const shown = terms.map((t, k): PanelTerm => {
      const negative = isNegative(t);
      const plain = negative ? graph.negate(t) : t;
      const factor = factors?.[k];
      return {
        sign: negative ? '-' : '+',
        formula: formula(plain),
        ...(factor !== undefined ? { factor } : {}),
        state: factor === undefined ? 'unknown' : Math.abs(factor - 1) < 1e-9 ? 'same' : 'differs',
      };
    });
    const unknown = !factors && claimed?.decision.verdict === 'differs';
    return {
      coordinate: c.name,
      terms: shown,
      ...(unknown ? { note: 'What the code has is no multiple of these terms: look for a term too many or a wrong function.' } : {}),
    };
  });
}

function formula(e: Expr): PanelFormula {
  return { text: text(e, { limit: LONGEST }), tex: tex(e, { limit: LONGEST }) };
}

function isNegative(e: Expr): boolean {
  return text(e).startsWith('-');
}

interface Motion {
  readonly derived: readonly Expr[];
  readonly code: readonly Expr[] | undefined;
  readonly energy: Expr;
}

/** The two motions as accelerations: as derived, and as the claims of the code give them. */
function motionOf(derived: Derived, o: BlockOutcome): Motion | undefined {
  const { system } = derived;
  const { graph, coordinates } = system;
  if (system.near) return undefined;
  const accelerations = derived.accelerations;
  const own = new Map<Expr, Expr>();
  for (const c of o.result?.claims ?? []) {
    if (!c.found || !c.expected || c.decision.verdict === 'unread') continue;
    const moved = symbolsOf(c.expected).filter((s) => coordinates.some((q) => q.acceleration === s));
    if (moved.length !== 1 || own.has(moved[0]!) || symbolsOf(c.found).some((s) => coordinates.some((q) => q.acceleration === s))) continue;
    const a = moved[0]!;
    const slope = derivative(graph, c.expected, a);
    if (symbolsOf(slope).includes(a)) continue;
    const rest = substitute(graph, [c.expected], new Map([[a, graph.zero]]))[0]!;
    own.set(a, graph.divide(graph.subtract(c.found, rest), slope));
  }
  const code = own.size === 0 ? undefined : coordinates.map((c, i) => own.get(c.acceleration) ?? accelerations[i]!);
  return { derived: accelerations, code, energy: derived.energy };
}

/** Every symbol that the panel needs a value for, with a start and the ends of its slider. */
function symbolsFor(derived: Derived, roots: readonly Expr[], witness: WitnessState | undefined): { readonly list: Map<Expr, number>; readonly symbols: PanelSymbol[] } {
  const { system } = derived;
  const used = new Set(symbolsOf(...roots));
  const list = new Map<Expr, number>();
  const symbols: PanelSymbol[] = [];
  const add = (e: Expr, name: string, kind: PanelSymbol['kind'], d: Declared | undefined): void => {
    list.set(e, symbols.length);
    const { low, high } = system.domains.get(e) ?? {};
    const given = witness?.values.get(e);
    const angle = d?.unit === 'rad' && kind === 'coordinate';
    const plain = kind === 'parameter' ? (d?.typical ?? (low !== undefined && low >= 1 ? low + 1 : 1)) : kind === 'coordinate' ? (angle ? 0.5 : 0.2) : 0;
    const value = within(given ?? plain, low, high);
    const reach = Math.max(Math.abs(value) * 2, kind === 'parameter' ? 2 : angle ? Math.PI : 3);
    symbols.push({
      name,
      kind,
      value,
      // A mass of zero moves nothing.
      low: low === 0 && kind === 'parameter' ? value / 20 : (low ?? (kind === 'parameter' ? Math.min(value / 20, value * 2) : -reach)),
      high: high ?? (kind === 'parameter' ? Math.max(low ?? 0, 0) + reach : reach),
      ...(d?.unit && kind !== 'velocity' ? { unit: d.unit } : {}),
      ...(d?.remark && kind === 'coordinate' ? { remark: d.remark } : {}),
    });
  };
  for (const c of system.coordinates) add(c.symbol, c.name, 'coordinate', c);
  for (const c of system.coordinates) add(c.velocity, `${c.name}'`, 'velocity', c);
  for (const u of system.inputs) if (used.has(u.symbol)) add(u.symbol, u.name, 'input', u);
  for (const p of system.parameters) if (used.has(p.symbol)) add(p.symbol, p.name, 'parameter', p);
  if (used.has(system.time)) add(system.time, (system.time.data as SymbolData).name, 'time', undefined);
  // Rates of inputs are zero: an input is held where its slider is.
  return { list, symbols };
}

function within(value: number, low: number | undefined, high: number | undefined): number {
  if (low !== undefined && value < low) return high === undefined ? low : (low + high) / 2;
  if (high !== undefined && value > high) return low === undefined ? high : (low + high) / 2;
  return value;
}
