import type { Graph } from '../../expression/graph';
import type { Expr } from '../../expression/node';
import type { Expression, Program } from '../../program/form';
import type { ScalarFunction } from '../../program/library';
import { nodesOf } from '../../program/scan';

/**
 * The global style of p5.js sketches: mathematical functions and constants without a prefix (reference of p5.js, "Math"
 * and "Constants"). They are looked up last, so that a program's own names always come first.
 */

const ANGLES = new Set('sin cos tan asin acos atan atan2'.split(' '));

const BARE: ReadonlyMap<string, string> = new Map([
  ...'sin cos tan asin acos atan atan2 sqrt pow abs exp log floor ceil round min max'.split(' ').map((n): [string, string] => [n, `Math.${n}`]),
  ['PI', 'Math.PI'],
  ...'TWO_PI TAU HALF_PI QUARTER_PI sq constrain radians degrees mag dist lerp'.split(' ').map((n): [string, string] => [n, `sketch.${n}`]),
]);

export function bareName(name: string, program: Program): string | { readonly unread: string } | undefined {
  // The parser makes one name of `p.sin`, where `p` is the sketch.
  const own = name.slice(name.indexOf('.') + 1);
  const path = /^(?:module|exports)\./.test(name) ? undefined : BARE.get(own);
  if (path === undefined) return undefined;
  if (ANGLES.has(own) && countsDegrees(program)) {
    return { unread: `\`${name}\` counts in the unit that \`angleMode\` sets, which may not be radians` };
  }
  return path;
}

const degrees = new WeakMap<Program, boolean>();

/** True where the sketch sets another unit of angles than radians. */
function countsDegrees(program: Program): boolean {
  let known = degrees.get(program);
  if (known === undefined) {
    known = false;
    for (const n of nodesOf(program.body)) {
      const e = n as Expression;
      if (e.kind !== 'call' || !('callee' in e) || !isNamed(e.callee, 'angleMode')) continue;
      if (!isNamed(e.args[0]?.value, 'RADIANS')) known = true;
    }
    degrees.set(program, known);
  }
  return known;
}

function isNamed(e: Expression | undefined, name: string): boolean {
  return e?.kind === 'name' && (e.name === name || e.name.endsWith(`.${name}`));
}

const degree = (g: Graph): Expr => g.divide(g.pi, g.number(180));

function fixed(count: number, f: (g: Graph, args: readonly Expr[]) => Expr): ScalarFunction {
  return (g, args) => (args.length === count ? f(g, args) : { unread: 'a function of the sketch with other arguments than usual' });
}

export const SKETCH_SCALARS: readonly [string, ScalarFunction][] = [
  ['sketch.sq', fixed(1, (g, [x]) => g.square(x!))],
  ['sketch.radians', fixed(1, (g, [x]) => g.multiply(x!, degree(g)))],
  ['sketch.degrees', fixed(1, (g, [x]) => g.divide(x!, degree(g)))],
  ['sketch.mag', fixed(2, (g, [x, y]) => g.sqrt(g.add(g.square(x!), g.square(y!))))],
  [
    'sketch.dist',
    fixed(4, (g, [a, b, c, d]) => g.sqrt(g.add(g.square(g.subtract(c!, a!)), g.square(g.subtract(d!, b!))))),
  ],
  ['sketch.lerp', fixed(3, (g, [a, b, t]) => g.add(a!, g.multiply(t!, g.subtract(b!, a!))))],
];

export const SKETCH_CONSTANTS: readonly [string, (graph: Graph) => Expr][] = [
  ['sketch.TWO_PI', (g) => g.multiply(g.number(2), g.pi)],
  ['sketch.TAU', (g) => g.multiply(g.number(2), g.pi)],
  ['sketch.HALF_PI', (g) => g.divide(g.pi, g.number(2))],
  ['sketch.QUARTER_PI', (g) => g.divide(g.pi, g.number(4))],
];

export const SKETCH_INTRINSICS: readonly [string, string][] = [['sketch.constrain', 'number-clamp']];
