import { codeDocs, type CodeDoc } from '../diagnosis/codes';
import { UsageError, type Io, type Status } from './io';

/** Prints what a code means, or the list of all. */
export function explain(code: string | undefined, io: Io): Status {
  if (code === undefined) {
    io.out(listText());
    return 0;
  }
  const doc = codeDocs.find((d) => d.code === code.toLowerCase());
  if (!doc) {
    throw new UsageError(`There is no code "${code}". The codes are: ${codeDocs.map((d) => d.code).join(', ')}.`);
  }
  io.out(explainText(doc));
  return 0;
}

function listText(): string {
  const width = Math.max(...codeDocs.map((d) => d.code.length));
  const lines = (about: CodeDoc['about']) =>
    codeDocs.filter((d) => d.about === about).map((d) => `  ${d.code.padEnd(width)}  ${d.title}`);
  return [
    'About a claim',
    ...lines('claim'),
    '',
    'About a declaration',
    ...lines('declaration'),
    '',
    'visviva explain CODE tells more about one.',
    '',
  ].join('\n');
}

export function explainText(doc: CodeDoc): string {
  const part = (title: string, body: string) => `${title}\n${indent(body.trim())}\n`;
  return [
    `${doc.code}: ${doc.title}\n`,
    part('What it means', doc.meaning),
    part('Why it matters', doc.why),
    part('How it is found', doc.found),
    part('Example', doc.example),
    part('What to do', doc.remedy),
  ].join('\n');
}

function indent(text: string): string {
  return text.split('\n').map((l) => (l === '' ? '' : `  ${l}`)).join('\n');
}
