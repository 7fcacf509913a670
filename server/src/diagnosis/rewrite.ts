import type { ClaimResult, SubjectRequest, SubjectResult } from '../comparison/subject';
import type { Place, Span } from '../text/span';
import { namesAt } from './names-in-code';
import { inOwnNames, symbolsExpected, type OwnCode } from './own-names';
import { Binding, replaceSite, type Edit } from './search/edits';
import { mapSource, type Site, type SourceMap } from './search/sites';
import { statementAround } from './search/statement';
import { isNoWorse, type Recheck } from './verify';

/** A whole output written anew from the declaration. */
export interface Rewrite {
  readonly claim: ClaimResult;
  readonly edits: readonly Edit[];
  /** What is replaced. */
  readonly place: Span;
}

const SHORT = 80;

/**
 * Writes the output of a claim that differs as the declaration has it, in the code's own names; undefined where that can't be
 * done or what it gives, read again from text, does not make the claim hold or makes another claim of the file worse.
 * @param touches which places are asked about; one of them has to be the claim's
 */
export async function rewriteOutput(
  request: SubjectRequest,
  result: SubjectResult,
  index: number,
  source: string,
  touches: (place: Span) => boolean,
  recheck: Recheck,
): Promise<Rewrite | undefined> {
  const claim = result.claims[index]!;
  if (claim.decision.verdict !== 'differs' || claim.place?.file !== request.file) return undefined;
  const map = mapSource(request.program);
  const sites = targets(map, claim.place);
  if (![claim.span, ...sites.map((s) => s.span)].some(touches)) return undefined;
  const needed = symbolsExpected(request.derived, claim);
  for (const site of sites) {
    const names = namesAt(request, result.reading, map, site, source);
    if (!needed.every((n) => names.has(n))) continue;
    const own = (limit: number) => inOwnNames(request.derived, claim, names, request.program.language, { source, limit });
    const named = own(SHORT);
    for (const code of named && named.statements.length > 0 ? [named, own(Infinity)] : [named]) {
      if (!code || !request.budget.look()) continue;
      const edits = editsFor(request, site, code, source);
      if (edits && (await makesRight(result, index, edits, recheck))) return { claim, edits, place: site.span };
    }
  }
  return undefined;
}

/** The value of the local variable that is the output, then the output's own expression. */
function targets(map: SourceMap, place: Place): Site[] {
  const same = (s: Site) => s.span.start === place.span.start && s.span.end === place.span.end;
  const site = map.sites.find(same);
  if (!site) return [];
  const { node } = site;
  if (node.kind !== 'name') return [site];
  const values = map.sites.filter(
    (s) => s.assignment && s.assignment.value === s.node && s.owner === site.owner && s.assignment.target.kind === 'name' && s.assignment.target.name === node.name,
  );
  return values.length === 1 && values[0]!.assignment!.op === undefined ? [values[0]!, site] : [site];
}

/** The edits that put the code at a place, its common parts in lines of their own before the statement. */
function editsFor(request: SubjectRequest, site: Site, code: OwnCode, source: string): Edit[] | undefined {
  const value = replaceSite(site, source, code.value, Binding.sum);
  if (code.statements.length === 0) return [value];
  const statement = statementAround(request.program, site.span);
  if (!statement) return undefined;
  const line = source.lastIndexOf('\n', statement.start - 1) + 1;
  const indent = source.slice(line, statement.start);
  if (indent.trim() !== '') return undefined;
  const end = source.includes('\r\n') ? '\r\n' : '\n';
  return [{ span: { start: statement.start, end: statement.start }, text: code.statements.map((s) => s + end + indent).join('') }, value];
}

async function makesRight(before: SubjectResult, index: number, edits: readonly Edit[], recheck: Recheck): Promise<boolean> {
  const after = await recheck(edits);
  if (!after || after.result.claims[index]?.decision.verdict !== 'holds' || !isNoWorse(before, after.result)) return false;
  const others = await after.others();
  return others.before.length === others.after.length && others.before.every((b, i) => isNoWorse(b, others.after[i]!));
}
