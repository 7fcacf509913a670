import { Sampler } from '../../comparison/sampling';
import type { Expr } from '../../expression/node';
import { substitute } from '../../expression/substitute';
import { symbolsOf } from '../../expression/reach';
import { symbolText, type SymbolData } from '../../expression/node';
import type { Parameter } from '../../program/form';
import type { Document } from '../../workspace/documents';
import { subjectName, type BlockOutcome } from '../check';
import { exactValues } from './decimal';
import { KEYED, type Argument, type Guard, type GuardResult } from './result';

const WANTED = 8;
const DRAWN = 40;
/** Samples are multiples of this: exact in binary, and short to read. */
const STEP = 1 / 64;

/** The guard of one declaration's function. */
export function guardOf({ text, program: { indexBase } }: Document, o: BlockOutcome): GuardResult | undefined {
  const { subject, block } = o.placed;
  if (!o.entry || !o.result?.reading || o.result.claims.length === 0) return undefined;
  const system = block.name;
  const name = subjectName(subject);
  const refuse = (refused: string): GuardResult => ({ system, function: name, refused });
  if (subject.kind !== 'function' || subject.owner) return refuse('only a function that stands by itself can be called by a test; this is a method, a class or a script');
  const { derived } = o.entry;
  if (derived.system.constraints.length > 0) return refuse('states that meet a constraint cannot be written down exactly');
  if (derived.system.near) return refuse('it implements an expansion, which equals the motion only near a point');

  const unread = o.result.claims.find((c) => c.decision.verdict === 'unread');
  if (unread) return refuse(`the claim about ${unread.output} is unread, so that it is not known what the function needs`);
  const claims = o.result.claims.flatMap((c) => {
    const path = pathOf(c.output, 'return', indexBase);
    return path && c.expected ? [{ path, quantity: c.quantity, expected: c.expected }] : [];
  });
  if (claims.length === 0) return refuse('none of its claims is about what it returns');

  const accelerations = new Map(derived.unknowns.map((u, i) => [u, derived.solution[i]!]));
  const expected = substitute(derived.system.graph, claims.map((c) => c.expected), accelerations);
  const meanings = new Map<string, Expr>(o.result.reading.bindings.map((b) => [asWritten(b.code, text.slice(b.place.span.start, b.place.span.end)), b.meaning]));
  const needed = new Set(symbolsOf(...expected, ...meanings.values()));
  if ([...needed].some((s) => (s.data as SymbolData).role === 'coordinate' && (s.data as SymbolData).order > 1)) return refuse('it takes accelerations as given');
  const fixed = new Map<Expr, number>();
  const { parameters } = subject.node;
  const names = parameters.map(parameterName);
  if (names.includes(undefined)) return refuse('one of its parameters is taken apart in the parameter list');
  for (const [code, meaning] of meanings) {
    const root = /^[^.[]+/.exec(code)![0];
    if (names.includes(root) || !needsValue(meaning) || isLocal(code, meaning, meanings)) continue;
    const declared = derived.system.parameters.find((p) => p.symbol === meaning);
    if (declared?.typical === undefined) return refuse(`\`${code}\` is no parameter of it: give ${symbolText(meaning.data as SymbolData)} its value in the declaration, as in \`parameters g = 9.81\``);
    fixed.set(meaning, declared.typical);
  }

  const columns = new Sampler(derived.system).draw([...needed], DRAWN);
  const cases: Guard['cases'][number][] = [];
  for (let k = 0; k < DRAWN && cases.length < WANTED; k++) {
    const at = (s: Expr) => fixed.get(s) ?? rounded(columns.get(s)?.values[k], s, derived.system.domains.get(s)?.low);
    const values = exactValues([...expected, ...meanings.values()], at);
    const wanted = values.slice(0, expected.length);
    if (wanted.some((v) => v === undefined || Math.abs(v) > 1e6)) continue;
    const given = new Map([...meanings.keys()].map((code, i) => [code, values[expected.length + i]]));
    // A parameter without a meaning does not matter, or the claims would not have been read.
    const args = names.map((n) => argument(n!, given, indexBase) ?? 0);
    const state = [...needed].filter((s) => !fixed.has(s)).map((s) => `${symbolText(s.data as SymbolData)} = ${at(s)}`).join(', ');
    cases.push({ state, arguments: args, expected: wanted as number[] });
  }
  if (cases.length < 3) return refuse('too few states have a value that can be computed to a hundred digits');
  return { system, function: name, outputs: claims.map(({ path, quantity }) => ({ path, quantity })), cases };
}

/** `p["m"]` is told as `p.m`; a call has to know which it is. */
function asWritten(code: string, source: string): string {
  return /\[["'][^"']+["']\]$/.test(source) && source.replace(/\[["']([^"']+)["']\]/g, '.$1') === code ? source : code;
}

function needsValue(meaning: Expr): boolean {
  return symbolsOf(meaning).length > 0;
}

/** A local name for what a parameter holds already (`const { l } = p`) needs nothing of its own. */
function isLocal(code: string, meaning: Expr, meanings: ReadonlyMap<string, Expr>): boolean {
  return [...meanings].some(([other, m]) => other !== code && m === meaning && /[.[]/.test(other));
}

function parameterName({ pattern }: Parameter): string | undefined {
  return pattern.kind === 'name' ? pattern.name : undefined;
}

function rounded(value: number | undefined, symbol: Expr, low: number | undefined): number | undefined {
  if (value === undefined) return undefined;
  const near = Math.round(value / STEP) * STEP;
  const least = (symbol.data as SymbolData).role === 'parameter' || low !== undefined ? STEP : -Infinity;
  return value > 0 && near <= 0 ? STEP : (low ?? -1) >= 0 ? Math.max(near, least) : near;
}

/** `return[1].x` as steps from the value, list places from 0; undefined for what does not begin so. */
function pathOf(text: string, root: string, indexBase: number): (number | string)[] | undefined {
  if (!text.startsWith(root)) return undefined;
  const steps: (number | string)[] = [];
  let rest = text.slice(root.length);
  while (rest !== '') {
    const m = /^\[(\d+)\]|^\.([\p{L}_][\p{L}\p{N}_]*)|^\[["'](.+?)["']\]/u.exec(rest);
    if (!m) return undefined;
    steps.push(m[1] !== undefined ? Number(m[1]) - indexBase : m[2] ?? `${KEYED}${m[3]!}`);
    rest = rest.slice(m[0].length);
  }
  return steps;
}

/** An argument built from everything that is said of a parameter. */
function argument(name: string, given: ReadonlyMap<string, number | undefined>, indexBase: number): Argument | undefined {
  let out: unknown;
  for (const [code, value] of given) {
    const path = pathOf(code, name, indexBase);
    if (!path || (code !== name && !/^[.[]/.test(code.slice(name.length)))) continue;
    if (value === undefined) return undefined;
    out = placed(out, path, value);
  }
  return out === undefined ? undefined : filled(out as Argument);
}

function placed(into: unknown, [step, ...rest]: readonly (number | string)[], value: number): unknown {
  if (step === undefined) return into ?? value;
  const own = typeof step === 'number' ? (Array.isArray(into) ? [...(into as unknown[])] : []) : { ...(typeof into === 'object' ? into : {}) };
  (own as Record<number | string, unknown>)[step] = placed((own as Record<number | string, unknown>)[step], rest, value);
  return own;
}

/** Places of a list that nothing is said about hold zero: the function does not read them. */
function filled(a: Argument): Argument {
  if (Array.isArray(a)) return Array.from(a as readonly (Argument | undefined)[], (x) => (x === undefined ? 0 : filled(x)));
  return typeof a === 'object' ? Object.fromEntries(Object.entries(a).map(([k, v]) => [k, filled(v)])) : a;
}
