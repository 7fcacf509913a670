import type { ClaimResult, SubjectRequest, SubjectResult } from '../../comparison/subject';
import type { Expression } from '../../program/form';
import type { Span } from '../../text/span';
import { solvePlace, type Needed } from './angelic';
import type { Atom, Candidate, Maker, Scene, Spot } from './candidates/candidate';
import { agree } from './candidates/candidate';
import { exchanges } from './candidates/exchanges';
import { functions, powers } from './candidates/functions';
import { names } from './candidates/names';
import { constants } from './candidates/numbers';
import { drops, groupings, operators, signs } from './candidates/operators';
import { insertions, knownTerms } from './candidates/terms';
import { LogFit } from './log-fit';
import { Model, type Change } from './model';
import { mapSource, type Site, type SourceMap } from './sites';
import { readTagged, type Evaluation } from './tagged';

/** What a search over one function found. */
export interface SearchResult {
  readonly model: Model;
  readonly map: SourceMap;
  /** Edits that make all claims right at the sampled states, likeliest first; reading the edited text must confirm them. */
  readonly candidates: readonly Candidate[];
  /** Edits that were not tried by numbers. */
  readonly untried: readonly Candidate[];
  /** Places at which some value would make all claims right, the smallest first. */
  readonly places: readonly Site[];
  /** Every edit tried, for the search of pairs. */
  readonly all: readonly Candidate[];
}

const BASIC: readonly Maker[] = [signs, operators, drops, groupings, names, constants, functions, powers];

export function search(request: SubjectRequest, result: SubjectResult, source: string): SearchResult | undefined {
  const { derived, budget, program, file } = request;
  if (derived.system.near || !result.reading) return undefined;
  const claims = result.claims;
  const starts = result.reading.trace.filter((t) => t.place.file === file).map((t) => t.place.span.start).sort((a, b) => a - b);
  const map = mapSource(program, (span) => containsAny(starts, span));
  const tagged = readTagged(request, claims, map);
  const model = tagged && Model.make(derived, claims, tagged);
  if (!tagged || !model || !model.targets.some((t) => t.differs)) return undefined;

  const scene = makeScene(request, model, map, source);
  const terms = knownTerms(model, wantedTerms(claims, derived.residuals));
  const symbols = [...derived.system.parameters, ...derived.system.inputs].map((p) => p.symbol);
  const fit = new LogFit(
    symbols.flatMap((expr) => {
      const value = model.column(expr);
      return value ? [{ expr, value }] : [];
    }),
    model.n,
  );
  const makers = [...BASIC, insertions(terms, fit)];

  const passed: Candidate[] = [];
  const untried: Candidate[] = [];
  const all: Candidate[] = [];
  const places: Site[] = [];
  const repeated = new Map<string, Candidate[]>();
  for (const site of map.sites) {
    if (!budget.look()) break;
    const evaluations = model.evaluations(site);
    if (evaluations.length === 0) continue;
    const values = evaluations.map((e) => model.value(e.read));
    if (values.some((v) => v === undefined || !v.every(Number.isFinite))) continue;
    const needed = solvePlace(model, site, evaluations);
    const spot: Spot = {
      site,
      evaluations,
      values: values as Float64Array[],
      text: source.slice(site.span.start, site.span.end),
      need: needed.kind === 'values' ? needed.need : undefined,
    };
    if (needed.kind === 'values') places.push(site);
    const open: Candidate[] = [];
    const give = (c: Candidate): void => {
      all.push(c);
      if (!c.values) untried.push(c);
      else if (needed.kind === 'values') {
        if (agree(c.values[0]!, needed.need)) open.push(c);
      } else if (needed.kind === 'open') open.push(c);
    };
    const plain = needed.kind === 'values' ? spot : { ...spot, need: undefined };
    for (const make of makers) make(scene, plain, give);
    passed.push(...confirmed(model, open));
    remember(repeated, spot, all, site);
  }
  exchanges(scene, map.siblings, (s) => model.evaluations(s), (c) => {
    all.push(c);
    passed.push(...confirmed(model, [c]));
  });
  passed.push(...everywhere(model, repeated));
  passed.sort(byCost);
  places.sort((a, b) => a.span.end - a.span.start - (b.span.end - b.span.start));
  untried.sort(byCost);
  return { model, map, candidates: passed, untried, places, all };
}

function byCost(a: Candidate, b: Candidate): number {
  return a.cost - b.cost || size(a) - size(b) || a.site.span.start - b.site.span.start;
}

function size(c: Candidate): number {
  return c.edits.reduce((t, e) => t + e.text.length + (e.span.end - e.span.start), 0);
}

/** Runs candidates in the model; keeps those that make every claim right. */
export function confirmed(model: Model, candidates: readonly Candidate[]): Candidate[] {
  const out: Candidate[] = [];
  model.outcomes(candidates.map((c) => changeOf(model, c)), (k, found) => {
    if (model.allHold(found)) out.push(candidates[k]!);
  });
  return out;
}

