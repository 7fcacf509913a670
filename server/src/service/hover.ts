import { findEquilibria } from '../comparison/equilibria';
import type { ClaimResult } from '../comparison/subject';
import { symbolText, type SymbolData } from '../expression/node';
import { formatNumber, formatPair } from '../expression/print/number';
import { equationText, symbolTex, tex, text } from '../expression/print';
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
  return told && { ...told.content(), range: document.lines.range(told.shown) };
}

/** Everything that `hoverAt` may tell. */
export function allHovers(document: Document, outcomes: readonly BlockOutcome[]): HoverItem[] {
  const { lines, text: source } = document;
  return tellable(document, outcomes).map((t) => ({
    ...t.content(),
    range: lines.range(t.span),
    text: source.slice(t.span.start, t.span.end),
    shown: lines.range(t.shown),
  }));
}

interface Told {
  readonly span: Span;
  readonly shown: Span;
  content(): Content;
}

type Content = Pick<Hover, 'markdown' | 'formulas'>;

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
        content: () => ({
          formulas: [],
          markdown: `\`${binding.code}\` is **${text(binding.meaning)}** of \`${o.placed.block.name}\`, ${how}.${symbolNote(o, binding.meaning.data)}`,
        }),
      });
    }
  }
  for (const o of outcomes) {
    const { block } = o.placed;
    const name = nameSpan(o);
    let made: Content | undefined;
    const content = () => (made ??= describeOutcome(o));
    out.push({ span: block.span, shown: block.nameSpan, content });
    if (name) out.push({ span: name, shown: name, content });
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

type Formulas = Hover['formulas'][number];

function describeOutcome(o: BlockOutcome): Content {
  const { block, subject } = o.placed;
  const lines: string[] = [`**${block.name}**${subject.kind === 'file' ? '' : ` · \`${subjectName(subject)}\``}`, ''];
  const formulas: Formulas[] = [];
  const derived = o.entry?.derived;
  if (!derived) return { markdown: `${lines[0]}\n\n${o.problems[0]?.message ?? 'not resolved'}`, formulas };
  const { system } = derived;
  const add = (heading: string, content: readonly Formulas['lines'][number][]): void => {
    const markdown = ['```text', ...content.map((c) => c.text), '```'].join('\n');
    lines.push(heading, '', markdown, '');
    formulas.push({ markdown, lines: content });
  };
  if (system.blocked) lines.push(system.blocked.reason, '');
  else {
    const limit = { limit: LONGEST };
    add('Equations of motion', equationsOfMotion(derived).map((e) => {
      const equation = equationText(e.left, e.right, limit);
      if (equation.length > 2 * LONGEST) return { text: `(the equation for ${e.coordinate.name} is too long to show here)`, tex: '' };
      return { text: equation, tex: `${tex(e.left, limit)} = ${tex(e.right, limit)}` };
    }));
    const constant = conserved(derived).map((c) => ({ text: `${c.name} = ${text(c.expr)} (${c.why})`, tex: `${conservedTex(c.name)} = ${tex(c.expr)}` }));
    if (constant.length > 0) add('Constant along the motion', constant);
    const rest = findEquilibria(derived).map((e) => equilibriumText(derived, e));
    if (rest.length > 0) lines.push('Equilibria at rest', '', '```text', ...rest, '```', '');
  }
  const claims = o.result?.claims ?? [];
  if (claims.length > 0) lines.push('Claims', '', ...claims.map((c) => `- ${claimLine(o, c)}`), '');
  const bindings = bindingLines(o);
  if (bindings.length > 0) lines.push('Read as', '', ...bindings.map((b) => `- ${b}`), '');
  const units = [...system.coordinates, ...system.parameters, ...system.inputs].filter((d) => d.unit).map((d) => `${d.name} [${d.unit!}]`);
  if (units.length > 0) lines.push(`Units: ${units.join(', ')}`, '');
  const remarks = system.coordinates.filter((c) => c.remark).map((c) => c.remark!);
  if (remarks.length > 0) lines.push(`Convention: ${[...new Set(remarks)].join('; ')}`, '');
  return { markdown: lines.join('\n').trim(), formulas };
}

/** `p[th]` is p with an index. */
function conservedTex(name: string): string {
  const index = /^p\[(.+)\]$/.exec(name)?.[1];
  return index === undefined ? name : `p_{${symbolTex({ name: index, role: 'coordinate', order: 0 })}}`;
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
