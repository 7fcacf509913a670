import { defaultOf } from './defaults';
import { bindItem } from './patterns';
import type { Parameter } from './form';
import { fieldValue } from './generics';
import type { Machine } from './machine';
import { readMember } from './members';
import type { Scope } from './scope';
import { arrivalOf, arrive, declare } from './variables';
import { NOTHING, type FunctionValue, type Value } from './values';

/** Handing arguments over to a function's parameters. */

export interface ArgumentValue {
  readonly value: Value;
  readonly name?: string;
}

/** The name of an argument whose entries are given by their names: Python's `**params`. */
export const ENTRIES = '**';

export function bindParameters(m: Machine, f: FunctionValue, scope: Scope, args: readonly ArgumentValue[], self: Value | undefined): void {
  const positional = args.filter((a) => a.name === undefined).map((a) => a.value);
  const named = new Map(args.filter((a) => a.name !== undefined).map((a) => [a.name!, a.value]));
  const entries = named.get(ENTRIES);
  const list = [...f.node.parameters];
  const isStrict = scope.frame.module.program.lateBinding === true;
  if (f.node.selfParameter) {
    const first = list.shift();
    if (first) bindParameter(m, scope, first, self ?? positional.shift() ?? NOTHING);
  }
  for (const parameter of list) {
    if (parameter.restNamed) {
      bindParameter(m, scope, parameter, entries ?? m.object({ kind: 'record', members: new Map(named) }));
    } else if (parameter.rest) {
      bindParameter(m, scope, parameter, m.list(positional.splice(0)));
    } else {
      const name = parameter.pattern.kind === 'name' ? parameter.pattern.name : undefined;
      let value: Value | undefined;
      if (name !== undefined && named.has(name)) {
        value = named.get(name)!;
        named.delete(name);
      } else if (!parameter.keywordOnly && positional.length > 0) value = positional.shift()!;
      else if (name !== undefined && entries) value = readMember(m, scope.frame.module, entries, name, m.place(scope, parameter.pattern.span));
      // What is given stands, also where it is nothing.
      if (isStrict && value) bindParameter(m, scope, { pattern: parameter.pattern, ...(parameter.field ? { field: true } : {}) }, value);
      else if (isStrict && parameter.initial) bindParameter(m, scope, parameter, defaultOf(m, f, parameter), true);
      else bindParameter(m, scope, parameter, value ?? NOTHING);
    }
  }
}

function bindParameter(m: Machine, scope: Scope, parameter: Parameter, value: Value, isDefault = false): void {
  bindItem(m, scope, isDefault ? { pattern: parameter.pattern } : parameter, value, (s, pattern, v, fromDefault) => {
    if (pattern.kind !== 'name') return;
    const place = m.place(s, pattern.span);
    const settled = fromDefault || isDefault ? arrive(m, pattern.name, v, arrivalOf(s, pattern.name, place)) : v;
    declare(m, s, pattern.name, settled);
    if (parameter.field && s.frame.self?.kind === 'object') {
      const { self } = s.frame;
      m.setMember(self, pattern.name, m.constructing?.id === self.id ? fieldValue(m, m.constructing, pattern.name, settled, place) : settled);
    }
  });
}
