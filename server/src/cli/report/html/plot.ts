import type { Curve } from '../../../service/api';
import { formatNumber } from '../../../text/number';
import { html } from '../markdown';

const WIDTH = 560;
const HEIGHT = 240;
const LEFT = 64;
const RIGHT = 16;
const TOP = 14;
const BOTTOM = 42;

/** Both sides of a claim along one symbol, the witness marked on each. */
export function plot(curve: Curve, quantity: string): string {
  const all = [...curve.expected, ...curve.found].filter(Number.isFinite).sort((a, b) => a - b);
  // A pole must not flatten all the rest.
  const cut = Math.floor(all.length * 0.02);
  const [low, high] = widened(all[cut]!, all[all.length - 1 - cut]!);
  const [from, to] = [curve.at[0]!, curve.at.at(-1)!];
  const x = (v: number) => LEFT + ((v - from) / (to - from)) * (WIDTH - LEFT - RIGHT);
  const y = (v: number) => TOP + ((high - v) / (high - low)) * (HEIGHT - TOP - BOTTOM);
  const parts: string[] = [];
  for (const v of ticks(low, high)) {
    parts.push(`<line class="grid" x1="${LEFT}" x2="${WIDTH - RIGHT}" y1="${n(y(v))}" y2="${n(y(v))}"/>`);
    parts.push(`<text x="${LEFT - 8}" y="${n(y(v) + 4)}" text-anchor="end">${label(v)}</text>`);
  }
  for (const v of ticks(from, to)) {
    parts.push(`<line class="grid" x1="${n(x(v))}" x2="${n(x(v))}" y1="${TOP}" y2="${HEIGHT - BOTTOM}"/>`);
    parts.push(`<text x="${n(x(v))}" y="${HEIGHT - BOTTOM + 17}" text-anchor="middle">${label(v)}</text>`);
  }
  const inside = (v: number) => Number.isFinite(v) && v >= low - (high - low) && v <= high + (high - low);
  const path = (values: readonly number[]) => {
    let d = '';
    let pen = false;
    values.forEach((v, i) => {
      if (!inside(v)) pen = false;
      else {
        d += `${pen ? 'L' : 'M'}${n(x(curve.at[i]!))} ${n(y(Math.min(high, Math.max(low, v))))}`;
        pen = true;
      }
    });
    return d;
  };
  parts.push(`<path class="expected" d="${path(curve.expected)}"/>`, `<path class="found" d="${path(curve.found)}"/>`);
  if (curve.witness >= from && curve.witness <= to) {
    parts.push(`<line class="witness" x1="${n(x(curve.witness))}" x2="${n(x(curve.witness))}" y1="${TOP}" y2="${HEIGHT - BOTTOM}"/>`);
  }
  const axis = `${curve.symbol}${curve.unit ? ` [${curve.unit}]` : ''}`;
  parts.push(`<text x="${(LEFT + WIDTH - RIGHT) / 2}" y="${HEIGHT - 6}" text-anchor="middle">${html(axis)}</text>`);
  const title = `${quantity} over ${curve.symbol}: what the declared energies give, and what the code gives. The witness is at ${curve.symbol} = ${formatNumber(curve.witness)}.`;
  return [
    `<figure><svg class="plot" viewBox="0 0 ${WIDTH} ${HEIGHT}" width="${WIDTH}" height="${HEIGHT}" role="img" aria-label="${html(title)}">${parts.join('')}</svg>`,
    `<figcaption><span class="key expected">declared energies</span> <span class="key found">code</span> <span class="key witness">witness</span></figcaption></figure>`,
  ].join('\n');
}

function widened(low: number, high: number): [number, number] {
  const size = Math.max(Math.abs(low), Math.abs(high), 1e-300);
  const margin = high - low > 1e-9 * size ? 0.06 * (high - low) : size === 1e-300 ? 1 : 0.5 * size;
  return [low - margin, high + margin];
}

/** About five round numbers in a range. */
function ticks(low: number, high: number): number[] {
  const rough = (high - low) / 5;
  const power = 10 ** Math.floor(Math.log10(rough));
  const step = [1, 2, 5, 10].find((m) => m * power >= rough)! * power;
  const out: number[] = [];
  for (let k = Math.ceil(low / step); k * step <= high; k++) out.push(k * step);
  return out;
}

function label(v: number): string {
  return formatNumber(Math.abs(v) < 1e-12 ? 0 : v, 3).replace('-', '\u2212');
}

function n(v: number): string {
  return String(Math.round(v * 10) / 10);
}
