import { canonicalName } from '../../mechanics/names';
import { contains } from '../../text/span';
import type { Budget } from '../../text/budget';
import type { Document } from '../../workspace/documents';
import { checkDocument, type BlockOutcome, type Project } from '../check';
import type { DocumentSymbol, FileEdit, FileResult, Files, FileRange, References, Service } from '../api';
import { symbolsOf } from '../symbols';
import { completionsAt } from './completion';
import { declarationOf, occurrencesOf, targetAt, type Target } from './references';
import { refusal, renameEdits } from './rename';
import { signatureAt } from './signature';
import { foldsOf, tokensOf } from './structure';

export type Editing = Pick<
  Service,
  'complete' | 'signature' | 'folds' | 'tokens' | 'definition' | 'references' | 'rename' | 'workspaceSymbols'
>;

const MOST_SYMBOLS = 500;

/**
 * What an editor offers while declarations are written and looked through.
 * @param tryOut the result of a file once some texts are changed; nothing of it is kept
 */
export function editingService(
  project: Project,
  files: Files,
  load: (file: string) => Promise<Document | undefined>,
  tryOut: (changed: ReadonlyMap<string, string>, file: string, budget: Budget) => Promise<FileResult>,
): Editing {
  type Checked = readonly [Document, readonly BlockOutcome[]];

  /** Documents that speak of a system: the one at hand, and others of the project that name it. */
  const documentsOf = async (document: Document, system: string): Promise<Document[]> => {
    const out = [document];
    for (const file of files.declarations()) {
      if (file === document.file || !project.documents.text(file)?.includes(system)) continue;
      const other = await load(file);
      if (other?.blocks.some((b) => b.block.name === system)) out.push(other);
    }
    return out;
  };

  const found = async (document: Document, offset: number, budget: Budget): Promise<{ target: Target; checked: Checked[] } | undefined> => {
    const own = await checkDocument(project, document, budget);
    const target = targetAt(document, offset, own);
    if (!target) return undefined;
    const checked: Checked[] = [[document, own]];
    for (const other of (await documentsOf(document, target.system)).slice(1)) checked.push([other, await checkDocument(project, other, budget)]);
    return { target, checked };
  };

  const place = (document: Document, span: { start: number; end: number }): FileRange => ({ file: document.file, range: document.lines.range(span) });

  return {
    async workspaceSymbols(query) {
      const out: { file: string; symbol: DocumentSymbol; system: string }[] = [];
      const wanted = query.toLowerCase();
      for (const file of files.declarations()) {
        if (out.length >= MOST_SYMBOLS) break;
        const document = await load(file);
        for (const system of document ? symbolsOf(document) : []) {
          for (const symbol of [system, ...system.children]) if (hasLetters(symbol.name.toLowerCase(), wanted)) out.push({ file, symbol, system: system.name });
        }
      }
      return out.slice(0, MOST_SYMBOLS);
    },

    async complete(file, position) {
      const document = await load(file);
      if (!document) return [];
      const offset = document.lines.offset(position);
      const name = document.blocks.findLast((b) => b.block.span.start <= offset)?.block.name;
      const others = name === undefined ? [] : await documentsOf(document, name);
      return completionsAt(document, offset, (system) =>
        others.flatMap((d) => d.blocks.filter((b) => b.block.name === system).map((b) => [d, b.block] as const)),
      );
    },

    async signature(file, position) {
      const document = await load(file);
      return document && signatureAt(document, document.lines.offset(position));
    },

    async folds(file) {
      const document = await load(file);
      return document ? foldsOf(document) : [];
    },

    async tokens(file) {
      const document = await load(file);
      return document ? tokensOf(document) : [];
    },

    async definition(file, position, budget) {
      const document = await load(file);
      if (!document || document.blocks.length === 0) return undefined;
      const offset = document.lines.offset(position);
      const claimed = await claimedPlace(project, document, offset, budget);
      if (claimed) return claimed;
      const at = await found(document, offset, budget);
      if (!at) return undefined;
      if (at.target.kind === 'name') {
        const declared = declarationOf(at.target.system, at.target.key, at.checked.map(([d]) => d));
        return declared && place(declared.document, declared.named.span);
      }
      const first = occurrencesOf(at.target, at.checked)[0];
      return first?.isDeclaration ? place(first.document, first.span) : undefined;
    },

    async references(file, position, budget): Promise<References | undefined> {
      const document = await load(file);
      if (!document || document.blocks.length === 0) return undefined;
      const at = await found(document, document.lines.offset(position), budget);
      if (!at) return undefined;
      const places = occurrencesOf(at.target, at.checked);
      if (at.target.kind === 'name' && !places.some((p) => p.isDeclaration)) return undefined;
      return {
        range: document.lines.range(at.target.span),
        name: document.text.slice(at.target.span.start, at.target.span.end),
        places: places.map((o) => ({ ...place(o.document, o.span), side: o.side, isDeclaration: o.isDeclaration })),
      };
    },

    async rename(file, position, name, budget) {
      const document = await load(file);
      const at = document && (await found(document, document.lines.offset(position), budget));
      if (!at) return { failure: 'There is no name of a declaration here.' };
      const no = refusal(at.target, name);
      if (no !== undefined) return { failure: no };
      const documents = at.checked.map(([d]) => d);
      let old = at.target.system;
      if (at.target.kind === 'name') {
        const declared = declarationOf(at.target.system, at.target.key, documents);
        if (!declared) return { failure: 'The name is not declared, so there is nothing to rename.' };
        if (declarationOf(at.target.system, canonicalName(name), documents)) return { failure: `\`${name}\` is declared already.` };
        old = declared.named.name;
      }
      const places = occurrencesOf(at.target, at.checked);
      for (const renameCode of [true, false]) {
        const edits = renameEdits(at.target, old, name, places, at.checked, renameCode);
        if (await keepsVerdicts(at.checked, edits, budget)) return { edits };
      }
      return { failure: `With \`${name}\` in its place some claim would no longer be decided as it is now.` };
    },
  };

  /** Tried out on the texts: every file still has the verdicts that it has now. */
  async function keepsVerdicts(checked: readonly Checked[], edits: readonly FileEdit[], budget: Budget): Promise<boolean> {
    const texts = new Map(checked.map(([d]) => [d.file, applied(d, edits)]));
    for (const [document, outcomes] of checked) {
      const after = await tryOut(texts, document.file, budget);
      const before = outcomes.flatMap((o) => (o.result?.claims ?? []).map((c) => c.decision.verdict));
      if (budget.why || after.claims.map((c) => c.verdict).join() !== before.join()) return false;
      if (after.problems.filter((p) => p.severity === 'error').length > outcomes.flatMap((o) => o.problems.filter((p) => p.severity === 'error')).length) return false;
    }
    return true;
  }
}

