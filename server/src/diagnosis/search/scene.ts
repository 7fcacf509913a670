import { readsBindings, type SubjectRequest } from '../../comparison/subject';
import type { Expr } from '../../expression/node';
import { symbolsOf } from '../../expression/reach';
import { Tape } from '../../expression/tape';
import type { Expression, FunctionNode } from '../../program/form';
import type { Meaning } from '../../program/reading';
import type { Atom, Scene } from './candidates/candidate';
import { agree } from './candidates/candidate';
import type { Model } from './model';
import type { SourceMap } from './sites';
import type { Evaluation } from './tagged';

/** Gathers what the code has names for, with its values: what stands in it, what is bound, and what stands beside that. */
export function makeScene(request: SubjectRequest, model: Model, map: SourceMap, source: string, functions: readonly Expr[]): Scene {
  const atoms = new Map<string, Atom>();
  const add = (atom: Atom): void => {
    const key = `${atom.text}\u0000${atom.owner?.span.start ?? ''}\u0000${atom.values.length}`;
    if (!atoms.has(key)) atoms.set(key, atom);
  };
  const starts = declarationEnds(map);
  const from = (text: string): number => starts.get(/^[\p{L}_$][\p{L}\p{N}_$]*/u.exec(text)?.[0] ?? '') ?? 0;
  for (const site of map.sites) {
    const { node } = site;
    if (!['name', 'member', 'index', 'call'].includes(node.kind) || site.span.end - site.span.start > 40) continue;
    const values = model.tagged.evaluations.get(site)?.map((e) => model.value(e.read));
    if (!values?.every((v) => v?.every(Number.isFinite))) continue;
    const text = source.slice(site.span.start, site.span.end);
    add({ text, values: values as Float64Array[], from: from(text), owner: site.owner });
  }
  const subject = request.subject.kind === 'function' ? request.subject.node : undefined;
  for (const { text, expr } of model.tagged.names) {
    const value = model.value(expr);
    if (value?.every(Number.isFinite)) add({ text, values: [value], from: from(text), owner: subject });
  }
  const { indexBase } = request.program;
  for (const binding of readsBindings(request.block, request.derived, [])) {
    const text = binding.text.split(' = ')[0]!;
    for (const entry of entriesOf(text, binding.meaning, indexBase)) {
      const value = columnOf(model, entry.expr);
      if (value) add({ text: entry.text, values: [value], from: 0, owner: subject });
    }
  }
  const code = withoutComments(source, request);
  addMembers(request, model, code, [...atoms.values()], add);
  addFunctions(model, code, functions, [...atoms.values()], add);
  const valuesOf = (e: Expression, evaluations: readonly Evaluation[]): readonly Float64Array[] | undefined => {
    const own = model.tagged.evaluations.get(map.byNode.get(e)!);
    if (own?.length === evaluations.length) {
      const values = own.map((x) => model.value(x.read));
      return values.every((v) => v !== undefined) ? values : undefined;
    }
    const literal = literalValue(e);
    return literal === undefined ? undefined : evaluations.map(() => new Float64Array(model.n).fill(literal));
  };
  return {
    model,
    program: request.program,
    source,
    code,
    atoms: [...atoms.values()],
    siteOf: (e) => map.byNode.get(e),
    valuesOf,
    assignedBefore: (site, evaluations) => {
      const { start, end } = site.assignment!.target.span;
      const name = source.slice(start, end);
      const earlier = map.sites.filter(
        (s) =>
          s.owner === site.owner &&
          s.assignment?.value === s.node &&
          s.span.end < start &&
          source.slice(s.assignment.target.span.start, s.assignment.target.span.end) === name,
      );
      const last = earlier.at(-1);
      return last?.assignment?.op === undefined && last ? valuesOf(last.node, evaluations) : undefined;
    },
  };
}

/** `p.m1` where `p.m2` stands and both are declared, whether or not `p.m1` is read anywhere. */
function addMembers(request: SubjectRequest, model: Model, code: string, atoms: readonly Atom[], add: (atom: Atom) => void): void {
  const { system } = request.derived;
  const declared = [...system.parameters, ...system.inputs, ...system.coordinates];
  const seen = new Set<string>();
  for (const atom of atoms) {
    const member = /^(.*[.>])([\p{L}_][\p{L}\p{N}_]*)$/u.exec(atom.text);
    if (!member || !declared.some((d) => d.name === member[2])) continue;
    const head = member[1]!;
    const key = `${head} ${atom.owner?.span.start ?? ''}`;
    if (seen.has(key)) continue;
    seen.add(key);
    for (const d of declared) {
      const value = model.column(d.symbol);
      if (value && isMember(code, request, atom.owner, head, member[2]!, d.name)) add({ text: head + d.name, values: [value], from: atom.from, owner: atom.owner });
    }
  }
}

