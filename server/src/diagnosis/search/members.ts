import type { SubjectRequest } from '../../comparison/subject';
import type { Expr } from '../../expression/node';
import type { FunctionNode } from '../../program/form';
import { agree, type Atom } from './candidates/candidate';

/**
 * Whether the code itself shows that there is such a member: listed beside one that is, in the type of the parameter it
 * belongs to, or used by the class whose `this` it is. A name that merely would agree with the declaration is none.
 */
export function isMember(code: string, request: SubjectRequest, owner: FunctionNode | undefined, head: string, sibling: string, name: string): boolean {
  if (!isName(name)) return false;
  const { subject } = request;
  if (/^(this|self)\W/.test(head)) {
    const { span } = (subject.kind === 'function' ? subject.owner : subject.kind === 'class' ? subject.node : undefined) ?? { span: undefined };
    if (!span) return false;
    const used = new RegExp(`${head.replace(/[^\w]/g, '\\$&')}${name}(?![\\w(])`, 'u');
    const text = code.slice(span.start, span.end);
    return used.test(text) || new RegExp(`\\b(?:private|public|protected|readonly)\\s+${name}\\b`, 'u').test(text);
  }
  const group = typeGroup(code, owner, head);
  return group !== undefined && listed(group, sibling) && listed(group, name);
}

/**
 * Members of last resort: a declared parameter or input that the code has no name for at all, where an object hands over at
 * least two others under their declared names and nothing says that it has no more.
 */
export function lastMembers(
  request: SubjectRequest,
  atoms: readonly Atom[],
  code: string,
  columnOf: (symbol: Expr) => Float64Array | undefined,
): { readonly text: string; readonly value: Float64Array; readonly owner: Atom['owner']; readonly from: number }[] {
  const { system } = request.derived;
  const symbols = [...system.parameters, ...system.inputs].flatMap((d) => {
    const value = columnOf(d.symbol);
    return value && isName(d.name) ? [{ name: d.name, value }] : [];
  });
  const single = atoms.filter((a) => a.values.length === 1);
  const missing = symbols.filter((d) => !single.some((a) => agree(a.values[0]!, d.value, 1e-12)));
  if (missing.length === 0) return [];
  const heads = new Map<string, { count: number; atom: Atom }>();
  for (const a of single) {
    const member = /^([\p{L}_$][\p{L}\p{N}_$]*\.)([\p{L}_][\p{L}\p{N}_]*)$/u.exec(a.text);
    if (!member || /^(this|self)\./.test(a.text) || !symbols.some((d) => d.name === member[2] && agree(a.values[0]!, d.value, 1e-12))) continue;
    const known = heads.get(member[1]!);
    if (known) known.count++;
    else heads.set(member[1]!, { count: 1, atom: a });
  }
  return [...heads].flatMap(([head, { count, atom }]) => {
    if (count < 2 || typeGroup(code, atom.owner, head) !== undefined) return [];
    return missing.map((d) => ({ text: head + d.name, value: d.value, owner: atom.owner, from: atom.from }));
  });
}

function isName(name: string): boolean {
  return /^[\p{L}_][\p{L}\p{N}_]*$/u.test(name);
}

/** The members that the type of a parameter lists, as text. */
function typeGroup(code: string, owner: FunctionNode | undefined, head: string): string | undefined {
  const root = /^[\p{L}_$][\p{L}\p{N}_$]*(?=\W$)/u.exec(head)?.[0];
  if (!owner || root === undefined) return undefined;
  const signature = code.slice(owner.span.start, owner.bodySpan.start);
  const annotation = new RegExp(`(?<![\\w.])${root.replace(/\$/g, '\\$')}\\??\\s*:\\s*(?:(\\w+)|(\\{[^{}]*\\}))`, 'u').exec(signature);
  const type = annotation?.[1];
  if (!annotation || type === undefined) return annotation?.[2];
  return new RegExp(`\\b(?:interface|type)\\s+${type}\\b[^{}]*(\\{[^{}]*\\})`, 'u').exec(code)?.[1];
}

function listed(group: string, name: string): boolean {
  return new RegExp(`[{,;\\s]${name}\\s*\\??\\s*[:,;]`, 'u').test(group);
}
