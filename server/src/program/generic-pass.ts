import type { SymbolData } from '../expression/node';
import type { Place } from '../text/span';
import type { Pattern, Statement } from './form';
import { genericAt } from './generics';
import { DEAD, type Machine } from './machine';
import { scalarOf } from './numbers';
import { memberPath, pathOf } from './paths';
import { nodesOf, patternNames, placesOf } from './scan';
import type { Scope, Variable } from './scope';
import type { Outcome } from './flow';
import type { Expression } from './form';
import { readVariable } from './variables';
import { isData, unread, type Content, type Value } from './values';

/** Where a pass begins: the place in the source, and why all that is known is one pass, in words that begin a sentence. */
export interface PassStart {
  readonly place: Place;
  readonly origin?: string;
}

/**
 * One pass of a loop whose number of passes is not known (or does not matter): what the body writes starts from a generic
 * value, the one its name means.
 */
export function genericPass(m: Machine, scope: Scope, start: PassStart, run: () => Outcome): Outcome {
  const base = m.store;
  const variables = variablesByLocation(scope);
  openSamples(m, variables, start);
  const written = dryRun(m, base, run);
  const names = namesOfObjects(m, variables);
  for (const location of written.keys()) {
    const before = base.get(location);
    if (!before || location === DEAD) continue;
    if (!isData(before)) {
      const variable = variables.get(location);
      if (variable) m.store.set(location, entryValue(m, variable, before, start));
    } else openMembers(m, location, written.get(location)!, names.get(location), start);
  }
  m.inGenericPass++;
  const outcome = run();
  m.inGenericPass--;
  return outcome;
}

/** Of lists whose samples `reads v[i] = ...` tells about, nothing else is known in a pass: it may be any of them. */
function openSamples(m: Machine, variables: ReadonlyMap<number, Variable>, { place }: PassStart): void {
  for (const v of variables.values()) {
    if (!m.naming.hasOpenReads(v.name)) continue;
    const value = readVariable(m, v, undefined);
    const data = value.kind === 'object' ? m.store.data(value.id) : undefined;
    const isOpen = data?.kind === 'list' || data?.kind === 'generic' || (data?.kind === 'broken' && data.cells);
    if (value.kind !== 'object' || !isOpen) continue;
    m.store.set(value.id, { kind: 'broken', unread: unread('a list of which only the samples that `reads` names are known', place), cells: [] });
  }
}

/** What a pass writes, found by a run whose effects are dropped. */
function dryRun(m: Machine, base: Machine['store'], run: () => Outcome): Map<number, Content> {
  m.quiet++;
  m.store = base.child();
  const outcome = run();
  const written = new Map(m.store.changesSince(base));
  for (const x of outcome.exits) for (const [k, v] of x.store.changesSince(base)) if (!written.has(k)) written.set(k, v);
  m.quiet--;
  m.store = base;
  return written;
}

function variablesByLocation(scope: Scope): Map<number, Variable> {
  const found = new Map<number, Variable>();
  for (let s: Scope | undefined = scope; s; s = s.parent) for (const v of s.variables.values()) found.set(v.location, v);
  return found;
}

function namesOfObjects(m: Machine, variables: ReadonlyMap<number, Variable>): Map<number, string> {
  const names = new Map<number, string>();
  for (const v of variables.values()) {
    const value = m.store.value(v.location);
    if (value?.kind === 'object' && !names.has(value.id)) names.set(value.id, v.name);
  }
  return names;
}

/** The generic value of a variable at the start of a pass. */
function entryValue(m: Machine, variable: Variable, before: Value, { place, origin }: PassStart): Value {
  if (before.kind === 'function' || before.kind === 'class' || before.kind === 'library' || before.kind === 'module') return before;
  const value = genericAt(m, variable.name, place, { ...(origin === undefined ? {} : { origin }), ...(before.kind === 'object' ? { fallback: () => before } : {}) });
  if (!m.entries.has(variable.name)) m.entries.set(variable.name, value);
  return value;
}

function openMembers(m: Machine, id: number, after: Content, name: string | undefined, { place, origin }: PassStart): void {
  const data = m.store.data(id);
  if (!isData(after)) return;
  if (after.kind === 'broken' && data.kind === 'list') {
    // Earlier passes wrote to it, nobody knows where.
    m.breakObject(id, after.unread);
    if (after.cells && !data.view) m.store.set(id, { kind: 'broken', unread: after.unread, cells: [] });
    return;
  }
  if (data.kind === 'generic' && after.kind === 'generic') {
    const own = m.store.writable(id);
    if (own.kind === 'generic') for (const key of after.members.keys()) own.members.delete(key);
    return;
  }
  const base = m.request.program.indexBase;
  const open = (key: string, before: Value | undefined): Value =>
    genericAt(m, memberPath(name ?? 'list', key), place, {
      ...(origin === undefined ? {} : { origin }),
      ...(before?.kind === 'object' ? { fallback: () => before } : {}),
    });
  if (data.kind === 'list' && after.kind === 'list') {
    const read = name === undefined ? undefined : m.naming.read([name], place);
    const own = m.store.writable(id);
    if (own.kind !== 'list') return;
    own.items.forEach((v, k) => {
      if (after.items[k] === v) return;
      const meaning = read?.kind === 'list' ? read.items[k] : undefined;
      own.items[k] = meaning?.kind === 'scalar' ? { kind: 'scalar', expr: meaning.expr, place } : open(String(k + base), v);
    });
  } else if (data.kind === 'record' && after.kind === 'record') {
    if (name === undefined || m.isFrameNames(id)) return;
    const own = m.store.writable(id);
    if (own.kind !== 'record') return;
    for (const [key, v] of after.members) if (own.members.get(key) !== v) own.members.set(key, open(key, own.members.get(key)));
  }
}

