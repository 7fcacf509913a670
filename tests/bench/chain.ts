import { createService } from '../../server/src/service';
import { Budget } from '../../server/src/text/budget';
import { armDeclaration, armSource } from './arm-source';
import { chainSource } from './chain-source';
import { cpuTime, exponent, median, megabytes, peakMemory, report, type Row } from './measure';

/**
 * A chain of n point masses on rods and a spatial arm of turning joints: declaration by points and bodies, code with its
 * own mass matrix and elimination. Declaration and code are read anew and every acceleration is decided at 64 states, with
 * the exact test. The code's elimination alone takes n^3 operations. Processor time, median of several runs.
 */
const sizes = [1, 2, 3, 5, 10, 20, 40];

async function decideAnew(text: string): Promise<{ milliseconds: number; evidence: string }> {
  const service = createService({ read: () => text, declarations: () => [] });
  const before = cpuTime();
  const { claims, problems } = await service.check('bench.ts', new Budget({ milliseconds: 300_000 }), 'verdicts');
  const milliseconds = cpuTime() - before;
  const open = claims.find((c) => c.verdict !== 'holds');
  if (open || claims.length === 0) throw new Error(`${open?.findings[0]?.message ?? problems[0]?.message ?? 'nothing is claimed'}`);
  return { milliseconds, evidence: claims.every((c) => c.evidence?.kind === 'identity') ? 'identity' : `states (${claims[0]!.evidence!.inexact})` };
}

async function measured(text: string, runs: number): Promise<{ milliseconds: number; evidence: string }> {
  const all = [];
  for (let i = 0; i < runs; i++) all.push(await decideAnew(text));
  const warm = all.slice(Math.floor(runs / 2));
  return { milliseconds: median(warm.map((r) => r.milliseconds)), evidence: warm[0]!.evidence };
}

const rows: Row[] = [];
const points: [number, number][] = [];
const add = (name: string, r: { milliseconds: number; evidence: string }, first: number): void =>
  void rows.push([name, r.milliseconds.toFixed(1), (r.milliseconds / first).toFixed(1), r.evidence]);
let first = 0;
// The smallest first, many times: what runs is compiled by then.
await measured(chainSource(2), 60);
for (const n of sizes) {
  const r = await measured(chainSource(n), n > 20 ? 1 : n > 10 ? 3 : n > 5 ? 8 : 40);
  first ||= r.milliseconds;
  points.push([n, r.milliseconds]);
  add(`chain, n = ${n}`, r, first);
}
for (const n of [3, 5, 7]) {
  const service = createService({ read: () => `/*\n${armDeclaration(n)}\n*/\n`, declarations: () => [] });
  const [printed] = await service.derive('arm.ts', 'typescript', new Budget());
  add(`spatial arm, ${n} joints`, await measured(armSource(n, printed!.text), 10), first);
}
report('chain', 'Derive and decide', ['system', 'ms of processor', 'of n = 1', 'evidence'], rows, [
  `Growth of the chain from n = 3: n^${exponent(points.filter(([n]) => n >= 3)).toFixed(2)}. Peak memory ${megabytes(peakMemory())}.`,
]);
