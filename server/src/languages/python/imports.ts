import type { Statement } from '../../program/form';
import { type Context, nameText, spanOf, textOf } from './context';
import { child, children, type Node } from './syntax';

type Import = Extract<Statement, { kind: 'import' }>;

/** `import numpy as np`, `import scipy.linalg` (which makes `scipy` known). */
export function importModules(c: Context, node: Node): Statement[] {
  return children(node, 'name').map((n): Import => {
    const span = spanOf(n);
    if (n.type === 'aliased_import') {
      const from = child(n, 'name');
      const alias = child(n, 'alias');
      return { kind: 'import', from: dotted(c, from), names: [], ...(alias ? { namespace: nameText(c, alias) } : {}), span };
    }
    const path = dotted(c, n);
    const first = path.split('.')[0]!;
    return { kind: 'import', from: first, names: [], namespace: first, span };
  });
}

/** `from .rig import Crane as C`, `from math import *`. */
export function importFrom(c: Context, node: Node): Statement[] {
  const module = child(node, 'module_name');
  if (!module) return [];
  const span = spanOf(node);
  const from = dotted(c, module);
  if (node.children.some((n) => n.type === 'wildcard_import')) return [{ kind: 'import', from, names: [], all: true, span }];
  const names = children(node, 'name').map((n): Import['names'][number] => {
    const alias = n.type === 'aliased_import' ? child(n, 'alias') : undefined;
    const imported = dotted(c, n.type === 'aliased_import' ? child(n, 'name') : n);
    return { imported, local: alias ? nameText(c, alias) : imported, span: spanOf(n) };
  });
  return names.length === 0 ? [] : [{ kind: 'import', from, names, orModules: true, span }];
}

function dotted(c: Context, node: Node | undefined): string {
  return node ? textOf(c, node).replace(/\s+/g, '').normalize('NFC') : '';
}
