import type { Place } from '../text/span';
import { classInfo } from './classes';
import type { Expression, Program, Statement, TypeNote } from './form';
import { genericAt } from './generics';
import type { Library, Meaning } from './library';
import type { Machine } from './machine';
import { libraryMember, readMember } from './members';
import { pathOf } from './paths';
import { bindPattern } from './patterns';
import { factsOf, firstMade, givenOnce, onlyFunction } from './facts';
import { patternNames } from './scan';
import { Scope, type Frame, type Module } from './scope';
import { enumValue } from './statements';
import { typeFacts } from './type-notes';
import { arrivalOf, arrive, readVariable, type Arrival } from './variables';
import { unread, type Value } from './values';
import type { Variable } from './scope';

/** Files: their top-level names, imports and exports. Nothing at the top level runs until something asks for it. */

export function loadModule(m: Machine, file: string, program: Program, library: Library, isMeaning = false): Module {
  const known = m.modules.get(file);
  if (known) return known;
  const names = m.atRoot(() => m.store.add({ kind: 'record', members: new Map() }));
  const frame = { names, depth: 0 } as { -readonly [K in keyof Frame]: Frame[K] };
  const scope = new Scope(undefined, frame, true);
  const module: Module = { file, program, library, ...(isMeaning ? { isMeaning } : {}), scope, touched: new Set(), exports: new Map(), everythingOf: [], imports: [] };
  frame.module = module;
  m.modules.set(file, module);
  for (const s of program.body) addTopLevel(m, module, scope, s);
  return module;
}

function lazy(m: Machine, scope: Scope, name: string, value: () => Value): Variable {
  const variable: Variable = { name, location: m.store.reserve(), scope, lazy: value };
  scope.variables.set(name, variable);
  return variable;
}

/** Makes a statement's names known in `scope`, a file's or that of a function around the one that is read. */
export function addTopLevel(m: Machine, module: Module, scope: Scope, s: Statement): void {
  switch (s.kind) {
    case 'function':
      lazy(m, scope, s.node.name, () => ({ kind: 'function', node: s.node, scope }));
      return;
    case 'class':
      lazy(m, scope, s.node.name, () => ({ kind: 'class', info: classInfo(m, scope, s.node) }));
      return;
    case 'enum':
      lazy(m, scope, s.name, () => enumValue(m, scope, s));
      return;
    case 'declare':
      addVariables(m, module, scope, s);
      return;
    case 'import':
      addImport(m, module, s);
      return;
    case 'export':
      addExport(m, module, s);
      return;
    case 'block':
      for (const inner of s.body) if (inner.kind === 'declare' && inner.scope === 'function') addVariables(m, module, scope, inner);
      return;
    case 'expression':
      addAssigned(m, module, scope, s.value);
      return;
    default:
      return;
  }
}

/** A name that is assigned without having been declared. */
function addAssigned(m: Machine, module: Module, scope: Scope, e: Expression): void {
  if (e.kind !== 'assign' || e.op || (e.target.kind !== 'place' && e.target.kind !== 'name')) return;
  if (e.target.kind === 'name') {
    // A language without declarations: the first assignment declares.
    if (scope.variables.has(e.target.name)) return;
    const { name } = e.target;
    lazy(m, scope, name, () => topLevelValue(m, module, scope, name, e.value, true));
    return;
  }
}

function addVariables(m: Machine, module: Module, scope: Scope, s: Statement & { kind: 'declare' }): void {
  if (s.target.kind === 'name') {
    const { name } = s.target;
    if (scope.variables.has(name) && !s.value) return;
    lazy(m, scope, name, () => topLevelValue(m, module, scope, name, s.value, s.mutable, m.place(scope, s.target.span), s.note));
    return;
  }
  // Taken apart when one of its names is first wanted.
  const values = new Map<string, Value>();
  let done = false;
  for (const name of patternNames(s.target)) {
    lazy(m, scope, name, () => {
      if (!done && s.value) {
        done = true;
        bindPattern(m, scope, s.target, m.evaluate(scope, s.value), (_, p, v) => {
          if (p.kind === 'name') values.set(p.name, arrive(m, p.name, v, arrival(scope, p.name, m.place(scope, p.span))));
        });
      }
      return values.get(name) ?? unread(`\`${name}\` has no value`, m.place(scope, s.span));
    });
  }
}

function arrival(scope: Scope, name: string, place: Place): Arrival {
  return { ...arrivalOf(scope, name, place), isAccumulated: false, isLocal: false };
}

/**
 * A top-level variable at a function's entry: a constant has its value; one that functions change is state, known by its
 * name only, of the shape of its first value.
 */
