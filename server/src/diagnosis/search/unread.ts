import type { ClaimResult, SubjectRequest, SubjectResult } from '../../comparison/subject';
import type { Expression } from '../../program/form';
import { patternNames } from '../../program/scan';
import { contains, type Span } from '../../text/span';
import type { Candidate } from './candidates/candidate';
import { localsOf } from './tagged';
import { mapSource, type Site, type SourceMap } from './sites';

/** How far a mistyped slot is from the right one, mostly. */
const FARTHEST = 3;
const MOST_SLOTS = 8;
const MOST_CANDIDATES = 24;

/**
 * Edits that might make claims readable which a fault made unread: an index beyond the list, a slot that another statement
 * fills, a misspelt name. Nothing can be computed there, so only reading the edited text tells.
 */
export function unreadCandidates(request: SubjectRequest, result: SubjectResult, source: string): Candidate[] {
  const map = mapSource(request.program);
  const spans = new Set<Span>();
  for (const { decision, place } of result.claims) {
    if (decision.verdict !== 'unread') continue;
    for (const p of [decision.place, place]) if (p?.file === request.file) spans.add(p.span);
  }
  const inSubject = sitesOf(request, map);
  const numbers = new Set((result.reading?.trace ?? []).filter((t) => t.place.file === request.file).map((t) => `${t.place.span.start} ${t.place.span.end}`));
  const isNear = (s: Site): boolean => [...spans].some((p) => contains(p, s.span.start) && contains(p, s.span.end));
  // An entry that gave no number, wherever the reader noticed.
  const isEmpty = (s: Site): boolean => s.node.kind === 'index' && s.role !== 'object' && !numbers.has(`${s.span.start} ${s.span.end}`);
  const near = inSubject.filter((s) => isNear(s) || isEmpty(s));
  const out: Candidate[] = slotCandidates(request, result.claims, map, source);
  const give = giver(out, source);
  for (const site of near) {
    if (site.node.kind === 'index') indices(request, site, site.node.indices, give, inSubject);
    else if (site.node.kind === 'name' || site.node.kind === 'member') spellings(request, site, site.node.name, give, map);
  }
  const seen = new Set<string>();
  return out
    .sort((a, b) => a.cost - b.cost || a.site.span.start - b.site.span.start)
    .filter((c) => {
      const key = JSON.stringify(c.edits);
      return !seen.has(key) && seen.add(key);
    })
    .slice(0, MOST_CANDIDATES);
}

/** Values written to another slot, which a claim that does not hold is about. */
export function slotCandidates(request: SubjectRequest, claims: readonly ClaimResult[], map: SourceMap, source: string): Candidate[] {
  const wanted = new Set(claims.flatMap((c) => (c.decision.verdict === 'holds' ? [] : (/\[(\d+)\]$/.exec(c.output)?.[1] ?? []))));
  const out: Candidate[] = [];
  const give = giver(out, source);
  for (const site of sitesOf(request, map)) {
    const target = site.assignment?.value === site.node ? site.assignment.target : undefined;
    if (target?.kind !== 'place' || target.target.kind !== 'index') continue;
    const index = target.target.indices.at(-1)!;
    if (index.kind !== 'number') continue;
    for (const slot of wanted) give(site, index.span, slot, 1 + 0.1 * Math.abs(Number(slot) - index.value.toNumber()), target.span);
  }
  return out;
}

/** The places of the function that the claims are about. */
export function sitesOf({ subject }: SubjectRequest, map: SourceMap): Site[] {
  const whole = subject.kind === 'function' ? subject.node.span : undefined;
  return map.sites.filter((s) => !whole || (contains(whole, s.span.start) && contains(whole, s.span.end)));
}

function giver(out: Candidate[], source: string): Give {
  return (site, span, text, cost, whole) => {
    if (source.slice(span.start, span.end) === text) return;
    const old = source.slice(whole.start, whole.end);
    const better = source.slice(whole.start, span.start) + text + source.slice(span.end, whole.end);
    out.push({ site, edits: [{ span, text }], code: 'swapped-symbol', place: whole, cost, label: `slot ${text}`, old, new: better });
  };
}

/** @param whole what the message quotes: the edit is inside it */
type Give = (site: Site, span: Span, text: string, cost: number, whole: Span) => void;

/** Other slots, the nearest first; another name where the index is one. */
function indices(request: SubjectRequest, site: Site, list: readonly Expression[], give: Give, sites: readonly Site[]): void {
  const base = request.program.indexBase;
  for (const index of list.flatMap((e) => (e.kind === 'binary' ? [e.left, e.right] : [e]))) {
    if (index.kind === 'number' && /^\d+$/.test(index.text)) {
      const now = index.value.toNumber();
      for (let k = base; k < base + MOST_SLOTS; k++) {
        const distance = Math.abs(k - now);
        if (distance <= FARTHEST) give(site, index.span, String(k), 0.9 + 0.1 * distance + (k > now ? 0.05 : 0), site.span);
      }
    } else if (index.kind === 'name') {
      for (const name of new Set(sites.flatMap((s) => (s.node.kind === 'name' && isInIndex(s) && s.owner === site.owner ? [s.node.name] : [])))) {
        give(site, index.span, name, 1, site.span);
      }
    }
  }
}

function isInIndex(site: Site): boolean {
  const s = site.parent?.node.kind === 'binary' ? site.parent : site;
  return s.role === 'other' && s.parent?.node.kind === 'index';
}

/** Names of the code and the declaration that are almost the same as one which names nothing here. */
function spellings(request: SubjectRequest, site: Site, name: string, give: Give, map: SourceMap): void {
  const { system } = request.derived;
  const inCode = new Set<string>();
  for (const f of map.functions) {
    if (!contains(f.span, site.span.start)) continue;
    for (const n of [...f.parameters.flatMap((p) => patternNames(p.pattern)), ...localsOf(f, site.span.start)]) inCode.add(n);
  }
  const isMember = site.node.kind === 'member';
  // A name that stands for something is not misspelt, nor is a member that the code names again.
  if (isMember ? map.sites.some((s) => s !== site && s.node.kind === 'member' && s.node.name === name) : inCode.has(name)) return;
  const known = new Set<string>([...[...system.parameters, ...system.inputs, ...system.coordinates].map((d) => d.name), ...inCode]);
  if (isMember) for (const s of map.sites) if (s.node.kind === 'member') known.add(s.node.name);
  const span = { start: site.span.end - name.length, end: site.span.end };
  for (const other of known) {
    const distance = editDistance(name, other);
    if (distance > 0 && distance <= (name.length < 4 ? 1 : 2)) give(site, span, other, 0.9 + 0.2 * distance, site.span);
  }
}

/** Insertions, deletions, replacements and exchanges of neighbours (Damerau's distance, neighbours only). */
function editDistance(a: string, b: string): number {
  if (Math.abs(a.length - b.length) > 2) return 3;
  const rows: number[][] = [Array.from({ length: b.length + 1 }, (_, j) => j)];
  for (let i = 1; i <= a.length; i++) {
    const row = [i];
    for (let j = 1; j <= b.length; j++) {
      let best = Math.min(rows[i - 1]![j]! + 1, row[j - 1]! + 1, rows[i - 1]![j - 1]! + (a[i - 1] === b[j - 1] ? 0 : 1));
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1]) best = Math.min(best, rows[i - 2]![j - 2]! + 1);
      row.push(best);
    }
    rows.push(row);
  }
  return rows[a.length]![b.length]!;
}
