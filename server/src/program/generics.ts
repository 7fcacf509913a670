import { childNames } from './children';
import { factsOf } from './facts';
import type { Construction, Machine } from './machine';
import { lastName, memberPath } from './paths';
import { typeFacts, typeOfMember } from './type-notes';
import type { Meaning } from './reading';
import { isUnread, unread, type Assigned, type Generic, type GenericData, type ObjectValue, type Scalar, type Value } from './values';
import type { Expr } from '../expression/node';
import type { Rational } from '../expression/rational';
import type { Place } from '../text/span';

/** Things from outside the code, and what they mean. */

/** The thing reached by `path`; the same one each time it is asked for. */
export function genericAt(
  m: Machine,
  path: string,
  place: Place,
  more: { aliases?: readonly string[] } & Partial<Pick<Generic, 'info' | 'typed' | 'fallback' | 'assigned' | 'later' | 'constant' | 'origin' | 'computed'>> = {},
): ObjectValue {
  const { aliases = [], ...rest } = more;
  const generic: Generic = { path, aliases: [...aliases], place, ...rest };
  return m.atRoot(() => m.object({ kind: 'generic', generic, members: new Map() }));
}

const memos = new WeakMap<Machine, { children: Map<string, ObjectValue>; numbers: Map<string, Scalar> }>();

function memo(m: Machine): { children: Map<string, ObjectValue>; numbers: Map<string, Scalar> } {
  let found = memos.get(m);
  if (!found) memos.set(m, (found = { children: new Map(), numbers: new Map() }));
  return found;
}

/** What is known of a member beyond its name. */
type MemberFacts = Partial<Pick<Generic, 'fallback' | 'constant' | 'assigned'>>;

/** The member `key` that a generic thing had when the function was entered. */
export function childOf(m: Machine, id: number, generic: Generic, key: string, place: Place, facts: MemberFacts = {}): ObjectValue {
  const { fallback, constant = generic.constant, assigned } = facts;
  const children = memo(m).children;
  const k = `${id} ${key}`;
  let child = children.get(k);
  if (!child) {
    const [path, ...aliases] = childNames(generic, key);
    const inherited = fallback ?? fallbackMember(m, generic, key);
    const { origin, computed } = generic;
    const from = { ...typeFacts(m, typeOfMember(generic, key)), ...(origin === undefined ? {} : { origin }), ...(computed ? { computed } : {}) };
    const more = { ...(inherited ? { fallback: inherited } : {}), ...(constant ? { constant } : {}), ...(assigned ? { assigned } : {}) };
    child = genericAt(m, path!, place, { aliases, ...from, ...more });
    children.set(k, child);
  }
  return child;
}

/** A copy with the same members: what is in them is shared. */
export function copyOfGeneric(m: Machine, id: number, data: GenericData): ObjectValue {
  return m.object({ kind: 'generic', generic: data.generic, copyOf: data.copyOf ?? id, members: new Map(data.members) });
}

/** True where something was written to a member of a member of a thing from outside. */
export function hasWritesBelow(m: Machine, id: number): boolean {
  const prefix = `${id} `;
  for (const [key, child] of memo(m).children) {
    if (!key.startsWith(prefix)) continue;
    const data = m.store.data(child.id);
    if (data.kind === 'generic' && (data.members.size > 0 || hasWritesBelow(m, child.id))) return true;
  }
  return false;
}

function fallbackMember(m: Machine, generic: Generic, key: string): Generic['fallback'] {
  const later = generic.later?.get(key);
  if (later) return later;
  if (!generic.fallback) return undefined;
  const whole = generic.fallback;
  return () => {
    const v = whole();
    if (v?.kind !== 'object') return undefined;
    const data = m.store.data(v.id);
    return data.kind === 'record' ? data.members.get(key) : undefined;
  };
}

export function addAlias(m: Machine, value: ObjectValue, name: string): void {
  const data = m.store.data(value.id);
  if (data.kind !== 'generic') return;
  const { generic } = data;
  if (generic.path !== name && !generic.aliases.includes(name)) generic.aliases.push(name);
}

