import { setFlagsFromString } from 'node:v8';
import { runInNewContext } from 'node:vm';
import { readClaims } from '../../server/src/comparison/subject';
import { Spellings } from '../../server/src/comparison/spellings';
import { Graph } from '../../server/src/expression/graph';
import { typescriptLibrary } from '../../server/src/languages/typescript/library';
import { programOf } from '../../server/src/languages/typescript/parse';
import { parseSource } from '../../server/src/languages/typescript/source';
import { buildSystem } from '../../server/src/mechanics/build';
import { Derived } from '../../server/src/mechanics/lagrange';
import { findBlocks } from '../../server/src/notation';
import { Budget } from '../../server/src/text/budget';
import { readingSource } from './reading-source';

/**
 * Reading alone: a file of 2,000 lines and 40 functions, 10 of them claimed, from its syntax tree to the expressions of
 * its outputs (program form, declarations, execution), without the parse and without the comparison. Warm; processor time,
 * median of several runs.
 */
// What the parse leaves behind is not to be cleared away while the reading is timed.
setFlagsFromString('--expose-gc');
const collect = runInNewContext('gc') as () => void;

const text = readingSource();
const runs = 15;
const stages = { form: [] as number[], declarations: [] as number[], execution: [] as number[], all: [] as number[] };

const now = (): number => {
  const { user, system } = process.cpuUsage();
  return (user + system) / 1000;
};

for (let i = 0; i < runs + 5; i++) {
  const source = parseSource('plant.ts', text);
  collect();
  const start = now();
  const program = programOf('plant.ts', text, () => source);
  const formed = now();
  const placed = program.comments.flatMap((c) => findBlocks(text, c).map((block) => ({ block, subject: c.subject })));
  const systems = placed.map(({ block }) => {
    const derived = new Derived(buildSystem(block, new Graph()));
    return { derived, spellings: new Spellings(derived.system) };
  });
  const declared = now();
  let claims = 0;
  placed.forEach(({ block, subject }, k) => {
    const { derived, spellings } = systems[k]!;
    const request = { block, derived, spellings, file: 'plant.ts', program, library: typescriptLibrary, subject, importFile: () => undefined, budget: new Budget() };
    const result = readClaims(request);
    const lost = result.claims.length - result.pending.length;
    if (lost > 0) throw new Error(`${block.name}: ${lost} claims are not read`);
    claims += result.pending.length;
  });
  const end = now();
  if (placed.length !== 10 || claims < 20) throw new Error(`${placed.length} declarations with ${claims} claims`);
  if (i < 5) continue;
  stages.form.push(formed - start);
  stages.declarations.push(declared - formed);
  stages.execution.push(end - declared);
  stages.all.push(end - start);
}

const median = (times: number[]): number => times.sort((a, b) => a - b)[Math.floor(times.length / 2)]!;
console.log(`reading ${text.split('\n').length} lines, 40 functions, 10 of them claimed`);
for (const [name, times] of Object.entries(stages)) console.log(`  ${name.padEnd(12)} ${median(times).toFixed(1).padStart(6)} ms`);
