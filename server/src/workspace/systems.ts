import { asCodeEnergies, readCodeEnergies } from '../comparison/code-energies';
import { checkDeclaration } from '../comparison/declaration';
import { Spellings } from '../comparison/spellings';
import { Graph } from '../expression/graph';
import { buildSystem, type CodeEnergies } from '../mechanics/build';
import { Derived } from '../mechanics/lagrange';
import type { DeclarationProblem, System } from '../mechanics/system';
import type { Block, Statement } from '../notation/tree';
import type { ReadRequest } from '../program/reading';
import type { Budget } from '../text/budget';
import type { Document, Documents } from './documents';

/** A resolved system, and where it was declared. */
export interface SystemEntry {
  readonly file: string;
  readonly block: Block;
  readonly derived: Derived;
  readonly spellings: Spellings;
  readonly problems: readonly DeclarationProblem[];
  /** Files read for it beyond its own. */
  readonly files: readonly string[];
  readonly energies: CodeEnergies;
  /** Set where a block that names the system adds to it (`near`, `ranges`, a step size): for that block alone. */
  readonly isExtended?: boolean;
}

export type Lookup =
  | { readonly kind: 'found'; readonly entry: SystemEntry }
  | { readonly kind: 'none' }
  | { readonly kind: 'several'; readonly files: readonly string[] };

/** A graph that many edits have filled is thrown away with its system. */
const MOST_NODES = 60_000;
const MOST_ENTRIES = 100;

/** What a block that names a system may add to it. */
const ADDITIONS: ReadonlySet<Statement['kind']> = new Set(['near', 'ranges', 'where', 'parameters', 'inputs', 'time'] as const);

/** Finds and keeps the systems that blocks declare or name. */
export class Systems {
  private readonly kept = new Map<string, SystemEntry>();

  constructor(
    private readonly documents: Documents,
    private readonly declarations: () => readonly string[],
    private readonly importFile: (core: Document) => ReadRequest['importFile'],
  ) {}

  /** The system a block declares or refers to by its name, with what the block adds to it. */
  async lookup(document: Document, block: Block, budget: Budget): Promise<Lookup> {
    const base = await this.lookupBase(document, block, budget);
    if (base.kind !== 'found' || declares(block)) return base;
    const additions = block.statements.filter((s) => ADDITIONS.has(s.kind));
    return additions.length === 0 ? base : { kind: 'found', entry: this.extended(base.entry, document, block, additions) };
  }

  private extended(base: SystemEntry, document: Document, block: Block, additions: readonly Statement[]): SystemEntry {
    const { system } = base.derived;
    const key = ['+', base.file, document.file, block.name, document.text.slice(block.span.start, block.span.end)].join('\u0000');
    const known = this.kept.get(key);
    // The same graph means the same base.
    if (known && known.derived.system.graph === system.graph) return moved(known, block);
    const merged = buildSystem({ ...system.block, statements: [...system.block.statements, ...additions] }, system.graph, base.energies);
    const before = new Set(base.problems.map((p) => p.message));
    const entry: SystemEntry = {
      ...base,
      file: document.file,
      block,
      derived: new Derived(merged),
      spellings: new Spellings(merged),
      problems: merged.problems.filter((p) => !before.has(p.message)),
      files: base.file === document.file ? [] : [base.file],
      isExtended: true,
    };
    this.keep(key, entry);
    return entry;
  }

  private keep(key: string, entry: SystemEntry): void {
    if (this.kept.size >= MOST_ENTRIES) this.kept.delete(this.kept.keys().next().value!);
    this.kept.delete(key);
    this.kept.set(key, entry);
  }

  private async lookupBase(document: Document, block: Block, budget: Budget): Promise<Lookup> {
    if (declares(block)) return { kind: 'found', entry: this.entry(document, block, budget) };
    const here = document.blocks.filter((b) => b.block.name === block.name && declares(b.block));
    if (here.length === 1) return { kind: 'found', entry: this.entry(document, here[0]!.block, budget) };
    if (here.length > 1) return { kind: 'several', files: here.map(() => document.file) };
    const found: { document: Document; block: Block }[] = [];
    for (const file of this.declarations()) {
      if (file === document.file) continue;
      if (!this.documents.text(file)?.includes(block.name)) continue;
      await this.documents.prepare(file);
      const other = this.documents.get(file);
      for (const b of other?.blocks ?? []) {
        if (b.block.name === block.name && declares(b.block)) found.push({ document: other!, block: b.block });
      }
    }
    if (found.length === 0) return { kind: 'none' };
    if (found.length > 1) return { kind: 'several', files: found.map((f) => f.document.file) };
    return { kind: 'found', entry: this.entry(found[0]!.document, found[0]!.block, budget) };
  }

  private entry(document: Document, block: Block, budget: Budget): SystemEntry {
    const definers = document.blocks.filter(
      (b) => b.block.name === block.name && b.block.statements.some((s) => s.kind === 'defines'),
    );
    const text = document.text.slice(block.span.start, block.span.end);
    // Energies in code depend on the whole file; typed ones on their block alone.
    const key = [document.file, block.name, text, definers.length > 0 ? document.text : ''].join('\u0000');
    const known = this.kept.get(key);
    if (known && known.derived.system.graph.nodes.length < MOST_NODES) return moved(known, block);
    const entry = budget.run('the declaration', () => this.build(document, block, definers, budget));
    if (!budget.why) this.keep(key, entry);
    return entry;
  }

  private build(document: Document, block: Block, definers: Document['blocks'], budget: Budget): SystemEntry {
    const graph = new Graph();
    let system: System = buildSystem(block, graph);
    const extra: DeclarationProblem[] = [];
    const files: string[] = [];
    let codeEnergies: CodeEnergies = new Map();
    if (definers.length > 0) {
      const derived = new Derived(system);
      const spellings = new Spellings(system);
      const energies = definers.flatMap((d) =>
        readCodeEnergies({
          block: d.block,
          derived,
          spellings,
          file: document.file,
          program: document.program,
          library: document.core.library,
          subject: d.subject,
          importFile: this.importFile(document),
          budget,
        }),
      );
      for (const e of energies) if (e.problem) extra.push(e.problem);
      codeEnergies = asCodeEnergies(energies);
      system = buildSystem(block, graph, codeEnergies);
      if (extra.length > 0 && !system.blocked) {
        system = { ...system, blocked: { reason: extra[0]!.message, span: extra[0]!.span } };
      }
    }
    const derived = new Derived(system);
    return {
      file: document.file,
      block,
      derived,
      spellings: new Spellings(system),
      problems: [...system.problems, ...extra, ...checkDeclaration(derived)],
      files,
      energies: codeEnergies,
    };
  }
}

export function declares(block: Block): boolean {
  return block.statements.some((s) => s.kind === 'coordinates');
}

/** The same declaration further down or up: its places move with it. */
function moved(entry: SystemEntry, block: Block): SystemEntry {
  const by = block.span.start - entry.block.span.start;
  if (by === 0) return entry;
  return {
    ...entry,
    block,
    problems: entry.problems.map((p) => ({ ...p, span: { start: p.span.start + by, end: p.span.end + by } })),
  };
}
