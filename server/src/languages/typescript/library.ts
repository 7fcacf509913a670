import type { Library } from '../../program/library';
import { PACKAGE_CONSTANTS, PACKAGE_INTRINSICS, PACKAGE_MODULES, PACKAGE_SCALARS } from './library-packages';
import { CONSTANTS, SCALARS } from './library-scalars';
import { meaningOfGlobal, meaningOfPackage } from './vectors/packages';
import { SKETCH_CONSTANTS, SKETCH_INTRINSICS, SKETCH_SCALARS, bareName } from './library-sketch';

/**
 * What the standard library of JavaScript means. Names are looked up by dotted path after the names of the program, so
 * `const { sin } = Math`, `const M = Math` and `const s = Math.sin` all come back to these entries.
 */
export const typescriptLibrary: Library = {
  scalars: new Map([...SCALARS, ...PACKAGE_SCALARS, ...SKETCH_SCALARS]),
  constants: new Map([...CONSTANTS, ...PACKAGE_CONSTANTS, ...SKETCH_CONSTANTS]),
  intrinsics: new Map([
    ['Array', 'list-new'],
    ['Array.from', 'list-from'],
    ['Array.of', 'list-of'],
    ['Array.isArray', 'is-list'],
    ...numericArrays(),
    ['Object.assign', 'record-assign'],
    ['Object.keys', 'record-keys'],
    ['Object.values', 'record-values'],
    ['Object.entries', 'record-entries'],
    ['Object.fromEntries', 'record-from-entries'],
    ['Object.freeze', 'freeze'],
    ['Object.seal', 'identity'],
    ['Object.preventExtensions', 'identity'],
    ['structuredClone', 'deep-copy'],
    ['Object.hasOwn', 'record-has'],
    ['Boolean', 'to-condition'],
    // Beside their meaning as functions of numbers: `assume within limits` takes clips out.
    ['Math.min', 'number-min'],
    ['Math.max', 'number-max'],
    ...PACKAGE_INTRINSICS,
    ...SKETCH_INTRINSICS,
  ]),
  methods: new Map([
    ...listMethods(),
    ['record.hasOwnProperty', 'record-has'],
    ['scalar.valueOf', 'identity'],
  ]),
  modules: new Map(PACKAGE_MODULES),
  bare: bareName,
  packageMeaning: meaningOfPackage,
  globalMeaning: meaningOfGlobal,
  ignorable: new Set([
    ...'log info warn error debug trace assert table group groupEnd time timeEnd timeLog count'.split(' ').map((n) => `console.${n}`),
    'alert',
    // What these are given runs later.
    'setTimeout',
    'setInterval',
    'requestAnimationFrame',
    'queueMicrotask',
    'performance.mark',
    'performance.measure',
    'Error.captureStackTrace',
  ]),
};

/** `new Float64Array(4)` is four zeros, `new Float64Array(xs)` and `Float64Array.from(xs)` copies. */
function numericArrays(): [string, string][] {
  return ['Float64Array', 'Float32Array', 'Float16Array'].flatMap((name): [string, string][] => [
    [name, 'numbers-new'],
    [`${name}.from`, 'list-from'],
    [`${name}.of`, 'list-of'],
  ]);
}

function listMethods(): [string, string][] {
  const plain =
    'map forEach reduce reduceRight filter slice splice concat push pop shift unshift fill indexOf lastIndexOf includes every ' +
    'some find findIndex findLast findLastIndex flat flatMap reverse at keys entries with sort join';
  const named: [string, string][] = plain.split(' ').map((n) => [`list.${n}`, `list-${kebab(n)}`]);
  return [
    ...named,
    ['list.values', 'list-copy'],
    ['list.set', 'list-set-from'],
    ['list.subarray', 'list-view'],
    ['list.toReversed', 'list-reversed'],
    ['list.toSorted', 'list-sorted'],
    ['list.copyWithin', 'list-copy-within'],
  ];
}

function kebab(name: string): string {
  return name.replace(/[A-Z]/g, (c) => `-${c.toLowerCase()}`);
}
