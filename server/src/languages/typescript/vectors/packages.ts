import type { Meaning } from '../../../program/library';
import { parseTypeScript } from '../parse';
import { REACT } from './hooks';
import { GL_MATRIX } from './lists';
import { P5, THREE, VICTOR } from './objects';

/** Packages that are read by what they mean, most of them for their vectors: by the name they are imported under, or are known by in a page. */

const TEXTS: Readonly<Record<string, string>> = { three: THREE, p5: P5, victor: VICTOR, 'gl-matrix': GL_MATRIX, react: REACT };

/** Global name -> package, and the export it is where it is not the whole of it. */
const GLOBALS: ReadonlyMap<string, readonly [string, string?]> = new Map([
  ['THREE', ['three']],
  ['p5', ['p5']],
  ['createVector', ['p5', 'createVector']],
  ['Victor', ['victor', 'default']],
  ['glMatrix', ['gl-matrix']],
  ['React', ['react']],
  ...['useRef', 'useCallback', 'useMemo'].map((n): [string, [string, string]] => [n, ['react', n]]),
  ...['vec2', 'vec3', 'vec4', 'mat2', 'mat3'].map((n): [string, [string, string]] => [n, ['gl-matrix', n]]),
]);

const made = new Map<string, Meaning>();

function meaning(name: string): Meaning | undefined {
  const text = TEXTS[name];
  if (text === undefined) return undefined;
  let known = made.get(name);
  if (!known) made.set(name, (known = { name, program: parseTypeScript(`${name}.js`, text) }));
  return known;
}

/** `three`, `three/src/math/Vector3.js`, `https://.../three.module.js` */
export function meaningOfPackage(from: string): Meaning | undefined {
  if (from.startsWith('.')) return undefined;
  if (Object.hasOwn(TEXTS, from)) return meaning(from);
  const named = Object.keys(TEXTS).find((n) => from.startsWith(`${n}/`) || new RegExp(`^https?://.*[/@]${n}[@/.].*`).test(from));
  return named === undefined ? undefined : meaning(named);
}

export function meaningOfGlobal(name: string): { readonly of: Meaning; readonly exported?: string } | undefined {
  const found = GLOBALS.get(name);
  const of = found && meaning(found[0]);
  if (!found || !of) return undefined;
  return found[1] === undefined ? { of } : { of, exported: found[1] };
}
