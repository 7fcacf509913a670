import type { Expr, SymbolData } from '../expression/node';
import type { Place } from '../text/span';
import type { Expression } from './form';
import type { Machine } from './machine';
import { openKey, openKeyOf } from './open-keys';
import { lastName, memberPath, pathOf, spellings } from './paths';
import type { Meaning, ReadsBinding } from './reading';
import { nodesOf } from './scan';

/** What a name in the code means: one symbol, or several, between which nobody may guess. */
export type NameMeaning = { readonly expr: Expr; readonly text: string; readonly isFormula?: boolean } | { readonly ambiguous: readonly string[] };

/**
 * The meanings that `reads` and the agreement of names give to places in the code, with a record of the bindings made. Two
 * paths that agree with one symbol by name alone are told apart: both become free and are reported.
 */
export class Naming {
  private readonly reads = new Map<string, ReadsBinding>();
  /** `reads v[i] = ...`, by the text of its indices */
  private readonly openReads = new Map<string, ReadsBinding>();
  private readonly names = new Map<string, NameMeaning | undefined>();
  /** symbol -> the different things in the code that mean it by name alone */
  private readonly origins = new Map<string, { expr: Expr; paths: Map<string, Place> }>();
  private indexNames: ReadonlySet<string> | undefined;
  private readonly declared = new Map<number, boolean>();
  private readonly free = new Map<number, boolean>();
  /** Distinguishes the runs of different functions, each of which may have its own `p.m`. */
  run = 0;

  constructor(
    private readonly m: Machine,
    private readonly forcedFree: ReadonlySet<string>,
  ) {
    this.settle(() => undefined);
  }

  /** Once constants are known: `reads s[X] = x` with `const X = 0` is `reads s[0] = x`. */
  settle(indexOf: (e: Expression) => string | undefined): void {
    for (const binding of this.m.request.meanings.reads) {
      const path = pathOf(binding.target, indexOf);
      if (path !== undefined && !this.reads.has(path)) this.reads.set(path, binding);
      const open = path === undefined ? openKeyOf(binding.target) : undefined;
      if (open !== undefined) this.openReads.set(open, binding);
    }
  }

  /** What `reads` says about any of these paths. */
  read(paths: readonly string[], place: Place): Meaning | undefined {
    for (const path of paths) {
      const binding = this.reads.get(path);
      if (binding) {
        this.recordMeaning(path, binding.meaning, place);
        return binding.meaning;
      }
    }
    return undefined;
  }

  member(path: string, key: string): string {
    return memberPath(path, key);
  }

  /** What `reads` says about a path, without a record of it. */
  meaningOf(path: string): Meaning | undefined {
    return this.reads.get(path)?.meaning;
  }

  /** The one number that `reads` or its own name says a name is, without a record of it. */
  symbolOf(name: string): Expr | undefined {
    const read = this.meaningOf(name);
    if (read) return read.kind === 'scalar' ? read.expr : undefined;
    const meaning = this.byName(name);
    return meaning && 'expr' in meaning ? meaning.expr : undefined;
  }

  /** What `reads` says about the element at these indices, or about what it is in: `reads x[k] = [..]` for `x[k, 0]`. */
  openRead(root: Expression, indices: readonly Expression[]): { meaning: Meaning; path: string; length: number } | undefined {
    if (this.openReads.size === 0) return undefined;
    for (let length = indices.length; length > 0; length--) {
      const key = openKey(root, indices.slice(0, length));
      const binding = key === undefined ? undefined : this.openReads.get(key);
      if (binding) return { meaning: binding.meaning, path: binding.text.slice(0, binding.text.lastIndexOf(' = ')), length };
    }
    return undefined;
  }

  /** True for the list of some `reads v[i] = ...`. */
  hasOpenReads(name: string): boolean {
    for (const key of this.openReads.keys()) if (key.startsWith(`${name} `)) return true;
    return false;
  }

  /** Names in the indices of `reads v[i] = ...`, and of claims about `v[i + 1]`. */
  get openNames(): ReadonlySet<string> {
    if (this.indexNames) return this.indexNames;
    const names = new Set<string>();
    const targets = [...this.openReads.values()].map((b) => b.target);
    for (const e of [...targets, ...this.m.request.outputs.map((o) => o.expression)]) {
      if (e.kind !== 'index') continue;
      for (const node of nodesOf(e.indices)) if (isName(node)) names.add(node.name);
    }
    return (this.indexNames = names);
  }

  recordRead(path: string, meaning: Meaning, place: Place): void {
    this.recordMeaning(path, meaning, place);
  }

  hasRead(path: string): boolean {
    return this.reads.has(path);
  }

  /** True where some binding goes through this path: `reads p.m = ...` for `p`. */
  hasReadBelow(path: string): boolean {
    for (const key of this.reads.keys()) if (key.startsWith(`${path}.`) || key.startsWith(`${path}[`)) return true;
    return false;
  }

  /** The symbol a bare name agrees with, in any of its spellings. */
  byName(name: string): NameMeaning | undefined {
    const known = this.names.get(name);
    if (known !== undefined || this.names.has(name)) return known;
    let meaning: NameMeaning | undefined;
    for (const s of spellings(name.normalize('NFC'))) {
      const found = this.m.request.meanings.byName(s);
      if (found.length === 1) meaning = found[0]!;
      else if (found.length > 1) meaning = { ambiguous: found.map((f) => f.text) };
      if (meaning) break;
    }
    this.names.set(name, meaning);
    return meaning;
  }

