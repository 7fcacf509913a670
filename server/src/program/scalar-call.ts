import { broadcast } from './broadcast';
import type { ScalarFunction } from './library';
import { unclip } from './limits';
import type { Machine } from './machine';
import { withEach } from './merging';
import { itemsOf, numeric } from './numbers';
import type { Place } from '../text/span';
import { isUnread, unread, type Value } from './values';

/** A scalar function; over the items of a numeric vector where it is given one. */
export function applyScalar(m: Machine, f: ScalarFunction, args: readonly Value[], place: Place): Value {
  const choice = args.findIndex((a) => a.kind === 'choice');
  if (choice >= 0) {
    return withEach(m, args[choice]!, place, (v) => applyScalar(m, f, args.map((a, k) => (k === choice ? v : a)), place));
  }
  if (args.some((a) => itemsOf(m, a))) return broadcast(m, args, (each) => applyScalar(m, f, each, place), place);
  const exprs = [];
  for (const a of args) {
    const n = numeric(m, a, place);
    if (isUnread(n)) return n;
    exprs.push(n);
  }
  const r = f(m.graph, exprs);
  if ('unread' in r) return unread(r.unread, place);
  return m.scalar(m.request.withinLimits ? unclip(r) : r, place);
}
