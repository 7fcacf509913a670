import type { Place } from '../text/span';
import type { ArgumentValue } from './parameters';
import type { Expression } from './form';
import type { Machine } from './machine';
import { fallbackOf } from './generics';
import { lastName } from './paths';
import { isUsedAsThing } from './facts';
import { assignments } from './scan';
import { write } from './variables';
import { unread, type Unread, type Value } from './values';

/** What a call that can't be read may have done. */

export function unknownCall(m: Machine, args: readonly ArgumentValue[], place: Place, words: string, why?: string): Unread {
  const isDiscarded = m.discarded?.kind === 'call' && m.discarded.span.start === place.span.start && m.discarded.span.end === place.span.end;
  const name = lastName(words) ?? words;
  const mayChange = !HARMLESS.test(name) && (isDiscarded || !ASKING.test(name));
  const reason = unread(why ?? `can't read the call \`${words}(...)\`: no function of that name is in this project or in the library tables`, place);
  damage(m, args, reason);
  if (mayChange) for (const { value } of args) breakOutside(m, value, reason);
  return reason;
}

/** What is called for its effect by these names shows, keeps or tests things and leaves them as they are. */
const HARMLESS = /^(?:assert|check|validate|verify|log|debug|trace|warn|error|info|report|print|plot|draw|paint|render|show|display|emit|notify|record|invariant|expect)(?![a-z])/;

/** What is called for its value by these names works something out of what it is given, and leaves that as it is. */
const ASKING = /^(?:get|is|has|to|as|of|from|compute|calc|calculate|evaluate|eval|estimate|predict|measure|find|lookup|read|interp|interpolate|sum|mean|count|length|norm|dot|cross|sin|cos|tan|min|max|abs|hypot|clamp|lerp|new|create|make|clone|copy|format|String|Number|Boolean|parse[A-Z]\w*)(?![a-z])/;

function breakOutside(m: Machine, value: Value, why: Unread): void {
  if (value.kind !== 'object') return;
  const data = m.store.data(value.id);
  if (data.kind !== 'generic' || data.generic.path === 'this') return;
  const paths = [data.generic.path, ...data.generic.aliases];
  if (data.generic.info || paths.some((p) => m.naming.hasReadBelow(p) || isUsedAsThing(m.request.program, p))) m.breakObject(value.id, why);
}

/** Things made here that an unknown call was given may be changed by it. */
export function damage(m: Machine, args: readonly ArgumentValue[], why: Unread): void {
  const seen = new Set<number>();
  const stack = args.map((a) => a.value);
  while (stack.length > 0) {
    const v = stack.pop()!;
    if (v.kind === 'choice') stack.push(v.whenTrue, v.whenFalse);
    if (v.kind === 'function') {
      for (const name of assignments(v.node).assigned) {
        const variable = v.scope.find(name);
        if (variable) write(m, variable, why);
      }
    }
    if (v.kind !== 'object' || seen.has(v.id)) continue;
    seen.add(v.id);
    const data = m.store.data(v.id);
    if (data.kind === 'list') stack.push(...data.items);
    else if (data.kind === 'record') stack.push(...data.members.values());
    if (data.kind === 'list' || data.kind === 'record') m.breakObject(v.id, why);
    else if (data.kind === 'generic' && data.members.size > 0) {
      const own = m.store.writable(v.id);
      if (own.kind === 'generic') for (const key of [...own.members.keys()]) own.members.set(key, why);
    }
  }
}

const MUTATORS = /^(?:normali[sz]e|negate|invert|reset|clear|update|step|advance|integrate|zero|wrap|clamp|limit)$/i;

/** True for a call without arguments of a method that is not known and that is called for what it does. */
export function changesReceiver(m: Machine, e: Expression & { kind: 'call' }, name: string, f: Value, receiver: Value): boolean {
  if (f.kind !== 'object' || receiver.kind !== 'object' || e.optional) return false;
  const [callee, object] = [m.store.data(f.id), m.store.data(receiver.id)];
  if (callee.kind !== 'generic' || object.kind !== 'generic' || m.naming.hasRead(`${callee.generic.path}()`)) return false;
  if (fallbackOf(m, callee.generic)) return false;
  return m.discarded === e || MUTATORS.test(name);
}

/** A method that is not known may change what it is called on. */
export function unknownMethod(m: Machine, self: Value | undefined, args: readonly ArgumentValue[], place: Place, words: string): Unread {
  const data = self?.kind === 'object' ? m.store.data(self.id) : undefined;
  const harmless = HARMLESS.test(lastName(words) ?? words);
  const why = unknownCall(m, self && !harmless ? [...args, { value: self }] : args, place, words);
  if (self?.kind === 'object' && data?.kind === 'generic' && data.generic.path !== 'this' && !harmless) m.breakObject(self.id, why);
  return why;
}
