import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';

/** Processor time of this process, in milliseconds: other programs on the machine hardly change it. */
export function cpuTime(): number {
  const { user, system } = process.cpuUsage();
  return (user + system) / 1000;
}

export function median(values: readonly number[]): number {
  return quantile(values, 0.5);
}

export function quantile(values: readonly number[], q: number): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.min(sorted.length - 1, Math.floor(q * sorted.length))]!;
}

/** The exponent of a power law through points, by least squares of the logarithms. */
export function exponent(points: readonly (readonly [number, number])[]): number {
  const logs = points.map(([x, y]) => [Math.log(x), Math.log(y)] as const);
  const mean = (k: 0 | 1): number => logs.reduce((s, p) => s + p[k], 0) / logs.length;
  const [mx, my] = [mean(0), mean(1)];
  return logs.reduce((s, [x, y]) => s + (x - mx) * (y - my), 0) / logs.reduce((s, [x]) => s + (x - mx) ** 2, 0);
}

/** A row of a bench's table: cells as they are shown. */
export type Row = readonly string[];

/** Prints a table and leaves it for the page of results. */
export function report(name: string, title: string, head: Row, rows: readonly Row[], notes: readonly string[] = []): void {
  const lines = [`### ${title}`, '', `| ${head.join(' | ')} |`, `|${head.map(() => '---').join('|')}|`, ...rows.map((r) => `| ${r.join(' | ')} |`)];
  const text = [...lines, ...(notes.length > 0 ? ['', ...notes] : []), ''].join('\n');
  console.log(text);
  const folder = join(process.cwd(), '.artifacts', 'bench', 'tables');
  mkdirSync(folder, { recursive: true });
  writeFileSync(join(folder, `${name}.md`), text);
}

export function megabytes(bytes: number): string {
  return `${Math.round(bytes / 1024 / 1024)} MB`;
}

/** The most memory this process has had, in bytes. */
export function peakMemory(): number {
  return process.resourceUsage().maxRSS * 1024;
}
