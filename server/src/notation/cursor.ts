import type { Span } from '../text/span';
import type { NotationError } from './tree';
import { Lexer, clip, type Segment, type Token } from './tokens';

/** Errors beyond this many in one declaration help nobody. */
const MOST_ERRORS = 50;

/** How names and words are read where the cursor stands. */
export interface Mode {
  /** Code in the left of `reads` and `checks`: dotted names stay identifiers, phrases such as `mass matrix` are no quantities. */
  readonly code: boolean;
  /** One-word quantities (`bias`, `residual`, `constant`) are meant, not names. */
  readonly quantities: boolean;
  /** `and`, `or`: operators always, only after one space (else a remark begins), or never. */
  readonly logic: 'always' | 'close' | 'never';
  /** Words of the statement that end a formula: `at`, `on`, `with`, `over`. */
  readonly stops: ReadonlySet<string>;
}

export const PHYSICS: Mode = { code: false, quantities: false, logic: 'close', stops: new Set(['over']) };
export const CODE: Mode = { ...PHYSICS, code: true };
export const CLAIMED: Mode = { ...PHYSICS, quantities: true };

/** Words that follow a name with meaning: the two words then are no remark. */
const AFTER_NAME = new Set('in over at on with order between and or rest matrix vector side A B of'.split(' '));

/** The tokens of one statement, with what is said about them: errors and remarks. */
export class Cursor {
  private readonly lexer: Lexer;
  private readonly ahead: Token[] = [];
  private last: Span;
  readonly remarks: { text: string; span: Span }[] = [];
  mode: Mode = PHYSICS;
  /** Open brackets around the cursor, for messages and the depth limit. */
  depth = 0;
  tooDeep = false;
  /** True once an operator was missing: the rest of the statement will be written alike. */
  saidJuxtaposed = false;

  constructor(
    readonly text: string,
    segments: readonly Segment[],
    readonly errors: NotationError[],
  ) {
    this.lexer = new Lexer(text, segments);
    const start = segments[0]?.start ?? 0;
    this.last = { start, end: start };
  }

  peek(k = 0): Token {
    while (this.ahead.length <= k) this.ahead.push(this.lexer.next());
    return this.ahead[k]!;
  }

  take(): Token {
    const token = this.peek();
    if (token.kind !== 'end') {
      this.ahead.shift();
      this.last = token.span;
    }
    return token;
  }

  /** Place of the last token taken. */
  get lastSpan(): Span {
    return this.last;
  }

  /** From a start to the end of the last token taken. */
  from(start: number): Span {
    return { start, end: Math.max(start, this.last.end) };
  }

  get atEnd(): boolean {
    return this.peek().kind === 'end';
  }

  is(operator: string, k = 0): boolean {
    const token = this.peek(k);
    return token.kind === 'operator' && token.text === operator;
  }

  isWord(word: string, k = 0): boolean {
    const token = this.peek(k);
    return token.kind === 'name' && token.text === word;
  }

  eat(operator: string): boolean {
    if (!this.is(operator)) return false;
    this.take();
    return true;
  }

  eatWord(word: string): boolean {
    if (!this.isWord(word)) return false;
    this.take();
    return true;
  }

  /** Goes on at an offset after the last token. */
  seek(offset: number): void {
    this.ahead.length = 0;
    this.lexer.seek(offset);
    this.last = { start: offset, end: offset };
  }

  lineEnd(offset: number): number {
    return this.lexer.lineEnd(offset);
  }

  /** No further error will be taken. */
  get full(): boolean {
    return this.errors.length >= MOST_ERRORS;
  }

  error(message: string, span: Span): void {
    if (this.full) return;
    if (this.errors.some((e) => e.span.start === span.start && e.span.end === span.end)) return;
    this.errors.push({ code: 'syntax', message, span });
  }

  /** The next token in words: `` `)` ``, `the end of the statement`. */
  describeNext(): string {
    const token = this.peek();
    return token.kind === 'end' ? 'the end of the statement' : `\`${clip(this.text.slice(token.span.start, token.span.end))}\``;
  }

  /** After something complete: true where a remark begins, by its mark or by two spaces. */
  atRemark(): boolean {
    const token = this.peek();
    if (token.kind === 'end') return false;
    if (token.kind === 'operator') {
      if (token.text === '#' || token.text === '//' || token.text === '—') return true;
      if ((token.text === '!' || token.text === '%') && token.gap > 0) return true;
      if (token.newline || token.gap < 2) return false;
      if (token.text === '-') {
        const second = this.peek(1);
        return second.kind === 'operator' && second.text === '-' && second.gap === 0 && this.peek(2).gap > 0;
      }
      return token.text === '(' || token.text === '[' || token.text === '{' || token.text === '@' || token.text === '%';
    }
    if (token.newline || token.gap < 2) return false;
    if (token.kind !== 'name') return token.kind !== 'prime' && token.kind !== 'superscript';
    if (this.mode.stops.has(token.text)) return false;
    return !(this.mode.logic === 'always' && (token.text === 'and' || token.text === 'or'));
  }

  /** After a comma: true where two spaces and a run of plain words end the line, as in `x [m],   the cart`. */
  atRemarkAfterComma(): boolean {
    const first = this.peek();
    if (first.newline || first.gap < 2 || first.kind !== 'name') return false;
    const second = this.peek(1);
    return second.kind === 'name' && !second.newline && second.gap === 1 && !AFTER_NAME.has(second.text);
  }

  /** Takes a remark, if one begins here, to the end of its line. */
  skipRemark(): void {
    while (this.atRemark()) this.takeRemark();
  }

  takeRemark(): void {
    const start = this.peek().span.start;
    const end = this.lineEnd(start);
    const text = this.text.slice(start, end).replace(/^(?:#+|\/\/+|—|--|!|%+)\s*/, '').trim();
    const before = this.last;
    if (text !== '') this.remarks.push({ text, span: { start, end } });
    this.ahead.length = 0;
    this.lexer.seek(end);
    this.last = before;
  }
}
