import { Binding, replaceSite } from '../edits';
import { agree, isVisible, seenAt, type Maker } from './candidate';

/** Another name that stands in the code, or a member or entry beside the one that stands there. */
export const names: Maker = (scene, spot, give) => {
  const { site, text, values, need } = spot;
  const { node } = site;
  const isName = node.kind === 'name' || node.kind === 'member' || node.kind === 'index';
  const isShort = isName || node.kind === 'number' || node.kind === 'call';
  if (!isShort && !need) return;
  const seen = new Set<string>([text]);
  const offer = (other: string, value: readonly Float64Array[], cost: number): void => {
    if (seen.has(other)) return;
    seen.add(other);
    if (need && !agree(value[0]!, need)) return;
    give({
      site,
      edits: [replaceSite(site, scene.source, other, Binding.atom)],
      code: 'swapped-symbol',
      cost: cost + (isName ? 0 : isShort ? 1 : 1.5 + 0.02 * text.length),
      values: value,
      label: `name ${other}`,
      old: text,
      new: other,
    });
  };
  for (const atom of scene.atoms) {
    if (atom.compound || !isVisible(atom, site)) continue;
    const seen = seenAt(atom, values.length);
    if (seen) offer(atom.text, seen, 1 + distance(text, atom.text));
  }
};

/** How unlike two names are, between 0 and 0.5: an index or a letter confused is likelier than a whole word. */
function distance(a: string, b: string): number {
  if (a === b) return 0;
  let start = 0;
  while (start < a.length && a[start] === b[start]) start++;
  let end = 0;
  while (end < a.length - start && end < b.length - start && a[a.length - 1 - end] === b[b.length - 1 - end]) end++;
  return 0.5 * (1 - (2 * (start + end)) / (a.length + b.length));
}