/**
 * Whether the code itself shows that there is such a member: listed beside one that is, in the type of the parameter it
 * belongs to, or used by the class whose `this` it is. A name that merely would agree with the declaration is none.
 */
function isMember(code: string, request: SubjectRequest, owner: FunctionNode | undefined, head: string, sibling: string, name: string): boolean {
  if (!/^[\p{L}_][\p{L}\p{N}_]*$/u.test(name)) return false;
  const { subject } = request;
  if (/^(this|self)\W/.test(head)) {
    const { span } = (subject.kind === 'function' ? subject.owner : subject.kind === 'class' ? subject.node : undefined) ?? { span: undefined };
    if (!span) return false;
    const used = new RegExp(`${head.replace(/[^\w]/g, '\\$&')}${name}(?![\\w(])`, 'u');
    return used.test(code.slice(span.start, span.end));
  }
  const root = /^[\p{L}_$][\p{L}\p{N}_$]*(?=\W$)/u.exec(head)?.[0];
  if (!owner || root === undefined) return false;
  const signature = code.slice(owner.span.start, owner.bodySpan.start);
  const annotation = new RegExp(`(?<![\\w.])${root.replace(/\$/g, '\\$')}\\??\\s*:\\s*(?:(\\w+)|(\\{[^{}]*\\}))`, 'u').exec(signature);
  if (!annotation) return false;
  const type = annotation[1];
  const group = type === undefined ? annotation[2] : new RegExp(`\\b(?:interface|type)\\s+${type}\\b[^{}]*(\\{[^{}]*\\})`, 'u').exec(code)?.[1];
  const key = (n: string) => new RegExp(`[{,;\\s]${n}\\s*\\??\\s*[:,;]`, 'u');
  return group !== undefined && key(sibling).test(group) && key(name).test(group);
}

function withoutComments(source: string, request: SubjectRequest): string {
  let code = source;
  for (const { span } of request.program.comments) code = code.slice(0, span.start) + ' '.repeat(span.end - span.start) + code.slice(span.end);
  return code;
}

/** `Math.sin(th)` where the derived equations have it, written as this file writes its functions. */
function addFunctions(model: Model, code: string, functions: readonly Expr[], atoms: readonly Atom[], add: (atom: Atom) => void): void {
  for (const f of functions.slice(0, 24)) {
    const inner = f.args[0]!;
    const prefix = prefixFor(code, f.op);
    if (prefix === undefined) continue;
    const value = columnOf(model, f);
    const argument = columnOf(model, inner);
    if (!value || !argument || atoms.some((a) => a.values.length === 1 && agree(a.values[0]!, value, 1e-12))) continue;
    const known = atoms.filter((a) => a.values.length === 1 && agree(a.values[0]!, argument, 1e-12));
    for (const a of known.slice(0, 4)) add({ text: `${prefix}${f.op}(${a.text})`, values: [value], from: a.from, owner: a.owner });
  }
}

/** What stands before the name of a function in this file: `Math.`, or nothing where the bare name is in use. */
export function prefixFor(code: string, name: string): string | undefined {
  if (new RegExp(`(?<![.:\\w])${name}\\s*\\(`).test(code)) return '';
  return /((?:\w+(?:\.|::))+)(?:sin|cos|tan|sqrt|pow|abs)\s*\(/.exec(code)?.[1];
}

/** Values at the sampled states of an expression of declared symbols. */
export function columnOf(model: Model, e: Expr): Float64Array | undefined {
  if (e.op === 'symbol') return model.column(e);
  if (symbolsOf(e).some((s) => !model.column(s))) return undefined;
  const value = new Tape([e]).run((s) => ({ values: model.column(s)! }), model.n).column(e).values;
  return value.every(Number.isFinite) ? value : undefined;
}

function entriesOf(text: string, meaning: Meaning, base: number): { text: string; expr: Expr }[] {
  if (meaning.kind === 'scalar') return [{ text, expr: meaning.expr }];
  return meaning.items.flatMap((item, i) => entriesOf(`${text}[${i + base}]`, item, base));
}

function literalValue(e: Expression): number | undefined {
  if (e.kind === 'number') return e.value.toNumber();
  if (e.kind === 'unary' && e.op === '-' && e.operand.kind === 'number') return -e.operand.value.toNumber();
  return undefined;
}

/** Where names have their value: the end of their declaration. Parameters and what comes from outside are not in it. */
function declarationEnds(map: SourceMap): Map<string, number> {
  const ends = new Map<string, number>();
  for (const { assignment: a } of map.sites) {
    if (!a?.isDeclaration || a.target.kind !== 'name') continue;
    ends.set(a.target.name, Math.max(ends.get(a.target.name) ?? 0, a.span.end));
  }
  return ends;
}
