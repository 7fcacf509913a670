import type { Expression } from './form';
import { pathOf, shapeOf } from './paths';

/** The list that an index expression goes into, through indices of indices; ranges over all at the end say nothing. */
export function indexChain(e: Expression & { kind: 'index' }): { root: Expression; indices: Expression[] } {
  const indices = [...e.indices];
  let root = e.object;
  while (root.kind === 'index') {
    indices.unshift(...root.indices);
    root = root.object;
  }
  const isWhole = (i: Expression | undefined): boolean => i?.kind === 'slice' && !i.from && !i.to && !i.step;
  while (indices.length > 1 && isWhole(indices[indices.length - 1])) indices.pop();
  return { root, indices };
}

/** The text by which `reads v[i] = ...` and `v[i]` in the code meet. */
export function openKey(root: Expression, indices: readonly Expression[]): string | undefined {
  const path = pathOf(root);
  return path === undefined ? undefined : [path, ...indices.map(shapeOf)].join(' ');
}

export function openKeyOf(e: Expression): string | undefined {
  if (e.kind !== 'index') return undefined;
  const { root, indices } = indexChain(e);
  return openKey(root, indices);
}