/** The initial value of a thing, worked out at the bottom of the store, the same for all branches. */
export function fallbackOf(m: Machine, generic: Generic): Value | undefined {
  return generic.fallback && m.atRoot(() => generic.fallback!());
}

/** What a generic thing is as a number. */
export function numberOf(m: Machine, id: number, data: GenericData): Scalar | ReturnType<typeof unread> {
  const { generic } = data;
  const key = `${id}`;
  const numbers = memo(m).numbers;
  const known = numbers.get(key);
  if (known) return known;
  const found = meaningOf(m, generic);
  if (found && isUnread(found)) return found;
  if (found) {
    numbers.set(key, found);
    return found;
  }
  if (m.counting > 0) {
    const v = countedFallback(m, generic);
    if (v) {
      // Once it has counted passes or places it is that number throughout.
      if (!m.quiet) numbers.set(key, v);
      return v;
    }
  }
  return { kind: 'scalar', expr: freeOf(m, generic), place: generic.place };
}

/** The number that a thing starts from, through the fields and defaults it was handed on by. */
function countedFallback(m: Machine, generic: Generic): Scalar | undefined {
  let v = fallbackOf(m, generic);
  for (let k = 0; v && k < 8; k++) {
    if (v.kind === 'scalar') return v;
    const data = v.kind === 'object' ? m.store.data(v.id) : undefined;
    v = data?.kind === 'generic' ? fallbackOf(m, data.generic) : undefined;
  }
  return undefined;
}

/** What `reads`, its name or its initial value say a thing is; undefined where nothing does. */
export function meaningOf(m: Machine, generic: Generic): Scalar | ReturnType<typeof unread> | undefined {
  const paths = [generic.path, ...generic.aliases];
  const place = generic.place;
  const doubted = m.doubted(generic.path);
  if (doubted) return { kind: 'scalar', expr: doubted, place };
  const read = m.naming.read(paths, place);
  if (read?.kind === 'scalar') {
    if (generic.assigned) m.believe(generic.path, { meaning: read, how: 'reads', assigned: generic.assigned });
    return { kind: 'scalar', expr: read.expr, place };
  }
  if (read) return unread(`\`${generic.path}\` is a list by its \`reads\`, and is used as a number`, place);
  for (const path of paths) {
    const item = familyItem(m, path);
    if (item) return { kind: 'scalar', expr: item, place };
    const name = throughGetters(path) && !generic.computed ? lastName(path) : undefined;
    const expr = name === undefined ? undefined : m.naming.agree(name, path, generic.path, place);
    if (expr) {
      if (generic.assigned) m.believe(generic.path, { meaning: { kind: 'scalar', expr }, how: 'name', assigned: generic.assigned });
      return { kind: 'scalar', expr, place };
    }
    if (m.naming.isForcedFree(generic.path)) return { kind: 'scalar', expr: freeOf(m, generic), place };
  }
  const value = fallbackOf(m, generic);
  if (value?.kind === 'scalar' && (generic.constant || m.naming.containsDeclared(value.expr))) return { ...value };
  return undefined;
}

/** `bodies[1].m`, where `m` names a family: its item of that index. */
function familyItem(m: Machine, path: string): Expr | undefined {
  const found = /\[(\d+)\]\.([^.[\]()]+)$/.exec(path);
  const family = found && m.request.meanings.familyByName(found[2]!);
  const item = family?.[Number(found![1]) - m.request.program.indexBase];
  return item?.kind === 'scalar' ? item.expr : undefined;
}

