import type { SubjectRequest } from '../comparison/subject';
import { symbolText, type Expr, type SymbolData } from '../expression/node';
import type { Pattern } from '../program/form';
import type { Reading } from '../program/reading';
import type { Site, SourceMap } from './search/sites';
import { localsOf } from './search/tagged';

/**
 * What the code calls the symbols of the declaration at a place: local names that hold them first, then what was read
 * for them, parameters and locals of the function around, and last members that the text has somewhere. Only names that the text has: a member
 * that an object does not have would be read by its name all the same.
 */
export function namesAt(request: SubjectRequest, reading: Reading | undefined, map: SourceMap, site: Site, source: string): Map<string, string> {
  const names = new Map<string, string>();
  const code = withoutComments(request, source);
  const has = (name: string): boolean => new RegExp(`(?<![\\w$])${name.replace(/[^\w]/g, '\\$&')}(?![\\w$])`, 'u').test(code);
  const add = (symbol: Expr, text: string): void => {
    const key = symbolText(symbol.data as SymbolData);
    if (symbol.op === 'symbol' && !names.has(key)) names.set(key, text);
  };
  const bySpan = new Map(map.sites.map((s) => [`${s.span.start} ${s.span.end}`, s]));
  const short = (a: string, b: string): number => a.length - b.length;
  const local = (reading?.trace ?? [])
    .filter((t) => t.place.file === request.file && t.expr.op === 'symbol')
    .map((t) => ({ expr: t.expr, text: source.slice(t.place.span.start, t.place.span.end), site: bySpan.get(`${t.place.span.start} ${t.place.span.end}`) }))
    .filter((t) => t.site?.owner === site.owner && t.site?.node.kind === 'name' && isBefore(map, t.text, site))
    .sort((a, b) => short(a.text, b.text));
  for (const t of local) add(t.expr, t.text);
  const read = (reading?.bindings ?? []).filter((b) => b.place.file === request.file && has(/^[\p{L}_$][\p{L}\p{N}_$]*/u.exec(b.code)?.[0] ?? b.code));
  for (const b of [...read].sort((x, y) => short(x.code, y.code))) add(b.meaning, b.code);
  for (const name of [...parametersOf(site), ...(site.owner ? localsOf(site.owner, site.span.start) : [])]) {
    const meanings = request.spellings.byName(name);
    if (meanings.length === 1 && !meanings[0]!.isFormula) add(meanings[0]!.expr, name);
  }
  const { parameters, inputs } = request.derived.system;
  const objects = new Set([...names.values()].flatMap((n) => /^(.*)\.\w+$/.exec(n)?.[1] ?? []));
  for (const object of objects) for (const p of [...parameters, ...inputs]) if (has(`${object}.${p.name}`)) add(p.symbol, `${object}.${p.name}`);
  return names;
}

/** Whether a local variable of that name is set before the place. */
function isBefore(map: SourceMap, name: string, site: Site): boolean {
  return map.sites.every(({ assignment: a, owner }) => !a || owner !== site.owner || a.target.kind !== 'name' || a.target.name !== name || a.span.end <= site.span.start);
}

function parametersOf(site: Site): string[] {
  const names: string[] = [];
  const stack: Pattern[] = (site.owner?.parameters ?? []).map((p) => p.pattern);
  while (stack.length > 0) {
    const p = stack.pop()!;
    if (p.kind === 'name') names.push(p.name);
    else if (p.kind === 'list') stack.push(...p.items.flatMap((i) => (i ? [i.pattern] : [])));
    else if (p.kind === 'record') stack.push(...p.fields.map((f) => f.item.pattern));
  }
  return names;
}

function withoutComments(request: SubjectRequest, source: string): string {
  let text = source;
  for (const { span } of [...request.program.comments].sort((a, b) => b.span.start - a.span.start)) {
    text = `${text.slice(0, span.start)} ${text.slice(span.end)}`;
  }
  return text;
}
