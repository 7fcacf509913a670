import type { Rational } from '../rational';
import { joined, Level, type Part, type Written } from './layout';
import { writeRational } from './number';

/** What languages with the usual arithmetic write alike. */

export function atom(text: string): Written {
  return { text, level: Level.atom };
}

export function tight(w: Written): string {
  return w.level >= Level.atom ? w.text : `(${w.text})`;
}

export function above(w: Written, level: Level): string {
  return w.level > level ? w.text : `(${w.text})`;
}

/** A number; a fraction is written as a quotient, which a factor before or behind it must not tear apart. */
export function number(value: Rational): Written {
  const n = writeRational(value);
  return n.kind === 'fraction' ? { text: `${n.top} / ${n.bottom}`, level: Level.product } : atom(n.text);
}

/**
 * A product over a product. `standsBare` tells of a factor that needs no brackets though it is a product itself, such as
 * `l * l`; alone below the line it does need them.
 */
export function product(
  coefficient: Rational,
  top: readonly Part[],
  bottom: readonly Part[],
  standsBare: (p: Part) => boolean = () => false,
): Written {
  const n = writeRational(coefficient);
  const numerator: string[] = top.map((p) => (standsBare(p) ? p.text : above(p, Level.product)));
  const denominator: string[] = bottom.map((p) => (standsBare(p) && bottom.length > 1 ? p.text : above(p, Level.product)));
  if (n.kind === 'fraction') {
    if (denominator.length === 0) numerator.unshift(`(${n.top} / ${n.bottom})`);
    else {
      if (n.top !== '1' || numerator.length === 0) numerator.unshift(n.top);
      denominator.unshift(n.bottom);
    }
  } else if (!coefficient.isOne || numerator.length === 0) numerator.unshift(n.text);
  if (denominator.length === 0) {
    if (numerator.length === 1 && top.length === 1) return top[0]!;
    return { text: joined(numerator, ' * '), level: Level.product };
  }
  const below = denominator.length === 1 ? denominator[0]! : `(${joined(denominator, ' * ')})`;
  return { text: `${joined(numerator, ' * ')} / ${below}`, level: Level.product };
}
