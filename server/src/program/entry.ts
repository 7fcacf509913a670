import { classInfo } from './classes';
import { evaluate } from './expressions';
import type { Expression, ClassNode, FunctionNode, Parameter, Pattern, TypeNote } from './form';
import { addAlias, genericAt } from './generics';
import type { Machine } from './machine';
import { addTopLevel } from './modules';
import { factsOf } from './facts';
import { nodesOf, patternNames } from './scan';
import { Scope, type ClassInfo, type Frame, type Module } from './scope';
import { typeFacts, type Typed } from './type-notes';
import { declare, write } from './variables';
import { unread, type Value } from './values';

/** The state in which a function is entered: generic arguments, a generic receiver, the functions around it. */

export interface Entry {
  readonly scope: Scope;
  readonly info?: ClassInfo;
}

/** A scope for running `node` on generic arguments; `made` is where it closes over what a run has computed. */
export function enter(m: Machine, module: Module, node: FunctionNode, owner?: ClassNode, made?: Scope): Entry {
  // At the root, where what is found later about the names of these scopes is kept.
  const around = made ?? m.atRoot(() => surroundings(m, module, node));
  const info = owner ? classInfo(m, around, owner) : undefined;
  const self = receiver(m, module, around, node, info);
  const names = m.store.add({ kind: 'record', members: new Map() });
  m.frameNames.add(names);
  const frame: Frame = { module, node, self, names, depth: 0, ...(info ? { home: info } : {}) };
  const scope = new Scope(info?.scope ?? around, frame, true);
  const parameters = [...node.parameters];
  if (node.selfParameter) {
    const first = parameters.shift();
    if (first?.pattern.kind === 'name') declare(m, scope, first.pattern.name, self);
  }
  for (const p of parameters) enterParameter(m, scope, p);
  return { scope, ...(info ? { info } : {}) };
}

function receiver(m: Machine, module: Module, around: Scope, node: FunctionNode, info: ClassInfo | undefined): Value {
  const known = around.frame.self;
  if (known && !info) return known;
  const place = m.place(around, info ? info.node.nameSpan : node.nameSpan);
  if (info) return genericAt(m, 'this', place, { info });
  const thing = factsOf(module.program).holderOf(node);
  if (thing?.kind === 'name' && around.find(thing.name)) {
    const value = evaluate(m, around, thing);
    // What is done to `this` is done to the thing by its name.
    if (value.kind === 'object' && m.store.data(value.id).kind === 'generic') {
      addAlias(m, value, 'this');
      return value;
    }
  }
  return genericAt(m, 'this', place, thing ? { fallback: () => evaluate(m, around, thing), constant: true } : {});
}

function enterParameter(m: Machine, scope: Scope, parameter: Parameter): void {
  const { initial } = parameter;
  let first: Value | undefined;
  const fallback = initial ? (): Value => (first ??= evaluate(m, scope, initial)) : undefined;
  const note = parameter.note ?? (parameter.type && { class: parameter.type });
  enterPattern(m, scope, parameter.pattern, [], note && { note, scope }, fallback);
}

/** Each name of a parameter is a thing of its own: of a field that is renamed, by either name. */
function enterPattern(m: Machine, scope: Scope, pattern: Pattern, others: readonly string[], typed?: Typed, fallback?: () => Value): void {
  switch (pattern.kind) {
    case 'name': {
      const place = m.place(scope, pattern.span);
      const aliases = others.filter((o) => o !== pattern.name);
      declare(m, scope, pattern.name, genericAt(m, pattern.name, place, { aliases, ...typeFacts(m, typed), ...(fallback ? { fallback } : {}) }));
      return;
    }
    case 'list':
      for (const item of pattern.items) if (item) enterPattern(m, scope, item.pattern, [], partOf(typed, typed?.note.item));
      return;
    case 'record':
      for (const field of pattern.fields) enterPattern(m, scope, field.item.pattern, [field.name], partOf(typed, typed?.note.member?.(field.name)));
      if (pattern.rest) enterPattern(m, scope, pattern.rest, []);
      return;
    default:
      return;
  }
}

function partOf(typed: Typed | undefined, note: TypeNote | undefined): Typed | undefined {
  return typed && note && { note, scope: typed.scope };
}

/** The scopes of the functions around one, with generic arguments of their own. */
function surroundings(m: Machine, module: Module, node: FunctionNode): Scope {
  const { start, end } = node.span;
  const outer = factsOf(module.program).functions.filter((f) => f !== node && f.bodySpan.start <= start && end <= f.bodySpan.end);
  let scope = module.scope;
  for (const f of outer.sort((a, b) => a.span.start - b.span.start)) {
    const names = m.store.add({ kind: 'record', members: new Map() });
    m.frameNames.add(names);
    const self = f.inheritsSelf ? scope.frame.self : undefined;
    scope = new Scope(scope, { module, node: f, names, depth: 0, isAround: true, ...(self ? { self } : {}) }, true);
    for (const p of f.parameters) enterParameter(m, scope, p);
    forgetChanged(m, scope, f);
    for (const s of f.body) addTopLevel(m, module, scope, s);
  }
  return scope;
}

/** A parameter that the function around changes by its own statements is no longer what it was handed in as. */
function forgetChanged(m: Machine, scope: Scope, f: FunctionNode): void {
  for (const n of nodesOf(f.body, false)) {
    const e = n as Expression;
    if (e.kind !== 'assign' || !('target' in e)) continue;
    for (const name of patternNames(e.target)) {
      const variable = scope.variables.get(name);
      if (!variable) continue;
      write(m, variable, unread(`\`${name}\`, which \`${f.name}\` changes: put the declaration above \`${f.name}\``, m.place(scope, e.span)));
    }
  }
}
