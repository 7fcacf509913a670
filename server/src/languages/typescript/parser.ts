import ts from 'typescript';
import type { Program } from '../../program/form';
import { programOf } from './parse';
import { parseSource } from './source';

const MOST_FILES = 32;

/** A tree of fewer characters is built anew faster than an old one is mended. */
const SMALL = 20_000;

/** Parses files again and again as they are edited; keeps the last trees of a few large files to start from. */
export class TypeScriptParser {
  /** Oldest use first. */
  private readonly trees = new Map<string, ts.SourceFile>();

  /** See `parseTypeScript`. */
  parse(file: string, text: string): Program {
    return programOf(file, text, (code) => this.source(file, code));
  }

  private source(file: string, code: string): ts.SourceFile {
    const before = this.trees.get(file);
    this.trees.delete(file);
    if (code.length < SMALL) return parseSource(file, code);
    const source = (before && mended(before, code)) ?? parseSource(file, code);
    this.trees.set(file, source);
    if (this.trees.size > MOST_FILES) this.trees.delete(this.trees.keys().next().value!);
    return source;
  }
}

/** The tree of the new text made from that of the old, which is spent by this; undefined where that can't be done. */
function mended(before: ts.SourceFile, text: string): ts.SourceFile | undefined {
  const old = before.text;
  const shorter = Math.min(old.length, text.length);
  let start = 0;
  while (start < shorter && old.charCodeAt(start) === text.charCodeAt(start)) start++;
  if (start === old.length && start === text.length) return before;
  let end = 0;
  while (end < shorter - start && old.charCodeAt(old.length - 1 - end) === text.charCodeAt(text.length - 1 - end)) end++;
  const changed = ts.createTextSpanFromBounds(start, old.length - end);
  try {
    return ts.updateSourceFile(before, text, ts.createTextChangeRange(changed, text.length - end - start));
  } catch {
    return undefined;
  }
}
