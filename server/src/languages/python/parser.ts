import { Edit, type Language, type Parser, type Point, type Tree } from 'web-tree-sitter';
import type { Program } from '../../program/form';
import { programOf } from './parse';
import { recover } from './recover';
import { copyTree, type Syntax } from './syntax';

/** Trees of this many large files stay in the parser's memory, to start from at the next edit. */
const MOST_FILES = 16;

/** A tree of fewer characters is built anew faster than an old one is mended. */
const SMALL = 4_000;

interface Kept {
  readonly text: string;
  readonly tree: Tree;
}

/** Parses files again and again as they are edited. Every tree is given back to the parser's memory. */
export class PythonParser {
  /** Oldest use first. */
  private readonly kept = new Map<string, Kept>();

  constructor(
    private readonly parser: Parser,
    private readonly language: Language,
  ) {}

  /** Never throws; syntax errors are in the program. Spans are UTF-16 offsets into `text`. */
  parse(file: string, text: string, version?: number): Program {
    let first = true;
    return programOf(
      recover(text, (source) => {
        const isWhole = first && source === text;
        first = false;
        return isWhole ? this.whole(file, source) : this.once(source);
      }),
      version,
    );
  }

  private once(text: string): Syntax {
    const tree = this.parser.parse(text);
    if (!tree) return EMPTY;
    try {
      return copyTree(this.language, tree);
    } finally {
      tree.delete();
    }
  }

  private whole(file: string, text: string): Syntax {
    const before = this.kept.get(file);
    this.kept.delete(file);
    if (text.length < SMALL) {
      before?.tree.delete();
      return this.once(text);
    }
    if (before) before.tree.edit(change(before.text, text));
    const tree = this.parser.parse(text, before?.tree);
    before?.tree.delete();
    if (!tree) return EMPTY;
    this.kept.set(file, { text, tree });
    if (this.kept.size > MOST_FILES) {
      const [oldest, entry] = this.kept.entries().next().value!;
      entry.tree.delete();
      this.kept.delete(oldest);
    }
    return copyTree(this.language, tree);
  }
}

const EMPTY: Syntax = {
  root: { type: 'module', start: 0, end: 0, field: undefined, isNamed: true, isBroken: false, children: [] },
  comments: [],
};

function change(old: string, text: string): Edit {
  const shorter = Math.min(old.length, text.length);
  let start = 0;
  while (start < shorter && old.charCodeAt(start) === text.charCodeAt(start)) start++;
  let end = 0;
  while (end < shorter - start && old.charCodeAt(old.length - 1 - end) === text.charCodeAt(text.length - 1 - end)) end++;
  return new Edit({
    startIndex: start,
    oldEndIndex: old.length - end,
    newEndIndex: text.length - end,
    startPosition: pointAt(old, start),
    oldEndPosition: pointAt(old, old.length - end),
    newEndPosition: pointAt(text, text.length - end),
  });
}

function pointAt(text: string, offset: number): Point {
  let row = 0;
  let line = 0;
  for (let at = text.indexOf('\n'); at >= 0 && at < offset; at = text.indexOf('\n', at + 1)) {
    row++;
    line = at + 1;
  }
  return { row, column: offset - line };
}