function applied(document: Document, edits: readonly FileEdit[]): string {
  const own = edits
    .filter((e) => e.file === document.file)
    .map((e) => ({ start: document.lines.offset(e.range.start), end: document.lines.offset(e.range.end), text: e.text }))
    .sort((a, b) => b.start - a.start);
  return own.reduce((text, e) => text.slice(0, e.start) + e.text + text.slice(e.end), document.text);
}

/** On the left of a claim: the place where the code makes that output. */
async function claimedPlace(project: Project, document: Document, offset: number, budget: Budget): Promise<FileRange | undefined> {
  const on = document.blocks.some((b) =>
    b.block.statements.some((s) => s.kind === 'checks' && s.items.some((i) => contains(i.left.span, offset))),
  );
  if (!on) return undefined;
  for (const o of await checkDocument(project, document, budget)) {
    for (const s of o.placed.block.statements) {
      if (s.kind !== 'checks') continue;
      const item = s.items.find((i) => contains(i.left.span, offset));
      const claim = item && o.result?.claims.find((c) => c.span.start === item.span.start && c.place?.file === document.file);
      if (claim?.place) return { file: document.file, range: document.lines.range(claim.place.span) };
    }
  }
  return undefined;
}

function hasLetters(name: string, wanted: string): boolean {
  let at = 0;
  for (const c of wanted) {
    at = name.indexOf(c, at) + 1;
    if (at === 0) return false;
  }
  return true;
}