/**
 * True for a loop that carries the motion on from numbers: variables whose names mean coordinates or velocities start
 * from literals, are written in the loop, and are computed from each other. A claim in it is about one pass from any
 * state. (A sum over links that happens to be called `x` is not computed from what the loop carries.)
 */
export function startsFromLiteralState(m: Machine, scope: Scope, bodies: readonly (readonly Statement[])[]): boolean {
  const carried: { readonly name: string; readonly root: string; readonly e: Expression & { kind: 'assign' } }[] = [];
  for (const body of bodies) {
    for (const node of nodesOf(body, false)) {
      const e = node as Expression;
      if (e.kind !== 'assign' || !('target' in e)) continue;
      for (const name of patternNames(e.target)) {
        if (!meansState(m, name)) continue;
        const variable = scope.find(name);
        const value = variable && readVariable(m, variable, undefined);
        if (value?.kind === 'scalar' && value.expr.op === 'number') carried.push({ name, root: name, e });
      }
      for (const place of placesOf(e.target)) {
        if (place.kind === 'member' && place.object.kind === 'name' && literalMember(m, scope, place)) {
          carried.push({ name: place.name, root: place.object.name, e });
        }
      }
    }
  }
  const names = new Set(carried.flatMap((c) => [c.name, c.root]));
  return carried.some(({ name, e }) => {
    for (const node of nodesOf(e.value)) {
      const x = node as Expression;
      const mentioned = x.kind === 'name' || x.kind === 'member' ? x.name : undefined;
      if (mentioned !== undefined && names.has(mentioned) && !(e.op && mentioned === name)) return true;
    }
    return false;
  });
}

/** True for a loop over the samples of which `reads v[i] = ...` tells the state: a claim in it is about one of them. */
export function countsSamples(m: Machine, target: Pattern | undefined, bodies: readonly (readonly Statement[])[]): boolean {
  const { openNames } = m.naming;
  if (openNames.size === 0) return false;
  const written = target ? patternNames(target) : [];
  for (const node of bodies.flatMap((body) => [...nodesOf(body, false)])) {
    const x = node as Statement | Expression;
    if ((x.kind === 'assign' || x.kind === 'declare') && 'target' in x) written.push(...patternNames(x.target));
  }
  return written.some((name) => openNames.has(name));
}

/**
 * True for the sub-steps of an integrator, where all that is claimed is increments: the body carries the state on from
 * itself and does not ask which pass it is. Such a claim is about one step, however many there are.
 */
export function isSubsteps(m: Machine, scope: Scope, s: Statement & { kind: 'loop' }): boolean {
  const { outputs } = m.request;
  if (outputs.length === 0 || !outputs.every((o) => o.increment)) return false;
  const counters = new Set([...s.initial, ...s.update].flatMap((x) => (x.kind === 'declare' ? patternNames(x.target) : [])));
  const carried: { readonly path: string; readonly e: Expression & { kind: 'assign' } }[] = [];
  for (const node of nodesOf(s.body, false)) {
    const e = node as Expression;
    if (e.kind === 'name' && 'name' in e && counters.has(e.name)) return false;
    if (e.kind !== 'assign' || !('target' in e)) continue;
    const places: Expression[] = [...placesOf(e.target), ...patternNames(e.target).map((name): Expression => ({ kind: 'name', name, span: e.span }))];
    for (const place of places) {
      const path = pathOf(place);
      if (path !== undefined && isStateNow(m, scope, place)) carried.push({ path, e });
    }
  }
  const paths = new Set(carried.map((c) => c.path));
  return carried.some(({ path, e }) => {
    for (const node of nodesOf(e.value)) {
      const x = node as Expression;
      const mentioned = x.kind === 'name' || x.kind === 'member' || x.kind === 'index' ? pathOf(x) : undefined;
      if (mentioned !== undefined && mentioned !== path && paths.has(mentioned)) return true;
    }
    return false;
  });
}

function isStateNow(m: Machine, scope: Scope, place: Expression): boolean {
  m.quiet++;
  const value = m.evaluate(scope, place);
  m.quiet--;
  const expr = scalarOf(m, value);
  return expr?.op === 'symbol' && (expr.data as SymbolData).role === 'coordinate';
}

function literalMember(m: Machine, scope: Scope, place: Expression): boolean {
  if (place.kind !== 'member' || place.object.kind !== 'name' || !meansState(m, place.name)) return false;
  const variable = scope.find(place.object.name);
  const object = variable && readVariable(m, variable, undefined);
  if (object?.kind !== 'object') return false;
  const data = m.store.data(object.id);
  const value = data.kind === 'record' ? data.members.get(place.name) : undefined;
  return value?.kind === 'scalar' && value.expr.op === 'number';
}

function meansState(m: Machine, name: string): boolean {
  return m.naming.isState(name) || m.naming.hasRead(name);
}
