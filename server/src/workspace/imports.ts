import type { Library } from '../program/library';
import type { Program, Statement } from '../program/form';
import type { Document, Documents } from './documents';

type Imported = { readonly file: string; readonly program: Program; readonly library: Library };

/** Files that a check may pull in for one document. */
const MOST_FILES = 200;

/** Finds the files of the project that a document imports, and reads them when the executor asks. */
export class Imports {
  constructor(private readonly documents: Documents) {}

  /** Loads the parsers of all files reachable by imports; reading itself then needs no waiting. */
  async prepare(document: Document): Promise<void> {
    const seen = new Set([document.file]);
    const queue: Document[] = [document];
    while (queue.length > 0 && seen.size < MOST_FILES) {
      const next = queue.pop()!;
      for (const from of importsOf(next.program)) {
        const file = this.resolve(from, next);
        if (file === undefined || seen.has(file)) continue;
        seen.add(file);
        await this.documents.prepare(file);
        const other = this.documents.get(file);
        if (other) queue.push(other);
      }
    }
  }

  reader(document: Document): (from: string, importer: string) => Imported | undefined {
    return (from, importer) => {
      const base = importer === document.file ? document : this.documents.get(importer);
      const file = base && this.resolve(from, base);
      const other = file === undefined ? undefined : this.documents.get(file);
      return other && { file: other.file, program: other.program, library: other.core.library };
    };
  }

  private resolve(from: string, importer: Document): string | undefined {
    return importer.core.resolveImport?.(from, importer.file, { read: (file) => this.documents.text(file) });
  }
}

/** The texts of a program's imports, `require` calls at the top among them. */
function importsOf(program: Program): string[] {
  const out = new Set<string>();
  const visit = (statements: readonly Statement[]): void => {
    for (const s of statements) {
      if (s.kind === 'import') out.add(s.from);
      else if (s.kind === 'export' && s.from !== undefined) out.add(s.from);
      else if (s.kind === 'declare' && s.value?.kind === 'call') addRequire(s.value);
      else if (s.kind === 'declare' && s.value?.kind === 'member' && s.value.object.kind === 'call') addRequire(s.value.object);
      else if (s.kind === 'block') visit(s.body);
    }
  };
  const addRequire = (call: { readonly callee: { readonly kind: string }; readonly args: readonly { readonly value: { readonly kind: string } }[] }): void => {
    const callee = call.callee as { kind: string; name?: string };
    const arg = call.args[0]?.value as { kind: string; value?: unknown } | undefined;
    if (callee.kind === 'name' && callee.name === 'require' && arg?.kind === 'string') out.add(arg.value as string);
  };
  visit(program.body);
  return [...out];
}
