import type { Expression } from '../../../program/form';
import { Binding, bindingOf, bracket, replaceSite, sourceOf } from '../edits';
import { isInnerFactor } from './numbers';
import { map1, map2, type Maker, type Scene, type Spot } from './candidate';

type Binary = Expression & { readonly kind: 'binary' };

const ARITHMETIC: Readonly<Record<string, (a: number, b: number) => number>> = {
  '+': (a, b) => a + b,
  '-': (a, b) => a - b,
  '*': (a, b) => a * b,
  '/': (a, b) => a / b,
};

/** Signs taken away, put in, or turned. */
export const signs: Maker = (scene, spot, give) => {
  const { site, text, values } = spot;
  const { node } = site;
  const { source } = scene;
  if (node.kind === 'unary' && node.op === '-') {
    const inner = source.slice(node.operand.span.start, node.operand.span.end);
    give({
      site,
      edits: [{ span: { start: site.span.start, end: site.span.start + text.length - text.replace(/^-\s*/, '').length }, text: '' }],
      code: 'sign',
      cost: 0.8,
      values: map1(values, (x) => -x),
      label: 'sign',
      old: text,
      new: inner,
    });
    return;
  }
  if (node.kind === 'binary' && (node.op === '+' || node.op === '-')) {
    const sides = sidesOf(scene, spot, node);
    const op = node.op === '+' ? '-' : '+';
    if (sides) {
      give({
        site,
        edits: [{ span: node.opSpan, text: op }],
        code: 'sign',
        place: { start: node.opSpan.start, end: node.right.span.end },
        cost: 0.9,
        values: map2(sides[0], sides[1], ARITHMETIC[op]!),
        label: 'operator ' + op,
        old: `${node.op} ${source.slice(node.right.span.start, node.right.span.end)}`,
        new: `${op} ${source.slice(node.right.span.start, node.right.span.end)}`,
      });
    }
  }
  const parent = site.parent?.node;
  // The sign of a factor or of a subtrahend is that of the whole term.
  if (parent?.kind === 'unary' || (parent?.kind === 'binary' && site.role === 'right' && !(parent.op === '-' || parent.op === '+'))) return;
  if (parent?.kind === 'binary' && site.role === 'right') return;
  if (node.kind === 'number' && parent?.kind === 'binary' && parent.op !== '*' && parent.op !== '/') return;
  const signed = bindingOf(node) < Binding.product || text.includes('**') ? `-${bracket(text)}` : `-${text}`;
  give({
    site,
    edits: [replaceSite(site, source, signed, Binding.sign)],
    code: 'sign',
    // A sign is lost where a value is made, sooner than where it is used.
    cost: bindingOf(node) < Binding.product ? 1.3 : bindingOf(node) === Binding.atom ? 1.15 : isInnerFactor(spot) ? 1.12 : 1.08,
    values: map1(values, (x) => -x),
    label: 'sign',
    old: text,
    new: signed,
  });
};

/** Another operator, or the operands the other way round. */
export const operators: Maker = (scene, spot, give) => {
  const { site, text } = spot;
  const { node } = site;
  if (node.kind !== 'binary') return;
  const isPower = node.op === '**';
  if (!ARITHMETIC[node.op] && !isPower) return;
  const sides = sidesOf(scene, spot, node);
  if (!sides) return;
  const { source } = scene;
  for (const op of ['*', '/', '+', '-']) {
    if (op === node.op || (isSum(op) && isSum(node.op))) continue;
    const binding = isSum(op) ? Binding.sum : Binding.product;
    const left = sourceOf(node.left, source, binding);
    const right = sourceOf(node.right, source, op === '+' ? Binding.sum : op === '*' ? Binding.product : ((binding + 1) as Binding));
    const keepsLevel = !isPower && isSum(op) === isSum(node.op);
    const whole = `${left} ${op} ${right}`;
    give({
      site,
      edits: keepsLevel ? [{ span: node.opSpan, text: op }] : [replaceSite(site, source, whole, binding)],
      code: 'wrong-operator',
      cost: keepsLevel ? 1.2 : 1.3,
      values: map2(sides[0], sides[1], ARITHMETIC[op]!),
      label: 'operator ' + op,
      old: text,
      new: whole,
    });
  }
  if (node.op === '-' || node.op === '/') {
    const binding = bindingOf(node);
    const whole = `${sourceOf(node.right, source, binding)} ${node.op} ${sourceOf(node.left, source, (binding + 1) as Binding)}`;
    give({
      site,
      edits: [replaceSite(site, source, whole, binding)],
      code: node.op === '-' ? 'sign' : 'wrong-operator',
      cost: 1.5,
      values: map2(sides[1], sides[0], ARITHMETIC[node.op]!),
      label: 'turned',
      old: text,
      new: whole,
    });
  }
};

