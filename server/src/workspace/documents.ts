import { languageOf, mayDeclare, type LanguageCore } from '../languages';
import { findBlocks } from '../notation';
import type { Block } from '../notation/tree';
import type { Program, Subject } from '../program/form';
import { LineIndex } from '../text/line-index';

/** One declaration in a document, with what it stands before. */
export interface PlacedBlock {
  readonly block: Block;
  readonly subject: Subject;
}

/** A document as read: text, program form and declarations. Immutable; a new text makes a new one. */
export interface Document {
  readonly file: string;
  readonly text: string;
  readonly language: string;
  /** Of the language, where the project says which. */
  readonly version: number | undefined;
  readonly core: LanguageCore;
  readonly program: Program;
  readonly lines: LineIndex;
  readonly blocks: readonly PlacedBlock[];
}

/** Trees of this many documents that are not open stay in memory. */
const MOST_CLOSED = 200;

/** The documents of a project: open ones by their editor text, others as `read` gives them. */
export class Documents {
  private readonly open = new Map<string, string>();
  private readonly parsed = new Map<string, Document>();
  private readonly cores = new Map<string, LanguageCore>();

  /** @param version the version of a language (by its id) that the project says a file is written in */
  constructor(
    private readonly read: (file: string) => string | undefined,
    private readonly version: (file: string, language: string) => number | undefined = () => undefined,
  ) {}

  update(file: string, text: string): void {
    this.open.set(file, text);
  }

  close(file: string): void {
    this.open.delete(file);
    this.parsed.delete(file);
  }

  invalidate(file: string): void {
    if (!this.open.has(file)) this.parsed.delete(file);
  }

  text(file: string): string | undefined {
    return this.open.get(file) ?? this.read(file);
  }

  /**
   * The text that a check of now goes by: that of the document as it was parsed, which a newer one on disk does not change
   * before it is told of.
   */
  readText(file: string): string | undefined {
    return this.get(file)?.text ?? this.text(file);
  }

  /** Loads what reads a file's language. */
  async prepare(file: string): Promise<void> {
    const language = languageOf(file);
    if (language && !this.cores.has(language.id)) this.cores.set(language.id, await language.load());
  }

  /** Undefined where the file can't be read, or its language is not loaded. */
  get(file: string): Document | undefined {
    const overlay = this.open.get(file);
    const known = this.parsed.get(file);
    const language = languageOf(file);
    const version = language && this.version(file, language.id);
    if (known && (overlay === undefined || known.text === overlay) && known.version === version) return known;
    const core = language && this.cores.get(language.id);
    const text = overlay ?? this.read(file);
    if (!core || text === undefined) return undefined;
    const program = core.parse(file, text, version);
    const blocks = mayDeclare(text)
      ? program.comments.flatMap((c) => findBlocks(text, c).map((block) => ({ block, subject: c.subject })))
      : [];
    const document = { file, text, language: language.id, version, core, program, lines: new LineIndex(text), blocks };
    this.parsed.delete(file);
    this.parsed.set(file, document);
    this.evict();
    return document;
  }

  private evict(): void {
    for (const file of this.parsed.keys()) {
      if (this.parsed.size <= MOST_CLOSED + this.open.size) return;
      if (!this.open.has(file)) this.parsed.delete(file);
    }
  }
}