function topLevelValue(m: Machine, module: Module, scope: Scope, name: string, value: Expression | undefined, mutable: boolean, at?: Place, note?: TypeNote): Value {
  const place = value ? m.place(scope, value.span) : (at ?? m.place(scope, { start: 0, end: 0 }));
  const only = value ? undefined : onlyFunction(module.program, name);
  if (only) return m.evaluate(scope, only);
  const made = value && value.kind !== 'nothing' ? value : firstMade(module.program, name);
  const initial = (): Value | undefined => (made ? m.evaluate(scope, made) : undefined);
  const changes = mutable && factsOf(module.program).assigned.has(name);
  if (!changes && value) {
    const v = initial();
    if (v && v.kind !== 'object') {
      const settled = arrive(m, name, v, arrival(scope, name, place));
      // What an unknown function gave is a thing of which nothing is known, set up before the function is entered.
      if (settled.kind !== 'unread' || m.stopped || value.kind !== 'call') return settled;
      return genericAt(m, name, place, { computed: true, origin: `what \`${pathOf(value.callee) ?? 'the call'}(...)\` gives is not known` });
    }
    if (v?.kind === 'object') {
      const data = m.store.data(v.id);
      if (data.kind === 'generic') return arrive(m, name, v, arrival(scope, name, place));
      // An empty list is filled elsewhere: it is what `reads` says.
      if (data.kind === 'list' && data.items.length === 0 && (m.naming.hasRead(name) || m.naming.hasReadBelow(name))) return genericAt(m, name, place);
      const { changedThings } = factsOf(module.program);
      if (changedThings.has(name) && data.kind === 'list') return genericAt(m, name, place, { origin: `\`${name}\` is changed after it is made` });
      if (!isState(module, name) && !changedThings.has(name) && data.kind !== 'broken') return arrive(m, name, v, arrival(scope, name, place));
      return genericAt(m, name, place, { fallback: () => v, constant: true, ...givenLater(m, module, scope, name) });
    }
  }
  let first: Value | undefined;
  return genericAt(m, name, place, { ...typeFacts(m, note && { note, scope }), fallback: () => (first ??= initial()) });
}

/** The members that statements beside a thing's declaration give it. */
function givenLater(m: Machine, module: Module, scope: Scope, name: string): { readonly later?: ReadonlyMap<string, () => Value> } {
  const given = givenOnce(module.program, scope.frame.node?.body ?? module.program.body).get(name);
  return given ? { later: new Map([...given].map(([key, e]) => [key, () => m.evaluate(scope, e)])) } : {};
}

/** True where members or elements of a top-level thing are written somewhere. */
function isState(module: Module, name: string): boolean {
  return factsOf(module.program).writtenThings.has(name);
}

function addImport(m: Machine, module: Module, s: Statement & { kind: 'import' }): void {
  const { scope } = module;
  for (const n of s.names) {
    lazy(m, scope, n.local, () => {
      const place = m.place(scope, n.span);
      const value = imported(m, module, s.from, n.imported, n.local, place);
      if (!s.orModules || (value.kind !== 'unread' && !isOutside(m, value))) return value;
      // Not a name of the package: perhaps a file in it.
      const below = `${s.from}${s.from.endsWith('.') ? '' : '.'}${n.imported}`;
      const whole = importedWhole(m, module, below, n.local, place);
      return isOutside(m, whole) ? value : whole;
    });
  }
  if (s.all) module.imports.push({ from: s.from, place: m.place(scope, s.span) });
  if (s.namespace !== undefined) {
    const { namespace } = s;
    lazy(m, scope, namespace, () => importedWhole(m, module, s.from, namespace, m.place(scope, s.span)));
  }
}

function isOutside(m: Machine, value: Value): boolean {
  return value.kind === 'object' && m.store.data(value.id).kind === 'generic';
}

/** A name that `from x import *` brings in. */
function broughtIn(m: Machine, module: Module, name: string): Value | undefined {
  for (const { from, place } of module.imports) {
    const prefix = module.library.modules.get(from);
    if (prefix !== undefined) {
      const path = prefix + name;
      const { scalars, constants, intrinsics } = module.library;
      if (scalars.has(path) || constants.has(path) || intrinsics.has(path)) return libraryMember(m, module, path, place);
      continue;
    }
    const other = openModule(m, module, from);
    if (other && (other.exports.has(name) || other.scope.variables.has(name))) return exportOf(m, other, name, place);
  }
  return undefined;
}

function imported(m: Machine, module: Module, from: string, name: string, local: string, place: Place): Value {
  const prefix = module.library.modules.get(from);
  if (prefix !== undefined) {
    if (name === 'default') return { kind: 'library', path: prefix.replace(/\.$/, ''), module };
    return underName(m, module, local, libraryMember(m, module, prefix + name, place), place);
  }
  const other = openModule(m, module, from);
  if (!other) return genericAt(m, local, place);
  const value = exportOf(m, other, name, place);
  return local === name ? value : underName(m, module, local, value, place);
}

