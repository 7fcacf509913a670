import type { Rational } from '../expression/rational';
import type { Expression } from './form';

/**
 * Canonical paths: one text for every spelling of the same place in the code, so that `params["m"]` and `params.m`, or
 * `s[0]` read through an alias, meet.
 */

const IDENTIFIER = /^[\p{L}_$#][\p{L}\p{N}\p{M}_$]*$/u;

export function memberPath(object: string, name: string): string {
  if (/^\d+$/.test(name)) return `${object}[${name}]`;
  if (!IDENTIFIER.test(name)) return `${object}[${JSON.stringify(name)}]`;
  return object === '' ? name : `${object}.${name}`;
}

/** The last name of a path: `m` of `p.load.m` and of `p.m()`; undefined for an index. */
export function lastName(path: string): string | undefined {
  const bare = path.endsWith('()') ? path.slice(0, -2) : path;
  const m = /(?:^|\.)([\p{L}_$#][\p{L}\p{N}\p{M}_$]*)$/u.exec(bare);
  return m?.[1];
}

/**
 * The canonical path of an expression that only names a place; undefined for anything that computes.
 * @param indexOf the value of an index that is not literal, such as a named constant
 */
export function pathOf(e: Expression, indexOf: (e: Expression) => string | undefined = () => undefined): string | undefined {
  switch (e.kind) {
    case 'name':
      return e.name.normalize('NFC');
    case 'self':
      return 'this';
    case 'member': {
      const object = pathOf(e.object, indexOf);
      return object === undefined ? undefined : memberPath(object, e.name.normalize('NFC'));
    }
    case 'index': {
      let path = pathOf(e.object, indexOf);
      for (const i of e.indices) {
        if (path === undefined) return undefined;
        const key = keyOf(i) ?? indexOf(i);
        path = key === undefined ? undefined : memberPath(path, key);
      }
      return path;
    }
    case 'call': {
      const callee = pathOf(e.callee, indexOf);
      const args = e.args.map((a) => argumentText(a.value));
      return callee === undefined || args.includes(undefined) ? undefined : `${callee}(${args.join(', ')})`;
    }
    default:
      return undefined;
  }
}

function keyOf(e: Expression): string | undefined {
  if (e.kind === 'number' && e.value.isInteger) return e.value.toString();
  if (e.kind === 'string') return e.value.normalize('NFC');
  return undefined;
}

function argumentText(e: Expression): string | undefined {
  if (e.kind === 'number') return (e.value as Rational).toString();
  if (e.kind === 'string') return JSON.stringify(e.value);
  return pathOf(e);
}

/** A text that two expressions share exactly when they are the same but for places. */
export function shapeOf(e: Expression): string {
  return JSON.stringify(e, (key, value: unknown) => {
    if (key === 'span' || key === 'nameSpan' || key === 'opSpan' || key === 'text' || key === 'integer') return undefined;
    return typeof value === 'bigint' ? value.toString() : value;
  });
}

/** The names a bare name could be meant as, best first: as it is, then without getters and marks. */
export function spellings(name: string): string[] {
  const found = [name];
  const add = (s: string): void => {
    if (s !== '' && !found.includes(s)) found.push(s);
  };
  const bare = name.replace(/^[#_$]+|_+$/g, '');
  add(bare);
  const getter = /^(?:get|Get)_?(.+)$/.exec(bare);
  if (getter) {
    const rest = getter[1]!;
    if (/^[^a-z]/.test(rest) || bare.startsWith('get_')) {
      add(rest);
      add(rest[0]!.toLowerCase() + rest.slice(1));
    }
  }
  return found;
}
