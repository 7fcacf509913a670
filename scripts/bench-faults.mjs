/** Runs the mutation benchmark of tests/bench/faults: `npm run bench:faults -- [--every N] [--only NAME] [--show]`. */
import { spawnSync } from 'node:child_process';
import { rmSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { build } from 'esbuild';

const root = fileURLToPath(new URL('..', import.meta.url));
// Beside the fixtures' folder, so that the loader finds them from where the bundle lies.
const outfile = join(root, 'tests', 'bench', `.faults-${process.pid}.mjs`);
await build({
  absWorkingDir: root,
  entryPoints: [join(root, 'tests', 'bench', 'faults', 'main.ts')],
  outfile,
  bundle: true,
  platform: 'node',
  target: 'node20',
  format: 'esm',
  packages: 'external',
  alias: { '@visviva/shared': join(root, 'shared/src/index.ts') },
  logLevel: 'warning',
});
const { status } = spawnSync(process.execPath, [outfile, ...process.argv.slice(2)], { cwd: root, stdio: 'inherit' });
rmSync(outfile);
process.exitCode = status ?? 1;
