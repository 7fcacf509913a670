import { findEquilibria } from '../comparison/equilibria';
import type { ClaimResult } from '../comparison/subject';
import { symbolText, type SymbolData } from '../expression/node';
import { formatNumber, formatPair } from '../expression/print/number';
import { equationText, text } from '../expression/print/text';
import { conserved, equationsOfMotion } from '../mechanics/equations';
import { stateText } from '../diagnosis/describe';
import { contains, type Span } from '../text/span';
import type { Document } from '../workspace/documents';
import type { Hover, HoverItem } from './api';
import { subjectName, type BlockOutcome } from './check';
import { equilibriumText } from './derive';

/** Longer equations say nothing in a pop-up. */
const LONGEST = 600;

/**
 * What there is to tell about a place: on a declaration its equations and verdicts, on a claimed function the same and the
 * bindings made, on a name in it what it was taken to mean.
 */
export async function hoverAt(
  document: Document,
  offset: number,
  check: () => Promise<readonly BlockOutcome[]>,
): Promise<Hover | undefined> {
  const near = document.blocks.some((b) => contains(b.block.span, offset) || contains(subjectSpan(b) ?? b.block.span, offset));
  if (!near) return undefined;
  const told = tellable(document, await check()).find((t) => contains(t.span, offset));
  return told && { markdown: told.markdown(), range: document.lines.range(told.shown) };
}

/** Everything that `hoverAt` may tell. */
export function allHovers(document: Document, outcomes: readonly BlockOutcome[]): HoverItem[] {
  const { lines, text: source } = document;
  return tellable(document, outcomes).map((t) => ({
    markdown: t.markdown(),
    range: lines.range(t.span),
    text: source.slice(t.span.start, t.span.end),
    shown: lines.range(t.shown),
  }));
}

interface Told {
  readonly span: Span;
  readonly shown: Span;
  markdown(): string;
}

function tellable(document: Document, outcomes: readonly BlockOutcome[]): Told[] {
  const out: Told[] = [];
  for (const o of outcomes) {
    for (const binding of o.result?.reading?.bindings ?? []) {
      if (binding.place.file !== document.file) continue;
      const { span } = binding.place;
      const how = binding.how === 'reads' ? 'by `reads`' : 'by its name';
      out.push({
        span,
        shown: span,
        markdown: () => `\`${binding.code}\` is **${text(binding.meaning)}** of \`${o.placed.block.name}\`, ${how}.${symbolNote(o, binding.meaning.data)}`,
      });
    }
  }
  for (const o of outcomes) {
    const { block } = o.placed;
    const name = nameSpan(o);
    let made: string | undefined;
    const markdown = () => (made ??= describeOutcome(o));
    out.push({ span: block.span, shown: block.nameSpan, markdown });
    if (name) out.push({ span: name, shown: name, markdown });
  }
  return out;
}

function subjectSpan(b: { readonly subject: BlockOutcome['placed']['subject'] }): Span | undefined {
  return b.subject.kind === 'file' ? undefined : b.subject.node.span;
}

function nameSpan(o: BlockOutcome): Span | undefined {
  return o.placed.subject.kind === 'file' ? undefined : o.placed.subject.node.nameSpan;
}

function symbolNote(o: BlockOutcome, data: unknown): string {
  const name = data !== null && typeof data === 'object' && 'role' in data ? (data as SymbolData).name : undefined;
  const system = o.entry?.derived.system;
  const declared = system && [...system.coordinates, ...system.parameters, ...system.inputs].find((d) => d.name === name);
  if (!declared) return '';
  const parts = [declared.unit ? `[${declared.unit}]` : '', declared.remark ?? ''].filter((p) => p !== '');
  return parts.length > 0 ? ` ${parts.join(' ')}` : '';
}

function describeOutcome(o: BlockOutcome): string {
  const { block, subject } = o.placed;
  const lines: string[] = [`**${block.name}**${subject.kind === 'file' ? '' : ` · \`${subjectName(subject)}\``}`, ''];
  const derived = o.entry?.derived;
  if (!derived) return `${lines[0]}\n\n${o.problems[0]?.message ?? 'not resolved'}`;
  const { system } = derived;
  if (system.blocked) lines.push(system.blocked.reason, '');
  else {
    lines.push('Equations of motion', '', '```text');
    for (const e of equationsOfMotion(derived)) {
      const equation = equationText(e.left, e.right, { limit: LONGEST });
      lines.push(equation.length > 2 * LONGEST ? `(the equation for ${e.coordinate.name} is too long to show here)` : equation);
    }
    lines.push('```', '');
    const constant = conserved(derived).map((c) => `${c.name} = ${text(c.expr)} (${c.why})`);
    if (constant.length > 0) lines.push('Constant along the motion', '', '```text', ...constant, '```', '');
    const rest = findEquilibria(derived).map((e) => equilibriumText(derived, e));
    if (rest.length > 0) lines.push('Equilibria at rest', '', '```text', ...rest, '```', '');
  }
  const claims = o.result?.claims ?? [];
  if (claims.length > 0) lines.push('Claims', '', ...claims.map((c) => `- ${claimLine(o, c)}`), '');
  const bindings = bindingLines(o);
  if (bindings.length > 0) lines.push('Read as', '', ...bindings.map((b) => `- ${b}`), '');
  const remarks = system.coordinates.filter((c) => c.remark).map((c) => c.remark!);
  if (remarks.length > 0) lines.push(`Convention: ${[...new Set(remarks)].join('; ')}`, '');
  return lines.join('\n').trim();
}

function claimLine(o: BlockOutcome, claim: ClaimResult): string {
  const { decision } = claim;
  const head = `\`${claim.output}\` = \`${claim.quantity}\``;
  switch (decision.verdict) {
    case 'holds':
      if (decision.proof?.kind === 'identity') return `${head} holds: identity, failure chance below 1e-15`;
      return `${head} holds: ${decision.states} states, worst relative difference ${formatNumber(decision.worst, 1)}`;
    case 'unread':
      return `${head} is not checked: ${decision.reason}`;
    case 'differs': {
      const [found, expected] = formatPair(decision.witness.found, decision.witness.expected);
      return `${head} differs: at ${stateText(o.entry!.derived.system, decision.witness)} code ${found}, energies ${expected}`;
    }
  }
}

function bindingLines(o: BlockOutcome): string[] {
  const seen = new Map<string, string>();
  for (const b of o.result?.reading?.bindings ?? []) {
    const data = b.meaning.data as SymbolData | null;
    const meaning = b.meaning.op === 'symbol' ? symbolText(data as SymbolData) : text(b.meaning);
    if (b.code !== meaning) seen.set(b.code, `\`${b.code}\` is ${meaning}${b.how === 'reads' ? ' (reads)' : ''}`);
  }
  return [...seen.values()];
}
