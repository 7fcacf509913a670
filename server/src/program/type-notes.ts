import type { TypeNote } from './form';
import type { Machine } from './machine';
import { instanceFieldNote } from './class-members';
import type { ClassInfo, Module, Scope } from './scope';
import type { Generic, Value } from './values';

/** What declared types say of things from outside: their class, and the types of what is in them. */

/** Files that pass a type on from one to the next. */
const MOST_FILES = 16;

/** A type, with the scope its names are looked up in. */
export interface Typed {
  readonly note: TypeNote;
  readonly scope: Scope;
}

/** The class of this project that a type names. */
function classOf(m: Machine, typed: Typed): ClassInfo | undefined {
  const name = typed.note.class;
  if (!name) return undefined;
  m.quiet++;
  const value = m.atRoot(() => m.evaluate(typed.scope, name));
  m.quiet--;
  return value.kind === 'class' ? value.info : undefined;
}

/** What a thing's own type says, as its generic value keeps it. */
export function typeFacts(m: Machine, typed: Typed | undefined): Pick<Generic, 'info' | 'typed'> {
  if (!typed) return {};
  const info = classOf(m, typed);
  if (info) return { typed, info };
  const { note, scope } = typed;
  const name = note.class?.kind === 'name' ? note.class.name : undefined;
  const origin = name === undefined ? undefined : scope.frame.module.program.types?.imported(name);
  const other = origin && m.openModule(scope.frame.module, origin.from);
  return other ? exportedFacts(m, other, origin.name, 0) : { typed };
}

/** What an exported name of another file says as a type. */
function exportedFacts(m: Machine, module: Module, name: string, depth: number): Pick<Generic, 'info' | 'typed'> {
  const { types } = module.program;
  if (!types || depth > MOST_FILES) return {};
  const behind = types.exported(name);
  if (behind && 'from' in behind) {
    const other = m.openModule(module, behind.from);
    return other ? exportedFacts(m, other, behind.name, depth + 1) : {};
  }
  const local = behind ? behind.local : name;
  const note = types.declared(local);
  if (note) return typeFacts(m, { note, scope: module.scope });
  const imported = types.imported(local);
  if (imported) {
    const other = m.openModule(module, imported.from);
    return other ? exportedFacts(m, other, imported.name, depth + 1) : {};
  }
  const variable = module.scope.variables.get(local);
  if (variable) {
    m.quiet++;
    const value = m.atRoot(() => m.exportOf(module, name, { file: module.file, span: { start: 0, end: 0 } }));
    m.quiet--;
    return value.kind === 'class' ? { info: value.info } : {};
  }
  for (const from of types.passedOn) {
    const other = m.openModule(module, from);
    const found = other ? exportedFacts(m, other, name, depth + 1) : {};
    if (found.info || found.typed) return found;
  }
  return {};
}

/** A variable's declared type says what a thing from outside is that it is given. */
export function annotate(m: Machine, value: Value, typed: Typed): void {
  if (value.kind !== 'object') return;
  const data = m.store.data(value.id);
  if (data.kind !== 'generic' || data.generic.info || data.generic.typed) return;
  Object.assign(data.generic, typeFacts(m, typed));
}

/** The type of a member or element of a thing from outside. */
export function typeOfMember(generic: Generic, key: string): Typed | undefined {
  if (generic.info) {
    const found = instanceFieldNote(generic.info, key);
    if (found) return found;
  }
  const { typed } = generic;
  if (!typed) return undefined;
  const note = /^\d+$/.test(key) ? (typed.note.item ?? typed.note.member?.(key)) : typed.note.member?.(key);
  return note && { note, scope: typed.scope };
}
