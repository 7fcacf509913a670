import { polynomials } from '../../comparison/near';
import type { ClaimResult, SubjectRequest, SubjectResult } from '../../comparison/subject';
import type { Expr } from '../../expression/node';
import { reachable } from '../../expression/reach';
import { contains } from '../../text/span';
import type { Derived } from '../../mechanics/lagrange';
import { solvePlace, type Needed } from './angelic';
import { assignments } from './candidates/assignments';
import { brackets } from './candidates/brackets';
import type { Candidate, Maker, Scene, Spot } from './candidates/candidate';
import { agree } from './candidates/candidate';
import { exchanges } from './candidates/exchanges';
import { functions, powers } from './candidates/functions';
import { names } from './candidates/names';
import { constants } from './candidates/numbers';
import { drops, groupings, operators, signs } from './candidates/operators';
import { vectorEdits } from './candidates/vectors';
import { insertions, knownTerms } from './candidates/terms';
import { LogFit } from './log-fit';
import { findPairs, type CandidatePair } from './pairs';
import { Model, type Change } from './model';
import { mapSource, type Site, type SourceMap } from './sites';
import { makeScene } from './scene';
import { sitesOf, slotCandidates } from './unread';
import { modesFor, readTagged, type Evaluation } from './tagged';

/** Operations of trials; some seconds. */
const MOST_WORK = 600_000;
const MOST_PAIR_WORK = 600_000;
const MOST_HALVES = 12;
/** Two edits are to be small ones. */
const DEAREST_HALF = 2.3;

const BASIC: readonly Maker[] = [signs, assignments, operators, drops, groupings, brackets, names, constants, functions, powers];

/** The search for an edit that makes all claims of a function right, in stages from cheap to dear. */
export class Search {
  /** Places at which some value would make all claims right, the smallest first. */
  readonly places: Site[] = [];
  /** Edits that numbers can't try. */
  readonly untried: Candidate[] = [];
  /** Every edit thought of so far. */
  readonly all: Candidate[] = [];
  private readonly needs = new Map<Site, Needed>();
  private readonly scene: Scene;
  private readonly makers: readonly Maker[];
  private readonly repeated = new Map<string, Candidate[]>();

  private constructor(
    private readonly request: SubjectRequest,
    private readonly claims: readonly ClaimResult[],
    readonly model: Model,
    readonly map: SourceMap,
    private readonly source: string,
  ) {
    const { system } = request.derived;
    const terms = knownTerms(model, wantedTerms(request.derived, claims));
    this.scene = makeScene(request, model, map, source, functionsOf(terms.map((t) => t.expr)));
    const symbols = [...system.parameters, ...system.inputs].map((p) => p.symbol);
    const bases = symbols.flatMap((expr) => {
      const value = model.column(expr);
      return value ? [{ expr, value }] : [];
    });
    this.makers = [...BASIC, insertions(terms, new LogFit(bases, model.n), model.n)];
    for (const site of map.sites) {
      if (!this.mayGoOn) break;
      const evaluations = model.evaluations(site);
      if (evaluations.length === 0 || !this.valuesOf(evaluations)) continue;
      this.needs.set(site, solvePlace(model, site, evaluations));
    }
    for (const [site, needed] of this.needs) if (needed.kind === 'values' || (needed.kind === 'open' && needed.guess)) this.places.push(site);
    this.places.sort((a, b) => a.span.end - a.span.start - (b.span.end - b.span.start));
  }

  static start(request: SubjectRequest, result: SubjectResult, source: string): Search | undefined {
    const { derived, program } = request;
    if (!result.reading) return undefined;
    const map = mapSource(program);
    const claims = expanded(derived, result.claims);
    for (const mode of modesFor(map)) {
      const tagged = readTagged(request, claims, map, mode);
      const model = tagged && Model.make(derived, claims, tagged);
      if (!model) continue;
      // Code that keeps more than the orders declared is right all the same, and not as numbers.
      if (derived.system.near && model.targets.some((t) => t.differs && claims[t.index]!.decision.verdict === 'holds')) return undefined;
      return model.targets.some((t) => t.differs) ? new Search(request, claims, model, map, source) : undefined;
    }
    return undefined;
  }

  /** Edits at places where the value needed is known. Candidates are right at all sampled states, likeliest first. */
  known(): Candidate[] {
    return this.at('values').sort(byCost);
  }

