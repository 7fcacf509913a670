import type { Diagnosis } from '../diagnosis/diagnose';
import { languageOf } from '../languages';
import type { Budget } from '../text/budget';
import { Documents } from '../workspace/documents';
import { Imports } from '../workspace/imports';
import { Systems } from '../workspace/systems';
import { withAcceptances } from './acceptances';
import { compareSystems, pairDeclarations } from './against';
import type { Comparison, Files, FileResult, Service } from './api';
import { checkDocument, fileResult, type BlockOutcome, type Project } from './check';
import { diagnoseOutcomes } from './diagnose';
import { deriveSystems } from './derive';
import { fileDetails } from './details';
import { editingService } from './editing';
import { allHovers, hoverAt } from './hover';
import { languageVersion } from './language-version';
import { inlaysOf, lensesOf } from './lenses';
import { outcomeAt, panelOf } from './panel/panel';
import { ResultCache } from './result-cache';
import { rewritesAt } from './rewrites';
import { suggestedComments } from './suggested-comments';
import { withSeverities } from './severity';
import { symbolsOf } from './symbols';

export type * from './api';

/** The service over some files. It keeps what it has read until told of a change. */
export function createService(files: Files): Service {
  const documents = new Documents((file) => files.read(file), (file, language) => languageVersion(files, file, language));
  const imports = new Imports(documents);
  const systems = new Systems(documents, () => files.declarations(), (d) => imports.reader(d));
  const results = new ResultCache<Diagnosis>((file) => documents.readText(file));
  const project: Project = { documents, systems, imports, results };

  const load = async (file: string) => {
    await documents.prepare(file);
    return documents.get(file);
  };

  const tryOut = (texts: ReadonlyMap<string, string>, file: string, budget: Budget): Promise<FileResult> => {
    const changed: Files = { read: (f) => texts.get(f) ?? documents.text(f), declarations: () => files.declarations(), ...(files.settings ? { settings: (f) => files.settings!(f) } : {}) };
    return createService(changed).check(file, budget, 'verdicts');
  };

  return {
    ...editingService(project, files, load, tryOut),
    update: (file, text) => documents.update(file, text),
    close: (file) => documents.close(file),
    invalidate: (file) => documents.invalidate(file),
    get readings() {
      return results.misses;
    },
    handles: (file) => languageOf(file) !== undefined,
    prepare: (file) => documents.prepare(file),

    async check(file: string, budget: Budget, depth: 'verdicts' | 'repairs' = 'repairs'): Promise<FileResult> {
      const document = files.isLeftOut?.(file) ? undefined : await load(file);
      if (!document) {
        return { file, language: languageOf(file)?.id ?? '', systems: [], claims: [], problems: [], dependsOn: [], unfinished: [] };
      }
      const outcomes = await checkDocument(project, document, budget);
      const result = fileResult(document, await diagnoseOutcomes(project, document, outcomes, budget, depth));
      return withSeverities(withAcceptances(result, document.text, depth === 'repairs'), files.settings?.(file) ?? {});
    },

    async rewrites(file, range, budget) {
      const document = await load(file);
      if (!document || document.blocks.length === 0) return [];
      const outcomes = await diagnoseOutcomes(project, document, await checkDocument(project, document, budget), budget, 'verdicts');
      return rewritesAt(project, document, outcomes, range, budget);
    },

    async hover(file, position, budget) {
      const document = await load(file);
      if (!document || document.blocks.length === 0) return undefined;
      return hoverAt(document, document.lines.offset(position), async (): Promise<BlockOutcome[]> => checkDocument(project, document, budget));
    },

    async hovers(file, budget) {
      const document = await load(file);
      if (!document || document.blocks.length === 0) return [];
      const outcomes = await checkDocument(project, document, budget);
      return budget.run('what there is to tell', () => allHovers(document, outcomes));
    },

    async symbols(file) {
      const document = await load(file);
      return document ? symbolsOf(document) : [];
    },

    async lenses(file, budget) {
      const document = await load(file);
      return document && document.blocks.length > 0 ? lensesOf(document, await checkDocument(project, document, budget)) : [];
    },

    async inlays(file, budget) {
      const document = await load(file);
      return document && document.blocks.length > 0 ? inlaysOf(document, await checkDocument(project, document, budget)) : [];
    },

    async panel(file, position, budget) {
      const document = await load(file);
      if (!document || document.blocks.length === 0) return undefined;
      const outcome = outcomeAt(await checkDocument(project, document, budget), document.lines.offset(position));
      return outcome && panelOf(document, outcome);
    },

    async derive(file, as, budget) {
      const document = await load(file);
      return document ? deriveSystems(project, document, as, budget) : [];
    },

    async details(file, budget) {
      const document = await load(file);
      return document ? fileDetails(document, await checkDocument(project, document, budget)) : { systems: [], claims: [] };
    },

    async guards(file, budget) {
      const document = await load(file);
      if (!document) return [];
      const { guardOf } = await import('./guard/cases');
      return (await checkDocument(project, document, budget)).flatMap((o) => guardOf(document, o) ?? []);
    },

    async suggest(file) {
      const document = await load(file);
      return document ? suggestedComments(document) : [];
    },

    async compare(file, against, system, budget) {
      const document = await load(file);
      const other = 'file' in against ? await load(against.file) : document;
      const pairs = pairDeclarations(document, other, 'name' in against ? against.name : undefined, system);
      if ('failure' in pairs) return pairs;
      const comparisons: Comparison[] = [];
      for (const [a, b] of pairs.pairs) comparisons.push(await compareSystems(project, a, b, budget));
      return { comparisons };
    },
  };
}
