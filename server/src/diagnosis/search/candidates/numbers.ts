import type { Rational } from '../../../expression/rational';
import { Binding, bindingOf, bracket, replaceSite, type Edit } from '../edits';
import type { Site } from '../sites';
import type { Maker, Scene, Spot } from './candidate';

/** A constant in place of a number, or as a factor of a term. */
export const constants: Maker = (scene, spot, give) => {
  const { site, need, values, text } = spot;
  const { node } = site;
  if (node.kind === 'number') {
    const now = (node.value as Rational).toNumber();
    const wanted = need ? [commonOf(need)] : NUMBERS;
    for (const x of wanted) {
      if (x === undefined || Math.abs(x - now) < 1e-12) continue;
      const nice = writeNice(x, scene, node.text);
      if (!nice) continue;
      // A factor of 1 is not written.
      const without = nice.value === 1 ? withoutFactor(site, scene.source) : undefined;
      give({
        site,
        edits: [without?.edit ?? replaceSite(site, scene.source, nice.text, nice.binding)],
        code: 'factor',
        place: site.span,
        cost: 1.1 + 0.1 * nice.size,
        values: values.map((v) => new Float64Array(v.length).fill(nice.value)),
        label: `number ${nice.text}`,
        old: without?.old ?? text,
        new: without?.new ?? nice.text,
      });
    }
    return;
  }
  if (isInnerFactor(spot) || values.length === 0) return;
  const now = values[0]!;
  const wanted = need ? [commonOf(need.map((x, s) => x / now[s]!))] : FACTORS;
  for (const x of wanted) {
    if (x === undefined || Math.abs(x - 1) < 1e-9 || Math.abs(x + 1) < 1e-9) continue;
    const nice = writeNice(x, scene, undefined);
    if (!nice) continue;
    const inner = bindingOf(node) < Binding.product ? bracket(text) : text;
    const divisor = writeNice(1 / x, scene, undefined);
    const divides = divisor !== undefined && divisor.whole && !nice.whole;
    const whole = divides ? `${inner} / ${divisor.text}` : `${nice.binding < Binding.atom ? bracket(nice.text) : nice.text} * ${inner}`;
    give({
      site,
      edits: [replaceSite(site, scene.source, whole, Binding.product)],
      code: 'factor',
      cost: 2 + 0.1 * nice.size,
      values: values.map((v) => v.map((y) => nice.value * y)),
      label: `times ${nice.text}`,
      old: text,
      new: whole,
    });
  }
};

/** `x` for `2 * x`, `x * 2` or `x / 2`, in words and as an edit that takes the number and its operator away. */
function withoutFactor({ parent, span, role }: Site, source: string): { edit: Edit; old: string; new: string } | undefined {
  const p = parent?.node;
  if (p?.kind !== 'binary' || (p.op !== '*' && !(p.op === '/' && role === 'right'))) return undefined;
  const other = role === 'left' ? p.right : p.left;
  const gap = role === 'left' ? { start: span.start, end: p.opSpan.end } : { start: p.opSpan.start, end: span.end };
  // Brackets between the number and its operator would lose their partner.
  if (!/^[\s\w.*/]*$/.test(source.slice(gap.start, gap.end))) return undefined;
  const more = role === 'left' ? /^\s*/.exec(source.slice(gap.end))![0].length : -/\s*$/.exec(source.slice(0, gap.start))![0].length;
  const edit = { span: role === 'left' ? { start: gap.start, end: gap.end + more } : { start: gap.start + more, end: gap.end }, text: '' };
  const old = source.slice(p.span.start, p.span.end);
  const text = old.slice(0, edit.span.start - p.span.start) + old.slice(edit.span.end - p.span.start);
  return other.kind === 'number' ? undefined : { edit, old, new: text };
}

const NUMBERS = [0, 1, 2, 3, 4, 0.5, 1 / 3, 4 / 3, 12, 6];
const FACTORS = [2, 0.5, 3, 1 / 3, 4, 0.25, 4 / 3, 3 / 4];

/** A factor of a product has the same effect as the whole product; the product speaks for it. */
export function isInnerFactor(spot: Spot): boolean {
  const { parent, role } = spot.site;
  const p = parent?.node;
  if (!p) return false;
  if (p.kind === 'unary') return true;
  return p.kind === 'binary' && (p.op === '*' || (p.op === '/' && role === 'left'));
}

/** The value all have in common. */
export function commonOf(values: Float64Array): number | undefined {
  const first = values.find((x) => !Number.isNaN(x));
  if (first === undefined || !Number.isFinite(first)) return undefined;
  for (const x of values) if (!Number.isNaN(x) && !(Math.abs(x - first) <= 1e-7 * Math.abs(first) + 1e-12)) return undefined;
  return first;
}

interface Nice {
  readonly text: string;
  readonly value: number;
  readonly binding: Binding;
  readonly whole: boolean;
  /** 0 for small whole numbers. */
  readonly size: number;
}

const MOST = 24;

/** Numbers that people write in formulas: small whole numbers and fractions of them, with pi where the code has a name for it. */
export function writeNice(x: number, scene: Scene, like: string | undefined): Nice | undefined {
  const float = (like ?? '').includes('.') || needsPoint(scene);
  const write = (k: number): string => (float ? `${k}.0` : String(k));
  for (let q = 1; q <= MOST; q++) {
    const p = Math.round(x * q);
    if (p === 0 && (like === undefined || Math.abs(x) > 1e-9)) continue;
    if (Math.abs(p) > 400 || Math.abs(x - p / q) > 1e-8 * Math.max(1, Math.abs(x))) continue;
    const value = p / q;
    if (q === 1) return { text: write(p), value, binding: p < 0 ? Binding.sign : Binding.atom, whole: true, size: p > 12 ? 2 : 0 };
    if ([2, 4, 5, 8, 20].includes(q) && Math.abs(p) < 100) {
      return { text: String(value), value, binding: p < 0 ? Binding.sign : Binding.atom, whole: false, size: 1 };
    }
    return { text: `${write(p)} / ${write(q)}`, value, binding: Binding.product, whole: false, size: 1 + Math.log10(Math.abs(p) * q) };
  }
  return undefined;
}

/** In these `4 / 3` is not the division of integers. */
function needsPoint(scene: Scene): boolean {
  return !['typescript', 'javascript', 'html', 'python', 'matlab', 'octave', 'julia', 'r', 'lua'].includes(scene.program.language);
}
