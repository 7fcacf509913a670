import type { TypeNote } from './form';
import type { Machine } from './machine';
import { instanceFieldNote } from './class-members';
import type { ClassInfo, Scope } from './scope';
import type { Generic, Value } from './values';

/** What declared types say of things from outside: their class, and the types of what is in them. */

/** A type, with the scope its names are looked up in. */
export interface Typed {
  readonly note: TypeNote;
  readonly scope: Scope;
}

/** The class of this project that a type names. */
export function classOf(m: Machine, typed: Typed | undefined): ClassInfo | undefined {
  const name = typed?.note.class;
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
  return { typed, ...(info ? { info } : {}) };
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
