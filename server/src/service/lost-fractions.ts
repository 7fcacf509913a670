import type { Problem } from '@visviva/shared';
import { text } from '../expression/print';
import type { Rational } from '../expression/rational';
import type { Drop } from '../program/reading';
import type { Document } from '../workspace/documents';

/** Places of the claimed code where integers lose what is behind the point; a verdict takes that into account. */
export function lostFractions(document: Document, drops: readonly Drop[]): Problem[] {
  return drops
    .filter((d) => d.place.file === document.file)
    .map((d) => ({
      file: document.file,
      code: 'wrong-operator',
      message: wordsOf(document, d),
      range: document.lines.range(d.place.span),
      severity: 'warning',
    }));
}

function wordsOf(document: Document, { kind, place, exact }: Drop): string {
  const code = document.text.slice(place.span.start, place.span.end).replace(/\s+/g, ' ');
  const quoted = `\`${code.length > 60 ? `${code.slice(0, 57)}...` : code}\``;
  const value = exact.op === 'number' ? (exact.data as Rational) : undefined;
  if (kind === 'element') {
    return `${quoted}: a list of integers keeps only the whole part of what is written to it: make it one of floating-point numbers`;
  }
  const is = value ? `is ${floor(value)} here, not ${text(exact)}` : 'loses what is behind the point';
  return `${quoted} ${is}: \`/\` between integers gives an integer in this version of the language: write one of them with a point`;
}

function floor(r: Rational): string {
  const { numerator: n, denominator: d } = r;
  const q = n / d;
  return String(n % d !== 0n && n < 0n ? q - 1n : q);
}
