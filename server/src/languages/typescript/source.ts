import ts from 'typescript';
import type { Program } from '../../program/form';

const KINDS: Readonly<Record<string, ts.ScriptKind>> = {
  ts: ts.ScriptKind.TS,
  mts: ts.ScriptKind.TS,
  cts: ts.ScriptKind.TS,
  tsx: ts.ScriptKind.TSX,
  html: ts.ScriptKind.JSX,
  htm: ts.ScriptKind.JSX,
};

/** `ts` of `src/crane.ts`, in lower case. */
export function extensionOf(file: string): string {
  return /\.([^./\\]+)$/.exec(file)?.[1]?.toLowerCase() ?? '';
}

/** The language's name in reports. */
export function languageId(file: string): 'typescript' | 'javascript' | 'html' {
  const extension = extensionOf(file);
  if (extension === 'html' || extension === 'htm') return 'html';
  return KINDS[extension] === undefined ? 'javascript' : 'typescript';
}

/**
 * The syntax tree; offsets in it are those of the text, byte order mark included.
 * @throws RangeError where brackets nest deeper than the parser's stack
 */
export function parseSource(file: string, text: string): ts.SourceFile {
  const options: ts.CreateSourceFileOptions = {
    languageVersion: ts.ScriptTarget.ESNext,
    jsDocParsingMode: ts.JSDocParsingMode.ParseNone,
  };
  const kind = KINDS[extensionOf(file)] ?? ts.ScriptKind.JS;
  // The name only has to be one for which the parser adds no rules of its own, as it does for declaration files.
  const name = kind === ts.ScriptKind.TSX ? 'file.tsx' : kind === ts.ScriptKind.TS ? 'file.ts' : 'file.jsx';
  return ts.createSourceFile(name, text, options, false, kind);
}

/** Syntax errors in the parser's words, in order of place. */
export function syntaxErrors(source: ts.SourceFile): Program['errors'] {
  const found = (source as { readonly parseDiagnostics?: readonly ts.DiagnosticWithLocation[] }).parseDiagnostics ?? [];
  return found
    .map((d) => ({
      message: ts.flattenDiagnosticMessageText(d.messageText, ' '),
      span: { start: d.start, end: d.start + d.length },
    }))
    .sort((a, b) => a.span.start - b.span.start);
}
