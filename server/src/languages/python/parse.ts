import type { Program, Statement } from '../../program/form';
import { changingNames } from './bindings';
import { findComments } from './comments';
import { Converter } from './converter';
import type { Recovered } from './recover';
import { namedChildren, type Node } from './syntax';

/**
 * A module in program form. `comments` holds only those comments and docstrings that contain `@visviva`.
 * @param version 2 or 3, where the project says which
 */
export function programOf(recovered: Recovered, version?: number): Program {
  const { syntax, broken, lost, errors } = recovered;
  const { root } = syntax;
  const converter = new Converter(recovered.text, broken, lost, changingNames(recovered.text, root));
  const body = converter.statements(root.children);
  const known = new Set(body.flatMap(importedNames));
  const inner = converter.innerImports.filter((s) => importedNames(s).some((n) => !known.has(n)));
  return {
    language: 'python',
    indexBase: 0,
    listConcat: true,
    integers: true,
    ...(dividesIntegers(recovered.text, root, version) ? { dividesIntegers: true } : {}),
    lateBinding: true,
    negativeIndex: true,
    exportsAll: true,
    classFields: true,
    selfWord: 'self',
    body: [...inner, ...body],
    comments: findComments(converter, syntax),
    errors: [...errors, ...converter.errors],
  };
}

function importedNames(s: Statement): string[] {
  if (s.kind !== 'import') return [];
  return [...s.names.map((n) => n.local), ...(s.namespace === undefined ? [] : [s.namespace]), ...(s.all ? [`* of ${s.from}`] : [])];
}

/** Python 2, as the project says, or by its first line or a `print` statement, unless it asks for true division. */
function dividesIntegers(text: string, root: Node, version: number | undefined): boolean {
  const top = namedChildren(root);
  const asksForDivision = top.some(
    (n) => n.type === 'future_import_statement' && /\bdivision\b/.test(text.slice(n.start, n.end)),
  );
  if (asksForDivision) return false;
  if (version !== undefined) return version === 2;
  if (/^#!.*\bpython2(?:\.\d+)?\b/.test(text)) return true;
  if (/^#!.*\bpython3/.test(text)) return false;
  return /^[ \t]*print[ \t]+["'\w]/m.test(text) && hasPrintStatement(root);
}

function hasPrintStatement(root: Node): boolean {
  const stack: Node[] = [root];
  for (let n = stack.pop(); n; n = stack.pop()) {
    if (n.type === 'print_statement' || n.type === 'exec_statement') return true;
    if (n.type === 'module' || /(?:definition|statement|block|clause)$/.test(n.type)) stack.push(...n.children);
  }
  return false;
}

