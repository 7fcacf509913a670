import uPlot from 'uplot';
import type { PanelData } from '@visviva/shared';
import { element } from './elements';
import type { Track } from './motion';

export interface Plot {
  readonly name: string;
  readonly holder: HTMLElement;
  readonly plot: uPlot;
}

interface Line {
  readonly label: string;
  readonly values: readonly (number | null)[];
  readonly colour: string;
  readonly dash?: number[];
}

/** The theme's colours, as the page's style sheet resolves them: a canvas knows no variables. */
export function colours(): Record<'text' | 'grid' | 'code' | 'derived' | 'difference', string> {
  const style = getComputedStyle(document.body);
  const of = (name: string): string => style.getPropertyValue(name).trim() || style.color;
  return { text: of('--text'), grid: of('--rule'), code: of('--code'), derived: of('--derived'), difference: of('--wrong') };
}

/** Code and derived motion of one coordinate, the energy along both, and how far they come apart. */
export function plots(data: PanelData, coordinate: number, derived: Track, code: Track | undefined, width: number): Plot[] {
  const c = colours();
  const times = derived.times.length >= (code?.times.length ?? 0) ? derived.times : code!.times;
  const pad = (values: readonly number[]): (number | null)[] => times.map((_, i) => values[i] ?? null);
  const name = data.motion!.coordinates[coordinate]!;
  const unit = data.symbols.find((s) => s.name === name)?.unit;
  const q = unit ? `${name} [${unit}]` : name;
  const both = (d: readonly number[], k: readonly number[] | undefined): Line[] => [
    { label: 'derived', values: pad(d), colour: c.derived, ...(k ? { dash: [7, 5] } : {}) },
    ...(k ? [{ label: 'code', values: pad(k), colour: c.code }] : []),
  ];
  const out = [
    plot(`${q} over time`, times, both(derived.positions[coordinate]!, code?.positions[coordinate]), width),
    plot('Energy over time', times, both(derived.energy, code?.energy), width),
  ];
  if (code) {
    const difference = pad(code.positions[coordinate]!).map((x, i) => (x === null || derived.positions[coordinate]![i] === undefined ? null : x - derived.positions[coordinate]![i]!));
    out.push(plot(`Code less derived, ${q}`, times, [{ label: 'difference', values: difference, colour: c.difference }], width));
  }
  return out;
}

function plot(title: string, times: readonly number[], lines: readonly Line[], width: number): Plot {
  const c = colours();
  const holder = element('figure', { class: 'plot' }, element('figcaption', {}, title));
  const canvas = element('div', { role: 'img', 'aria-label': `${title}: ${lines.map((l) => `${l.label} ${spoken(l.values)}`).join('; ')}` });
  holder.append(canvas);
  const axis: uPlot.Axis = { stroke: c.text, grid: { stroke: c.grid, width: 1 }, ticks: { stroke: c.grid, width: 1 }, font: '11px system-ui, sans-serif' };
  const made = new uPlot(
    {
      width,
      height: 170,
      cursor: { drag: { x: false, y: false } },
      legend: { show: lines.length > 1 },
      // A motion that does not move still needs a scale, and rounding is no motion.
      scales: { x: { time: false }, y: { range: (_, low, high) => spread(low, high) } },
      axes: [{ ...axis, values: (_, ticks) => ticks.map((t) => `${t} s`) }, { ...axis, size: 64, values: (_, ticks) => ticks.map(tick) }],
      series: [
        { label: 't', value: (_, t) => (t === null ? '' : `${t.toFixed(2)} s`) },
        ...lines.map((l): uPlot.Series => ({ label: l.label, stroke: l.colour, width: 1.8, ...(l.dash ? { dash: l.dash } : {}), points: { show: false }, value: (_, x) => (x === null ? '' : x.toPrecision(4)) })),
      ],
    },
    [times, ...lines.map((l) => l.values)] as uPlot.AlignedData,
    canvas,
  );
  return { name: title, holder, plot: made };
}

function tick(x: number): string {
  return x !== 0 && Math.abs(x) < 1e-3 ? x.toExponential(0) : String(Number(x.toPrecision(5)));
}

function spread(low: number | null, high: number | null): [number, number] {
  if (low === null || high === null) return [-1, 1];
  const size = Math.max(Math.abs(low), Math.abs(high));
  const least = Math.max(1e-2 * size, 1e-9);
  const gap = Math.max(high - low, least);
  return [low - 0.08 * gap, high + 0.08 * gap];
}

function spoken(values: readonly (number | null)[]): string {
  const known = values.filter((x): x is number => x !== null);
  if (known.length === 0) return 'has no values';
  return `from ${known[0]!.toPrecision(3)} to ${known.at(-1)!.toPrecision(3)}, between ${Math.min(...known).toPrecision(3)} and ${Math.max(...known).toPrecision(3)}`;
}
