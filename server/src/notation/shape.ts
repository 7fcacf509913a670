import { nearest } from './suggest';
import { ENERGY_WORDS, LONG_WORDS, SINGULARS } from './words';

/** What a line of a comment looks like from outside, before it is parsed. */
export type Shape =
  | { readonly kind: 'statement'; readonly word: string }
  /** A statement whose word is misspelt: `cordinates`, `Parameters`. */
  | { readonly kind: 'misspelt'; readonly word: string; readonly typed: string }
  /** `U = ...`: nothing that a declaration knows. */
  | { readonly kind: 'unknown'; readonly typed: string }
  | { readonly kind: 'tag' }
  | { readonly kind: 'blank' }
  | { readonly kind: 'prose' };

const KEYWORDS = new Set('at on over in with between and or not rest mass inertia centre center angle rotation order within limits of by to'.split(' '));
const PROSE = new Set('the is are was were that which an from for if when this these it its has have should must will can'.split(' '));
/** What follows the word of these is a name of one's own, and a colon ends it. */
export const NAMED: ReadonlySet<string> = new Set(['point', 'body']);
const EQUATIONS = new Set(['where', 'reads', 'checks', 'near', 'constraint']);

export function shapeOf(line: string): Shape {
  // A fence of Markdown around the declaration, and the remark lines of a `.visviva` file.
  if (line === '' || /^(?:```|~~~)[\w-]*$/.test(line) || /^(?:#(?!\{)|\/\/)/.test(line)) return { kind: 'blank' };
  if (line.startsWith('@')) return { kind: 'tag' };
  const head = /^[\p{L}_$][\p{L}\p{M}\p{Nd}_$\u2080-\u2089]*/u.exec(line)?.[0];
  if (!head) return { kind: 'prose' };
  const rest = line.slice(head.length);
  const whole = SINGULARS.get(head);
  if (whole && beginsStatement(whole, rest) && looksFormal(whole, rest.replace(/^:/, ''))) return { kind: 'statement', word: whole };
  if (ENERGY_WORDS.has(head)) {
    if (rest.trim() === '' || /^\s*(?:\([^()]*\)\s*)?:?=/.test(rest) || /^\s*[-+]=/.test(rest)) return { kind: 'statement', word: head };
  } else if (head === 'Q') {
    if (rest.trim() === '' || /^\s*\[[^\]]*(?:\]\s*=|$)/.test(rest) || /^\s*=/.test(rest)) return { kind: 'statement', word: head };
    if (/^\s*\[[^\]]*\]\s*$/.test(rest)) return { kind: 'statement', word: head };
  } else if (LONG_WORDS.has(head)) {
    if (beginsStatement(head, rest)) return { kind: 'statement', word: head };
  } else if (head.length >= 4) {
    const meant = nearest(head.toLowerCase(), LONG_WORDS);
    if (meant && /^\s+\S/.test(rest) && beginsStatement(meant, rest) && looksFormal(meant, rest)) {
      return { kind: 'misspelt', word: meant, typed: head };
    }
  }
  if (/^(?:['′″]+|\s*\[[^\]]*\]|\([^()]*\)|(?:\.|->)[\w$]+)*\s*[-+]?=(?![=>])/.test(rest)) return { kind: 'unknown', typed: head };
  return { kind: 'prose' };
}

/** True unless what follows the word makes it a word of a sentence, or a variable of a formula. */
function beginsStatement(word: string, rest: string): boolean {
  if (rest === '' || (rest === ':' && !NAMED.has(word))) return true;
  if (/^:\s+\S/.test(rest) && !NAMED.has(word)) return !isProse(word, rest.slice(1).trim()) && looksFormal(word, rest.slice(1));
  if (!/^\s/.test(rest)) return NAMED.has(word) ? rest.startsWith(':') : rest.startsWith('(') && !/=/.test(rest);
  const body = rest.trim();
  if (body === '') return true;
  if (/^(?:=|[*/^)\],;.]|[-+]\s)/.test(body)) return false;
  return !isProse(word, body);
}

/** Words of a sentence: an English small word among them, or three plain words in a row; formulas and brackets speak against it. */
function isProse(word: string, rest: string): boolean {
  const body = rest.split(/\s{2,}|\t/)[0]!;
  if (EQUATIONS.has(word) ? /=/.test(body) : /[[=(]|:\s/.test(body) && !/^[\p{L}]+ [\p{L}]+ [\p{L}]+ /u.test(body)) return false;
  let run = 0;
  for (const w of body.split(' ')) {
    const plain = /^\p{L}+[,.;:]?$/u.test(w);
    if (plain && PROSE.has(w.toLowerCase().replace(/\W$/, ''))) return true;
    run = plain && !KEYWORDS.has(w) ? run + 1 : 0;
    if (run >= 3) return true;
    if (/[,.;:]$/.test(w)) run = 0;
  }
  return EQUATIONS.has(word) && /\.$/.test(body);
}

/** A misspelt word is only taken for a statement where what follows could belong to one. */
function looksFormal(word: string, rest: string): boolean {
  const body = rest.trim().split(/\s{2,}|\t/)[0]!;
  switch (word) {
    case 'coordinates':
    case 'parameters':
    case 'inputs':
      return /^[\p{L}_][\p{L}\p{M}\p{N}_]*(?:\[\w+\])?\s*(?:$|[,[<>=]|in\b|over\b)/u.test(body);
    case 'where':
    case 'reads':
    case 'checks':
    case 'near':
    case 'constraint':
      return body.includes('=');
    case 'point':
    case 'body':
      return /\bmass\b/.test(body);
    case 'force':
      return /\bat\b/.test(body);
    case 'torque':
      return /\bon\b/.test(body);
    case 'spring':
    case 'damper':
      return /\bbetween\b/.test(body);
    case 'ranges':
      return /\bin\b/.test(body);
    case 'gravity':
      return /^[([]/.test(body);
    case 'defines':
      return /^[TVLDQ]\b/.test(body);
    default:
      return false;
  }
}

/** True where a line cannot be the end of a statement: an operator, comma or open bracket ends it. */
export function endsOpen(line: string): boolean {
  const open = /(?:[-+*/^=<>,([{·×⋅−&|:]|\b(?:and|or|not|over|at|on|with|between|in|of|by))$/;
  return open.test(line) || open.test(withoutRemark(line));
}

export function withoutRemark(line: string): string {
  const m = /[\p{L}\p{N}_'′″\])²³,](?: {2,}|\s*\t\s*)(?=[\p{L}"'(])(?!(?:at|on|over|with|between|and|or|in|rest|order|mass|inertia|centre|angle|rotation)\b)/u.exec(line);
  return m ? line.slice(0, m.index + 1) : line;
}

/** Brackets opened less brackets closed. */
export function openBrackets(line: string): number {
  let depth = 0;
  for (const c of withoutRemark(line)) {
    if (c === '(' || c === '[' || c === '{') depth++;
    else if (c === ')' || c === ']' || c === '}') depth--;
  }
  return depth;
}
