import type { Member, TypeNote } from './form';
import type { ClassInfo, Scope } from './scope';

/** Looking members up in a class and those it extends. */

export interface FoundMember {
  readonly member: Member;
  readonly info: ClassInfo;
}

/** The getter, method or field of instances by this name, the nearest class first. */
export function findMember(info: ClassInfo, name: string, kind?: Member['kind'], isStatic = false): FoundMember | 'unknown' | undefined {
  let at: ClassInfo | 'unknown' | undefined = info;
  for (let k = 0; at && k < 64; k++) {
    if (at === 'unknown') return 'unknown';
    const here: ClassInfo = at;
    const member = here.node.members.find(
      (x) => x.name === name && x.isStatic === isStatic && (kind ? x.kind === kind : x.kind !== 'setter' && x.kind !== 'constructor'),
    );
    if (member) return { member, info: here };
    at = here.base();
  }
  return undefined;
}

/** The type of a field: its own, or that of the constructor parameter that sets it. */
export function instanceFieldNote(info: ClassInfo, name: string): { readonly note: TypeNote; readonly scope: Scope } | undefined {
  let at: ClassInfo | 'unknown' | undefined = info;
  for (let k = 0; at && at !== 'unknown' && k < 64; k++) {
    const here: ClassInfo = at;
    for (const member of here.node.members) {
      if (member.kind === 'field' && member.name === name && !member.isStatic && member.note) return { note: member.note, scope: here.scope };
      if (member.kind !== 'constructor') continue;
      const p = member.node?.parameters.find((x) => x.field && x.pattern.kind === 'name' && x.pattern.name === name);
      if (p?.note) return { note: p.note, scope: here.scope };
    }
    at = here.base();
  }
  return undefined;
}
