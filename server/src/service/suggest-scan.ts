import type { Expression, FunctionNode, Pattern, Program, Statement } from '../program/form';
import { pathOf } from '../program/paths';
import { nodesOf, patternNames } from '../program/scan';

/** What a function names, for a first guess at what it is about. */

/** A place in the code that holds a number. */
export interface Slot {
  /** As `reads` writes it: `s[0]`, `p.m`, `th`. */
  readonly path: string;
  /** The name it goes by: of the local it is put in, or its last part. */
  readonly name: string;
}

export interface FunctionScan {
  /** Every slot that is read from outside, in the order of the code. */
  readonly slots: readonly Slot[];
  /** Locals that are assigned, in order. */
  readonly locals: readonly string[];
  /** Slots and names that are written in place. */
  readonly written: readonly { readonly path: string; readonly increment: boolean }[];
  /** The items of a returned list or record: a name where the item is one. */
  readonly returned: readonly { readonly key: string | undefined; readonly name: string | undefined }[] | 'value' | undefined;
  /** Names under a sine or cosine. */
  readonly angles: ReadonlySet<string>;
  readonly isComputing: boolean;
}

export function scanFunction(program: Program, f: FunctionNode): FunctionScan {
  const constants = indexConstants(program);
  const slots = new Map<string, Slot>();
  const locals: string[] = [];
  const written: { path: string; increment: boolean }[] = [];
  const angles = new Set<string>();
  const callees = new Set<object>();
  const inner = new Set<object>();
  const targets = new Set<object>();
  let returned: FunctionScan['returned'];
  let operations = 0;
  const whole = new Set<string>();
  const add = (path: string, name: string): void => {
    if (!slots.has(path)) slots.set(path, { path, name });
  };
  const own = new Set<string>();
  for (const p of f.parameters) if (p.pattern.kind !== 'name') for (const n of patternNames(p.pattern)) add(n, n);
  for (const node of nodesOf(f.body, false)) {
    const s = node as Statement;
    if (s.kind === 'declare' && s.value) {
      unpack(s.target, s.value, constants, add, own);
      locals.push(...patternNames(s.target));
    }
    if (s.kind === 'return' && s.value) returned = returnedBy(s.value);
    const e = node as Expression;
    if (e.kind === 'call' && 'callee' in e) {
      callees.add(e.callee);
      for (const inside of nodesOf(e.callee)) inner.add(inside);
      const trig = /(?:^|\.)(?:sin|cos)$/.test(pathOf(e.callee) ?? '');
      if (trig) for (const a of nodesOf(e.args.map((x) => x.value))) if ((a as Expression).kind === 'name') angles.add((a as { name: string }).name);
      if (trig) operations += 2;
    }
    if (e.kind === 'binary') operations++;
    if (e.kind === 'assign' && 'target' in e && e.target.kind !== 'list') {
      const path = e.target.kind === 'name' ? e.target.name : e.target.kind === 'place' ? pathOf(e.target.target, (i) => constants.get(pathOf(i) ?? '')) : undefined;
      if (e.target.kind === 'place' && !e.op) targets.add(e.target.target);
      if (path !== undefined) written.push({ path, increment: e.op === '+' });
    }
  }
  const parameters = f.parameters.flatMap((p) => (p.pattern.kind === 'name' ? [p.pattern.name] : []));
  for (const node of nodesOf(f.body, false)) {
    const e = node as Expression;
    if (inner.has(e) || !('span' in e)) continue;
    if ((e.kind === 'member' || e.kind === 'index') && 'object' in e) {
      const path = pathOf(e, (i) => constants.get(pathOf(i) ?? ''));
      for (const inside of nodesOf(e.object)) inner.add(inside);
      if (e.object.kind === 'name') whole.add(e.object.name);
      if (targets.has(e)) continue;
      const name = e.kind === 'member' ? e.name : undefined;
      if (path !== undefined && !/^(?:Math|np|numpy|math)\./.test(path) && !own.has(path)) add(path, name ?? constantName(e) ?? path);
    }
  }
  for (const n of parameters) if (!whole.has(n) && !own.has(n)) add(n, n);
  const globals = new Set(program.body.flatMap((s) => (s.kind === 'declare' ? patternNames(s.target) : [])));
  for (const node of nodesOf(f.body, false)) {
    const e = node as Expression;
    if (e.kind !== 'name' || inner.has(e) || callees.has(e) || !('span' in e)) continue;
    if (globals.has(e.name) && !locals.includes(e.name) && !whole.has(e.name) && !constants.has(e.name)) add(e.name, e.name);
  }
  return { slots: [...slots.values()], locals, written, returned, angles, isComputing: operations >= 3 };
}

/** `const X = 0`, and members of enums: what indices are called. */
function indexConstants(program: Program): ReadonlyMap<string, string> {
  const found = new Map<string, string>();
  for (const s of program.body) {
    if (s.kind === 'declare' && s.target.kind === 'name' && s.value?.kind === 'number' && s.value.value.isInteger && !s.mutable && /^[A-Z]/.test(s.target.name)) {
      found.set(s.target.name, s.value.value.toString());
    }
    if (s.kind !== 'enum') continue;
    for (const m of s.members) if (m.value?.kind === 'number') found.set(`${s.name}.${m.name}`, m.value.value.toString());
  }
  return found;
}

function constantName(e: Expression): string | undefined {
  const index = e.kind === 'index' ? e.indices[0] : undefined;
  const path = index && index.kind !== 'number' ? pathOf(index) : undefined;
  return path?.split('.').pop()?.toLowerCase();
}

/** `const [x, v] = s`, `const { m, l } = p`, `const th = s[0]`. */
function unpack(target: Pattern, value: Expression, constants: ReadonlyMap<string, string>, add: (path: string, name: string) => void, own: Set<string>): void {
  const path = pathOf(value, (i) => constants.get(pathOf(i) ?? ''));
  if (path === undefined) return;
  if (target.kind === 'name') {
    if (value.kind !== 'index' && value.kind !== 'member') return;
    add(path, target.name);
  } else if (target.kind === 'list') {
    own.add(path);
    target.items.forEach((item, k) => item?.pattern.kind === 'name' && add(`${path}[${k}]`, item.pattern.name));
  } else if (target.kind === 'record') {
    own.add(path);
    for (const field of target.fields) if (field.item.pattern.kind === 'name') add(`${path}.${field.name}`, field.item.pattern.name);
  }
}

function returnedBy(e: Expression): FunctionScan['returned'] {
  if (e.kind === 'list') return e.items.map((i) => ({ key: undefined, name: i.value.kind === 'name' ? i.value.name : undefined }));
  if (e.kind === 'record') {
    return e.fields.flatMap((x) => (x.kind === 'field' ? [{ key: x.name, name: x.value.kind === 'name' ? x.value.name : undefined }] : []));
  }
  return 'value';
}
