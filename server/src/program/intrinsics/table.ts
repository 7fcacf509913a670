import type { Place } from '../../text/span';
import { assignInto } from '../array-writes';
import { damage } from '../damage';
import type { ArgumentValue } from '../parameters';
import type { Machine } from '../machine';
import { withEach } from '../merging';
import { itemsOf, scalarOf } from '../numbers';
import { applyScalar } from '../scalar-call';
import type { Module } from '../scope';
import { changesOpen } from '../open-cells';
import { NOTHING, unread, type Value } from '../values';
import { ARRAY_NUMBERS } from './array-numbers';
import { ARRAY_SHAPES } from './array-shapes';
import { unknownName } from './keywords';
import { LISTS } from './lists';
import { HIGHER_ORDER } from './higher-order';
import { MATRICES } from './matrices';
import { NUMBERS } from './numbers';
import { PLAIN_LISTS } from './plain-lists';
import { RECORDS } from './records';

/** What an intrinsic is given: its receiver, or for a plain function its first argument, comes first. */
export interface Call {
  readonly module: Module;
  readonly args: readonly Value[];
  readonly named: ReadonlyMap<string, Value>;
  readonly place: Place;
  /** True where the first argument is the receiver of a method. */
  readonly isMethod: boolean;
}

export type Intrinsic = (m: Machine, call: Call) => Value;

export type IntrinsicTable = Readonly<Record<string, Intrinsic>>;

/** Operations on lists, records and matrices that all languages share, by name. */
export const INTRINSICS: ReadonlyMap<string, Intrinsic> = new Map(
  [LISTS, HIGHER_ORDER, RECORDS, MATRICES, NUMBERS, ARRAY_SHAPES, ARRAY_NUMBERS, PLAIN_LISTS].flatMap((table) => Object.entries(table)),
);

/** What is asked of a list without changing it. */
const LOOKING: ReadonlySet<string> = new Set(['array-transpose', 'array-shape', 'array-size', 'array-depth', 'array-flat', 'array-copy', 'list-length']);

function isNumberChoice(m: Machine, v: Value): boolean {
  return v.kind === 'choice' ? isNumberChoice(m, v.whenTrue) && isNumberChoice(m, v.whenFalse) : scalarOf(m, v) !== undefined;
}

export function runIntrinsic(m: Machine, module: Module, name: string, self: Value | undefined, args: readonly ArgumentValue[], place: Place): Value {
  if (self?.kind === 'choice') return withEach(m, self, place, (v) => runIntrinsic(m, module, name, v, args, place));
  const open = args.findIndex((a) => a.value.kind === 'choice' && !isNumberChoice(m, a.value));
  if (open >= 0) {
    return withEach(m, args[open]!.value, place, (v) =>
      runIntrinsic(m, module, name, self, args.map((a, k) => (k === open ? { ...a, value: v } : a)), place),
    );
  }
  const values = args.filter((a) => a.name === undefined).map((a) => a.value);
  if (self && !LOOKING.has(name) && changesOpen(m, self, name, values)) return NOTHING;
  const all = self ? [self, ...values] : values;
  if (name.startsWith('scalar:')) {
    const f = module.library.scalars.get(name.slice('scalar:'.length));
    return f ? applyScalar(m, f, all, place) : unread(`\`${name}\``, place);
  }
  const intrinsic = INTRINSICS.get(name);
  if (!intrinsic) return unread(`can't read \`${name}\``, place);
  const named = new Map(args.filter((a) => a.name !== undefined).map((a) => [a.name!, a.value]));
  const out = named.get('out');
  if (out && out.kind !== 'nothing') return writtenTo(m, out, place, () => runIntrinsic(m, module, name, self, args.filter((a) => a.name !== 'out'), place));
  named.delete('out');
  const unknown = unknownName(name, named.keys());
  if (unknown !== undefined) {
    const why = unread(`a call of the library with \`${unknown}=\`, whose effect is not known`, place);
    damage(m, args, why);
    return why;
  }
  return intrinsic(m, { module, args: all, named, place, isMethod: self !== undefined });
}

/** `out=`: what a function gives is written into an array that is there. */
export function writtenTo(m: Machine, out: Value, place: Place, value: () => Value): Value {
  if (out.kind !== 'object' || !itemsOf(m, out)) {
    const why = unread('a result that is written to something that is not known', place);
    damage(m, [{ value: out }], why);
    return why;
  }
  assignInto(m, out, value(), place);
  return out;
}
