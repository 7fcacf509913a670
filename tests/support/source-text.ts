/** What may hide text in a source file: comments and strings, by file name ending. */
interface Syntax {
  readonly line: readonly string[];
  readonly block: readonly (readonly [string, string])[];
  readonly quotes: readonly string[];
}

const C_LIKE: Syntax = { line: ['//'], block: [['/*', '*/']], quotes: ['"', "'", '`'] };

const SYNTAX: Readonly<Record<string, Syntax>> = {
  ts: C_LIKE,
  tsx: C_LIKE,
  mts: C_LIKE,
  js: C_LIKE,
  mjs: C_LIKE,
  cjs: C_LIKE,
  jsx: C_LIKE,
  html: { ...C_LIKE, block: [...C_LIKE.block, ['<!--', '-->']], quotes: ['`'] },
  py: { line: ['#'], block: [['"""', '"""'], ["'''", "'''"]], quotes: ['"', "'"] },
  visviva: { line: ['#'], block: [], quotes: [] },
};

export function extension(file: string): string {
  return file.slice(file.lastIndexOf('.') + 1);
}

function syntaxOf(file: string): Syntax {
  const syntax = SYNTAX[extension(file)];
  if (!syntax) throw new Error(`${file}: no comment syntax known for this ending; add it to tests/support/source-text.ts`);
  return syntax;
}

/** The mark that begins a line comment: `//`. */
export function lineMark(file: string): string {
  return syntaxOf(file).line[0]!;
}

/** The text with every comment blanked, offsets kept: what an edit of the code may touch. */
export function codeOnly(file: string, text: string): string {
  const syntax = syntaxOf(file);
  let out = '';
  let i = 0;
  const copy = (end: number): void => {
    out += text.slice(i, end);
    i = end;
  };
  const blank = (end: number): void => {
    out += text.slice(i, end).replace(/[^\n]/g, ' ');
    i = end;
  };
  while (i < text.length) {
    const block = syntax.block.find(([open]) => text.startsWith(open, i));
    if (block) {
      const end = text.indexOf(block[1], i + block[0].length);
      blank(end < 0 ? text.length : end + block[1].length);
    } else if (syntax.line.some((mark) => text.startsWith(mark, i))) {
      const end = text.indexOf('\n', i);
      blank(end < 0 ? text.length : end);
    } else if (syntax.quotes.includes(text[i]!)) {
      copy(endOfString(text, i));
    } else copy(i + 1);
  }
  return out;
}

function endOfString(text: string, start: number): number {
  const quote = text[start]!;
  for (let i = start + 1; i < text.length; i++) {
    if (text[i] === '\\') i++;
    else if (text[i] === quote) return i + 1;
    else if (text[i] === '\n' && quote !== '`') return i;
  }
  return text.length;
}
