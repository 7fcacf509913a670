import { createService } from '../../server/src/service';
import { Budget } from '../../server/src/text/budget';
import { chainSource } from './chain-source';

/**
 * A chain of n point masses on rods: declaration by points, code with its own mass matrix and elimination. Declaration and
 * code are read anew and every acceleration is decided at 64 states. The code's elimination alone takes n^3 operations.
 * Processor time, median of several runs; ratios are to n = 1 of the same run.
 */
const sizes = [1, 2, 3, 5, 10, 20, 40];
const runs = 7;

async function once(n: number, text: string): Promise<number> {
  const service = createService({ read: () => text, declarations: () => [] });
  const before = process.cpuUsage();
  const result = await service.check('chain.ts', new Budget({ milliseconds: 60_000 }), 'verdicts');
  const used = process.cpuUsage(before);
  const held = result.claims.filter((c) => c.verdict === 'holds').length;
  if (held !== n) throw new Error(`n = ${n}: ${held} claims hold: ${result.claims[0]?.findings[0]?.message}`);
  return (used.user + used.system) / 1000;
}

const rows: { n: number; milliseconds: number }[] = [];
for (const n of sizes) {
  const text = chainSource(n);
  const times: number[] = [];
  for (let i = 0; i < (n > 10 ? 3 : runs) + 2; i++) {
    const t = await once(n, text);
    if (i >= 2) times.push(t);
  }
  times.sort((a, b) => a - b);
  rows.push({ n, milliseconds: times[Math.floor(times.length / 2)]! });
}
const first = rows[0]!.milliseconds;
console.log('chain of n links: declaration, reading and 64 states');
for (const { n, milliseconds } of rows) {
  console.log(`  n = ${String(n).padStart(2)}  ${milliseconds.toFixed(1).padStart(8)} ms  ${(milliseconds / first).toFixed(1).padStart(7)} x`);
}
// Least squares of log time against log n, from n = 3 up where start-up no longer counts.
const points = rows.filter((r) => r.n >= 3).map((r) => [Math.log(r.n), Math.log(r.milliseconds)] as const);
const mean = (k: 0 | 1) => points.reduce((s, p) => s + p[k], 0) / points.length;
const [mx, my] = [mean(0), mean(1)];
const slope = points.reduce((s, [x, y]) => s + (x - mx) * (y - my), 0) / points.reduce((s, [x]) => s + (x - mx) ** 2, 0);
console.log(`  growth about n^${slope.toFixed(2)}`);