  /** Edits everywhere else; rows exchanged; the same edit at several places. */
  open(): Candidate[] {
    const passed = this.at('open');
    for (const [site, needed] of this.needs) if (needed.kind === 'none') this.make(site, needed);
    const swaps: Candidate[] = [];
    exchanges(this.scene, this.map.siblings, (s) => this.model.evaluations(s), (c) => swaps.push(c));
    this.all.push(...swaps);
    if (this.mayGoOn) passed.push(...confirmed(this.model, swaps), ...everywhere(this.model, this.repeated));
    this.untried.push(...vectorEdits(sitesOf(this.request, this.map), (s) => this.model.evaluations(s).length > 0, this.source));
    this.untried.push(...slotCandidates(this.request, this.claims, this.map, this.source));
    this.untried.sort(byCost);
    return passed.sort(byCost);
  }

  /** Edits that make some claims right and none worse, where one place can't mend all; most claims first. */
  partial(): Candidate[] {
    const out: { candidate: Candidate; fixes: number }[] = [];
    for (const [site, needed] of this.needs) {
      if (needed.kind !== 'none' || !needed.partial || !this.mayGoOn) continue;
      const { need, fixes } = needed.partial;
      const spot = this.spotOf(site, need);
      for (const make of this.makers) {
        make(this.scene, spot, (c) => {
          if (c.values && agree(c.values[0]!, need)) out.push({ candidate: c, fixes: fixes.length });
        });
      }
    }
    return out.sort((a, b) => b.fixes - a.fixes || byCost(a.candidate, b.candidate)).map((x) => x.candidate);
  }

  private spotOf(site: Site, need: Float64Array | undefined): Spot {
    const evaluations = this.model.evaluations(site);
    return { site, evaluations, values: this.valuesOf(evaluations)!, text: this.source.slice(site.span.start, site.span.end), need };
  }

  /** Two edits at once; after `known` and `open`. */
  pairs(): CandidatePair[] {
    // What a place needs alone says nothing about what it needs together with another: everything is thought of again.
    for (const [site, needed] of this.needs) {
      if (needed.kind !== 'values' || !this.mayGoOn) continue;
      const spot = this.spotOf(site, undefined);
      for (const make of this.makers) make(this.scene, spot, (c) => this.all.push(c));
    }
    if (!this.mayGoOn) return [];
    return findPairs(this.model, this.all, (c) => changeOf(this.model, c), this.request.budget);
  }

  /**
   * First halves of two edits: with each of them supposed, some place is found that one more edit mends. Those with the
   * likeliest second half come first.
   */
  halves(): Candidate[] {
    const { model } = this;
    const found: { first: Candidate; cost: number }[] = [];
    const from = model.work;
    for (const first of distinctEffects(model, this.all.filter((c) => c.values && c.cost <= DEAREST_HALF).sort(byCost))) {
      if (model.work - from > MOST_PAIR_WORK || found.length >= MOST_HALVES || !this.request.budget.look()) break;
      const cost = model.during(changeOf(model, first), () => this.secondCost(first));
      if (cost !== undefined) found.push({ first, cost: first.cost + cost });
    }
    return found.sort((a, b) => a.cost - b.cost).map((f) => f.first);
  }

  private secondCost(first: Candidate): number | undefined {
    const { model } = this;
    const wrong = model.targets.filter((t) => t.differs);
    let best: number | undefined;
    for (const site of this.needs.keys()) {
      const evaluations = model.evaluations(site);
      if (evaluations.length !== 1 || site === first.site || !wrong.every((t) => model.reaches(site, t))) continue;
      const needed = solvePlace(model, site, evaluations);
      if (needed.kind !== 'values') continue;
      const spot = this.spotOf(site, needed.need);
      for (const make of this.makers) {
        make(this.scene, spot, (c) => {
          if (c.values && c.cost <= DEAREST_HALF && c.cost < (best ?? Infinity) && agree(c.values[0]!, needed.need)) best = c.cost;
        });
      }
    }
    return best;
  }

  /** Bounded by work, so that what is found does not depend on how fast the machine is. */
  private get mayGoOn(): boolean {
    return this.model.work < MOST_WORK && this.request.budget.look();
  }

  private at(kind: Needed['kind']): Candidate[] {
    const passed: Candidate[] = [];
    for (const [site, needed] of this.needs) {
      if (needed.kind !== kind) continue;
      if (!this.mayGoOn) break;
      passed.push(...confirmed(this.model, this.make(site, needed)));
    }
    return passed;
  }

