import { Graph } from '../../server/src/expression/graph';
import type { Expr, SymbolData } from '../../server/src/expression/node';
import type { Rational } from '../../server/src/expression/rational';
import { typescriptLibrary } from '../../server/src/languages/typescript/library';
import { parseTypeScript } from '../../server/src/languages/typescript/parse';
import type { ClassNode, Expression, FunctionNode, Program } from '../../server/src/program/form';
import { read } from '../../server/src/program/read';
import type { Meaning, OutputValue, ReadRequest, Reading } from '../../server/src/program/reading';
import { Budget } from '../../server/src/text/budget';

/** A reading in one line: source text in, expressions as text out. */

export interface Ask {
  /** Names of coordinates; `x'` and its spellings are velocities. */
  readonly coordinates?: string;
  readonly parameters?: string;
  readonly inputs?: string;
  /** `p.load = m, s = [x, x']` */
  readonly reads?: Readonly<Record<string, string>>;
  readonly families?: Readonly<Record<string, string>>;
  readonly assume?: readonly string[];
  readonly withinLimits?: boolean;
  /** The function's name, or `Class.method`; `class Name`; the file where it is empty. */
  readonly subject?: string;
  readonly increment?: boolean;
  readonly files?: Readonly<Record<string, string>>;
  readonly steps?: number;
  readonly file?: string;
  readonly override?: { readonly text: string; readonly value: (g: Graph, e: Expr) => Expr };
}

export interface Answer {
  readonly reading: Reading;
  readonly graph: Graph;
  /** The outputs as text. */
  readonly text: readonly string[];
  /** The source text at the place of an output. */
  placeText(output: number): string;
  readonly source: string;
}

