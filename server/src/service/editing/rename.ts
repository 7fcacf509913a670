import type { ReportRange } from '@visviva/shared';
import type { Expression, FunctionNode, Pattern, Statement } from '../../program/form';
import { nodesOf, patternNames } from '../../program/scan';
import type { Span } from '../../text/span';
import type { Document } from '../../workspace/documents';
import type { BlockOutcome } from '../check';
import type { FileEdit } from '../api';
import { codeUses, type Occurrence, type Target } from './references';

interface Change {
  readonly document: Document;
  readonly span: Span;
  readonly text: string;
}

/** Why a name can't be what the user typed, in words. */
export function refusal(target: Target, name: string): string | undefined {
  if (target.kind === 'system') {
    return /^[\p{L}\p{Nd}_][\p{L}\p{M}\p{Nd}_.-]*$/u.test(name) ? undefined : `\`${name}\` is no name for a system: letters, digits, \`-\`, \`_\` and \`.\` may be used`;
  }
  return /^[\p{L}_][\p{L}\p{M}\p{Nd}_]*$/u.test(name) ? undefined : `\`${name}\` is no name: letters, digits and \`_\` may be used`;
}

/**
 * The edits that give a target another name instead of `old`. In code, parameters and locals that agreed with it by name are renamed too,
 * where `renameCode`; whatever else agreed by name is bound by `reads` from then on, so that it keeps its meaning.
 */
export function renameEdits(
  target: Target,
  old: string,
  name: string,
  occurrences: readonly Occurrence[],
  documents: readonly (readonly [Document, readonly BlockOutcome[]])[],
  renameCode: boolean,
): FileEdit[] {
  const changes: Change[] = occurrences
    .filter((o) => o.side === 'declaration')
    .map((o) => ({ document: o.document, span: o.span, text: name + dots(o.document.text.slice(o.span.start, o.span.end)) }));
  if (target.kind === 'name') {
    for (const [document, outcomes] of documents) {
      for (const o of outcomes) if (o.placed.block.name === target.system) changes.push(...inCode(target, old, name, document, o, renameCode));
    }
  }
  return changes.map((c) => ({ file: c.document.file, range: c.document.lines.range(c.span) satisfies ReportRange, text: c.text }));
}

/** Combining dots of a name as primes. */
function dots(typed: string): string {
  const marks = typed.normalize('NFD');
  return marks.includes('\u0308') ? "''" : marks.includes('\u0307') ? "'" : '';
}

function inCode(target: Target & { kind: 'name' }, old: string, name: string, document: Document, o: BlockOutcome, renameCode: boolean): Change[] {
  const out: Change[] = [];
  const { block, subject } = o.placed;
  const reads: string[] = [];
  const uses = codeUses(document, o).filter((u) => u.key === target.key && u.how === 'name');
  const meanings = new Map((o.result?.reading?.bindings ?? []).map((b) => [document.text.slice(b.place.span.start, b.place.span.end), b.meaning]));
  for (const code of new Set(uses.map((u) => u.code))) {
    const renamed = code.startsWith(old) ? name + code.slice(old.length) : code.replace(old, name);
    const spans = renameCode && subject.kind === 'function' && code.includes(old) ? localSpans(subject.node, code, renamed) : undefined;
    if (spans) out.push(...spans.map((span) => ({ document, span, text: renamed })));
    else {
      const data = meanings.get(code)?.data as { readonly order?: number } | null | undefined;
      reads.push(`${code} = ${name}${"'".repeat(data?.order ?? 0)}`);
    }
  }
  if (reads.length > 0) out.push({ document, ...insertion(document, block.statements.findLast((s) => s.kind === 'reads')?.span, block.span, reads) });
  return out;
}

/** At the end of the last `reads`, else on a line of its own below the declaration, written like the line above it. */
function insertion(document: Document, last: Span | undefined, block: Span, reads: readonly string[]): { span: Span; text: string } {
  if (last) {
    // Before the remark, if the statement ends in one.
    const end = last.end;
    return { span: { start: end, end }, text: `, ${reads.join(', ')}` };
  }
  const { text } = document;
  const start = Math.max(text.lastIndexOf('\n', block.end - 1), text.lastIndexOf('\r', block.end - 1)) + 1;
  const lead = /^[\s*#/%!]*/.exec(text.slice(start, block.end))![0].replace('/**', ' *');
  const end = text.includes('\r\n') ? '\r\n' : '\n';
  return { span: { start: block.end, end: block.end }, text: `${end}${lead}reads ${reads.join(', ')}` };
}

/**
 * The places of a parameter or local of a function. Undefined where it is none, where the new name is taken, or where the
 * name is also that of a field, as in `const { m } = p`.
 */
function localSpans(node: FunctionNode, code: string, renamed: string): Span[] | undefined {
  if (!/^[\p{L}_$][\p{L}\p{M}\p{Nd}_$]*$/u.test(code)) return undefined;
  const spans = new Map<number, Span>();
  let isLocal = node.parameters.some((p) => patternNames(p.pattern).includes(code));
  for (const n of nodesOf(node)) {
    const s = n as Statement;
    if (s.kind === 'declare' && patternNames(s.target).includes(code)) isLocal = true;
    const e = n as Expression;
    if (e.kind === 'record' && isShorthand(n, code)) return undefined;
    if (e.kind !== 'name' || !e.span) continue;
    if (e.name === renamed) return undefined;
    if (e.name === code) spans.set(e.span.start, e.span);
  }
  return isLocal && spans.size > 0 ? [...spans.values()] : undefined;
}

function isShorthand(record: object, name: string): boolean {
  const { fields } = record as { fields?: readonly { readonly name?: unknown; readonly span?: Span; readonly value?: { readonly span: Span }; readonly item?: { readonly pattern: Pattern } }[] };
  return (fields ?? []).some((f) => {
    if (f.name !== name) return false;
    if (f.item) return f.item.pattern.kind === 'name' && f.item.pattern.name === name;
    return f.span !== undefined && f.value !== undefined && f.span.start === f.value.span.start;
  });
}