  /** Makes the candidates of a place; returned are those worth trying. */
  private make(site: Site, needed: Needed): Candidate[] {
    const spot = this.spotOf(site, needed.kind === 'values' ? needed.need : undefined);
    const worth: Candidate[] = [];
    const from = this.all.length;
    const more = this.indirectness(site);
    const give = (made: Candidate): void => {
      const c = more > 0 && made.code !== 'swapped-symbol' ? { ...made, cost: made.cost + more } : made;
      this.all.push(c);
      if (!c.values) this.untried.push(c);
      else if (needed.kind === 'values' ? agree(c.values[0]!, needed.need) : needed.kind === 'open') worth.push(c);
    };
    for (const make of this.makers) make(this.scene, spot, give);
    if (needed.kind === 'open' && needed.guess) for (const make of this.makers) make(this.scene, { ...spot, need: needed.guess }, give);
    if (spot.text.length <= 60) this.remember(spot.text, this.all.slice(from));
    return worth;
  }

  /**
   * A fault is sooner where a local gets its value than where it is used, and sooner in the function itself than in a helper,
   * which others may share.
   */
  private indirectness({ node, owner, span }: Site): number {
    const { subject } = this.request;
    const isHelper = subject.kind === 'function' && !contains(subject.node.span, span.start);
    const isUse = node.kind === 'name' && this.map.sites.some((s) => s.assignment?.value === s.node && s.owner === owner && s.assignment.target.kind === 'name' && s.assignment.target.name === node.name);
    return (isHelper ? 0.15 : 0) + (isUse ? 0.15 : 0);
  }

  /** Candidates of places with the same text, to be made together: one wrong name used twice. */
  private remember(text: string, candidates: readonly Candidate[]): void {
    for (const c of candidates) {
      if (!c.values) continue;
      const key = `${text}\u0000${c.label}`;
      const list = this.repeated.get(key);
      if (list) list.push(c);
      else this.repeated.set(key, [c]);
    }
  }

  private valuesOf(evaluations: readonly Evaluation[]): Float64Array[] | undefined {
    const values = evaluations.map((e) => this.model.valueAt(e));
    return values.every((v) => v?.every(Number.isFinite)) ? (values as Float64Array[]) : undefined;
  }
}

/** Of edits that do the same to the claims, the first. */
function distinctEffects(model: Model, candidates: readonly Candidate[]): Candidate[] {
  const seen = new Set<string>();
  const out: Candidate[] = [];
  model.firstLook(candidates.map((c) => changeOf(model, c)), (k, found) => {
    const key = model.targets.map((t) => Array.from(found(t), (x) => x.toPrecision(7)).join()).join(';');
    if (seen.has(key) || key.includes('NaN')) return;
    seen.add(key);
    out.push(candidates[k]!);
  });
  return out;
}

function byCost(a: Candidate, b: Candidate): number {
  return a.cost - b.cost || size(a) - size(b) || a.site.span.start - b.site.span.start;
}

function size(c: Candidate): number {
  return c.edits.reduce((t, e) => t + e.text.length + (e.span.end - e.span.start), 0);
}

/** Runs candidates in the model; keeps those that make every claim right. */
export function confirmed(model: Model, candidates: readonly Candidate[]): Candidate[] {
  return model.successes(candidates.map((c) => changeOf(model, c))).map((k) => candidates[k]!);
}

export function changeOf(model: Model, c: Candidate): Change {
  const one = (site: Site, values: readonly Float64Array[]): Change =>
    model.evaluations(site).map((evaluation, k) => ({ evaluation, value: values[k]! }));
  return [...one(c.site, c.values!), ...(c.also ?? []).flatMap((a) => one(a.site, a.values))];
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

/** Where the declaration is about an expansion, claims with the expanded value. */
function expanded(derived: Derived, claims: readonly ClaimResult[]): readonly ClaimResult[] {
  if (!derived.system.near) return claims;
  const known = claims.filter((c) => c.expected);
  const values = polynomials(derived, known.map((c) => c.expected!));
  return claims.map((c) => (c.expected ? { ...c, expected: values[known.indexOf(c)]! } : c));
}

/** What the code may be made of: claims that are no accelerations, the equations, and the entries of the mass matrix. */
function wantedTerms(derived: Derived, claims: readonly ClaimResult[]): Expr[] {
  const own = claims.flatMap((c) => (c.expected && c.decision.verdict === 'differs' && c.expected.op !== 'symbol' ? [c.expected] : []));
  return [...own, ...derived.residuals, ...new Set(derived.massMatrix)];
}

function functionsOf(terms: readonly Expr[]): Expr[] {
  return reachable(terms).filter((e) => e.op === 'sin' || e.op === 'cos' || e.op === 'tan');
}
