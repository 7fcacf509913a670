import { compareDeclarations } from '../comparison/equivalence';
import type { Expr } from '../expression/node';
import { monomialExpr, normalForm } from '../expression/normal-form';
import { text } from '../expression/print';
import { Rational } from '../expression/rational';
import { equationsOfMotion, solvedAccelerations } from '../mechanics/equations';
import type { Declared } from '../mechanics/system';
import { Budget } from '../text/budget';
import type { ClaimedFunction, Physics, PhysicsSystem } from './physics';

/** What became of a quantity: terms it gained and lost, and terms that have another factor now. */
export interface QuantityChange {
  /** `V`, `x''`, `equation of x` */
  readonly quantity: string;
  readonly gained: readonly string[];
  readonly lost: readonly string[];
  readonly became: readonly { readonly before: string; readonly after: string }[];
}

export interface ClaimChange {
  readonly function: string;
  readonly output: string;
  readonly quantity: string;
  /** Undefined where the claim is not made on that side. */
  readonly before?: string;
  readonly after?: string;
}

export interface BindingChange {
  readonly function: string;
  readonly code: string;
  readonly before?: string;
  readonly after?: string;
}

export interface SystemChange {
  readonly name: string;
  readonly file: string;
  /** `same`: nothing to tell. `rewritten`: text of declaration or code changed, the physics did not. */
  readonly status: 'same' | 'added' | 'removed' | 'renamed' | 'rewritten' | 'changed';
  /** Of a renamed one. */
  readonly before?: string;
  /** How the two declarations compare as mechanics. */
  readonly equations?: 'same' | 'same motion' | 'differ' | 'undecided';
  /** Why the equations are the same though the energies differ, or why nothing was decided. */
  readonly note?: string;
  /** Coordinates, parameters and inputs that came or went. */
  readonly symbols: readonly { readonly name: string; readonly kind: string; readonly change: 'added' | 'removed' }[];
  readonly quantities: readonly QuantityChange[];
  readonly claims: readonly ClaimChange[];
  readonly bindings: readonly BindingChange[];
  /** Functions whose code changed. */
  readonly code: readonly string[];
}

/** What changed in terms of physics, system by system, in the order of names. */
export function physicsChanges(before: Physics, after: Physics, milliseconds: number): SystemChange[] {
  const key = (s: PhysicsSystem) => s.name;
  const gone = before.systems.filter((s) => !after.systems.some((t) => key(t) === key(s)));
  const come = after.systems.filter((s) => !before.systems.some((t) => key(t) === key(s)));
  const out: SystemChange[] = [];
  for (const s of before.systems) {
    const t = after.systems.find((x) => key(x) === key(s) && x.file === s.file) ?? after.systems.find((x) => key(x) === key(s));
    if (t) out.push(systemChange(s, t, milliseconds));
  }
  for (const s of gone) {
    const i = come.findIndex((t) => equivalence(s, t, milliseconds).kind === 'same');
    if (i < 0) {
      out.push(whole(s, 'removed'));
      continue;
    }
    const [t] = come.splice(i, 1) as [PhysicsSystem];
    out.push({ ...systemChange(s, t, milliseconds), status: 'renamed', before: s.name });
  }
  for (const t of come) out.push(whole(t, 'added'));
  return out.sort((a, b) => (a.name < b.name ? -1 : a.name > b.name ? 1 : 0));
}

function whole(s: PhysicsSystem, status: 'added' | 'removed'): SystemChange {
  const claims = s.functions.flatMap((f) =>
    f.claims.map((c): ClaimChange => ({ function: f.name, output: c.output, quantity: c.quantity, ...(status === 'added' ? { after: c.verdict } : { before: c.verdict }) })),
  );
  return { name: s.name, file: s.file, status, symbols: [], quantities: [], claims, bindings: [], code: [] };
}

function systemChange(a: PhysicsSystem, b: PhysicsSystem, milliseconds: number): SystemChange {
  const isSameText = a.declaration === b.declaration;
  const { kind, note } = isSameText && !definedByCode(a) ? { kind: 'same' as const, note: undefined } : equivalence(a, b, milliseconds);
  const symbols = symbolChanges(a, b);
  const quantities = isSameText && !definedByCode(a) ? [] : quantityChanges(a, b);
  const claims = claimChanges(a.functions, b.functions);
  const bindings = bindingChanges(a.functions, b.functions);
  const code = b.functions.filter((f) => a.functions.some((g) => g.name === f.name && g.file === f.file && g.code !== f.code)).map((f) => f.name);
  const changed = kind !== 'same' || symbols.length > 0 || quantities.length > 0 || claims.length > 0 || bindings.length > 0;
  const status = changed ? 'changed' : !isSameText || code.length > 0 ? 'rewritten' : 'same';
  return { name: b.name, file: b.file, status, equations: kind, ...(note === undefined ? {} : { note }), symbols, quantities, claims, bindings, code };
}

function definedByCode(s: PhysicsSystem): boolean {
  return s.entry.energies.size > 0;
}

function equivalence(a: PhysicsSystem, b: PhysicsSystem, milliseconds: number): { readonly kind: NonNullable<SystemChange['equations']>; readonly note?: string } {
  // Energies that code defines are not in the block alone; their terms are compared below.
  if (definedByCode(a) || definedByCode(b)) {
    return quantityChanges(a, b).length === 0 ? { kind: 'same' } : { kind: 'undecided', note: 'its energies are defined by code' };
  }
  const e = compareDeclarations(a.entry.derived.system, b.entry.block, new Budget({ milliseconds }));
  switch (e.kind) {
    case 'same':
      return { kind: 'same' };
    case 'constant':
      return { kind: 'same', note: 'the Lagrangians differ by a constant' };
    case 'gauge':
      return { kind: 'same', note: 'the Lagrangians differ by the total time derivative of a function of coordinates and time' };
    case 'same motion':
      return { kind: 'same motion', note: 'the accelerations are the same; momenta, energies and mass matrix are not' };
    case 'differ':
      return { kind: 'differ' };
    case 'undecided':
      return { kind: 'undecided', note: e.reason };
  }
}

