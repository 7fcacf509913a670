import type { ClassNode, Expression, FunctionNode, Member, Pattern, TypeNote } from './form';
import { nodesOf } from './scan';
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

/** True where a method reads a field that another method than the constructor writes. */
export function readsWhatChanges(node: ClassNode, method: FunctionNode): boolean {
  const read = new Set<string>();
  for (const n of nodesOf(method.body)) {
    const e = n as Expression;
    if (e.kind === 'member' && e.object.kind === 'self') read.add(e.name);
  }
  return node.members.some((x) => x.kind !== 'constructor' && x.node && x.node !== method && writesField(x.node, read));
}

function writesField(f: FunctionNode, names: ReadonlySet<string>): boolean {
  for (const n of nodesOf(f.body)) {
    const p = n as Pattern;
    let at = p.kind === 'place' ? p.target : undefined;
    while (at?.kind === 'index' || (at?.kind === 'member' && at.object.kind !== 'self')) at = at.object;
    if (at?.kind === 'member' && names.has(at.name)) return true;
  }
  return false;
}
