import { freeSymbol } from '../../comparison/claims';
import { readClaims, type ClaimResult, type SubjectRequest } from '../../comparison/subject';
import type { Expr } from '../../expression/node';
import type { Expression, FunctionNode } from '../../program/form';
import { patternNames } from '../../program/scan';
import type { OutputRequest, OutputValue, Reading } from '../../program/reading';
import { isScalarCall, type Site, type SourceMap } from './sites';

/** One evaluation of a place: the unknown added to its value, and the value that was read. */
export interface Evaluation {
  readonly tag: Expr;
  readonly read: Expr;
}

/** A reading in which every place's value has an unknown added, all of them zero where the code stays as it is. */
export interface TaggedReading {
  readonly evaluations: ReadonlyMap<Site, readonly Evaluation[]>;
  /** By the place of the claim among the subject's results. */
  readonly found: ReadonlyMap<number, Expr>;
  readonly reading: Reading;
  /** What the function's own names stand for: locals and parameters, entries of lists too (`q[1]`). */
  readonly names: readonly { readonly text: string; readonly expr: Expr }[];
}

const MOST_EVALUATIONS = 24;

/**
 * Reads the subject again with tags. `mode` says which numbers are left as they are.
 * @param claims the results of the plain reading, by which the tagged one is checked for having read the same
 */
export function readTagged(
  request: SubjectRequest,
  claims: readonly ClaimResult[],
  map: SourceMap,
  mode: Mode,
): TaggedReading | undefined {
  const mayTagSite = (site: Site) => mayTag(site, mode);
  const { graph } = request.derived.system;
  const evaluations = new Map<Site, Evaluation[]>();
  let count = 0;
  const names = namesOf(request);
  const result = readClaims({
    ...request,
    isNumber: (source) => {
      const site = map.byNode.get(source);
      return site !== undefined && isOperand(site, mode) && mayTagSite(site);
    },
    extra: names.map((name): OutputRequest => ({ expression: { kind: 'name', name, span: { start: 0, end: 0 } } })),
    tag: (place, source, read) => {
      if (place.file !== request.file || read.op === 'nan') return read;
      const site = map.byNode.get(source);
      if (!site || (read.op === 'number' && !isLiteral(source)) || !mayTagSite(site)) return read;
      const list = evaluations.get(site) ?? [];
      if (list.length >= MOST_EVALUATIONS) return read;
      const tag = graph.symbol({ name: `tag ${count++}`, role: 'auxiliary', order: 0 });
      list.push({ tag, read });
      evaluations.set(site, list);
      return graph.sum([read, tag]);
    },
  });
  if (!result.reading) return undefined;
  const found = new Map<number, Expr>();
  for (const p of result.pending) found.set(p.at, p.found);
  // A claim that could be read before must still be.
  for (let i = 0; i < claims.length; i++) {
    if (claims[i]!.decision.verdict !== 'unread' && !found.has(i)) return undefined;
  }
  const last = result.reading.outputs.slice(result.reading.outputs.length - names.length);
  return {
    evaluations,
    found,
    reading: result.reading,
    names: names.flatMap((name, i) => entries(name, last[i]!, request.program.indexBase, 0)),
  };
}

/** Numbers may be tagged only where nothing but arithmetic is done with them. */
function mayTag(site: Site, mode: Mode): boolean {
  const { node } = site;
  if (!isFull(mode) && isInLimit(site)) return false;
  if (isIndex(site)) return false;
  if (!site.mayVary && (node.kind === 'number' || node.kind === 'unary')) return mode === 'calls' && isCallNumber(site);
  if (node.kind === 'number') {
    if (mode === 'none') return false;
    if (mode === 'arithmetic') return site.role === 'left' || site.role === 'right';
  }
  return true;
}

/** Numbers that are needed as plain numbers show only when reading with tags fails: then fewer are tagged. */
const MODES = ['calls', 'all', 'arithmetic', 'none'] as const;
type Mode = (typeof MODES)[number];

