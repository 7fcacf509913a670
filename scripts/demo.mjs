/**
 * Checks the sample workspace as a first look at the command. The sample holds right and wrong code on purpose: findings
 * are what is to be seen, so that the command's status 1 is this script's success; only a real failure is one.
 */
import { spawnSync } from 'node:child_process';
import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

const root = fileURLToPath(new URL('..', import.meta.url));
const command = join(root, 'dist', 'visviva.mjs');
if (!existsSync(command)) {
  console.error('The command is not built: run "npm run build" first.');
  process.exit(2);
}
const { status, error } = spawnSync(process.execPath, [command, 'check', 'sample-workspace', ...process.argv.slice(2)], {
  cwd: root,
  stdio: 'inherit',
});
if (error) console.error(`The command did not run: ${error.message}`);
if (status === 1) console.error('\nThe sample holds wrong code on purpose: the findings above are the demonstration.');
process.exitCode = status === 0 || status === 1 ? 0 : 2;
