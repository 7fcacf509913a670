import { readsBindings, type SubjectRequest } from '../../comparison/subject';
import type { Expr, SymbolData } from '../../expression/node';
import { symbolsOf } from '../../expression/reach';
import { Tape } from '../../expression/tape';
import type { FunctionNode } from '../../program/form';
import type { Meaning } from '../../program/reading';
import { patternNames } from '../../program/scan';
import { contains } from '../../text/span';
import { agree, type Atom } from './candidates/candidate';
import { isMember, lastMembers } from './members';
import type { Model } from './model';
import type { Site, SourceMap } from './sites';

const LONGEST = 40;
const LONGEST_SUM = 24;
const MOST_SUMS = 24;
/** Angles of which sums and differences are thought of. */
const MOST_ANGLES = 4;

/** What the code has names for, with its values: what stands in it, what is bound, and what stands beside that. */
export class Atoms {
  private readonly atoms = new Map<string, Atom>();
  private readonly ends: Map<string, number>;
  private readonly subject: FunctionNode | undefined;

  constructor(
    private readonly request: SubjectRequest,
    private readonly model: Model,
    private readonly map: SourceMap,
    private readonly source: string,
    /** The source with its comments blank. */
    private readonly code: string,
  ) {
    this.subject = request.subject.kind === 'function' ? request.subject.node : undefined;
    this.ends = declarationEnds(map);
  }

  /** @param functions sines and cosines of the derived equations */
  gather(functions: readonly Expr[]): Atom[] {
    this.addPlaces();
    this.addLocals();
    for (const { text, expr } of this.model.tagged.names) this.add(text, this.model.value(expr), this.subject);
    this.addBound();
    this.addParts();
    this.addParameters();
    this.addMembers();
    this.addTwins();
    this.addFunctions(functions);
    this.addSums();
    return [...this.atoms.values()];
  }

  private add(text: string, values: Float64Array | readonly Float64Array[] | undefined, owner: Site['owner'], from = this.from(text, owner), compound = false): void {
    const columns = values instanceof Float64Array ? [values] : values;
    if (!columns?.every((v) => v?.every(Number.isFinite))) return;
    const key = `${text}\u0000${owner?.span.start ?? ''}\u0000${columns.length}`;
    if (!this.atoms.has(key)) this.atoms.set(key, { text, values: columns, from, owner, ...(compound ? { compound } : {}) });
  }

  private valuesAt(site: Site): Float64Array[] | undefined {
    const values = this.model.tagged.evaluations.get(site)?.map((e) => this.model.value(e.read));
    return values?.every((v) => v !== undefined) ? values : undefined;
  }

  private from(text: string, owner: Site['owner']): number {
    const name = /^[\p{L}_$][\p{L}\p{N}_$]*/u.exec(text)?.[0] ?? '';
    return this.ends.get(`${owner?.span.start ?? ''} ${name}`) ?? 0;
  }

  private textOf(site: Site): string {
    return this.source.slice(site.span.start, site.span.end);
  }

  private addPlaces(): void {
    for (const site of this.map.sites) {
      if (!['name', 'member', 'index', 'call'].includes(site.node.kind) || site.span.end - site.span.start > LONGEST) continue;
      this.add(this.textOf(site), this.valuesAt(site), site.owner);
    }
  }

  /** Locals of any function that have one value for good, used or not. */
  private addLocals(): void {
    const assigned = new Map<string, Site[]>();
    for (const site of this.map.sites) {
      const a = site.assignment;
      if (!a || a.value !== site.node) continue;
      for (const name of patternNames(a.target)) {
        const key = `${site.owner?.span.start ?? ''} ${name}`;
        assigned.set(key, [...(assigned.get(key) ?? []), site]);
      }
    }
    for (const sites of assigned.values()) {
      const a = sites[0]!.assignment!;
      if (sites.length === 1 && a.op === undefined && a.target.kind === 'name') this.add(a.target.name, this.valuesAt(sites[0]!), sites[0]!.owner, a.span.end);
    }
  }

  private addBound(): void {
    for (const binding of readsBindings(this.request.block, this.request.derived, [])) {
      const text = binding.text.split(' = ')[0]!;
      for (const entry of entriesOf(text, binding.meaning, this.request.program.indexBase)) this.add(entry.text, columnOf(this.model, entry.expr), this.subject);
    }
  }

  /** `spin` after `const { spin } = this`, `x` after `[x, v] = y`: what `this.spin` and `y[0]` are. */
  private addParts(): void {
    for (const site of this.map.sites) {
      const a = site.assignment;
      if (!a || a.value !== site.node || (a.target.kind !== 'record' && a.target.kind !== 'list')) continue;
      const whole = this.textOf(site);
      const isSelf = site.node.kind === 'self';
      const parts =
        a.target.kind === 'record'
          ? a.target.fields.map((f) => ({ pattern: f.item.pattern, text: `${whole}.${f.name}` }))
          : a.target.items.flatMap((item, i) => (item ? [{ pattern: item.pattern, text: `${whole}[${i + this.request.program.indexBase}]` }] : []));
      for (const { pattern, text } of parts) {
        if (pattern.kind !== 'name') continue;
        const known = [...this.atoms.values()].find((x) => x.text === text && (!x.owner || isSelf || contains(x.owner.span, site.span.start)));
        if (known) this.add(pattern.name, known.values, site.owner, a.span.end);
      }
    }
  }

