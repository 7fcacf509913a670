import type { Expression } from '../../../program/form';
import { isBracketed, type Edit } from '../edits';
import type { Span } from '../../../text/span';
import type { Candidate, Maker, Scene, Spot } from './candidate';

/** A run of operands and operators as it stands in the source, brackets of its own left whole. */
interface Run {
  readonly units: readonly Unit[];
  readonly ops: readonly { readonly op: string; readonly at: { readonly start: number; readonly end: number } }[];
}

interface Unit {
  readonly node: Expression;
  /** With its brackets. */
  readonly start: number;
  readonly end: number;
  readonly inBrackets: boolean;
}

const ARITHMETIC: Readonly<Record<string, (a: number, b: number) => number>> = {
  '+': (a, b) => a + b,
  '-': (a, b) => a - b,
  '*': (a, b) => a * b,
  '/': (a, b) => a / b,
};

const MOST_UNITS = 12;

/**
 * One pair of brackets put in or taken away, or one operator changed, anywhere in a run of operands: what the text then
 * means is worked out anew by precedence.
 */
export const brackets: Maker = (scene, spot, give) => {
  const { site } = spot;
  const { node } = site;
  if (!isChain(node)) return;
  const parent = site.parent?.node;
  // The longest run speaks for its parts.
  if (parent && isChain(parent) && !isBracketed(site.span, scene.source)) return;
  const run = flatten(node, scene.source);
  const n = run.units.length;
  if (n < 3 || n > MOST_UNITS) return;
  const values = run.units.map((u) => scene.valuesOf(u.node, spot.evaluations));
  if (values.some((v) => v === undefined)) return;
  const known = values as (readonly Float64Array[])[];
  const ops = run.ops.map((o) => o.op);
  const evaluate = (group: readonly [number, number] | undefined, changed: readonly string[]): Float64Array[] =>
    spot.evaluations.map((_, k) => columnwise(known.map((v) => v[k]!), (x) => valueOf(x, changed, group)));

  for (let i = 0; i < n - 1; i++) {
    for (let j = i + 1; j < n; j++) {
      if (i === 0 && j === n - 1) continue;
      const edits: Edit[] = [
        { span: { start: run.units[i]!.start, end: run.units[i]!.start }, text: '(' },
        { span: { start: run.units[j]!.end, end: run.units[j]!.end }, text: ')' },
      ];
      give(candidate(scene, spot, edits, evaluate([i, j], ops), 'grouping', 1.4));
    }
  }
  run.ops.forEach(({ op, at }, k) => {
    for (const other of ['+', '-', '*', '/']) {
      if (other === op) continue;
      const changed = ops.map((o, i) => (i === k ? other : o));
      const isSign = isSum(op) && isSum(other);
      give(candidate(scene, spot, [{ span: at, text: other }], evaluate(undefined, changed), isSign ? 'sign' : 'wrong-operator', isSign ? 0.95 : 1.15, { start: at.start, end: run.units[k + 1]!.end }));
    }
  });
  run.units.forEach((unit, at) => {
    if (!unit.inBrackets || !isChain(unit.node)) return;
    const inner = flatten(unit.node, scene.source);
    const innerValues = inner.units.map((u) => scene.valuesOf(u.node, spot.evaluations));
    if (innerValues.some((v) => v === undefined) || inner.units.length + n > 2 * MOST_UNITS) return;
    const all = [...known.slice(0, at), ...(innerValues as (readonly Float64Array[])[]), ...known.slice(at + 1)];
    const joined = [...ops.slice(0, at), ...inner.ops.map((o) => o.op), ...ops.slice(at)];
    const result = spot.evaluations.map((_, k) => columnwise(all.map((v) => v[k]!), (x) => valueOf(x, joined, undefined)));
    const edits: Edit[] = [
      { span: { start: unit.start, end: unit.start + 1 }, text: '' },
      { span: { start: unit.end - 1, end: unit.end }, text: '' },
    ];
    give(candidate(scene, spot, edits, result, 'grouping', 1.4));
  });
};

function candidate(scene: Scene, spot: Spot, edits: readonly Edit[], values: Float64Array[], code: Candidate['code'], cost: number, place?: Span): Candidate {
  const { span } = spot.site;
  let text = scene.source.slice(span.start, span.end);
  for (const e of [...edits].sort((a, b) => b.span.start - a.span.start)) {
    text = text.slice(0, e.span.start - span.start) + e.text + text.slice(e.span.end - span.start);
  }
  return { site: spot.site, edits, code, ...(place ? { place } : {}), cost, values, label: `text ${text}`, old: spot.text, new: text };
}

function isSum(op: string): boolean {
  return op === '+' || op === '-';
}

function isChain(e: Expression): e is Expression & { readonly kind: 'binary' } {
  return e.kind === 'binary' && ARITHMETIC[e.op] !== undefined;
}

function flatten(top: Expression & { readonly kind: 'binary' }, source: string): Run {
  const units: Unit[] = [];
  const ops: { op: string; at: { start: number; end: number } }[] = [];
  const stack: (Expression | { op: string; at: { start: number; end: number } })[] = [top];
  while (stack.length > 0) {
    const x = stack.pop()!;
    if ('at' in x) {
      ops.push(x);
      continue;
    }
    const own = isBracketed(x.span, source);
    if (isChain(x) && (x === top || !own)) {
      stack.push(x.right, { op: x.op, at: x.opSpan }, x.left);
      continue;
    }
    let { start, end } = x.span;
    if (own && x.kind !== 'name' && x.kind !== 'number') {
      start = source.lastIndexOf('(', start - 1);
      end = source.indexOf(')', end) + 1;
    }
    units.push({ node: x, start, end, inBrackets: start < x.span.start });
  }
  return { units, ops };
}

/** A run's value by precedence, one stretch of it taken first. */
function valueOf(x: readonly number[], ops: readonly string[], group: readonly [number, number] | undefined): number {
  if (group) {
    const [i, j] = group;
    const inner = valueOf(x.slice(i, j + 1), ops.slice(i, j), undefined);
    return valueOf([...x.slice(0, i), inner, ...x.slice(j + 1)], [...ops.slice(0, i), ...ops.slice(j)], undefined);
  }
  let sum = 0;
  let sign = 1;
  let product = x[0]!;
  for (let k = 0; k < ops.length; k++) {
    const y = x[k + 1]!;
    if (ops[k] === '*') product *= y;
    else if (ops[k] === '/') product /= y;
    else {
      sum += sign * product;
      sign = ops[k] === '+' ? 1 : -1;
      product = y;
    }
  }
  return sum + sign * product;
}

function columnwise(columns: readonly Float64Array[], f: (x: readonly number[]) => number): Float64Array {
  return columns[0]!.map((_, s) => f(columns.map((c) => c[s]!)));
}