export function changeOf(model: Model, c: Candidate): Change {
  const one = (site: Site, values: readonly Float64Array[]): Change =>
    model.evaluations(site).map((evaluation, k) => ({ evaluation, value: values[k]! }));
  return [...one(c.site, c.values!), ...(c.also ?? []).flatMap((a) => one(a.site, a.values))];
}

/** Candidates of places with the same text, to be made together: one wrong name used twice. */
function remember(repeated: Map<string, Candidate[]>, spot: Spot, all: readonly Candidate[], site: Site): void {
  if (spot.text.length > 60) return;
  for (let i = all.length - 1; i >= 0 && all[i]!.site === site; i--) {
    const c = all[i]!;
    if (!c.values) continue;
    const key = `${spot.text}\u0000${c.label}`;
    const list = repeated.get(key);
    if (list) list.push(c);
    else repeated.set(key, [c]);
  }
}

const MOST_REPEATS = 8;

function everywhere(model: Model, repeated: ReadonlyMap<string, readonly Candidate[]>): Candidate[] {
  const joined: Candidate[] = [];
  for (const list of repeated.values()) {
    if (list.length < 2 || list.length > MOST_REPEATS) continue;
    const [first, ...rest] = list as [Candidate, ...Candidate[]];
    joined.push({
      ...first,
      edits: list.flatMap((c) => c.edits),
      cost: first.cost + 0.8 + 0.2 * rest.length,
      also: rest.map((c) => ({ site: c.site, values: c.values! })),
    });
  }
  return confirmed(model, joined.slice(0, 600));
}

function containsAny(starts: readonly number[], span: Span): boolean {
  let low = 0;
  let high = starts.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (starts[middle]! < span.start) low = middle + 1;
    else high = middle;
  }
  return low < starts.length && starts[low]! < span.end;
}

function wantedTerms(claims: readonly ClaimResult[], residuals: readonly import('../../expression/node').Expr[]) {
  const own = claims.flatMap((c) => (c.expected && c.decision.verdict === 'differs' && c.expected.op !== 'symbol' ? [c.expected] : []));
  return [...own, ...residuals];
}

function makeScene(request: SubjectRequest, model: Model, map: SourceMap, source: string): Scene {
  const atoms = new Map<string, Atom>();
  const add = (atom: Atom): void => {
    const key = `${atom.text}\u0000${atom.owner?.span.start ?? ''}`;
    const known = atoms.get(key);
    if (!known || atom.from < known.from) atoms.set(key, atom);
  };
  for (const site of map.sites) {
    const { node } = site;
    if (!['name', 'member', 'index', 'call'].includes(node.kind) || site.span.end - site.span.start > 40) continue;
    const evaluations = model.tagged.evaluations.get(site);
    if (evaluations?.length !== 1) continue;
    const value = model.value(evaluations[0]!.read);
    if (!value || !value.every(Number.isFinite)) continue;
    add({ text: source.slice(site.span.start, site.span.end), value, from: 0, owner: site.owner });
  }
  const subject = request.subject.kind === 'function' ? request.subject.node : undefined;
  for (const { text, expr } of model.tagged.names) {
    const value = model.value(expr);
    if (value?.every(Number.isFinite)) add({ text, value, from: definedAt(map, text), owner: subject });
  }
  const list = [...atoms.values()];
  for (const a of list) if (a.from === 0) (a as { from: number }).from = definedAt(map, a.text);
  return {
    model,
    program: request.program,
    source,
    atoms: list,
    siteOf: (e) => map.byNode.get(e),
    valuesOf: (e: Expression, evaluations: readonly Evaluation[]) => {
      const site = map.byNode.get(e);
      const own = site && model.tagged.evaluations.get(site);
      if (own?.length === evaluations.length) {
        const values = own.map((x) => model.value(x.read));
        return values.every((v) => v !== undefined) ? values : undefined;
      }
      const literal = literalValue(e);
      return literal === undefined ? undefined : evaluations.map(() => new Float64Array(model.n).fill(literal));
    },
  };
}

function literalValue(e: Expression): number | undefined {
  if (e.kind === 'number') return e.value.toNumber();
  if (e.kind === 'unary' && e.op === '-' && e.operand.kind === 'number') return -e.operand.value.toNumber();
  return undefined;
}

/** Where a name of the function has its value: the end of its declaration; 0 for parameters and what comes from outside. */
function definedAt(map: SourceMap, text: string): number {
  const name = /^[\p{L}_$][\p{L}\p{N}_$]*/u.exec(text)?.[0];
  let at = 0;
  for (const s of map.sites) {
    const a = s.assignment;
    if (a?.isDeclaration && a.target.kind === 'name' && a.target.name === name) at = Math.max(at, a.span.end);
  }
  return at;
}

export type { Needed };
