import type { ReportPosition } from '@visviva/shared';
import { LineIndex } from '../../server/src/text/line-index';

/** A text in which `‸` marks the cursor, without the mark, and where it stood. */
export function marked(text: string): { readonly text: string; readonly position: ReportPosition } {
  const at = text.indexOf('‸');
  if (at < 0) throw new Error('no ‸ in the text');
  const plain = text.slice(0, at) + text.slice(at + 1);
  return { text: plain, position: new LineIndex(plain).position(at) };
}
