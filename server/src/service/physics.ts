import type { Verdict } from '@visviva/shared';
import type { Diagnosis } from '../diagnosis/diagnose';
import { symbolText, type SymbolData } from '../expression/node';
import { text } from '../expression/print';
import { Budget } from '../text/budget';
import { Documents } from '../workspace/documents';
import { Imports } from '../workspace/imports';
import { declares, Systems, type SystemEntry } from '../workspace/systems';
import type { Files } from './api';
import { checkDocument, subjectName, type BlockOutcome } from './check';
import { languageVersion } from './language-version';
import { ResultCache } from './result-cache';

/** What some files say of physics, and whether their code does it. */
export interface Physics {
  readonly systems: readonly PhysicsSystem[];
}

export interface PhysicsSystem {
  readonly name: string;
  readonly file: string;
  readonly entry: SystemEntry;
  /** The declaration's text, blanks and comment marks aside. */
  readonly declaration: string;
  readonly functions: readonly ClaimedFunction[];
}

/** A function with claims about the system. */
export interface ClaimedFunction {
  readonly file: string;
  readonly name: string;
  /** Its text, blanks aside. */
  readonly code: string;
  readonly claims: readonly { readonly output: string; readonly quantity: string; readonly verdict: Verdict; readonly reason?: string }[];
  /** What its names were taken for. */
  readonly bindings: ReadonlyMap<string, string>;
}

/** Reads and checks every declaration of the files. */
export async function readPhysics(files: Files, milliseconds: number): Promise<Physics> {
  const documents = new Documents((file) => files.read(file), (file, language) => languageVersion(files, file, language));
  const imports = new Imports(documents);
  const systems = new Systems(documents, () => files.declarations(), (d) => imports.reader(d));
  const project = { documents, systems, imports, results: new ResultCache<Diagnosis>((file) => documents.readText(file)) };
  const found: { name: string; file: string; entry: SystemEntry; declaration: string; functions: ClaimedFunction[] }[] = [];
  const claimed: { name: string; from: string; function: ClaimedFunction }[] = [];
  for (const file of files.declarations()) {
    await documents.prepare(file);
    const document = documents.get(file);
    if (!document) continue;
    for (const outcome of await checkDocument(project, document, new Budget({ milliseconds }))) {
      const { block } = outcome.placed;
      const source = document.text.slice(block.span.start, block.span.end);
      if (declares(block) && outcome.entry) found.push({ name: block.name, file, entry: outcome.entry, declaration: bare(source.replace(/^\s*[*/#%!]+/gm, '')), functions: [] });
      if (outcome.result && outcome.result.claims.length > 0) claimed.push({ name: block.name, from: outcome.entry!.isExtended ? '' : outcome.entry!.file, function: functionOf(file, document.text, outcome) });
    }
  }
  for (const c of claimed) {
    const home = found.find((s) => s.name === c.name && s.file === c.from) ?? found.find((s) => s.name === c.name);
    home?.functions.push(c.function);
  }
  return { systems: found };
}

function functionOf(file: string, source: string, o: BlockOutcome): ClaimedFunction {
  const { subject } = o.placed;
  const code = subject.kind === 'file' ? '' : bare(source.slice(subject.node.span.start, subject.node.span.end));
  const bindings = new Map<string, string>();
  for (const b of o.result!.reading?.bindings ?? []) {
    bindings.set(b.code, b.meaning.op === 'symbol' ? symbolText(b.meaning.data as SymbolData) : text(b.meaning));
  }
  const claims = o.result!.claims.map(({ output, quantity, decision }) => ({
    output,
    quantity,
    verdict: decision.verdict,
    ...(decision.verdict === 'unread' ? { reason: decision.reason } : {}),
  }));
  return { file, name: subjectName(subject), code, claims, bindings };
}

function bare(source: string): string {
  return source.replace(/\s+/g, '');
}
