import type { Parameter } from './form';
import type { Machine } from './machine';
import { unread, type FunctionValue, type Value } from './values';

/** Default values that are worked out once, where a function is defined, and shared by all its calls. */

/** A function with its defaults, in languages that work them out at its definition. */
export function withDefaults(m: Machine, f: FunctionValue): FunctionValue {
  if (!f.scope.frame.module.program.lateBinding) return f;
  const wanted = f.node.parameters.filter((p) => p.initial);
  if (wanted.length === 0) return f;
  return { ...f, defaults: new Map(wanted.map((p): [Parameter, Value] => [p, defaultOf(m, f, p)])) };
}

/** The default of one parameter; undefined where it has none. */
export function defaultOf(m: Machine, f: FunctionValue, p: Parameter): Value {
  const known = f.defaults?.get(p);
  if (known) return known;
  const value = m.evaluate(f.scope, p.initial!);
  const place = m.place(f.scope, p.initial!.span);
  const data = value.kind === 'object' ? m.store.data(value.id) : undefined;
  const isLiteral = p.initial!.kind !== 'name' && p.initial!.kind !== 'member';
  if (value.kind !== 'object' || !isLiteral || (data?.kind !== 'list' && data?.kind !== 'record')) return value;
  // Calls share it, so that what one of them writes is there for the next.
  return m.object({ ...data, held: unread('a default value that is changed: all calls share it', place) });
}
