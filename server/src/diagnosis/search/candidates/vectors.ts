import { contains } from '../../../text/span';
import type { Site } from '../sites';
import type { Candidate } from './candidate';

const MOST = 16;

/**
 * Edits of expressions that are no numbers but vectors or matrices: operands of a product of vectors the other way round, a
 * sum for a difference. Only reading the edited text tells what they give.
 * @param isNumber tells the places whose values are known as numbers; they have candidates of their own
 */
export function vectorEdits(sites: readonly Site[], isNumber: (site: Site) => boolean, source: string): Candidate[] {
  const out: Candidate[] = [];
  const textOf = (span: { readonly start: number; readonly end: number }): string => source.slice(span.start, span.end);
  const inner = sites.filter(isNumber);
  for (const site of sites) {
    const { node } = site;
    if (isNumber(site) || out.length >= MOST) continue;
    // Something of it must count, or it is in code that no claim depends on.
    if (!inner.some((s) => contains(site.span, s.span.start) && contains(site.span, s.span.end)) && !sites.some((s) => s.parent === site)) continue;
    if (node.kind === 'call' && node.args.length === 2 && node.args.every((a) => !a.spread && a.name === undefined)) {
      const [a, b] = [node.args[0]!.value, node.args[1]!.value];
      const [x, y] = [textOf(a.span), textOf(b.span)];
      if (x === y || a.kind === 'number' || b.kind === 'number' || a.kind === 'function' || b.kind === 'function') continue;
      out.push({
        site,
        edits: [{ span: a.span, text: y }, { span: b.span, text: x }],
        code: 'swapped-symbol',
        // The order in a cross product is a sign that does not look like one.
        cost: /cross$/i.test(textOf(node.callee.span)) ? 0.95 : 1.2,
        label: 'turned',
        old: textOf(node.span),
        new: `${textOf({ start: node.span.start, end: a.span.start })}${y}${textOf({ start: a.span.end, end: b.span.start })}${x}${textOf({ start: b.span.end, end: node.span.end })}`,
      });
    } else if (node.kind === 'binary' && (node.op === '+' || node.op === '-')) {
      const op = node.op === '+' ? '-' : '+';
      const right = textOf(node.right.span);
      out.push({ site, edits: [{ span: node.opSpan, text: op }], code: 'sign', place: { start: node.opSpan.start, end: node.right.span.end }, cost: 1, label: `operator ${op}`, old: `${node.op} ${right}`, new: `${op} ${right}` });
    } else if (node.kind === 'unary' && node.op === '-') {
      const operand = textOf(node.operand.span);
      out.push({ site, edits: [{ span: node.span, text: operand }], code: 'sign', cost: 1, label: 'sign', old: textOf(node.span), new: operand });
    }
  }
  return out;
}
