import type { Expr } from '../../expression/node';
import { broadcast } from '../broadcast';
import { truthOf } from '../conditions';
import { areSwapped, unclip } from '../limits';
import type { Machine } from '../machine';
import { itemsOf, numeric } from '../numbers';
import { truncated } from '../truncate';
import { NOTHING, isUnread, unread, type Unread, type Value } from '../values';
import type { Call, IntrinsicTable } from './table';

function numbersIn(m: Machine, call: Call, list: readonly Value[]): Expr[] | Unread {
  const exprs: Expr[] = [];
  for (const v of list) {
    const n = numeric(m, v, call.place);
    if (isUnread(n)) return n;
    exprs.push(n);
  }
  return exprs;
}

function isReason(x: Expr[] | Unread): x is Unread {
  return !Array.isArray(x);
}

function each(m: Machine, call: Call, f: (args: readonly Value[]) => Value): Value {
  return broadcast(m, call.args, f, call.place);
}

/** min and max of several numbers; a clip within limits passes its argument. */
function limited(op: 'min' | 'max') {
  return (m: Machine, call: Call): Value =>
    each(m, call, (args) => {
      const exprs = numbersIn(m, call, args);
      if (isReason(exprs)) return exprs;
      if (exprs.length === 0) return unread(`the ${op} of nothing`, call.place);
      const e = m.graph.apply(op, exprs);
      return m.request.withinLimits ? passed(m, call, op, args, exprs, e) : m.scalar(e, call.place);
    });
}

/**
 * What a clip passes. A second bound on the same side, or bounds the wrong way round, are no clip: nothing passes them.
 */
function passed(m: Machine, call: Call, op: 'min' | 'max', args: readonly Value[], exprs: readonly Expr[], e: Expr): Value {
  const inner = unclip(e);
  const at = exprs.indexOf(inner);
  if (inner === e || at < 0 || exprs.length !== 2) return m.scalar(inner, call.place);
  const arg = args[at]!;
  const before = arg.kind === 'scalar' ? arg.clip : undefined;
  const bound = exprs[1 - at]!;
  const bounds = { ...before, [op]: bound };
  const whole = m.graph.apply(op, [before?.whole ?? inner, bound]);
  if (before?.[op] || (bounds.min && bounds.max && areSwapped(bounds.max, bounds.min))) return m.scalar(whole, call.place);
  return { kind: 'scalar', expr: inner, place: call.place, clip: { ...bounds, whole } };
}

/** A bound that is given by name. */
function bound(call: Call, k: number): Value | undefined {
  return k === 0 ? undefined : (call.named.get(k === 1 ? 'a_min' : 'a_max') ?? call.named.get(k === 1 ? 'min' : 'max'));
}

export const NUMBERS: IntrinsicTable = {
  'number-min': limited('min'),
  'number-max': limited('max'),
  /** `clamp(x, low, high)` */
  'number-clamp': (m, call) =>
    each(m, { ...call, args: [0, 1, 2].map((k) => call.args[k] ?? bound(call, k) ?? NOTHING) }, (args) => {
      const exprs = numbersIn(m, call, args.filter((a) => a.kind !== 'nothing'));
      if (isReason(exprs)) return exprs;
      const [x, low, high] = exprs;
      if (!x || !low || !high) return unread('a clip without two bounds', call.place);
      if (m.request.withinLimits && !areSwapped(low, high)) return m.scalar(x, call.place);
      return m.scalar(m.graph.apply('min', [m.graph.apply('max', [x, low]), high]), call.place);
    }),
  'number-hypot': (m, call) => {
    const only = call.args.length === 1 ? itemsOf(m, call.args[0]!) : undefined;
    if (!only && call.args.some((a) => itemsOf(m, a))) return each(m, call, (args) => NUMBERS['number-hypot']!(m, { ...call, args }));
    const exprs = numbersIn(m, call, only ?? call.args);
    return isReason(exprs) ? exprs : m.scalar(m.graph.sqrt(m.graph.sum(exprs.map((x) => m.graph.square(x)))), call.place);
  },
  'to-condition': (m, call) => {
    const v = call.args[0] ?? NOTHING;
    const t = truthOf(m, v, call.place);
    return isUnread(t) ? t : { kind: 'condition', expr: t, place: call.place };
  },
  /** The number itself: `Number(x)`, `float(x)`. */
  'number-same': (m, call) => {
    const v = call.args[0];
    if (!v) return unread('a number that is not given', call.place);
    if (itemsOf(m, v)) return v;
    const n = numeric(m, v, call.place);
    return isUnread(n) ? n : m.scalar(n, call.place);
  },
  /** `int(x)`: what is behind the point is dropped. */
  'number-whole': (m, call) => {
    const [v, base] = call.args;
    if (!v || base) return unread('a number made of a text', call.place);
    const n = numeric(m, v, call.place);
    return isUnread(n) ? n : { kind: 'scalar', expr: truncated(m.graph, n), place: call.place, integer: true };
  },
};