function symbolChanges(a: PhysicsSystem, b: PhysicsSystem): SystemChange['symbols'] {
  const all = (s: PhysicsSystem): readonly Declared[] => [...s.entry.derived.system.coordinates, ...s.entry.derived.system.parameters, ...s.entry.derived.system.inputs];
  const missing = (from: PhysicsSystem, other: PhysicsSystem) => all(from).filter((d) => !all(other).some((e) => e.name === d.name && e.kind === d.kind));
  return [
    ...missing(b, a).map((d) => ({ name: d.name, kind: d.kind, change: 'added' as const })),
    ...missing(a, b).map((d) => ({ name: d.name, kind: d.kind, change: 'removed' as const })),
  ];
}

/** Names of terms are texts in one order, so that terms of two systems can be told to be the same. */
type Terms = ReadonlyMap<string, { readonly coefficient: Rational; readonly text: string }>;

const MOST_TERMS = 200;

function termsOf(s: PhysicsSystem, e: Expr): Terms {
  const { graph } = s.entry.derived.system;
  const form = normalForm(graph, e, MOST_TERMS);
  if (!form) return new Map([[text(e, { limit: 4000 }), { coefficient: Rational.ONE, text: text(e) }]]);
  return new Map(form.terms.map((m) => [text(monomialExpr(graph, { ...m, coefficient: Rational.ONE })), { coefficient: m.coefficient, text: text(monomialExpr(graph, m)) }]));
}

function quantitiesOf(s: PhysicsSystem): Map<string, Terms> {
  const { derived } = s.entry;
  const { system } = derived;
  const { graph } = system;
  const out = new Map<string, Terms>();
  if (system.blocked) return out;
  out.set('T', termsOf(s, system.T ?? graph.zero));
  out.set('V', termsOf(s, system.V ?? graph.zero));
  if (!system.T || !system.V) out.set('L', termsOf(s, system.L));
  out.set('D', termsOf(s, system.D));
  system.coordinates.forEach((c, i) => out.set(`Q[${c.name}]`, termsOf(s, system.Q[i]!)));
  system.constraints.forEach((c, i) => out.set(`constraint ${i + 1}`, termsOf(s, c.expr)));
  const solved = solvedAccelerations(derived);
  const apart = solved?.map((a) => ({ name: `${a.coordinate.name}''`, terms: termsOf(s, a.expr) }));
  // A quotient is one term, which says nothing of what changed in it; the equation of motion does.
  if (apart?.every((a) => [...a.terms.keys()].every((k) => !/\)\/|\/\(|\^\(?-/.test(k)))) for (const a of apart) out.set(a.name, a.terms);
  else for (const e of equationsOfMotion(derived)) out.set(`equation of ${e.coordinate.name}`, termsOf(s, graph.subtract(e.left, e.right)));
  return out;
}

function quantityChanges(a: PhysicsSystem, b: PhysicsSystem): QuantityChange[] {
  const [before, after] = [quantitiesOf(a), quantitiesOf(b)];
  const names = [...new Set([...before.keys(), ...after.keys()])].filter((n) => before.has(n) && after.has(n));
  return names.flatMap((quantity): QuantityChange[] => {
    const [x, y] = [before.get(quantity)!, after.get(quantity)!];
    const gained = [...y].filter(([k]) => !x.has(k)).map(([, t]) => t.text);
    const lost = [...x].filter(([k]) => !y.has(k)).map(([, t]) => t.text);
    const became = [...y].flatMap(([k, t]) => {
      const old = x.get(k);
      return old && !old.coefficient.equals(t.coefficient) ? [{ before: old.text, after: t.text }] : [];
    });
    return gained.length + lost.length + became.length === 0 ? [] : [{ quantity, gained, lost, became }];
  });
}

function claimChanges(a: readonly ClaimedFunction[], b: readonly ClaimedFunction[]): ClaimChange[] {
  const list = (fs: readonly ClaimedFunction[]) => new Map(fs.flatMap((f) => f.claims.map((c) => [JSON.stringify([f.name, c.output, c.quantity]), { f, c }] as const)));
  const [before, after] = [list(a), list(b)];
  const out: ClaimChange[] = [];
  for (const key of new Set([...before.keys(), ...after.keys()])) {
    const [x, y] = [before.get(key), after.get(key)];
    if (x?.c.verdict === y?.c.verdict) continue;
    const { f, c } = (y ?? x)!;
    out.push({ function: f.name, output: c.output, quantity: c.quantity, ...(x ? { before: x.c.verdict } : {}), ...(y ? { after: y.c.verdict } : {}) });
  }
  return out;
}

function bindingChanges(a: readonly ClaimedFunction[], b: readonly ClaimedFunction[]): BindingChange[] {
  const out: BindingChange[] = [];
  for (const f of b) {
    const old = a.find((g) => g.name === f.name);
    if (!old) continue;
    for (const code of new Set([...old.bindings.keys(), ...f.bindings.keys()])) {
      const [before, after] = [old.bindings.get(code), f.bindings.get(code)];
      // A name that is no more, or new, is a matter of code; what it means is not.
      if (before !== undefined && after !== undefined && before !== after) out.push({ function: f.name, code, before, after });
    }
  }
  return out;
}
