import { STATEMENT_WORDS, UNIT_NAMES } from '../../notation';
import type { Block } from '../../notation/tree';
import type { Document } from '../../workspace/documents';
import type { Completion } from '../api';
import { codeNames } from './code-names';
import { writingPlace, type WritingPlace } from './context';
import { FUNCTION_HELP, QUANTITY_HELP } from './functions';
import { namedIn } from './names';

const SYMBOL_WORDS = new Set(['coordinates', 'parameters', 'inputs']);
/** Words inside statements, and what follows them. */
const PARTS: Readonly<Record<string, readonly (readonly [word: string, snippet: string])[]>> = {
  point: [['mass', 'mass ${1:m} at (${2:x}, ${3:y})'], ['at', 'at (${1:x}, ${2:y})']],
  body: [['mass', 'mass ${1:m}'], ['inertia', 'inertia ${1:J}'], ['centre', 'centre (${1:x}, ${2:y})'], ['angle', 'angle ${1:th}'], ['rotation', 'rotation ${1:R}']],
  spring: [['rest', 'rest ${1:L0}'], ['between', 'between ${1:A} and ${2:B}']],
  damper: [['between', 'between ${1:A} and ${2:B}']],
  force: [['at', 'at ${1:P}']],
  torque: [['on', 'on ${1:th}']],
  constraint: [['with', 'with ${1:lam}']],
  near: [['order', 'order ${1:1}']],
  assume: [['within limits', 'within limits']],
};

/**
 * What may be typed at a place of a declaration.
 * @param known declarations of the system that a block only names
 */
export function completionsAt(document: Document, offset: number, known: (name: string) => readonly (readonly [Document, Block])[]): Completion[] {
  const place = writingPlace(document, offset);
  const before = place?.before ?? commentStart(document, offset);
  if (before === undefined) return [];
  const typed = /[\p{L}\p{N}\p{M}_$.[\]()'@]*$/u.exec(before)![0];
  const tag = /@[\p{L}]*$/u.exec(before)?.[0];
  const items = tag !== undefined ? tagItems() : place?.placed ? itemsOf(document, place, place.placed.block, known) : [];
  const own = tag ?? ownPart(typed);
  const range = document.lines.range({ start: offset - own.length, end: offset });
  return items.map((item) => ({ ...item, range }));
}

/** A comment without a declaration is none of the program's; its marks on the line tell that it is one. */
function commentStart(document: Document, offset: number): string | undefined {
  const line = document.text.slice(document.text.lastIndexOf('\n', offset - 1) + 1, offset);
  return /(?:\/\*+|^\s*\*|\/\/|#|%|!|"""|''')\s*(@\p{L}*)$/u.exec(line)?.[1];
}

type Item = Omit<Completion, 'range'>;

/** Of `sin(th` the name is `th`; of `p.m` it is the whole path. */
function ownPart(typed: string): string {
  return /[\p{L}_$][\p{L}\p{N}\p{M}_$]*(?:\.[\p{L}\p{N}\p{M}_$]*|\[[^[\]()]*\]?|'+)*$/u.exec(typed)?.[0] ?? '';
}

function tagItems(): Item[] {
  return [
    {
      label: '@visviva',
      kind: 'statement',
      detail: 'declare what the code below is to compute',
      snippet: "@visviva ${1:name}\ncoordinates  ${2:x} [${3:m}]\nparameters   ${4:m} [${5:kg}] > 0\npoint ${6:body}: mass ${4:m} at (${2:x}, 0)\nchecks       return = ${2:x}''",
    },
  ];
}

function itemsOf(document: Document, place: WritingPlace, block: Block, known: (name: string) => readonly (readonly [Document, Block])[]): Item[] {
  const { word, statement } = place;
  if (word === undefined) return /^\p{L}*$/u.test(place.before) ? statementItems() : [];
  const rest = statement.slice(word.length);
  if (SYMBOL_WORDS.has(word)) return rest.lastIndexOf('[') > rest.lastIndexOf(']') ? unitItems() : [];
  if (word === 'defines') return ['T', 'V', 'L', 'D'].map((label): Item => ({ label, kind: 'quantity', detail: 'energy' }));
  const code = (): Item[] => codeItems(document, place, word);
  const physics = (): Item[] => [...symbolItems(document, block, known), ...functionItems(), ...(word === 'checks' ? quantityItems() : [])];
  if (word === 'assume') return [...partItems(word), ...code()];
  if (word === 'reads' || word === 'checks') return isLeftOfEquation(rest) ? [...code(), ...(word === 'checks' ? [] : [])] : physics();
  return [...partItems(word), ...physics()];
}

/** True before the `=` of the equation being typed; commas in brackets do not end one. */
function isLeftOfEquation(text: string): boolean {
  let depth = 0;
  let left = true;
  for (const c of text) {
    if (c === '(' || c === '[') depth++;
    else if (c === ')' || c === ']') depth--;
    else if (c === ',' && depth === 0) left = true;
    else if (c === '=' && depth === 0) left = false;
  }
  return left;
}

function statementItems(): Item[] {
  return STATEMENT_WORDS.map(({ word, description, snippet }) => ({ label: word, kind: 'statement', detail: description, snippet }));
}

function unitItems(): Item[] {
  return UNIT_NAMES.map((label) => ({ label, kind: 'unit', detail: 'unit' }));
}

function partItems(word: string): Item[] {
  return (PARTS[word] ?? []).map(([label, snippet]) => ({ label, kind: 'statement', detail: `part of ${word}`, snippet }));
}

function symbolItems(document: Document, block: Block, known: (name: string) => readonly (readonly [Document, Block])[]): Item[] {
  const out = new Map<string, Item>();
  for (const [doc, b] of [[document, block] as const, ...known(block.name)]) {
    for (const n of namedIn(doc.text, b)) {
      const detail = [n.kind, n.unit ? `[${n.unit}]` : '', n.remark ?? ''].filter((x) => x !== '').join(' ');
      out.set(n.name, { label: n.name, kind: 'symbol', detail });
      const orders = n.kind === 'coordinate' ? 2 : n.kind === 'input' || n.kind === 'shorthand' || n.kind === 'point' ? 1 : 0;
      for (let k = 1; k <= orders; k++) {
        const label = n.name + "'".repeat(k);
        out.set(label, { label, kind: 'symbol', detail: `${k === 1 ? 'time derivative' : 'second time derivative'} of ${n.name}` });
      }
    }
  }
  return [...out.values()];
}

function functionItems(): Item[] {
  return FUNCTION_HELP.map((f) => ({
    label: f.name,
    kind: 'function',
    detail: f.description,
    snippet: `${f.name}(${f.parameters.map((p, i) => `\${${i + 1}:${p}}`).join(', ')})`,
  }));
}

function quantityItems(): Item[] {
  return QUANTITY_HELP.map(([label, snippet, detail]) => ({ label, kind: 'quantity', detail, snippet }));
}

function codeItems(document: Document, place: WritingPlace, word: string): Item[] {
  const { parameters, names, functions } = codeNames(document, place.placed!.subject);
  const item = (detail: string) => (label: string): Item => ({ label, kind: 'code', detail });
  return [
    ...(word === 'checks' ? [item('the returned value')('return')] : []),
    ...parameters.map(item('parameter of the function')),
    ...names.map(item('in the code')),
    ...functions.map(item('function of the code')),
  ];
}
