import type { Machine } from '../machine';
import { dataOf } from '../numbers';
import { unread, type RecordData, type Value } from '../values';
import type { Call, IntrinsicTable } from './table';

function recordIn(m: Machine, call: Call, k: number): RecordData | Value {
  const v = call.args[k];
  if (!v || v.kind === 'unread') return v ?? unread('a record that is not given', call.place);
  const data = dataOf(m, v);
  if (data?.kind === 'record') return data;
  if (data?.kind === 'broken') return data.unread;
  if (data?.kind === 'list') {
    return { kind: 'record', members: new Map(data.items.map((item, i) => [String(i), item])) };
  }
  return unread('a thing whose members are not known', call.place);
}

function isRecord(x: RecordData | Value): x is RecordData {
  return x.kind === 'record';
}

export const RECORDS: IntrinsicTable = {
  'record-keys': (m, call) => {
    const r = recordIn(m, call, 0);
    return isRecord(r) ? m.list([...r.members.keys()].map((value) => ({ kind: 'string', value }))) : r;
  },
  'record-values': (m, call) => {
    const r = recordIn(m, call, 0);
    return isRecord(r) ? m.list([...r.members.values()]) : r;
  },
  'record-entries': (m, call) => {
    const r = recordIn(m, call, 0);
    return isRecord(r) ? m.list([...r.members].map(([value, v]) => m.list([{ kind: 'string', value }, v]))) : r;
  },
  'record-from-entries': (m, call) => {
    const list = call.args[0] && dataOf(m, call.args[0]);
    if (list?.kind !== 'list') return unread('a record made from a list that is not known', call.place);
    const members = new Map<string, Value>();
    for (const pair of list.items) {
      const data = dataOf(m, pair);
      const key = data?.kind === 'list' ? data.items[0] : undefined;
      if (data?.kind !== 'list' || key?.kind !== 'string') return unread('a record made from a list that is not known', call.place);
      members.set(key.value, data.items[1] ?? { kind: 'nothing' });
    }
    return m.object({ kind: 'record', members });
  },
  'record-assign': (m, call) => {
    const [target] = call.args;
    if (target?.kind !== 'object') return target ?? unread('a record that is not given', call.place);
    dataOf(m, target);
    for (let k = 1; k < call.args.length; k++) {
      if (call.args[k]!.kind === 'nothing') continue;
      const r = recordIn(m, call, k);
      if (!isRecord(r)) {
        m.breakObject(target.id, r.kind === 'unread' ? r : unread('members that are not known', call.place));
        return target;
      }
      for (const [key, v] of r.members) m.setMember(target, key, v);
    }
    return target;
  },
  freeze: (m, call) => {
    const [value] = call.args;
    const data = value?.kind === 'object' ? m.store.data(value.id) : undefined;
    if (value?.kind === 'object' && data?.kind === 'record') m.store.set(value.id, { ...data, frozen: true });
    return value ?? unread('a thing that is not given', call.place);
  },
  /** `Object.seal(x)` and the like: the thing itself. */
  identity: (_, call) => call.args[0] ?? unread('a thing that is not given', call.place),
  /** A copy with copies of everything in it. */
  'deep-copy': (m, call) => (call.args[0] ? clone(m, call.args[0], 0) : unread('a thing that is not given', call.place)),
  'record-has': (m, call) => {
    const [v, key] = call.args;
    const data = v && dataOf(m, v);
    if (key?.kind !== 'string' || (data?.kind !== 'record' && data?.kind !== 'generic')) return unread('whether a thing has a member', call.place);
    const has = data.kind === 'generic' || data.members.has(key.value);
    return { kind: 'condition', expr: has ? m.graph.true : m.graph.false, place: call.place };
  },
};

function clone(m: Machine, v: Value, depth: number): Value {
  if (v.kind !== 'object') return v;
  const data = dataOf(m, v)!;
  if (depth > 16) return unread('a thing nested too deeply', undefined);
  if (data.kind === 'list') return m.list(data.items.map((x) => clone(m, x, depth + 1)), data.array);
  if (data.kind === 'record') {
    return m.object({ ...data, frozen: false, members: new Map([...data.members].map(([k, x]) => [k, clone(m, x, depth + 1)])) });
  }
  if (data.kind === 'generic' && data.members.size === 0) {
    // A copy of a thing from outside starts with its members.
    return m.object({ ...data, members: new Map() });
  }
  return unread('a copy of a thing from outside that was changed', undefined);
}
