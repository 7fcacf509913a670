import { Rational } from '../expression/rational';
import type { Span } from '../text/span';

export type TokenKind = 'number' | 'name' | 'string' | 'prime' | 'superscript' | 'operator' | 'bad' | 'end';

export interface Token {
  readonly kind: TokenKind;
  /** Operators in their plain spelling (`·` is `*`), names in NFC without dots, strings without quotes. */
  readonly text: string;
  readonly span: Span;
  /** Spaces before it on its line; a tab counts two. */
  readonly gap: number;
  /** First on its line, and not on the statement's first. */
  readonly newline: boolean;
  /** Order of a prime; dots on a name. */
  readonly order: number;
  /** A name with the dots it was written with, in NFC: an identifier of the code may have them. */
  readonly raw?: string;
  readonly value?: Rational;
  /** What is wrong with a `bad` token, or with one that was read as something near to what was typed. */
  readonly problem?: string;
}

/** A piece of a document line without its comment marks: `start` to `end`, no line end inside. */
export interface Segment {
  readonly start: number;
  readonly end: number;
}

const NAME = /[\p{L}_$\u2080-\u2089][\p{L}\p{M}\p{Nd}_$\u2080-\u2089]*/uy;
const NUMBER = /(?:\d[\d_]*(?:\.(?!\.)\d*)?|\.\d+)(?:[eE][+-]?\d+)?/y;
const DIGITS = /\d+/y;
const SUPERSCRIPT = /[⁺⁻]?[⁰¹²³⁴-⁹]+/y;
const OPERATOR = /===|!==|\*\*|\.\.\.?|->|::|\?\.|[=!<>~]=|<>|[-+*/]=|&&|\|\||\/\/|[-+*/^=<>()[\]{},;:.!~@%#&|?\\]/y;
const PRIMES: Readonly<Record<string, number>> = { "'": 1, '′': 1, '’': 1, ʹ: 1, '″': 2, '‴': 3 };
const SPELLINGS: Readonly<Record<string, string>> = {
  '·': '*', '×': '*', '⋅': '*', '∙': '*', '•': '*', '−': '-', '–': '-', '÷': '/', '⁄': '/', '∕': '/',
  '≤': '<=', '≥': '>=', '≠': '!=', '…': '..', '∧': '&&', '∨': '||', '¬': '!', '—': '—',
};
const RESPELT: Readonly<Record<string, string>> = { '**': '^', '==': '==', '===': '==', '!==': '!=', '~=': '!=', '<>': '!=', '...': '..' };
const FRACTIONS: Readonly<Record<string, readonly [number, number]>> = {
  '½': [1, 2], '⅓': [1, 3], '¼': [1, 4], '¾': [3, 4], '⅔': [2, 3], '⅛': [1, 8],
};

/** Reads tokens on demand from the segments of one statement. Positions are document offsets throughout. */
export class Lexer {
  private segment = 0;
  private offset: number;
  private fresh = false;
  /** The last token, for the difference between a prime and an opening quote. */
  private before: Token | undefined;

  constructor(
    private readonly text: string,
    private readonly segments: readonly Segment[],
  ) {
    this.offset = segments[0]?.start ?? 0;
  }

  /** Goes on reading at a later or earlier offset inside the segments. */
  seek(offset: number): void {
    this.segment = this.segmentAt(offset);
    this.offset = Math.max(offset, this.segments[this.segment]?.start ?? 0);
    this.fresh = false;
    this.before = undefined;
  }

  /** End of the line that holds an offset. */
  lineEnd(offset: number): number {
    return this.segments[this.segmentAt(offset)]?.end ?? offset;
  }

  private segmentAt(offset: number): number {
    let low = 0;
    let high = this.segments.length - 1;
    while (low < high) {
      const middle = (low + high) >> 1;
      if (this.segments[middle]!.end < offset) low = middle + 1;
      else high = middle;
    }
    return Math.max(0, low);
  }

  next(): Token {
    const token = this.read();
    this.before = token;
    return token;
  }

  private read(): Token {
    let gap = 0;
    let newline = this.fresh;
    this.fresh = false;
    for (;;) {
      const end = this.segments[this.segment]?.end ?? this.offset;
      while (this.offset < end && /[\s\u200b\ufeff]/u.test(this.text[this.offset]!)) {
        gap += this.text[this.offset] === '\t' ? 2 : 1;
        this.offset++;
      }
      if (this.offset < end) return this.lex(gap, newline, end);
      if (this.segment + 1 >= this.segments.length) {
        return { kind: 'end', text: '', span: { start: this.offset, end: this.offset }, gap, newline, order: 0 };
      }
      this.segment++;
      this.offset = this.segments[this.segment]!.start;
      newline = true;
      gap = 0;
    }
  }

  private lex(gap: number, newline: boolean, end: number): Token {
    const start = this.offset;
    const make = (kind: TokenKind, text: string, length: number, more: Partial<Token> = {}): Token => {
      this.offset = Math.min(start + length, end);
      return { kind, text, span: { start, end: this.offset }, gap, newline, order: 0, ...more };
    };
    const touching = gap === 0 && !newline ? this.before : undefined;
    const c = this.text[start]!;

    const primed = PRIMES[c];
    if (primed !== undefined && (c !== "'" || isOperandEnd(touching))) return make('prime', c, 1, { order: primed });
    if (c === '"' && isOperandEnd(touching)) {
      return make('prime', c, 1, { order: 2, problem: 'this is one quotation mark: the second derivative is written with two apostrophes, as in x\'\'' });
    }
    if (c === '"' || c === "'" || c === '“' || c === '‘') return this.string(c, start, end, make);

    const after = touching?.text === '.' || touching?.text === '->' || touching?.text === '::';
    if (after && c === '#') {
      const name = this.match(NAME, start + 1, end);
      if (name) return make('name', `#${name}`.normalize('NFC'), name.length + 1, { raw: `#${name}`.normalize('NFC') });
    }
    const digits = after ? this.match(DIGITS, start, end) : undefined;
    if (digits) return make('name', digits, digits.length, { raw: digits });
    const number = c === '.' && isOperandEnd(touching) ? undefined : this.match(NUMBER, start, end);
    if (number) {
      const value = Rational.parse(number);
      if (!value) return make('bad', number, number.length, { problem: `the number ${clip(number)} is out of range` });
      return make('number', number, number.length, { value });
    }
    const name = this.match(NAME, start, end);
    if (name) return make('name', ...nameOf(name));
    const raised = this.match(SUPERSCRIPT, start, end);
    if (raised) {
      const plain = [...raised].map((x) => '⁰¹²³⁴⁵⁶⁷⁸⁹'.indexOf(x)).map((d, i) => (d >= 0 ? `${d}` : raised[i] === '⁻' ? '-' : ''));
      const value = Rational.parse(plain.join(''));
      if (value) return make('superscript', plain.join(''), raised.length, { value });
    }
    const fraction = FRACTIONS[c];
    if (fraction) return make('number', c, 1, { value: Rational.of(...fraction) });
    if (c === '∞') return make('name', 'inf', 1, { raw: 'inf' });
    const spelling = SPELLINGS[c];
    if (spelling) return make('operator', spelling, 1);
    const operator = this.match(OPERATOR, start, end);
    if (operator) return make('operator', RESPELT[operator] ?? operator, operator.length);
    const whole = String.fromCodePoint(this.text.codePointAt(start)!);
    return make('bad', whole, whole.length, { problem: `\`${whole}\` has no meaning in a formula` });
  }

  private string(
    open: string,
    start: number,
    end: number,
    make: (kind: TokenKind, text: string, length: number, more?: Partial<Token>) => Token,
  ): Token {
    const close = open === '“' ? '”' : open === '‘' ? '’' : open;
    const line = this.text.slice(start, end);
    const at = line.indexOf(close, 1);
    if (at < 0) return make('bad', line, line.length, { problem: 'this quotation is not closed on its line' });
    return make('string', line.slice(1, at), at + 1);
  }

  private match(pattern: RegExp, at: number, end: number): string | undefined {
    pattern.lastIndex = at;
    const found = pattern.exec(this.text)?.[0];
    return found === undefined || found === '' ? undefined : found.slice(0, Math.max(0, end - at)) || undefined;
  }
}

function isOperandEnd(token: Token | undefined): boolean {
  if (!token) return false;
  return (
    token.kind === 'name' || token.kind === 'number' || token.kind === 'prime' || token.kind === 'superscript' ||
    (token.kind === 'operator' && (token.text === ')' || token.text === ']'))
  );
}

/**
 * Takes the dots off a name: `ẋ`, `θ̈1` are x', θ1''. Dots inside a word (`höhe`) belong to its spelling; on the last letter of
 * a longer name they count only where typed as combining characters (`theta` and U+0307).
 */
function nameOf(raw: string): [text: string, length: number, more: Partial<Token>] {
  const nfc = raw.normalize('NFC');
  const plain: [string, number, Partial<Token>] = [nfc, raw.length, { raw: nfc }];
  if (!/[^\x00-\x7f]/.test(raw)) return plain;
  const parts = /^(\p{L}|\p{L}[\p{L}\p{Nd}_$]*\p{L})([\u0307\u0308]+)([\p{Nd}_\u2080-\u2089][\p{L}\p{Nd}_\u2080-\u2089]*)?$/u.exec(raw.normalize('NFD'));
  if (!parts) return plain;
  const [, letters = '', dots = '', tail = ''] = parts;
  if ([...letters].length > 1 && !/[\u0307\u0308]/.test(raw)) return plain;
  const order = [...dots].reduce((n, d) => n + (d === '\u0307' ? 1 : 2), 0);
  return [(letters + tail).normalize('NFC'), raw.length, { order, raw: nfc }];
}

export function clip(text: string, most = 40): string {
  return text.length <= most ? text : `${text.slice(0, most - 3)}...`;
}
