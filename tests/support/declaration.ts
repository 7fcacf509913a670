import { parseFormula, splitOutside, type Evaluate } from './formula';

/** A declaration as far as the tests' own judge understands it. It throws on what it does not know. */
export interface Declared {
  readonly name: string;
  readonly coordinates: readonly Drawn[];
  readonly parameters: readonly Drawn[];
  readonly inputs: readonly Drawn[];
  readonly time: string;
  readonly where: ReadonlyMap<string, Evaluate>;
  readonly energies: readonly { readonly which: string; readonly value: Evaluate }[];
  readonly points: readonly { readonly mass: Evaluate; readonly at: Evaluate }[];
  readonly gravity?: Evaluate;
  readonly springs: readonly { readonly k: Evaluate; readonly rest: Evaluate; readonly from: Evaluate; readonly to: Evaluate }[];
  readonly dampers: readonly { readonly c: Evaluate; readonly from: Evaluate; readonly to: Evaluate }[];
  readonly along: readonly { readonly coordinate: string; readonly value: Evaluate }[];
  readonly forces: readonly { readonly value: Evaluate; readonly at: Evaluate }[];
  readonly torques: readonly { readonly value: Evaluate; readonly on: Evaluate }[];
  readonly claims: readonly { readonly left: string; readonly op: '=' | '+=' | '-='; readonly right: string }[];
  /** `reads NAME = FORMULA` with a bare name on the left. */
  readonly named: ReadonlyMap<string, Evaluate>;
}

/** A symbol and the interval it is drawn from. */
export interface Drawn {
  readonly name: string;
  readonly low: number;
  readonly high: number;
}