/** A constant that comes in under a name with a meaning stands for it, as one that is given to such a name does. */
function underName(m: Machine, module: Module, local: string, value: Value, place: Place): Value {
  if (value.kind !== 'scalar' || value.expr.op !== 'number') return value;
  return arrive(m, local, value, arrival(module.scope, local, place));
}

function importedWhole(m: Machine, module: Module, from: string, local: string, place: Place): Value {
  const prefix = module.library.modules.get(from);
  if (prefix !== undefined) return { kind: 'library', path: prefix.replace(/\.$/, ''), module };
  const other = openModule(m, module, from);
  if (!other) return genericAt(m, local, place);
  if (other.isMeaning && other.exports.has('default')) return exportOf(m, other, 'default', place);
  return other.whole ? m.evaluate(other.scope, other.whole) : { kind: 'module', module: other };
}

export function requireModule(m: Machine, scope: Scope, from: string, place: Place): Value {
  return importedWhole(m, scope.frame.module, from, from, place);
}

export function openModule(m: Machine, module: Module, from: string): Module | undefined {
  const found = m.request.importFile(from, module.file);
  if (!found) {
    const meaning = module.library.packageMeaning?.(from);
    return meaning && loadMeaning(m, meaning, module.library);
  }
  m.files.add(found.file);
  return loadModule(m, found.file, found.program, found.library);
}

function loadMeaning(m: Machine, meaning: Meaning, library: Library): Module {
  return loadModule(m, `package ${meaning.name}`, meaning.program, library, true);
}

function addExport(m: Machine, module: Module, s: Statement & { kind: 'export' }): void {
  const place = m.place(module.scope, s.span);
  if (s.all && s.from !== undefined) {
    const { from } = s;
    const [as] = s.names;
    if (as) module.exports.set(as.exported, () => importedWhole(m, module, from, as.exported, place));
    else module.everythingOf.push({ from, span: s.span });
  }
  for (const n of s.names) {
    if (s.all) continue;
    if (s.from !== undefined) {
      const { from } = s;
      module.exports.set(n.exported, () => imported(m, module, from, n.local, n.exported, place));
    } else {
      module.exports.set(n.exported, () => {
        const variable = module.scope.find(n.local);
        return variable ? readVariable(m, variable, place) : unread(`\`${n.local}\` is exported but not there`, place);
      });
    }
  }
  if (s.value) {
    const { value } = s;
    if (s.names.length === 0) module.whole = value;
    for (const n of s.names) module.exports.set(n.exported, () => m.evaluate(module.scope, value));
  }
}

export function exportOf(m: Machine, module: Module, name: string, place: Place, depth = 0): Value {
  const known = module.exports.get(name);
  if (known) return known();
  for (const { from } of module.everythingOf) {
    if (name === 'default' || depth > 16) break;
    const other = openModule(m, module, from);
    const value = other && exportOf(m, other, name, place, depth + 1);
    if (value && value.kind !== 'unread' && value.kind !== 'nothing') return value;
  }
  if (module.whole) {
    const whole = m.evaluate(module.scope, module.whole);
    return name === 'default' ? whole : readMember(m, module, whole, name, place);
  }
  if (name === 'default' && module.exports.size > 0 && !/\.m?[jt]sx?$/.test(module.file)) return { kind: 'module', module };
  // Languages without export lists give every top-level name.
  const variable = module.program.exportsAll || module.exports.size === 0 ? module.scope.find(name) : undefined;
  if (variable) return readVariable(m, variable, place);
  return unread(`\`${name}\` is not exported by ${module.file}`, place);
}

/** A name that no scope has: of the library, or a thing from outside. */
export function unknownName(m: Machine, scope: Scope, name: string, place: Place): Value {
  const { module } = scope.frame;
  const brought = module.imports.length > 0 ? broughtIn(m, module, name) : undefined;
  if (brought) return brought;
  if (m.libraryNames(module.library).has(name)) return libraryMember(m, module, name, place);
  const bare = module.library.bare?.(name, module.program);
  if (typeof bare === 'string') return libraryMember(m, module, bare, place);
  if (bare) return unread(bare.unread, place);
  const known = module.isMeaning ? undefined : module.library.globalMeaning?.(name);
  if (known) {
    const other = loadMeaning(m, known.of, module.library);
    return known.exported === undefined ? { kind: 'module', module: other } : exportOf(m, other, known.exported, place);
  }
  let found = m.globals.get(name);
  if (!found) m.globals.set(name, (found = genericAt(m, name, place)));
  return found;
}
