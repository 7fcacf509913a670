import type ts from 'typescript';
import type { Program } from '../../program/form';
import { findComments } from './comments';
import { Converter } from './converter';
import { exportedNames, topStatements } from './exports-object';
import { scriptsOnly } from './html';
import { exportsRecord } from './modules';
import { languageId, parseSource, syntaxErrors } from './source';
import { typeTable } from './type-table';

/**
 * TypeScript, JavaScript, TSX or JSX, or the scripts of an HTML page, in program form. The file's extension says which.
 * Spans are UTF-16 offsets into `text`. `comments` holds only those comments that contain `@visviva`.
 * Never throws: brackets that nest too deeply for the parser give a program with an error.
 */
export function parseTypeScript(file: string, text: string): Program {
  return programOf(file, text, (code) => parseSource(file, code));
}

export function programOf(file: string, text: string, parse: (code: string) => ts.SourceFile): Program {
  const language = languageId(file);
  try {
    const source = parse(language === 'html' ? scriptsOnly(text) : text);
    const top = topStatements(source);
    const errors = syntaxErrors(source);
    const converter = new Converter(source, exportedNames(top), errors.map((e) => e.span.start));
    const body = converter.statements(top);
    body.push(...exportsRecord(converter, body));
    return { language, indexBase: 0, body, types: typeTable(converter), comments: findComments(converter), errors };
  } catch (error) {
    if (!(error instanceof RangeError)) throw error;
    const message = 'Brackets or blocks nest too deeply here to be read; split the expression into named parts.';
    return { language, indexBase: 0, body: [], comments: [], errors: [{ message, span: { start: 0, end: text.length } }] };
  }
}