const WORDS =
  /^(coordinates|parameters|inputs|time|where|T|V|L|D|Q\[|force|torque|constraint|point|body|gravity|spring|damper|ranges|near|assume|reads|checks|defines)(?=[\s\[=(]|$|\w*\])/;

/** The statements of a declaration, continuation lines joined, remarks cut off. */
export function statements(blockText: string): string[] {
  const lines = blockText.split('\n').slice(1);
  const out: string[] = [];
  let indent = 0;
  for (const raw of lines) {
    if (/^\s*(\*\/|-->)/.test(raw)) break;
    const line = raw.replace(/\*\/.*$/, '').replace(/^\s*(\*(?!\/)|\/\/|#)? ?/, '');
    if (line.trim() === '') continue;
    const depth = /^ */.exec(line)![0].length;
    const body = line.trim();
    const open = out.length > 0 && /[-+*/^,([=]$/.test(out.at(-1)!);
    if (!open && WORDS.test(body) && !(out.length > 0 && depth > indent)) {
      out.push(cutRemark(body));
      indent = depth;
    } else if (out.length > 0 && (open || depth > indent)) out[out.length - 1] += ` ${cutRemark(body)}`;
    else break;
  }
  return out;
}

function cutRemark(body: string): string {
  const close = body.replace(/^(\w+) +/, '$1 ').replace(/: +/, ': ').replace(/ += +/g, ' = ');
  return close.split(/ {2,}/)[0]!.trim();
}

type Draft = { -readonly [K in keyof Declared]: Declared[K] extends readonly (infer E)[] ? E[] : Declared[K] };

export function readDeclaration(name: string, blockText: string): Declared {
  const where = new Map<string, Evaluate>();
  const named = new Map<string, Evaluate>();
  const d: Draft = {
    name, coordinates: [], parameters: [], inputs: [], time: 't', where, energies: [], points: [], springs: [], dampers: [],
    along: [], forces: [], torques: [], claims: [], named,
  };
  const ranges = new Map<string, [number, number]>();
  for (const statement of statements(blockText)) {
    const word = WORDS.exec(statement)![1]!;
    const rest = statement.slice(word.length).trim();
    if (word === 'coordinates') d.coordinates.push(...drawn(rest, -1.3, 1.3));
    else if (word === 'parameters') d.parameters.push(...drawn(rest, 0.4, 1.7));
    else if (word === 'inputs') d.inputs.push(...drawn(rest, -1.5, 1.5));
    else if (word === 'time') d.time = rest;
    else if (word === 'where') for (const [l, r] of equations(rest)) where.set(l, parseFormula(r));
    else if (/^[TVLD]$/.test(word)) d.energies.push({ which: word, value: parseFormula(rest.replace(/^=/, '')) });
    else if (word === 'Q[') {
      const m = /^(\w+)\]\s*=(.*)$/.exec(rest)!;
      d.along.push({ coordinate: m[1]!, value: parseFormula(m[2]!) });
    } else if (word === 'force') {
      const m = /^(.*) at (.*)$/.exec(rest)!;
      d.forces.push({ value: parseFormula(m[1]!), at: parseFormula(m[2]!) });
    } else if (word === 'torque') {
      const m = /^(.*) on (.*)$/.exec(rest)!;
      d.torques.push({ value: parseFormula(m[1]!), on: parseFormula(m[2]!) });
    } else if (word === 'point') {
      const m = /^([\w-]+): mass (.*) at (.*)$/.exec(rest)!;
      d.points.push({ mass: parseFormula(m[2]!), at: parseFormula(m[3]!) });
      where.set(m[1]!, parseFormula(m[3]!));
    } else if (word === 'gravity') d.gravity = parseFormula(rest);
    else if (word === 'spring') {
      const m = /^(.*?)(?:, rest (.*))? between (.*) and (.*)$/.exec(rest)!;
      const [from, to] = [parseFormula(m[3]!), parseFormula(m[4]!)];
      d.springs.push({ k: parseFormula(m[1]!), rest: m[2] ? parseFormula(m[2]) : () => 0, from, to });
    } else if (word === 'damper') {
      const m = /^(.*) between (.*) and (.*)$/.exec(rest)!;
      d.dampers.push({ c: parseFormula(m[1]!), from: parseFormula(m[2]!), to: parseFormula(m[3]!) });
    } else if (word === 'ranges') {
      for (const m of rest.matchAll(/(\w+'*) in \[([^,]+),([^\]]+)\]/g)) ranges.set(m[1]!, [constant(m[2]!), constant(m[3]!)]);
    } else if (word === 'reads') {
      for (const [l, r] of equations(rest)) if (/^\w+$/.test(l) && !r.startsWith('[')) named.set(l, parseFormula(r));
    } else if (word === 'checks') d.claims.push(...claims(rest));
    else if (word !== 'assume') throw new Error(`${name}: the tests' judge does not know "${word}"`);
  }
  const ranged = (list: Drawn[]): Drawn[] =>
    list.map((s) => (ranges.has(s.name) ? { name: s.name, low: ranges.get(s.name)![0], high: ranges.get(s.name)![1] } : s));
  return { ...d, coordinates: ranged(d.coordinates), parameters: ranged(d.parameters), inputs: ranged(d.inputs) };
}

const constant = (text: string): number =>
  parseFormula(text)({ lookup: (n) => (n === 'pi' ? Math.PI : NaN), rate: () => NaN }) as number;

function drawn(list: string, low: number, high: number): Drawn[] {
  return splitOutside(list, ',').map((item) => {
    const name = /^[\p{L}_][\p{L}\p{N}_]*/u.exec(item)![0];
    const within = / in \[([^,]+),([^\]]+)\]/.exec(item);
    if (within) return { name, low: constant(within[1]!), high: constant(within[2]!) };
    return / > 0/.test(item) ? { name, low: 0.7, high: 1.9 } : { name, low, high };
  });
}

function equations(list: string): [string, string][] {
  return splitOutside(list, ',').map((item) => {
    const at = item.indexOf('=');
    return [item.slice(0, at).trim(), item.slice(at + 1).trim()];
  });
}

function claims(list: string): Declared['claims'][number][] {
  return splitOutside(list, ',').flatMap((item) => {
    const m = /^(.*?)\s*(\+=|-=|=)\s*(.*)$/.exec(item);
    if (!m) throw new Error(`not a claim: ${item}`);
    const op = m[2] as '=' | '+=' | '-=';
    if (!m[3]!.startsWith('[')) return [{ left: m[1]!, op, right: m[3]! }];
    const rights = splitOutside(m[3]!.slice(1, -1), ',');
    const lefts = m[1]!.startsWith('[') ? splitOutside(m[1]!.slice(1, -1), ',') : undefined;
    return rights.map((right, i) => ({ left: lefts ? lefts[i]! : `${m[1]!}[${i}]`, op, right }));
  });
}
