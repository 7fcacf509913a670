#!/usr/bin/env node
import pc from 'picocolors';
import { run } from './command';

// A reader that has seen enough, as in `visviva check | head`, is no failure of ours.
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  if (error.code !== 'EPIPE') throw error;
  process.exit();
});

const status = await run(process.argv.slice(2), {
  out: (text) => process.stdout.write(text),
  log: (text) => process.stderr.write(`${text}\n`),
  folder: process.cwd(),
  environment: process.env,
  colour: pc.isColorSupported && process.stdout.isTTY === true,
});
if (status !== undefined) process.exitCode = status;