/** One side of an operator left out. */
export const drops: Maker = (scene, spot, give) => {
  const { site, text } = spot;
  const { node } = site;
  if (node.kind !== 'binary') return;
  const sides = sidesOf(scene, spot, node);
  if (!sides) return;
  const { source } = scene;
  const isTerm = isSum(node.op);
  const sourceText = (e: Expression) => source.slice(e.span.start, e.span.end);
  give({
    site,
    edits: [replaceSite(site, source, sourceText(node.left), bindingOf(node.left))],
    code: isTerm ? 'extra-term' : node.op === '**' ? 'wrong-power' : 'factor',
    cost: node.op === '**' ? 1.4 : 1.8,
    values: sides[0],
    label: `only ${sourceText(node.left)}`,
    old: isTerm ? sourceText(node.right) : node.op === '**' ? text : sourceText(node.right),
    new: sourceText(node.left),
  });
  if (node.op === '**') return;
  const minus = node.op === '-';
  const right = minus ? `-${sourceOf(node.right, source, Binding.product)}` : sourceText(node.right);
  const inverse = node.op === '/';
  give({
    site,
    edits: [replaceSite(site, source, inverse ? `1 / ${sourceOf(node.right, source, Binding.power)}` : right, minus ? Binding.sign : inverse ? Binding.product : bindingOf(node.right))],
    code: isTerm ? 'extra-term' : 'factor',
    cost: inverse ? 2.2 : 1.8,
    values: map1(sides[1], (x) => (minus ? -x : inverse ? 1 / x : x)),
    label: `only ${right}`,
    old: sourceText(node.left),
    new: right,
  });
};

