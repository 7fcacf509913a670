import { canonicalName } from '../../mechanics/names';
import { childrenOf } from '../../notation/building';
import type { Formula } from '../../notation/tree';
import type { Span } from '../../text/span';
import type { Document } from '../../workspace/documents';
import type { SemanticToken } from '../api';
import { FUNCTION_HELP } from './functions';
import { namedIn, physicsOf } from './names';

/** Every declaration that takes more than one line can be folded. */
export function foldsOf(document: Document): { readonly startLine: number; readonly endLine: number }[] {
  return document.blocks
    .map(({ block }) => document.lines.range(block.span))
    .filter((r) => r.end.line > r.start.line)
    .map((r) => ({ startLine: r.start.line, endLine: r.end.line }));
}

const FUNCTIONS: ReadonlySet<string> = new Set(FUNCTION_HELP.map((f) => f.name));

/** What the words of declarations are, for colours; in order, and each within one line. */
export function tokensOf(document: Document): SemanticToken[] {
  const out = new Map<number, { span: Span; kind: SemanticToken['kind']; isDeclaration: boolean }>();
  const add = (span: Span, kind: SemanticToken['kind'], isDeclaration = false): void => {
    if (span.end > span.start && !out.has(span.start)) out.set(span.start, { span, kind, isDeclaration });
  };
  for (const { block } of document.blocks) {
    add({ start: block.span.start, end: block.span.start + '@visviva'.length }, 'keyword');
    add(block.nameSpan, 'system', true);
    const kinds = new Map<string, SemanticToken['kind']>();
    for (const n of [...document.blocks.filter((b) => b.block.name === block.name).flatMap((b) => namedIn(document.text, b.block))]) {
      kinds.set(n.key, n.kind === 'time' || n.kind === 'multiplier' ? 'input' : n.kind === 'point' ? 'shorthand' : n.kind);
    }
    for (const n of namedIn(document.text, block)) add(n.span, kinds.get(n.key)!, true);
    for (const s of block.statements) {
      add(s.wordSpan, 'keyword');
      if (s.kind === 'coordinates' || s.kind === 'parameters' || s.kind === 'inputs') for (const i of s.items) if (i.unit) add(i.unit.span, 'unit');
      for (const f of physicsOf(s)) colour(f, kinds, add);
      if (s.kind === 'reads' || s.kind === 'checks') for (const i of s.items) colourCode(i.left, add);
    }
  }
  return [...out.values()]
    .sort((a, b) => a.span.start - b.span.start)
    .map(({ span, kind, isDeclaration }) => ({ range: document.lines.range(span), kind, isDeclaration }))
    .filter((t) => t.range.start.line === t.range.end.line);
}

type Add = (span: Span, kind: SemanticToken['kind']) => void;

function colour(formula: Formula, kinds: ReadonlyMap<string, SemanticToken['kind']>, add: Add): void {
  const stack = [formula];
  for (let f = stack.pop(); f; f = stack.pop()) {
    if (f.kind === 'number') add(f.span, 'number');
    else if (f.kind === 'name') {
      const kind = kinds.get(canonicalName(f.name)) ?? (FUNCTIONS.has(f.name) ? 'function' : undefined);
      if (kind) add(f.span, kind);
    } else stack.push(...childrenOf(f));
  }
}

/** Names of the code, paths part by part. */
function colourCode(formula: Formula, add: Add): void {
  const stack = [formula];
  for (let f = stack.pop(); f; f = stack.pop()) {
    if (f.kind === 'number') add(f.span, 'number');
    else if (f.kind === 'name') add(f.span, 'code');
    else {
      if (f.kind === 'member') add({ start: f.span.end - f.name.length, end: f.span.end }, 'code');
      stack.push(...childrenOf(f));
    }
  }
}