/** The modes worth trying for a program: `calls` only where it makes a difference. */
export function modesFor(map: SourceMap): readonly Mode[] {
  return map.sites.some(isCallNumber) ? MODES : MODES.slice(1);
}

/** A number handed to a function of the program itself: `scale(2, v)`; what others do with it is not known. */
function isCallNumber(site: Site): boolean {
  const call = site.parent?.node;
  return site.node.kind === 'number' && site.role === 'argument' && call?.kind === 'call' && call.callee.kind === 'name' && !isScalarCall(call);
}

function isFull(mode: Mode): boolean {
  return mode === 'calls' || mode === 'all';
}

/** A choice of row or slot, which must stay a whole number. */
function isIndex(site: Site): boolean {
  for (let s: Site | undefined = site; s; s = s.parent) if (s.role === 'other' && s.parent?.node.kind === 'index') return true;
  return false;
}

/** Inside a clip, whose form must stay recognisable. */
function isInLimit(site: Site): boolean {
  for (let s: Site | undefined = site; s; s = s.parent) {
    const { node } = s;
    const callee = node.kind === 'call' ? node.callee : undefined;
    if ((callee?.kind === 'member' || callee?.kind === 'name') && /^(f?min|f?max|clip|clamp|saturate|constrain)$/i.test(callee.name)) return true;
  }
  return false;
}

/** Used in arithmetic, so that it must be a number whatever it looks like. */
function isOperand({ node, parent, role }: Site, mode: Mode): boolean {
  if (node.kind !== 'name' && node.kind !== 'member' && node.kind !== 'index') return false;
  const p = parent?.node;
  if (role === 'item' || (role === 'whole' && !p)) return isFull(mode);
  if (p?.kind === 'assign') return role === 'whole' && (p.op !== undefined || isFull(mode));
  if (p?.kind === 'unary') return p.op === '-';
  if (p?.kind === 'binary') return /^[-+*/%]$|\*\*/.test(p.op);
  return p?.kind === 'call' && role === 'argument' && parent!.mayVary && isScalarCall(p);
}

function isLiteral(e: Expression): boolean {
  for (let open: Expression[] = [e]; open.length > 0; ) {
    const x = open.pop()!;
    if (x.kind === 'binary') open.push(x.left, x.right);
    else if (x.kind === 'unary') open.push(x.operand);
    else if (x.kind !== 'number') return false;
  }
  return true;
}

/** Parameters and locals of the subject. */
function namesOf(request: SubjectRequest): string[] {
  if (request.subject.kind !== 'function') return [];
  const out = new Set<string>();
  const { node } = request.subject;
  for (const p of node.parameters) for (const name of patternNames(p.pattern)) out.add(name);
  for (const name of localsOf(node)) out.add(name);
  return [...out].slice(0, 60);
}

/** Names that a function declares, as far as its declarations end before a position. */
export function localsOf(node: FunctionNode, before = Infinity): string[] {
  const out: string[] = [];
  const visit = (x: unknown, depth: number): void => {
    if (depth > 12 || typeof x !== 'object' || x === null) return;
    if (Array.isArray(x)) x.forEach((y) => visit(y, depth + 1));
    else if ('kind' in x && x.kind === 'declare' && 'target' in x) {
      if ((x as unknown as { span: { end: number } }).span.end <= before) out.push(...patternNames(x.target as never));
    }
    else if ('body' in x || 'whenTrue' in x) Object.values(x).forEach((y) => visit(y, depth + 1));
  };
  visit(node.body, 0);
  return out;
}

function entries(text: string, value: OutputValue, base: number, depth: number): { text: string; expr: Expr }[] {
  if (value.kind === 'scalar') return freeSymbol(value.expr) ? [] : [{ text, expr: value.expr }];
  if (value.kind !== 'list' || depth > 1 || value.items.length > 16) return [];
  return value.items.flatMap((item, i) => entries(`${text}[${i + base}]`, item, base, depth + 1));
}