export function readCode(source: string, outputs: readonly string[], ask: Ask = {}): Answer {
  const graph = new Graph();
  const file = ask.file ?? 'main.ts';
  const program = parseTypeScript(file, source);
  const names = symbols(graph, ask);
  const reads = Object.entries(ask.reads ?? {}).map(([target, formula]) => ({
    target: expressionOf(target),
    meaning: meaningOf(graph, names, formula),
    text: `${target} = ${formula}`,
    span: { start: 0, end: 0 },
  }));
  const declared = new Set(names.values());
  const request: ReadRequest = {
    graph,
    file,
    program,
    library: typescriptLibrary,
    subject: subjectOf(program, ask.subject ?? 'f'),
    meanings: {
      reads,
      byName: (name) => byName(names, name),
      familyByName: (name) => {
        const f = ask.families?.[name];
        const m = f === undefined ? undefined : meaningOf(graph, names, f);
        return m?.kind === 'list' ? m.items : undefined;
      },
      isDeclared: (s) => declared.has(s),
    },
    assumptions: (ask.assume ?? []).map(expressionOf),
    withinLimits: ask.withinLimits ?? false,
    outputs: outputs.map((o) => ({ expression: outputExpression(graph, names, o), increment: ask.increment ?? false })),
    importFile: (from) => {
      const name = from.replace(/^\.\//, '');
      const found = Object.entries(ask.files ?? {}).find(([k]) => k === name || k.replace(/\.[jt]s$/, '') === name);
      return found && { file: found[0], program: parseTypeScript(found[0], found[1]), library: typescriptLibrary };
    },
    budget: new Budget({ steps: ask.steps ?? 400_000 }),
    ...(ask.override
      ? {
          override: {
            file,
            span: { start: source.indexOf(ask.override.text), end: source.indexOf(ask.override.text) + ask.override.text.length },
            value: (e: Expr) => ask.override!.value(graph, e),
          },
        }
      : {}),
  };
  const reading = read(request);
  return {
    reading,
    graph,
    source,
    get text() {
      return reading.outputs.map(outputText);
    },
    placeText: (k) => {
      const place = reading.outputs[k]!.place;
      return place ? source.slice(place.span.start, place.span.end) : '';
    },
  };
}

/** The outputs' texts alone. */
export function outputs(source: string, wanted: readonly string[], ask: Ask = {}): readonly string[] {
  return readCode(source, wanted, ask).text;
}

function list(text: string | undefined): string[] {
  return (text ?? '').split(/[\s,]+/).filter((x) => x !== '');
}

function symbols(graph: Graph, ask: Ask): Map<string, Expr> {
  const names = new Map<string, Expr>();
  const add = (name: string, role: SymbolData['role'], order: number): unknown =>
    names.set(name + "'".repeat(order), graph.symbol({ name, role, order }));
  for (const q of list(ask.coordinates)) [0, 1, 2].forEach((order) => add(q, 'coordinate', order));
  for (const p of list(ask.parameters)) add(p, 'parameter', 0);
  for (const u of list(ask.inputs)) add(u, 'input', 0);
  return names;
}

function byName(names: ReadonlyMap<string, Expr>, name: string): { expr: Expr; text: string }[] {
  const bare = name.replace(/_+$/, '');
  const direct = names.get(bare);
  if (direct) return [{ expr: direct, text: bare }];
  for (const [key, expr] of names) {
    const q = key.replace(/'/g, '');
    if (key !== `${q}'`) continue;
    if ([`${q}dot`, `${q}Dot`, `${q}_dot`, `d${q}`].includes(bare)) return [{ expr, text: key }];
  }
  return [];
}

function meaningOf(graph: Graph, names: ReadonlyMap<string, Expr>, formula: string): Meaning {
  const text = formula.trim();
  if (text.startsWith('[')) {
    return { kind: 'list', items: splitList(text.slice(1, -1)).map((t) => meaningOf(graph, names, t)) };
  }
  const terms = text.split('+').map((t) => {
    const sign = t.trim().startsWith('-') ? graph.minusOne : graph.one;
    const name = t.trim().replace(/^-/, '');
    const symbol = names.get(name) ?? (/^\d+$/.test(name) ? graph.number(Number(name)) : undefined);
    if (!symbol) throw new Error(`no symbol ${name}`);
    return graph.product([sign, symbol]);
  });
  return { kind: 'scalar', expr: graph.sum(terms) };
}

function splitList(text: string): string[] {
  const parts: string[] = [];
  let depth = 0;
  let start = 0;
  for (let i = 0; i <= text.length; i++) {
    if (text[i] === '[') depth++;
    if (text[i] === ']') depth--;
    if (i === text.length || (text[i] === ',' && depth === 0)) {
      parts.push(text.slice(start, i));
      start = i + 1;
    }
  }
  return parts;
}

function expressionOf(text: string): Expression {
  const program = parseTypeScript('claim.ts', `(${text.replace(/\breturn\b/g, '$return')});`);
  const s = program.body.find((x) => x.kind === 'expression');
  if (s?.kind !== 'expression') throw new Error(`no expression: ${text}`);
  return JSON.parse(JSON.stringify(s.value, keepBigints), restore) as Expression;
}

/** `x''` in an output is put in as an expression. */
function outputExpression(graph: Graph, names: ReadonlyMap<string, Expr>, text: string): Expression {
  const marked = text.replace(/(\w+)('+)/g, (_, name: string, primes: string) => `$${name}$${primes.length}`);
  void graph;
  return replaceNames(expressionOf(marked), (name) => {
    const m = /^\$(\w+)\$(\d)$/.exec(name);
    return m ? names.get(m[1]! + "'".repeat(Number(m[2]))) : undefined;
  });
}

function replaceNames(e: Expression, find: (name: string) => Expr | undefined): Expression {
  return deepMap(e, (x) => {
    if (x.kind !== 'name') return x;
    const expr = find(x.name as string);
    return expr ? { kind: 'symbolic', expr, span: x.span } : x;
  }) as Expression;
}

function deepMap(x: unknown, f: (node: { kind?: string; name?: unknown; span?: unknown }) => unknown): unknown {
  if (Array.isArray(x)) return x.map((y) => deepMap(y, f));
  if (x === null || typeof x !== 'object' || 'numerator' in x) return x;
  const copy = Object.fromEntries(Object.entries(x).map(([k, v]) => [k, deepMap(v, f)]));
  return f(copy as { kind?: string });
}

function keepBigints(_: string, v: unknown): unknown {
  if (v !== null && typeof v === 'object' && 'numerator' in v) return { $r: String(v as Rational) };
  return typeof v === 'bigint' ? String(v) : v;
}

function restore(key: string, v: unknown): unknown {
  if (v !== null && typeof v === 'object' && '$r' in v) {
    const [n, d] = String((v as { $r: string }).$r).split('/');
    return rational(n!, d ?? '1');
  }
  if (key === 'name' && v === '$return') return 'return';
  return v;
}

function rational(n: string, d: string): Rational {
  const g = new Graph();
  return g.divide(g.number(BigInt(n)), g.number(BigInt(d))).data as Rational;
}

function subjectOf(program: Program, wanted: string): ReadRequest['subject'] {
  if (wanted === '') return { kind: 'file' };
  const functions: { node: FunctionNode; owner?: ClassNode }[] = [];
  const classes: ClassNode[] = [];
  const visit = (x: unknown, owner?: ClassNode): void => {
    if (Array.isArray(x)) x.forEach((y) => visit(y, owner));
    else if (x !== null && typeof x === 'object') {
      const node = x as Record<string, unknown>;
      let here = owner;
      if ('members' in node && 'nameSpan' in node && Array.isArray(node.members) && node.kind !== 'enum') {
        here = node as unknown as ClassNode;
        classes.push(here);
      }
      if ('bodySpan' in node) {
        functions.push({ node: node as unknown as FunctionNode, ...(owner ? { owner } : {}) });
        here = undefined;
      }
      for (const v of Object.values(node)) visit(v, here);
    }
  };
  visit(program.body);
  if (wanted.startsWith('class ')) return { kind: 'class', node: classes.find((c) => c.name === wanted.slice(6))! };
  const [a, b] = wanted.split('.');
  const found = b
    ? functions.find((f) => f.owner?.name === a && f.node.name === b) ?? functions.find((f) => f.node.name === wanted)
    : functions.find((f) => f.node.name === a);
  if (!found) throw new Error(`no function ${wanted}: ${functions.map((f) => f.node.name).join(' ')}`);
  return { kind: 'function', ...found };
}

export function outputText(o: OutputValue): string {
  if (o.kind === 'unread') return `unread: ${o.reason}`;
  if (o.kind === 'list') return `[${o.items.map(outputText).join(', ')}]`;
  return exprText(o.expr);
}

function flat(e: Expr, op: 'sum' | 'product'): Expr[] {
  return e.args.flatMap((a) => (a.op === op ? flat(a, op) : [a]));
}

/** Terms that cancel are left out. */
function sumText(terms: readonly Expr[]): string {
  const texts = terms.map(exprText);
  for (const t of [...texts]) {
    const against = texts.indexOf(`-1*${t}`);
    if (against < 0 || !texts.includes(t)) continue;
    texts.splice(against, 1);
    texts.splice(texts.indexOf(t), 1);
  }
  if (texts.length === 1) return texts[0]!;
  return texts.length === 0 ? '0' : `(${texts.sort().join(' + ')})`;
}

/** A plain text of an expression, arguments in a fixed order. */
export function exprText(e: Expr): string {
  switch (e.op) {
    case 'number':
      return String(e.data as Rational);
    case 'symbol': {
      const s = e.data as SymbolData;
      return (s.role === 'free' ? '?' : '') + s.name + "'".repeat(s.order);
    }
    case 'sum':
      return sumText(flat(e, 'sum'));
    case 'product':
      return flat(e, 'product').map(exprText).sort().join('*');
    case 'power':
      return `${exprText(e.args[0]!)}^${exprText(e.args[1]!)}`;
    case 'pi':
    case 'nan':
    case 'true':
    case 'false':
      return e.op;
    case 'less':
      return `${exprText(e.args[0]!)} < ${exprText(e.args[1]!)}`;
    case 'lessEqual':
      return `${exprText(e.args[0]!)} <= ${exprText(e.args[1]!)}`;
    case 'equal':
      return e.args.map(exprText).sort().join(' == ');
    case 'component':
      return `${exprText(e.args[0]!)}.${String(e.data)}`;
    default:
      return `${e.op}(${e.args.map(exprText).join(', ')})`;
  }
}
