import type { Expression } from '../../../program/form';
import { Binding, bindingOf, bracket, replaceSite } from '../edits';
import { agree, map1, map2, type Maker } from './candidate';
import { isInnerFactor } from './numbers';

type OneArgument = (x: number) => number;

/** Functions that are taken for one another. */
const FAMILIES: readonly Readonly<Record<string, OneArgument>>[] = [
  { sin: Math.sin, cos: Math.cos, tan: Math.tan },
  { asin: Math.asin, acos: Math.acos, atan: Math.atan },
  { sinh: Math.sinh, cosh: Math.cosh, tanh: Math.tanh },
  { sqrt: Math.sqrt, abs: Math.abs, cbrt: Math.cbrt, exp: Math.exp, log: Math.log },
];

const MEANINGS = new Map<string, OneArgument>(FAMILIES.flatMap((f) => Object.entries(f)));

/** Another function of the same family, or none; arguments the other way round. */
export const functions: Maker = (scene, spot, give) => {
  const { site, text, values, evaluations } = spot;
  const { node } = site;
  if (node.kind !== 'call' || node.args.some((a) => a.spread)) return;
  const { source } = scene;
  if (node.args.length === 2) {
    const [a, b] = node.args as [{ value: Expression }, { value: Expression }];
    const texts = [a, b].map((x) => source.slice(x.value.span.start, x.value.span.end));
    if (texts[0] === texts[1]) return;
    const x = scene.valuesOf(a.value, evaluations);
    const y = scene.valuesOf(b.value, evaluations);
    const isAngle = x && y && values.every((v, k) => agree(v, x[k]!.map((p, s) => Math.atan2(p, y[k]![s]!))));
    give({
      site,
      edits: [
        { span: a.value.span, text: texts[1]! },
        { span: b.value.span, text: texts[0]! },
      ],
      code: 'swapped-symbol',
      cost: 1.6,
      ...(isAngle ? { values: map2(y, x, Math.atan2) } : {}),
      label: 'turned',
      old: `(${texts.join(', ')})`,
      new: `(${[...texts].reverse().join(', ')})`,
    });
    return;
  }
  if (node.args.length !== 1) return;
  const callee = source.slice(node.callee.span.start, node.callee.span.end);
  const match = /^(.*?)(\w+)$/s.exec(callee);
  if (!match) return;
  const name = match[2]!.replace(/^arc/, 'a');
  const own = MEANINGS.get(name) ?? MEANINGS.get(name.replace(/f$/, ''));
  const argument = scene.valuesOf(node.args[0]!.value, evaluations);
  if (!own || !argument || !values.every((v, k) => agree(v, argument[k]!.map(own)))) return;
  const family = FAMILIES.find((f) => Object.values(f).includes(own))!;
  const inside = source.slice(node.callee.span.end, node.span.end);
  for (const [other, f] of Object.entries(family)) {
    if (f === own) continue;
    // A bare name must be in use, or nothing says that it means anything.
    if (match[1] === '' && !new RegExp(`(?<![.:\\w])${other}\\b`).test(scene.code)) continue;
    const renamed = match[1]! + match[2]!.replace(name.startsWith('a') && name.length === 4 ? match[2]! : name.replace(/f$/, ''), other);
    give({
      site,
      edits: [{ span: node.callee.span, text: renamed }],
      code: 'wrong-function',
      cost: 1,
      values: map1(argument, f),
      label: `function ${other}`,
      old: text,
      new: renamed + inside,
    });
  }
  const bare = source.slice(node.args[0]!.value.span.start, node.args[0]!.value.span.end);
  give({
    site,
    edits: [replaceSite(site, source, bare, bindingOf(node.args[0]!.value))],
    code: 'wrong-function',
    cost: 1.9,
    values: argument,
    label: 'argument',
    old: text,
    new: bare,
  });
};

const EXPONENTS = [1, 2, 3, 4, 0.5, 1.5, -1, -2];

/** Another exponent, a power where there is none. */
export const powers: Maker = (scene, spot, give) => {
  const { site, text, values, evaluations } = spot;
  const { node } = site;
  const { source } = scene;
  const parts = powerParts(node);
  if (parts) {
    const base = scene.valuesOf(parts.base, evaluations);
    if (!base) return;
    const baseText = source.slice(parts.base.span.start, parts.base.span.end);
    for (const n of EXPONENTS) {
      if (n === parts.exponent) continue;
      give({
        site,
        edits: [{ span: parts.span, text: n < 0 ? bracket(String(n)) : String(n) }],
        code: 'wrong-power',
        cost: n === 1 ? 1.3 : n < 0 || n % 1 !== 0 ? 1.5 : 1.05,
        values: map1(base, (x) => Math.pow(x, n)),
        label: `power ${n}`,
        old: text,
        new: n === 1 ? baseText : text.slice(0, parts.span.start - site.span.start) + String(n) + text.slice(parts.span.end - site.span.start),
      });
    }
    if (parts.exponent === 2 && node.kind === 'binary') {
      give({
        site,
        edits: [replaceSite(site, source, baseText, bindingOf(parts.base))],
        code: 'wrong-power',
        cost: 1.25,
        values: base,
        label: 'base',
        old: text,
        new: baseText,
      });
    }
    return;
  }
  const isShort = node.kind === 'name' || node.kind === 'member' || node.kind === 'index' || node.kind === 'call';
  if (!isShort && isInnerFactor(spot)) return;
  if (node.kind === 'number' || !(isShort || bindingOf(node) <= Binding.product)) return;
  const least = isShort ? text : bracket(text);
  const square = squareText(scene.code, least);
  give({
    site,
    edits: [replaceSite(site, source, square.text, square.binding)],
    code: 'wrong-power',
    cost: isShort ? 1.35 : 1.8,
    values: map1(values, (x) => x * x),
    label: 'square',
    old: text,
    new: square.text,
  });
};

/** The way this file writes squares. */
function squareText(code: string, base: string): { text: string; binding: Binding } {
  if (/[\w)\]] ?\*\* ?2\b/.test(code)) return { text: `${base} ** 2`, binding: Binding.power };
  const call = /\b((?:Math\.)?pow)\(/.exec(code);
  if (call) return { text: `${call[1]}(${base}, 2)`, binding: Binding.atom };
  return { text: `${base} * ${base}`, binding: Binding.product };
}

function powerParts(node: Expression): { base: Expression; exponent: number; span: Expression['span'] } | undefined {
  let base: Expression | undefined;
  let exponent: Expression | undefined;
  if (node.kind === 'binary' && (node.op === '**' || node.op === 'elementwise-power')) [base, exponent] = [node.left, node.right];
  else if (node.kind === 'call' && node.args.length === 2) {
    const name = node.callee.kind === 'member' || node.callee.kind === 'name' ? node.callee.name : '';
    if (/^(pow|power|powf|powi|float_power)$/i.test(name)) [base, exponent] = [node.args[0]!.value, node.args[1]!.value];
  }
  if (!base || !exponent) return undefined;
  const negative = exponent.kind === 'unary' && exponent.op === '-';
  const literal = exponent.kind === 'unary' && exponent.op === '-' ? exponent.operand : exponent;
  if (literal.kind !== 'number') return undefined;
  return { base, exponent: (negative ? -1 : 1) * literal.value.toNumber(), span: exponent.span };
}
