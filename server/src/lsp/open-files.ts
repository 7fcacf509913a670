import type { Diagnostic } from 'vscode-languageserver';
import type { TextDocument } from 'vscode-languageserver-textdocument';
import type { FileResult } from '../service/api';
import type { TextResult } from '../service/last-reading';

/** A document that is open in the editor, and what is known of it. */
export interface OpenFile {
  readonly file: string;
  readonly document: TextDocument;
  /** Other files that its last result was made from. */
  dependsOn: readonly string[];
  /** Its last result, and the version that it is about. */
  result: { readonly version: number; readonly result: FileResult } | undefined;
  /** What was last known of functions that are being typed now. */
  known: TextResult | undefined;
  /** The version whose check ran out of time. */
  ranOutAt: number | undefined;
  /** What the editor shows of it now; undefined before the first result. */
  published: { readonly version: number; readonly content: string } | undefined;
}

export class OpenFiles {
  private readonly byUri = new Map<string, OpenFile>();

  set(file: string, document: TextDocument): OpenFile {
    const open: OpenFile = { file, document, dependsOn: [], result: undefined, known: undefined, ranOutAt: undefined, published: undefined };
    this.byUri.set(document.uri, open);
    return open;
  }

  get(uri: string): OpenFile | undefined {
    return this.byUri.get(uri);
  }

  delete(uri: string): void {
    this.byUri.delete(uri);
  }

  all(): OpenFile[] {
    return [...this.byUri.values()];
  }

  isOpen(file: string): boolean {
    return this.all().some((open) => open.file === file);
  }

  dependents(file: string): OpenFile[] {
    return this.all().filter((open) => open.file !== file && open.dependsOn.includes(file));
  }
}

/** The text of a line (from 1) without its end. */
export function lineOf(document: TextDocument, line: number): string {
  if (line < 1 || line > document.lineCount) return '';
  return document
    .getText({ start: { line: line - 1, character: 0 }, end: { line, character: 0 } })
    .replace(/[\r\n]+$/, '');
}

/** Equal diagnostics have equal content. */
export function contentOf(diagnostics: readonly Diagnostic[]): string {
  return JSON.stringify(diagnostics);
}
