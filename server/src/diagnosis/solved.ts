import type { SubjectRequest, SubjectResult } from '../comparison/subject';
import { derivative } from '../expression/differentiate';
import type { Expr } from '../expression/node';
import { symbolsOf } from '../expression/reach';
import { substitute } from '../expression/substitute';
import { tidy } from '../mechanics/equations';
import type { Span } from '../text/span';
import type { Candidate } from './search/candidates/candidate';
import { Binding, replaceSite } from './search/edits';
import type { Search } from './search/search';
import type { Site } from './search/sites';
import { namesAt } from './names-in-code';
import { closedForm, inCode, symbolNames } from './own-names';

const MOST_PLACES = 10;
const MOST_TRIED = 4;
/** Longer than this it is no repair of a place but another formula. */
const LONGEST = 60;
const COST = 9;

/**
 * Edits for places whose value alone is wrong: the equation of a claim is solved for the place, which claims are affine in,
 * and what comes out is written in the code's own names. Needs no guess at what was meant, so it comes last.
 */
export function solvedPlaces(request: SubjectRequest, result: SubjectResult, search: Search, source: string): Candidate[] {
  const out: Candidate[] = [];
  for (const site of search.places.slice(0, MOST_PLACES)) {
    if (!request.budget.look()) break;
    // A whole output written anew says nothing about the fault: it is offered as such, and only where asked for.
    if (result.claims.some((c) => c.place && covers(site.span, c.place.span))) continue;
    const text = writtenFor(request, result, search, site, source);
    if (text === undefined) continue;
    const old = source.slice(site.span.start, site.span.end);
    out.push({ site, edits: [replaceSite(site, source, text, Binding.sum)], code: 'differs', cost: COST, label: 'solved', old, new: text });
  }
  // The place at which the least has to be written is the likeliest one.
  return out.sort((x, y) => x.new.length - y.new.length).slice(0, MOST_TRIED);
}

function covers(outer: Span, inner: Span): boolean {
  return outer.start <= inner.start && inner.end <= outer.end;
}

function writtenFor(request: SubjectRequest, result: SubjectResult, { model, map }: Search, site: Site, source: string): string | undefined {
  const g = request.derived.system.graph;
  const { tagged } = model;
  const evaluations = tagged.evaluations.get(site) ?? [];
  if (evaluations.length !== 1) return undefined;
  const { tag, read } = evaluations[0]!;
  const others = new Map<Expr, Expr>();
  for (const list of tagged.evaluations.values()) for (const e of list) if (e.tag !== tag) others.set(e.tag, g.zero);
  for (const [i, found] of tagged.found) {
    const claim = result.claims[i]!;
    if (claim.decision.verdict !== 'differs' || !symbolsOf(found).includes(tag)) continue;
    const expected = closedForm(request.derived, claim);
    if (!expected || !claim.found) continue;
    const [own, plain] = substitute(g, [found, read], others) as [Expr, Expr];
    const slope = derivative(g, own, tag);
    if (slope === g.zero || symbolsOf(slope).includes(tag)) continue;
    const [before] = substitute(g, [own], new Map([[tag, g.zero]])) as [Expr];
    const needed = tidy(g, g.sum([plain, g.divide(g.subtract(expected, before), slope)]));
    const names = namesAt(request, result.reading, map, site, source);
    if (!symbolNames(needed).every((n) => names.has(n))) continue;
    const text = inCode(needed, names, request.program.language, source);
    if (text !== undefined && text.length <= LONGEST) return text;
  }
  return undefined;
}