/** A name says nothing about what a computation gave: `pos.normalized().x` is not the x of `pos`. */
function throughGetters(path: string): boolean {
  const calls = path.slice(0, -1).matchAll(/([\p{L}\p{N}_$#]*)\(/gu);
  const last = path.endsWith('()') ? path.slice(0, -2) : path;
  for (const c of calls) {
    if (c.index + c[1]!.length < last.length && !/^get/i.test(c[1]!)) return false;
  }
  return true;
}

/**
 * The value that a constructor run on generic arguments leaves in a field: what `reads` or the field's name says it is;
 * else the value, a constructor's parameter standing for what its own name means. Where fields keep what they are given,
 * a value that is built of declared symbols comes first.
 */
export function fieldValue(m: Machine, making: Construction, key: string, value: Value, place: Place): Value {
  const path = memberPath(making.path, key);
  if (making.places) {
    making.places.set(key, place);
    const own = asWritten(m, value);
    if (own) return own;
  }
  const doubted = m.doubted(path);
  if (doubted) return { kind: 'scalar', expr: doubted, place };
  const read = m.naming.read([path], place);
  if (read) return read.kind === 'scalar' ? { kind: 'scalar', expr: read.expr, place } : value;
  if (value.kind === 'scalar' && m.naming.containsDeclared(value.expr)) return value;
  const data = value.kind === 'object' ? m.store.data(value.id) : undefined;
  if (data && (data.kind !== 'generic' || data.members.size > 0 || data.generic.info)) return value;
  if (value.kind !== 'scalar' && value.kind !== 'unread' && !data) return value;
  const { run } = m.naming;
  m.naming.run = run - 1;
  const expr = m.naming.agree(key, path, path, place);
  m.naming.run = run;
  if (expr) return { kind: 'scalar', expr, place };
  const own = data?.kind === 'generic' ? meaningOf(m, data.generic) : undefined;
  return own && !isUnread(own) ? own : value;
}

/** A value that is built of declared symbols, or a parameter that is one by its own name. */
function asWritten(m: Machine, value: Value): Value | undefined {
  if (value.kind === 'scalar') return m.naming.containsDeclared(value.expr) ? value : undefined;
  const data = value.kind === 'object' ? m.store.data(value.id) : undefined;
  if (data?.kind !== 'generic' || data.members.size > 0) return undefined;
  const own = meaningOf(m, data.generic);
  return own && !isUnread(own) ? own : undefined;
}

function freeOf(m: Machine, generic: Generic) {
  const ambiguous = m.naming.isForcedFree(generic.path);
  const from = generic.origin === undefined ? '' : `${generic.origin}, and `;
  const reason = ambiguous
    ? `\`${generic.path}\` is ambiguous: another name agrees with the same symbol; say what each means with \`reads\``
    : `${from}nothing says what \`${generic.path}\` means: declare it, or bind it with \`reads ${generic.path} = ...\``;
  return m.freeSymbol(generic.path, reason, generic.place);
}

/** A value for a meaning. */
export function valueOf(m: Machine, meaning: Meaning, place: Place | undefined): Value {
  if (meaning.kind === 'scalar') return { kind: 'scalar', expr: meaning.expr, ...(place ? { place } : {}) };
  return m.list(meaning.items.map((item) => valueOf(m, item, place)), m.request.program.listConcat === true);
}

/**
 * Turns a generic thing into the list that `reads`, a family of its name or its initial value say it is, at its first use
 * as a list. It happens at the bottom of the store, the same for all branches.
 */
export function structure(m: Machine, id: number): void {
  const data = m.store.data(id);
  if (data.kind !== 'generic' || data.generic.structured || data.members.size > 0) return;
  const { generic } = data;
  const paths = [generic.path, ...generic.aliases];
  const read = m.naming.read(paths, generic.place);
  const family = read || paths.some((p) => familyItem(m, p)) ? undefined : m.naming.family(paths);
  const items = read?.kind === 'list' ? read.items : family;
  if (items) {
    generic.structured = true;
    if (generic.assigned) m.believe(generic.path, { meaning: { kind: 'list', items }, how: read ? 'reads' : 'name', assigned: generic.assigned });
    m.atRoot(() => {
      const base = m.request.program.indexBase;
      const list = items.map((item, k): Value => {
        const doubted = m.doubted(`${generic.path}[${k + base}]`);
        return doubted ? { kind: 'scalar', expr: doubted, place: generic.place } : valueOf(m, item, generic.place);
      });
      const vectors = m.request.program.listConcat === true;
      m.store.set(id, { kind: 'list', items: list, array: vectors, ...(vectors ? { outside: true } : {}) });
    });
    return;
  }
  const count = countRead(m, paths);
  if (count !== undefined) {
    generic.structured = true;
    const base = m.request.program.indexBase;
    const list = Array.from({ length: count }, (_, k) => childOf(m, id, generic, String(k + base), generic.place));
    m.atRoot(() => m.store.set(id, { kind: 'list', items: list, array: false }));
    return;
  }
  const value = fallbackOf(m, generic);
  if (value?.kind === 'object' && value.id !== id) {
    const initial = m.store.data(value.id);
    if (initial.kind === 'list' || initial.kind === 'record') {
      generic.structured = true;
      const shape = generalise(m, value.id, generic, 0);
      m.atRoot(() => m.store.set(id, shape));
    }
  }
}

const MOST_ITEMS = 1000;

/** How many items a list has by `reads bodies.length = 2`. */
function countRead(m: Machine, paths: readonly string[]): number | undefined {
  for (const path of paths) {
    const read = m.naming.meaningOf(`${path}.length`) ?? m.naming.meaningOf(`len(${path})`);
    if (read?.kind !== 'scalar' || read.expr.op !== 'number') continue;
    const n = (read.expr.data as Rational).toNumber();
    if (Number.isInteger(n) && n >= 0 && n <= MOST_ITEMS) return n;
  }
  return undefined;
}

/** The same shape, in which numbers that are not built of declared symbols become generic by their path. */
function generalise(m: Machine, id: number, generic: Generic, depth: number) {
  const data = m.store.data(id);
  const base = m.request.program.indexBase;
  const isFixed = data.kind === 'list' && isFixedList(m, id, generic);
  const one = (v: Value, key: string): Value => {
    if (isFixed && !m.naming.hasRead(memberPath(generic.path, key)) && !m.naming.hasReadBelow(memberPath(generic.path, key))) {
      if (v.kind === 'scalar' && v.expr.op === 'number') return v;
      if (v.kind === 'object' && m.store.data(v.id).kind === 'list') return v;
    }
    if (v.kind === 'scalar' && m.naming.containsDeclared(v.expr)) {
      // What is state begins with this value, and has another later.
      const path = memberPath(generic.path, key);
      const isState = m.naming.hasRead(path) || m.naming.isState(key) || m.isAssignedMember(key);
      // Set once and bound by `reads`, it is both what is said and what is written.
      const assigned = m.isAssignedMember(key) ? undefined : (): Assigned => ({ value: v, place: v.place ?? generic.place, hasSymbol: () => false });
      return isState ? childOf(m, -id, generic, key, generic.place, assigned ? { assigned } : {}) : v;
    }
    const isCode = v.kind === 'function' || v.kind === 'class' || v.kind === 'library' || v.kind === 'method' || v.kind === 'module';
    if (isCode || depth > 8) return v;
    const constant = generic.constant && data.kind === 'record' && !m.isAssignedMember(key);
    return childOf(m, -id, generic, key, generic.place, { fallback: () => v, constant: constant === true });
  };
  if (data.kind === 'list') {
    const { held: _, ...rest } = data;
    return { ...rest, items: data.items.map((v, k) => one(v, String(k + base))) };
  }
  if (data.kind === 'record') {
    const members = new Map([...data.members].map(([k, v]) => [k, one(v, k)]));
    for (const [k, value] of generic.later ?? []) if (!members.has(k)) members.set(k, childOf(m, -id, generic, k, generic.place, { fallback: value, constant: true }));
    const { held: _, ...rest } = data;
    return { ...rest, members };
  }
  return data;
}

/** A vector or matrix that is made of declared symbols once and for all: the zeros in it are zeros. */
function isFixedList(m: Machine, id: number, generic: Generic): boolean {
  const name = generic.path.replace(/(?:\[\d+\])+$/, '').split('.').pop()!;
  if (m.isAssignedMember(name)) return false;
  for (const module of m.modules.values()) {
    const { elementWrites, writtenThings, assigned } = factsOf(module.program);
    if (elementWrites.has(name) || writtenThings.has(name) || assigned.has(name)) return false;
  }
  return hasDeclared(m, id, 0);
}

function hasDeclared(m: Machine, id: number, depth: number): boolean {
  const data = m.store.data(id);
  if (data.kind !== 'list' || depth > 4) return false;
  return data.items.some((v) => (v.kind === 'scalar' ? m.naming.containsDeclared(v.expr) : v.kind === 'object' && hasDeclared(m, v.id, depth + 1)));
}
