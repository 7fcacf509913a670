import { pathOf, uriOf } from '../host/paths';

/** What a document without a file name is called, by its language, so that the service knows how to read it. */
const extensionOf: Readonly<Record<string, string>> = {
  typescript: '.ts',
  javascript: '.js',
  typescriptreact: '.tsx',
  javascriptreact: '.jsx',
  html: '.html',
  python: '.py',
  visviva: '.visviva',
};

/**
 * Translates between the editor's addresses and the service's file names, and gives back each address exactly as the
 * editor spelled it: editors encode the same path in several ways and only know their own.
 */
export class Addresses {
  private readonly opened = new Map<string, string>();

  fileOf(uri: string, languageId?: string): string {
    const path = pathOf(uri);
    if (path !== undefined) return path;
    const extension = extensionOf[languageId ?? ''] ?? '';
    return /\.\w+$/.test(uri) ? uri : uri + extension;
  }

  open(file: string, uri: string): void {
    this.opened.set(file, uri);
  }

  close(file: string): void {
    this.opened.delete(file);
  }

  uriOf(file: string): string {
    return this.opened.get(file) ?? (/^[a-z][\w+.-]+:/i.test(file) ? file : uriOf(file));
  }
}
