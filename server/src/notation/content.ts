import type { Cursor, Mode } from './cursor';
import { LEVEL } from './building';
import { parseExpression } from './formula';
import type { Formula, Statement } from './tree';

type Distribute<S> = S extends unknown ? Omit<S, 'span' | 'wordSpan' | 'remark' | 'over'> : never;
export type Content = Distribute<Statement>;

export function withStops(mode: Mode, ...stops: string[]): Mode {
  return { ...mode, stops: new Set(['over', ...stops]) };
}

/** Reads a formula in another mode, then returns to the mode before. */
export function reading(c: Cursor, mode: Mode, level: number = LEVEL.sum): Formula {
  const outer = c.mode;
  c.mode = mode;
  const formula = parseExpression(c, level);
  c.skipRemark();
  c.mode = outer;
  return formula;
}

/** `NAME:` before the parts of a force, spring or damper: allowed, and only a help to the reader. */
export function skipLabel(c: Cursor): void {
  if (c.peek().kind === 'name' && c.is(':', 1)) {
    c.take();
    c.take();
  }
}