/** Brackets moved: (a op b) op2 c for a op (b op2 c), and the other way round. */
export const groupings: Maker = (scene, spot, give) => {
  const { site, text, evaluations } = spot;
  const { node } = site;
  const { source } = scene;
  const offer = (whole: string, binding: Binding, values: Float64Array[], cost = 1.4): void =>
    give({
      site,
      edits: [replaceSite(site, source, whole, binding)],
      code: 'grouping',
      cost,
      values,
      label: 'grouping',
      old: text,
      new: whole,
    });
  if (node.kind === 'unary' && node.op === '-' && node.operand.kind === 'binary') {
    const inner = node.operand;
    const a = scene.valuesOf(inner.left, evaluations);
    const b = scene.valuesOf(inner.right, evaluations);
    if (!a || !b || !isSum(inner.op)) return;
    const whole = `-${sourceOf(inner.left, source, Binding.product)} ${inner.op} ${sourceOf(inner.right, source, inner.op === '-' ? Binding.product : Binding.sum)}`;
    offer(whole, Binding.sum, map2(a, b, (x, y) => (inner.op === '+' ? -x + y : -x - y)));
    return;
  }
  if (node.kind !== 'binary' || !ARITHMETIC[node.op]) return;
  const f = ARITHMETIC[node.op]!;
  const { left, right } = node;
  if (left.kind === 'unary' && left.op === '-' && isSum(node.op)) {
    const a = scene.valuesOf(left.operand, evaluations);
    const b = scene.valuesOf(right, evaluations);
    if (a && b) offer(`-(${sourceOf(left.operand, source, Binding.sum)} ${node.op} ${sourceOf(right, source, Binding.product)})`, Binding.sign, map2(a, b, (x, y) => -f(x, y)));
  }
  if (left.kind === 'binary' && ARITHMETIC[left.op]) {
    const parts = [left.left, left.right, right].map((e) => scene.valuesOf(e, evaluations));
    if (parts.every((p) => p !== undefined)) {
      const [a, b, c] = parts as [Float64Array[], Float64Array[], Float64Array[]];
      const inner = `${sourceOf(left.right, source, bindingOfOp(node.op))} ${node.op} ${sourceOf(right, source, above(node.op))}`;
      const wrapped = needsBrackets(node.op, left.op) ? bracket(inner) : inner;
      const whole = `${sourceOf(left.left, source, bindingOfOp(left.op))} ${left.op} ${wrapped}`;
      offer(whole, bindingOfOp(left.op), map2(a, map2(b, c, f), ARITHMETIC[left.op]!));
    }
  }
  if (right.kind === 'binary' && ARITHMETIC[right.op]) {
    const parts = [left, right.left, right.right].map((e) => scene.valuesOf(e, evaluations));
    if (parts.every((p) => p !== undefined)) {
      const [a, b, c] = parts as [Float64Array[], Float64Array[], Float64Array[]];
      const join = (op: string, joinOp: string, cost: number): void => {
        const inner = `${sourceOf(left, source, bindingOfOp(op))} ${op} ${sourceOf(right.left, source, above(op))}`;
        const wrapped = bindingOfOp(op) < bindingOfOp(joinOp) ? bracket(inner) : inner;
        const whole = `${wrapped} ${joinOp} ${sourceOf(right.right, source, above(joinOp))}`;
        offer(whole, bindingOfOp(joinOp), map2(map2(a, b, ARITHMETIC[op]!), c, ARITHMETIC[joinOp]!), cost);
      };
      join(node.op, right.op, 1.4);
    }
    // a - (b - c) / d for (a - b - c) / d: the brackets moved, and those inside went.
    const deeper = right.left;
    if (deeper.kind === 'binary' && isSum(deeper.op) && isSum(node.op) && !isSum(right.op)) {
      const four = [left, deeper.left, deeper.right, right.right].map((e) => scene.valuesOf(e, evaluations));
      if (four.every((p) => p !== undefined)) {
        const [a, b, c, d] = four as Float64Array[][] as [Float64Array[], Float64Array[], Float64Array[], Float64Array[]];
        const inner = `${sourceOf(left, source, Binding.sum)} ${node.op} ${sourceOf(deeper.left, source, above(node.op))} ${deeper.op} ${sourceOf(deeper.right, source, above(deeper.op))}`;
        const whole = `(${inner}) ${right.op} ${sourceOf(right.right, source, above(right.op))}`;
        const sum = map2(map2(a, b, f), c, ARITHMETIC[deeper.op]!);
        offer(whole, Binding.product, map2(sum, d, ARITHMETIC[right.op]!), 1.6);
      }
    }
  }
};

export function isSum(op: string): boolean {
  return op === '+' || op === '-';
}

function bindingOfOp(op: string): Binding {
  return isSum(op) ? Binding.sum : Binding.product;
}

function above(op: string): Binding {
  return op === '+' ? Binding.sum : op === '*' ? Binding.product : ((bindingOfOp(op) + 1) as Binding);
}

function needsBrackets(inner: string, outer: string): boolean {
  if (isSum(inner) && !isSum(outer)) return true;
  return isSum(inner) === isSum(outer) && (outer === '-' || outer === '/' || inner === '/');
}

export function sidesOf(scene: Scene, spot: Spot, node: Binary): readonly [readonly Float64Array[], readonly Float64Array[]] | undefined {
  const left = scene.valuesOf(node.left, spot.evaluations);
  const right = scene.valuesOf(node.right, spot.evaluations);
  return left && right ? [left, right] : undefined;
}
