import type { ClassNode, Expression, FunctionNode, Statement, Subject } from '../../program/form';
import { nodesOf, patternNames } from '../../program/scan';
import type { Document } from '../../workspace/documents';

const LONGEST = 40;
const MOST = 200;

/** What of the code `reads`, `checks` and `assume` may name: parameters, locals, fields and slots, as they are written. */
export function codeNames(
  document: Document,
  subject: Subject,
): { readonly parameters: string[]; readonly names: string[]; readonly functions: string[] } {
  const parameters = new Set<string>();
  const names = new Set<string>();
  const functions = new Set<string>();
  const nodes: FunctionNode[] = [];
  const body: unknown = subject.kind === 'function' ? subject.node : subject.kind === 'class' ? subject.node : document.program.body;
  if (subject.kind === 'function') nodes.push(subject.node);
  for (const node of nodes) for (const p of node.parameters.slice(node.selfParameter ? 1 : 0)) for (const n of patternNames(p.pattern)) parameters.add(n);
  const called = new Set<number>();
  for (const n of nodesOf(body)) {
    if (names.size >= MOST) break;
    if ('members' in n) for (const m of (n as ClassNode).members) if (m.node && m.kind === 'method') functions.add(m.name);
    const s = n as Statement;
    if (s.kind === 'declare') for (const name of patternNames(s.target)) names.add(name);
    if (s.kind === 'function' && subject.kind === 'file') functions.add(s.node.name);
    const e = n as Expression;
    if (e.kind === 'call') called.add(e.callee.span.start);
    if ((e.kind === 'member' || e.kind === 'index') && 'object' in e && isPath(e)) {
      const text = document.text.slice(e.span.start, e.span.end);
      if (text.length <= LONGEST && !text.includes('\n') && !called.has(e.span.start)) names.add(text);
    }
  }
  return { parameters: [...parameters], names: [...names].filter((x) => !parameters.has(x)), functions: [...functions] };
}

/** `p.m`, `s[0]`, `this.arm.l`: names, fields and slots with a plain index. */
function isPath(e: Expression): boolean {
  for (let x: Expression = e; ; ) {
    if (x.kind === 'member') x = x.object;
    else if (x.kind === 'index') {
      if (!x.indices.every((i) => i.kind === 'number' || i.kind === 'name' || i.kind === 'string')) return false;
      x = x.object;
    } else return x.kind === 'name' || x.kind === 'self';
  }
}