  /** Parameters of the functions around the subject, by their names. */
  private addParameters(): void {
    const at = this.subject?.span.start;
    if (at === undefined) return;
    for (const f of this.map.functions) {
      if (!contains(f.span, at)) continue;
      for (const name of f.parameters.flatMap((p) => patternNames(p.pattern))) {
        const meanings = this.request.spellings.byName(name);
        if (meanings.length === 1) this.add(name, columnOf(this.model, meanings[0]!.expr), f);
      }
    }
  }

  /** `p.m1` where `p.m2` stands and both are declared, whether or not `p.m1` is read anywhere. */
  private addMembers(): void {
    const { system } = this.request.derived;
    const declared = [...system.parameters, ...system.inputs, ...system.coordinates];
    const seen = new Set<string>();
    for (const atom of [...this.atoms.values()]) {
      const member = /^(.*[.>])([\p{L}_][\p{L}\p{N}_]*)$/u.exec(atom.text);
      if (!member) continue;
      const head = member[1]!;
      const key = `${head} ${atom.owner?.span.start ?? ''}`;
      if (seen.has(key)) continue;
      seen.add(key);
      for (const d of declared) {
        const value = this.model.column(d.symbol);
        if (value && isMember(this.code, this.request, atom.owner, head, member[2]!, d.name)) this.add(head + d.name, value, atom.owner, atom.from);
      }
    }
    for (const m of lastMembers(this.request, [...this.atoms.values()], this.code, (s) => this.model.column(s))) this.add(m.text, m.value, m.owner, m.from);
  }

  /** `Math.cos(a - b)` where the code has `Math.sin(a - b)`. */
  private addTwins(): void {
    for (const site of this.map.sites) {
      const { node } = site;
      if (node.kind !== 'call' || node.args.length !== 1 || site.span.end - site.span.start > LONGEST) continue;
      const text = this.textOf(site);
      const match = /^((?:\w+(?:\.|::))*)(sin|cos)(?=\s*\()/.exec(text);
      const argument = match && this.map.byNode.get(node.args[0]!.value);
      const values = argument && this.valuesAt(argument);
      if (!values || !match) continue;
      const other = match[2] === 'sin' ? 'cos' : 'sin';
      this.add(match[1]! + other + text.slice(match[0].length), values.map((v) => v.map(Math[other])), site.owner, this.from(text, site.owner));
    }
  }

  /** `Math.sin(th)` where the derived equations have it, or one of the sum or difference of two angles, written as this file writes its functions. */
  private addFunctions(functions: readonly Expr[]): void {
    const plain = [...new Set(functions.map((f) => f.args[0]!))];
    const known = (value: Float64Array): Atom[] => [...this.atoms.values()].filter((a) => a.values.length === 1 && agree(a.values[0]!, value, 1e-12)).slice(0, 4);
    const put = (name: string, text: string, argument: Float64Array, from: number, owner: Site['owner']): void => {
      const prefix = prefixFor(this.code, name);
      const value = argument.map(name === 'sin' ? Math.sin : name === 'cos' ? Math.cos : Math.tan);
      if (prefix === undefined || known(value).some((a) => a.owner === owner)) return;
      this.add(`${prefix}${name}(${text})`, value, owner, from);
    };
    for (const f of functions.slice(0, 24)) {
      const argument = columnOf(this.model, f.args[0]!);
      if (argument) for (const a of known(argument)) put(f.op, a.text, argument, a.from, a.owner);
    }
    const angles = plain.filter((e) => e.op === 'symbol' && (e.data as SymbolData).role === 'coordinate').slice(0, MOST_ANGLES);
    angles.forEach((p, i) => {
      for (const q of angles.slice(i + 1)) {
        const [a, b] = [this.model.column(p), this.model.column(q)];
        const first = a && known(a)[0];
        const second = b && known(b).find((x) => x.owner === first?.owner);
        if (!first || !second) continue;
        for (const sign of [-1, 1]) {
          const argument = a.map((x, s) => x + sign * b[s]!);
          const named = known(argument)[0];
          const text = named?.text ?? `${first.text} ${sign < 0 ? '-' : '+'} ${second.text}`;
          for (const name of ['cos', 'sin']) put(name, text, argument, Math.max(first.from, second.from, named?.from ?? 0), first.owner);
        }
      }
    });
  }

  /** Short sums that stand in the code: `(m1 + m2)`. */
  private addSums(): void {
    let count = 0;
    for (const site of this.map.sites) {
      const { node } = site;
      if (node.kind !== 'binary' || (node.op !== '+' && node.op !== '-') || site.span.end - site.span.start > LONGEST_SUM) continue;
      const values = this.valuesAt(site);
      if (values?.length !== 1 || count++ > MOST_SUMS) continue;
      const text = this.textOf(site);
      const names = text.match(/[\p{L}_$][\p{L}\p{N}_$]*/gu) ?? [];
      this.add(`(${text})`, values, site.owner, Math.max(0, ...names.map((n) => this.from(n, site.owner))), true);
    }
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

/** Where names have their value, by function: the end of their declaration. Parameters and what comes from outside are not in it. */
function declarationEnds(map: SourceMap): Map<string, number> {
  const ends = new Map<string, number>();
  for (const { assignment: a, owner } of map.sites) {
    if (!a?.isDeclaration || a.target.kind !== 'name') continue;
    const key = `${owner?.span.start ?? ''} ${a.target.name}`;
    ends.set(key, Math.max(ends.get(key) ?? 0, a.span.end));
  }
  return ends;
}