  /** True for a name that `where` gives a formula: what the code computes under that name is its own answer. */
  isFormula(name: string): boolean {
    const meaning = this.byName(name);
    return meaning !== undefined && 'expr' in meaning && meaning.isFormula === true;
  }

  /** True for a name that agrees with a coordinate or a velocity. */
  isState(name: string): boolean {
    const meaning = this.byName(name);
    if (!meaning || 'ambiguous' in meaning || meaning.expr.op !== 'symbol') return false;
    return (meaning.expr.data as SymbolData).role === 'coordinate';
  }

  /** True for a name that agrees with the second time derivative of a coordinate. */
  isAcceleration(name: string): boolean {
    const meaning = this.byName(name);
    if (!meaning || 'ambiguous' in meaning || meaning.expr.op !== 'symbol') return false;
    const data = meaning.expr.data as SymbolData;
    return data.role === 'coordinate' && data.order >= 2;
  }

  family(paths: readonly string[]): readonly Meaning[] | undefined {
    for (const path of paths) {
      const name = lastName(path);
      const family = name === undefined ? undefined : this.m.request.meanings.familyByName(name);
      if (family) return family;
    }
    return undefined;
  }

  /**
   * The symbol that a thing reached by `path` means by its name. `origin` is what tells it from other things of that
   * name.
   */
  agree(name: string, path: string, origin: string, place: Place): Expr | undefined {
    const meaning = this.byName(name);
    if (!meaning) return undefined;
    if ('ambiguous' in meaning) {
      this.m.ambiguous(
        `\`${path}\` could mean ${meaning.ambiguous.join(' or ')}; say which with \`reads ${path} = ${meaning.ambiguous[0]}\``,
        place,
      );
      return undefined;
    }
    const key = `${this.run} ${origin}`;
    if (this.forcedFree.has(key)) return undefined;
    if (!this.m.quiet) {
      const id = `${this.run} ${meaning.text}`;
      let entry = this.origins.get(id);
      if (!entry) this.origins.set(id, (entry = { expr: meaning.expr, paths: new Map() }));
      if (!entry.paths.has(origin)) entry.paths.set(origin, place);
      this.record(path, meaning.expr, 'name', place);
    }
    return meaning.expr;
  }

  isForcedFree(origin: string): boolean {
    return this.forcedFree.has(`${this.run} ${origin}`);
  }

  /** Different things that agreed with one symbol, to be read again as free. */
  conflicts(): { keys: string[]; message: string; place: Place }[] {
    const found: { keys: string[]; message: string; place: Place }[] = [];
    for (const [id, entry] of this.origins) {
      if (entry.paths.size < 2) continue;
      const run = id.split(' ')[0]!;
      const inOrder = [...entry.paths].sort(([, a], [, b]) => a.span.start - b.span.start);
      const names = inOrder.map(([name]) => name);
      const shown = names.map((n) => `\`${n}\``).join(' and ');
      found.push({
        keys: names.map((n) => `${run} ${n}`),
        message: `${shown} could both mean the same symbol; say what each means with \`reads\``,
        place: inOrder[1]![1],
      });
    }
    return found;
  }

  /** True for an expression in which a symbol of the declaration occurs. */
  containsDeclared(expr: Expr): boolean {
    return this.contains(expr, this.declared, (symbol) => this.m.request.meanings.isDeclared(symbol));
  }

  /** True for an expression in which something occurs that nothing says the meaning of. */
  containsFree(expr: Expr): boolean {
    return this.contains(expr, this.free, (symbol) => this.m.free.has(symbol));
  }

  private contains(expr: Expr, known: Map<number, boolean>, isOne: (symbol: Expr) => boolean): boolean {
    const stack = [expr];
    while (stack.length > 0) {
      const e = stack[stack.length - 1]!;
      if (known.has(e.id)) {
        stack.pop();
        continue;
      }
      if (e.op === 'symbol') known.set(e.id, isOne(e));
      else {
        const open = e.args.filter((a) => !known.has(a.id));
        if (open.length > 0) {
          stack.push(...open);
          continue;
        }
        known.set(e.id, e.args.some((a) => known.get(a.id)!));
      }
      stack.pop();
    }
    return known.get(expr.id)!;
  }

  private recordMeaning(path: string, meaning: Meaning, place: Place): void {
    if (meaning.kind === 'scalar') this.record(path, meaning.expr, 'reads', place);
    else {
      const base = this.m.request.program.indexBase;
      meaning.items.forEach((item, k) => this.recordMeaning(`${path}[${k + base}]`, item, place));
    }
  }

  private record(code: string, meaning: Expr, how: 'reads' | 'name', place: Place): void {
    if (this.m.quiet) return;
    const key = `${code} ${meaning.id}`;
    if (!this.m.bindings.has(key)) this.m.bindings.set(key, { code: this.m.inWords(code), meaning, how, place });
  }
}

function isName(node: object): node is Expression & { kind: 'name' } {
  return 'kind' in node && node.kind === 'name' && 'name' in node;
}
